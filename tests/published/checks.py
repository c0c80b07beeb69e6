"""Reads the published checks of a module of physics and runs them through the papers of its laws.

A file ``<module>.toml`` lists checks and refusals. Numbers are SI, or ``[number, unit]`` in a unit of the
service. A check compares within ``within`` (relative) or ``absolute`` (in the unit of the expectation).
"""

import tomllib
from collections.abc import Mapping
from functools import cache
from pathlib import Path

import pytest
from msgspec import Struct, convert

from loopslack.kernel.equation import EQUATIONS, Equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import from_si, to_si
from loopslack.kernel.value import Given, Value

MODULES = (
    "atmosphere",
    "balance",
    "balance_pressure",
    "balance_steam",
    "collector",
    "collector_area",
    "expansion",
    "geometry",
    "heat_loss",
    "mixing",
    "order",
    "precharge",
    "relief",
    "statics",
    "steam",
    "vessel",
)
"""Modules of physics whose laws are checked here; water and mixtures have their own tests."""

Number = float | tuple[float, str]


class Check(Struct, frozen=True, forbid_unknown_fields=True, kw_only=True):
    """One published figure."""

    equation: str
    source: str
    inputs: Mapping[str, Number]
    expect: Number
    within: float = 0.0
    absolute: float = 0.0

    def values(self, equation: Equation) -> dict[str, Value]:
        return values(equation, self.inputs)

    def found(self) -> float:
        """What the law gives, through its papers, in the unit of the expectation."""
        equation = EQUATIONS[self.equation]
        number = equation.derive(**self.values(equation)).si
        return from_si(number, self.expect[1], equation.kind) if isinstance(self.expect, tuple) else number

    def expected(self) -> object:
        """The published figure with its tolerance, to be compared with ``==``."""
        number = self.expect[0] if isinstance(self.expect, tuple) else self.expect
        return pytest.approx(number, rel=self.within, abs=self.absolute)

    def passes(self) -> bool:
        """Whether the law gives the figure, and does not refuse it."""
        try:
            return self.found() == self.expected()
        except (OutOfRange, ArithmeticError):
            return False


class Refusal(Struct, frozen=True, forbid_unknown_fields=True, kw_only=True):
    """Inputs that a law must refuse, and words its message must contain."""

    equation: str
    why: str
    inputs: Mapping[str, Number]
    says: str

    def passes(self) -> bool:
        """Whether the law refuses in those words."""
        equation = EQUATIONS[self.equation]
        try:
            equation.derive(**values(equation, self.inputs))
        except OutOfRange as refusal:
            return self.says in refusal.message
        except ArithmeticError:
            return False
        return False


class Published(Struct, frozen=True, forbid_unknown_fields=True):
    """A file of checks."""

    check: list[Check]
    refused: list[Refusal] = []


@cache
def published(module: str) -> Published:
    """The checks of a module of physics."""
    text = (Path(__file__).parent / f"{module}.toml").read_text(encoding="utf-8")
    return convert(tomllib.loads(text), Published)


def values(equation: Equation, inputs: Mapping[str, Number]) -> dict[str, Value]:
    """Inputs as values of the kinds that a law takes."""
    return {
        name: Value(si(number, equation.arguments[name]), equation.arguments[name], name, Given())
        for name, number in inputs.items()
    }


def si(number: Number, kind: Kind) -> float:
    """A number of a check in SI."""
    return to_si(*number, kind) if isinstance(number, tuple) else number
