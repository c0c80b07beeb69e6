"""Front door to fluids: makes the fluid a caller describes. What a fluid answers stands in ``base``.

Fluids are immutable in use and cached by their exact strength, so that a repeated question costs nothing.
"""

from collections.abc import Sequence
from functools import lru_cache

from loopslack.calc.fluids.base import ROUNDING, ZERO_CELSIUS, Fluid, FluidKind, Vapour, celsius
from loopslack.calc.fluids.glycol import (
    FREEZING_STRENGTH_HIGHEST,
    STRENGTH_HIGHEST,
    Glycol,
    pure_density_at_20,
    strength_freezing_at,
    warmer_freezing_point,
)
from loopslack.calc.fluids.own import BoilsLike, OwnFluid
from loopslack.calc.fluids.water import Water
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import Density, VolumeFraction
from loopslack.library.fluids import GlycolKind, water_data
from loopslack.physics import mixture

__all__ = [
    "FREEZING_STRENGTH_HIGHEST",
    "STRENGTH_HIGHEST",
    "BoilsLike",
    "Fluid",
    "FluidKind",
    "GlycolKind",
    "Vapour",
    "coldest_protection",
    "glycol",
    "glycol_by_volume",
    "glycol_protecting_to",
    "own_fluid",
    "pure_density_at_20",
    "strength_protecting_to",
    "water",
]


@lru_cache(maxsize=1)
def water() -> Fluid:
    """Water without additives."""
    return Water()


@lru_cache(maxsize=512)
def glycol(kind: GlycolKind, mass_fraction: float) -> Fluid:
    """Glycol and water by mass fraction; nought is water. Raises ``OutOfRange`` below 0 and beyond 63 %."""
    return water() if mass_fraction == 0.0 else Glycol(kind, mass_fraction)


def glycol_by_volume(kind: GlycolKind, fraction: float) -> Fluid:
    """Glycol and water by volume fraction, the volumes unmixed at 20 degC.

    Raises ``OutOfRange`` as ``glycol``. Tables of inhibited fluids follow this within 0.9 percentage points.
    """
    if not 0.0 <= fraction <= 1.0:
        raise OutOfRange(
            f"The strength is {100 * fraction:.5g} % by volume.",
            remedy="State a share between 0 and 100 %.",
            facts={"number": fraction, "low": 0.0, "high": 1.0, "rule": f"strength of {kind}"},
        )
    strength = mixture.mass_fraction_of(
        VolumeFraction(fraction), Density(pure_density_at_20(kind)), water_data().density_at_20
    )
    return glycol(kind, strength)


def coldest_protection(kind: GlycolKind) -> float:
    """Lowest temperature, K, a glycol protects to: where its warmer freezing curve ends, at 60 % by mass."""
    return warmer_freezing_point(kind, FREEZING_STRENGTH_HIGHEST)


def strength_protecting_to(kind: GlycolKind, temperature: float, margin: float = 0.0) -> float:
    """Lowest mass fraction whose warmer freezing curve lies a margin (K) or more below a temperature (K).

    Raises ``OutOfRange`` when that would take more than 60 % by mass, where the freezing curves end.
    """
    wanted = temperature - margin
    coldest = coldest_protection(kind)
    if not wanted >= coldest - ROUNDING:
        raise OutOfRange(
            f"Protection to {celsius(temperature)} degC with a margin of {margin:g} K asks for a freezing "
            f"point of {celsius(wanted)} degC; {kind.replace('-', ' ')} reaches {celsius(coldest)} degC at "
            "60 % by mass, where its freezing curve ends.",
            remedy="Ask for less protection, or choose a glycol that freezes lower.",
            facts={
                "number": wanted,
                "low": coldest,
                "high": ZERO_CELSIUS,
                "rule": f"freezing point of {kind}",
            },
        )
    return 0.0 if wanted >= ZERO_CELSIUS else strength_freezing_at(kind, wanted)


def glycol_protecting_to(kind: GlycolKind, temperature: float, margin: float = 0.0) -> Fluid:
    """The weakest mixture that protects to a temperature; see ``strength_protecting_to``."""
    return glycol(kind, strength_protecting_to(kind, temperature, margin))


def own_fluid(
    points: Sequence[tuple[float, float]],
    freezing_point: float,
    boiling: Sequence[tuple[float, float]] | BoilsLike,
    *,
    heat_capacity: Sequence[tuple[float, float]] = (),
    viscosity: Sequence[tuple[float, float]] = (),
    name: str = "the own fluid",
) -> Fluid:
    """A caller's own fluid by table.

    Points of density are (K, kg/m3), of boiling (K, Pa absolute) unless it boils like a known glycol. Heat
    capacity (K, J/(kg K)) and viscosity (K, Pa s) are optional; ``Missing`` when asked for without a table.
    Raises ``Missing`` for fewer than three points, ``Contradiction`` for a table that cannot be true,
    ``NotApplicable`` for a fluid whose vapour cannot be steam.
    """
    reference = glycol(boiling.kind, boiling.mass_fraction) if isinstance(boiling, BoilsLike) else boiling
    return OwnFluid(
        points, freezing_point, reference, heat_capacity=heat_capacity, viscosity=viscosity, name=name
    )
