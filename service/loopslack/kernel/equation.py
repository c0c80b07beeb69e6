"""One published equation: a plain function on floats, and its papers in the register.

The decorator leaves the function as it is, so that a solver pays nothing for the papers. ``derive`` computes from
values, within the published range, and keeps the derivation.
"""

from collections.abc import Callable, Mapping
from hashlib import sha256
from inspect import getsource, signature
from math import inf, isfinite
from typing import ParamSpec, TypeVar, get_type_hints

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import KIND_OF, Coefficients, Kind
from loopslack.kernel.value import Computed, Value

P = ParamSpec("P")
R = TypeVar("R", bound=float)


class Range(Struct, frozen=True):
    """A closed range of SI numbers; outside it an equation refuses, it never clamps."""

    low: float = -inf
    high: float = inf

    def holds(self, number: float) -> bool:
        """Whether a finite number lies inside."""
        return isfinite(number) and self.low <= number <= self.high


class Equation(Struct, frozen=True):
    """The papers of one formula function."""

    id: str
    law: str
    symbols: Mapping[str, str]
    source: Cite
    note: str
    valid: Mapping[str, Range]
    yields: Range
    kind: Kind
    arguments: Mapping[str, Kind]
    coefficients: tuple[str, ...]
    function: Callable[..., float]

    def derive(
        self, name: str = "", coefficients: Mapping[str, Coefficients] | None = None, /, **inputs: Value
    ) -> Value:
        """Compute a value from values, checking kinds and ranges, and remember how.

        ``coefficients`` are the fitted numbers of a law that takes such; they are no values.
        Raises ``TypeError`` when an input is of another kind, ``OutOfRange`` outside the published range.
        """
        for argument, value in inputs.items():
            if value.kind is not self.arguments[argument]:
                raise TypeError(f"{self.id}: {argument} is given as a {value.kind.name}")
            self._check(value.name, value.si, self.valid.get(argument, _ANY))
        numbers = {argument: value.si for argument, value in inputs.items()}
        number = self.function(**numbers, **(coefficients or {}))
        title = name or self.function.__name__.replace("_", " ")
        self._check(title, number, self.yields)
        return Value(number, self.kind, title, Computed(self.id, inputs))

    def _check(self, name: str, number: float, allowed: Range) -> None:
        if not allowed.holds(number):
            raise OutOfRange(
                f"The {name} is {number:g}; {self.id} holds from {allowed.low:g} to {allowed.high:g} (SI).",
                remedy=f"Bring the {name} into that range or choose another method.",
                facts={"number": number, "low": allowed.low, "high": allowed.high, "rule": self.id},
            )


_ANY = Range()

EQUATIONS: dict[str, Equation] = {}
_PAPERS: dict[object, Equation] = {}


def equation(
    id: str,
    *,
    law: str,
    source: Cite,
    symbols: Mapping[str, str] | None = None,
    note: str = "",
    valid: Mapping[str, Range] | None = None,
    yields: Range = _ANY,
) -> Callable[[Callable[P, R]], Callable[P, R]]:
    """Enter a formula function in the register and return it unchanged.

    Every argument and the result must be annotated with a quantity type of ``kinds``; arguments annotated
    ``Coefficients`` carry the fitted numbers of the law and have no kind.
    """

    def enter(function: Callable[P, R]) -> Callable[P, R]:
        if id in EQUATIONS:
            raise ValueError(f"equation {id} is defined twice")
        hints = get_type_hints(function)
        names = tuple(signature(function).parameters)
        coefficients = tuple(name for name in names if hints[name] is Coefficients)
        arguments = {name: _kind_of(id, hints[name]) for name in names if name not in coefficients}
        EQUATIONS[id] = _PAPERS[function] = Equation(
            id=id,
            law=law,
            symbols=symbols or {},
            source=source,
            note=note,
            valid=valid or {},
            yields=yields,
            kind=_kind_of(id, hints["return"]),
            arguments=arguments,
            coefficients=coefficients,
            function=function,
        )
        return function

    return enter


def papers(function: Callable[..., float]) -> Equation:
    """The papers of a formula function."""
    return _PAPERS[function]


def fingerprint() -> str:
    """Twelve hexadecimal digits that change whenever an equation's law, source or code changes."""
    digest = sha256()
    for key in sorted(EQUATIONS):
        entry = EQUATIONS[key]
        digest.update(f"{key}|{entry.law}|{entry.source}|{getsource(entry.function)}".encode())
    return digest.hexdigest()[:12]


def _kind_of(id: str, hint: object) -> Kind:
    kind = KIND_OF.get(hint)
    if kind is None:
        raise TypeError(f"{id}: {hint!r} does not say what kind of quantity it is")
    return kind
