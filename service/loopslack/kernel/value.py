"""A number that knows where it came from.

A ``Value`` has no arithmetic: adding two is a TypeError. New values come out of an equation only, so no number of
a derivation can lose its origin.
"""

from __future__ import annotations

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.kernel.kinds import Kind


class Given(Struct, frozen=True, tag="given"):
    """Stated by the caller, at this JSON Pointer of the question."""

    pointer: str = ""


class Assumed(Struct, frozen=True, tag="assumed"):
    """Not stated by the caller; a default of the trade stands in."""

    source: Cite


class Tabulated(Struct, frozen=True, tag="tabulated"):
    """Read from a row of a table that ships with the service."""

    table: str
    row: str
    source: Cite


class Computed(Struct, frozen=True, tag="computed"):
    """The outcome of an equation of the register."""

    equation: str
    inputs: dict[str, Value]


class Solved(Struct, frozen=True, tag="solved"):
    """The root of a system of equations, found by a solver named here."""

    system: str
    inputs: dict[str, Value]


Origin = Given | Assumed | Tabulated | Computed | Solved


class Value(Struct, frozen=True):
    """A number in SI, its kind, its name in the derivation, and its origin."""

    si: float
    kind: Kind
    name: str
    origin: Origin
