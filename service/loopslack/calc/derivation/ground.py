"""What a derivation starts from beyond the loop in SI: what the question said before reading turned it into the loop.

Tubes named by their standard, collector coefficients on another area, strengths by volume, measured stagnation. Where
nothing is known of these, the loop's own figures count as stated. Plain data; reading a question is not done here.
"""

from collections.abc import Mapping
from typing import Literal

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.library.tubes import Tube


class TubeGround(Struct, frozen=True, kw_only=True):
    """How a stretch's tube was named: by a row of a standard, by its bore (m), or by its content per length."""

    row: Tube | None = None
    bore: float | None = None


class CollectorGround(Struct, frozen=True, kw_only=True):
    """How a group was described: pointer of its aperture, coefficients and the area they refer to, measured stagnation.

    ``areas`` are the test's and the aperture, m2 with their pointers, where the coefficients refer to another area;
    ``coefficients`` are then those of the test. ``measured`` is temperature K, sun W/m2 and air K. ``power`` is the
    key of the default behind the steam power, and ``worse`` that of the next worse one.
    """

    aperture: str
    areas: tuple[tuple[float, str], tuple[float, str]] | None = None
    coefficients: tuple[float, float, float] | None = None
    measured: tuple[float, float, float] | None = None
    power: str = ""
    worse: str = ""


class FluidGround(Struct, frozen=True, kw_only=True):
    """How a strength was stated: by mass or volume (a share), or as the temperature (K) it must protect to."""

    way: Literal["by-mass", "by-volume", "protect-to"] = "by-mass"
    number: float = 0.0


class Ground(Struct, frozen=True, kw_only=True):
    """Everything a derivation starts from beside the loop itself.

    ``assumed`` gives the source of what the question left open, by pointer; ``vessels`` the pointer of an article by
    its id, which is missing for the generic series. ``heights`` are the pointers of heights that were stated.
    ``sized_cooling`` says that the cooling vessel's content was solved for; ``fill`` is a stated fill pressure (Pa
    absolute) with its pointer; ``allowance`` the opening allowance (Pa) where one was stated instead of a rule.
    """

    assumed: Mapping[str, Cite] = {}
    tubes: Mapping[str, TubeGround] = {}
    collectors: Mapping[int, CollectorGround] = {}
    fluid: FluidGround = FluidGround()
    vessels: Mapping[str, str] = {}
    heights: frozenset[str] = frozenset()
    sized_cooling: bool = False
    fill: tuple[float, str] | None = None
    allowance: float | None = None
