"""Reads single members of a question into SI and keeps the books of what was assumed and refused.

A refusal does not stop the reading, so that a caller sees every fault at once. What was refused is replaced only to
read on, never to be computed with; which of the refusals rest on such a stand-in is found in ``again``.
"""

from collections.abc import Iterable, Mapping
from functools import lru_cache
from typing import NamedTuple, Protocol, TypeVar

from loopslack.contract.problems import MOST_COUNTED
from loopslack.contract.quantity import Pressure
from loopslack.contract.questions.fields import Field
from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.errors import CalculationError, Contradiction, Missing, OutOfRange
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import GAUGE_UNITS
from loopslack.library.defaults import choice, default

T = TypeVar("T")


class Stated(Protocol):
    """Any quantity of a question."""

    @property
    def value(self) -> float:
        """The number."""

    @property
    def unit(self) -> str:
        """Its unit."""


class Assumed(NamedTuple):
    """Something the caller did not state: a number of a kind in SI, or a word, and why it stands in."""

    pointer: str
    si: float | None
    kind: Kind | None
    low: float
    high: float
    word: str
    why: str
    source: Cite


class Provisional(NamedTuple):
    """Why an answer rests on more than was stated: a stable code and the member that would settle it."""

    code: str
    pointer: str


MOST_REFUSED = 4 * MOST_COUNTED
"""Refusals that end a reading: enough to fill the count, also where some prove to rest on stand-ins."""


class EnoughError(Exception):
    """Ends a reading that has refused so much."""


class Reader:
    """One reading of one question.

    ``atmosphere`` is the site's, Pa absolute; it must be set before pressures are read. ``turn`` numbers the readings
    of one question: in each, other numbers stand in for what is refused. ``is_certain`` says that none had to.
    """

    __slots__ = ("assumed", "atmosphere", "is_certain", "provisional", "refused", "turn")

    def __init__(self, atmosphere: float = 101325.0, *, turn: int = 0) -> None:
        self.atmosphere = atmosphere
        self.turn = turn
        self.is_certain = True
        self.assumed: list[Assumed] = []
        self.provisional: list[Provisional] = []
        self.refused: list[CalculationError] = []

    def si(self, stated: Stated, field: Field, place: str) -> float:
        """Read a quantity that is no pressure; ``place`` is the pointer of the object it is a member of."""
        scale, offset = field.lines[stated.unit]
        number = scale * stated.value + offset
        if field.low <= number <= field.high:
            return number
        return self._out_of_range(stated, field, place, number, 0.0)

    def gauge(self, stated: Pressure, field: Field, place: str) -> float:
        """Read a pressure as gauge at the site, Pa, whichever way it was stated."""
        unit = stated.unit
        scale, _ = field.lines[unit]
        datum = 0.0 if unit in GAUGE_UNITS else self.atmosphere
        number = scale * stated.value - datum
        if field.low <= number <= field.high:
            return number
        return self._out_of_range(stated, field, place, number, datum)

    def absolute(self, stated: Pressure, field: Field, place: str) -> float:
        """Read a pressure as absolute, Pa, whichever way it was stated; its range is absolute as well."""
        unit = stated.unit
        scale, _ = field.lines[unit]
        datum = -self.atmosphere if unit in GAUGE_UNITS else 0.0
        number = scale * stated.value - datum
        if field.low <= number <= field.high:
            return number
        return self._out_of_range(stated, field, place, number, datum)

    def optional(self, stated: Stated | None, field: Field, place: str) -> float | None:
        """Read a quantity that may be absent and has no default."""
        return None if stated is None else self.si(stated, field, place)

    def optional_gauge(self, stated: Pressure | None, field: Field, place: str) -> float | None:
        """Read a pressure that may be absent and has no default."""
        return None if stated is None else self.gauge(stated, field, place)

    def or_default(self, stated: Stated | None, field: Field, place: str, key: str) -> float:
        """Read a quantity or take the default of the trade."""
        if stated is not None:
            return self.si(stated, field, place)
        return self.default(key, f"{place}/{field.name}")

    def or_default_gauge(self, stated: Pressure | None, field: Field, place: str, key: str) -> float:
        """Read a pressure as gauge or take the default of the trade."""
        if stated is not None:
            return self.gauge(stated, field, place)
        return self.default(key, f"{place}/{field.name}")

    def default(self, key: str, pointer: str) -> float:
        """Take a default number and note it."""
        noted = _noted(key, pointer)
        self.assumed.append(noted)
        return noted.si  # type: ignore[return-value] # a default number is one

    def word(self, key: str, pointer: str) -> str:
        """Take a default word and note it."""
        noted = _noted_word(key, pointer)
        self.assumed.append(noted)
        return noted.word

    def derived(self, pointer: str, si: float, kind: Kind, why: str, *, low: float, high: float) -> float:
        """Note a number that follows from others by a rule that nobody stated."""
        self.assumed.append(Assumed(pointer, si, kind, low, high, "", why, DERIVED))
        return si

    def doubtful(self, code: str, pointer: str) -> None:
        """Note that the answer is provisional."""
        self.provisional.append(Provisional(code, pointer))

    def refuse(self, error: CalculationError, pointer: str = "") -> None:
        """Note a refusal; a pointer replaces the error's own."""
        if pointer:
            error.pointer = pointer
        if len(self.refused) == MOST_REFUSED:
            raise EnoughError
        self.refused.append(error)

    def contradiction(
        self, pointer: str, message: str, remedy: str, facts: Mapping[str, object] | None = None
    ) -> None:
        """Note that stated numbers cannot be true together."""
        self.refuse(Contradiction(message, remedy=remedy, pointer=pointer, facts=facts))

    def missing(self, pointer: str, message: str, remedy: str) -> None:
        """Note that a number is needed that was not stated and has no default."""
        self.refuse(Missing(message, remedy=remedy, pointer=pointer))

    def stand_in(self, *options: T) -> T:
        """What to read on with in place of something that was refused: another in each turn."""
        self.is_certain = False
        return options[self.turn % len(options)]

    def take_over(self, refused: Iterable[CalculationError], within: str = "") -> None:
        """Note what was refused of the object at a place in a reading of its own; it may rest on a stand-in."""
        self.is_certain = False
        for error in refused:
            self.refuse(error, within + error.pointer)

    def _out_of_range(self, stated: Stated, field: Field, place: str, number: float, datum: float) -> float:
        unit = stated.unit
        value = stated.value
        scale, offset = field.lines[unit]
        low = (field.low + datum - offset) / scale
        high = (field.high + datum - offset) / scale
        self.refuse(
            OutOfRange(
                f"The {field.title} is {_plain(value)} {unit}; "
                f"it must lie from {_plain(low)} to {_plain(high)} {unit}.",
                remedy=_remedy(field, unit, value, low, high),
                pointer=f"{place}/{field.name}",
                facts={"value": value, "low": low, "high": high, "unit": unit},
            )
        )
        near, far = (field.high, field.low) if number > field.low else (field.low, field.high)
        return self.stand_in(near, far, (near + far) / 2)


def _remedy(field: Field, unit: str, value: float, low: float, high: float) -> str:
    if unit.endswith("percent") and 0 < value < 1 and low <= 100 * value <= high:
        return (
            f"It counts in percent: state {_plain(100 * value)} if {_plain(value)} was meant as a fraction."
        )
    others = [other for other in field.kind.units if other != unit]
    if not others:
        return "Check the number."
    listed = ", ".join(others[:-1]) + f" and {others[-1]}" if len(others) > 1 else others[0]
    return f"Check the number and its unit; {listed} {'are' if len(others) > 1 else 'is'} accepted too."


def _plain(number: float) -> str:
    """A number as a person writes it, without a power of ten where it is not needed."""
    text = f"{number:.6g}" if abs(number) < 1 else f"{number:.4g}"
    return (
        f"{float(text):.10f}".rstrip("0").rstrip(".") if "e" in text and 1e-6 <= abs(number) < 1e9 else text
    )


@lru_cache(maxsize=8192)
def _noted(key: str, pointer: str) -> Assumed:
    row = default(key)
    return Assumed(pointer, row.si, row.kind, row.low, row.high, "", row.why, row.source)


@lru_cache(maxsize=8192)
def _noted_word(key: str, pointer: str) -> Assumed:
    row = choice(key)
    return Assumed(pointer, None, None, 0.0, 0.0, row.word, row.why, row.source)
