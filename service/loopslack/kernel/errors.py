"""What can go wrong in a calculation, in the caller's words.

Each error names the number, the rule and the remedy, points at the field it is about and keeps its facts for
translation. None of them knows about HTTP. All survive pickling, since they cross process borders.
"""

from collections.abc import Iterable, Mapping


class CalculationError(Exception):
    """The question was well formed but cannot be answered.

    ``code`` is stable and kebab-case, ``pointer`` a JSON Pointer (RFC 6901) into the question or empty,
    ``remedy`` says what to do, ``facts`` holds the numbers behind the message.
    """

    code = "unanswerable"

    def __init__(
        self,
        message: str,
        *,
        remedy: str,
        pointer: str = "",
        code: str = "",
        facts: Mapping[str, object] | None = None,
    ) -> None:
        super().__init__(message)
        self.message, self.remedy, self.pointer = message, remedy, pointer
        self.code = code or type(self).code
        self.facts = dict(facts or {})

    def __reduce__(self) -> tuple[object, ...]:
        return _rebuild, (type(self), self.message, self.remedy, self.pointer, self.code, self.facts)


class OutOfRange(CalculationError):
    """A number lies outside the range its equation or table was published for."""

    code = "out-of-range"


class Contradiction(CalculationError):
    """Two or more stated numbers cannot be true together."""

    code = "contradiction"


class Missing(CalculationError):
    """A number that the chosen method needs was not stated and has no default."""

    code = "missing"


class NotApplicable(CalculationError):
    """The method does not describe this loop."""

    code = "not-applicable"


class Refusals(CalculationError):
    """Several refusals of one question, all of which the caller should see."""

    code = "several"

    def __init__(self, errors: Iterable[CalculationError]) -> None:
        self.errors = tuple(errors)
        super().__init__("; ".join(error.message for error in self.errors), remedy="Mend every point listed.")

    def __reduce__(self) -> tuple[object, ...]:
        return Refusals, (self.errors,)


def _rebuild(
    kind: type[CalculationError],
    message: str,
    remedy: str,
    pointer: str,
    code: str,
    facts: dict[str, object],
) -> CalculationError:
    return kind(message, remedy=remedy, pointer=pointer, code=code, facts=facts)
