"""Stagnation by the second opinion: the balance, named and reported, and the vessel that just holds it.

Must not live here: solving (`balance`), fluids, geometry, liquid states.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from scipy.optimize import brentq

from .balance import Loop, Space
from .case import Case
from .fluid import COLDEST, HOTTEST

Regime = Literal[
    "no-boiling", "pinned", "steam", "valve-opens", "membrane-full", "vessel-empty", "beyond-range"
]
GroupRegime = Literal["liquid", "pinned", "emptied"]


@dataclass(frozen=True, kw_only=True)
class Stagnation:
    """The balance. Lists follow the order of spaces, groups and branches of the case.

    `regime_if_shut` and every number are those of a loop whose relief valve stays shut; `regime` heeds the
    valve. With `unspent` power the branches are used up, and pressure and steam volume are lower bounds.
    `mass_error` is relative to the mass of the loop.
    """

    regime: Regime
    regime_if_shut: Regime
    group_regimes: tuple[GroupRegime, ...] = ()
    vessel_pressure: float | None = None
    front_pressures: tuple[float, ...] = ()
    front_elevations: tuple[float, ...] = ()
    boiling_temperatures: tuple[float, ...] = ()
    stagnation_temperatures: tuple[float, ...] = ()
    steam_powers: tuple[float, ...] = ()
    reaches: tuple[float, ...] = ()
    steam_volume: float = 0.0
    vessel_liquid: float = 0.0
    vessel_temperature: float = 0.0
    unspent: float = 0.0
    mass_error: float = 0.0


def stagnation(case: Case) -> Stagnation:
    """The balance of a case. ValueError if open pipes rise from the collectors of more than one space."""
    loop = Loop(case)
    if case.liquid_at_filling < 0.0:
        return Stagnation(
            regime="vessel-empty", regime_if_shut="vessel-empty", vessel_liquid=case.liquid_at_filling
        )
    rising = [space for space, path in enumerate(loop.paths) if path.rises]
    if len(rising) > 1:
        raise ValueError("open pipes rise away from the collectors in more than one steam space")
    fixed = {space: loop.furthest_extent(space) for space in rising}
    found = loop.balance(fixed)
    if not isinstance(found, tuple):
        regime = _heeding_valve(loop, loop.high, found) if found == "membrane-full" else found
        return Stagnation(regime=regime, regime_if_shut=found)
    return _report(loop, *found, fixed)


def _report(loop: Loop, vessel_liquid: float, full: list[float], fixed: dict[int, float]) -> Stagnation:
    case = loop.case
    pressure = loop.pressure(vessel_liquid)
    fronts = loop.fronts(pressure, fixed)
    shut = _regime(loop, vessel_liquid, full, fronts)
    boiling = [fronts[space].boiling for space in loop.space_of]
    reaches = dict.fromkeys(range(len(case.branches)), 0.0)
    for path, front in zip(loop.paths, fronts, strict=True):
        reaches |= path.filled(front.extent)
    in_pipes = sum(path.volume(front.extent) for path, front in zip(loop.paths, fronts, strict=True))
    in_collectors = sum(group.content * (1.0 - share) for group, share in zip(case.groups, full, strict=True))
    left = [
        f.surplus for p, f in zip(loop.paths, fronts, strict=True) if f.extent >= p.end and f.surplus > 1e-6
    ]
    return Stagnation(
        regime=_heeding_valve(loop, vessel_liquid, shut),
        regime_if_shut=shut,
        group_regimes=tuple("liquid" if s >= 1.0 else "emptied" if s <= 0.0 else "pinned" for s in full),
        vessel_pressure=pressure,
        front_pressures=tuple(front.front_pressure for front in fronts),
        front_elevations=tuple(p.elevation(f.extent) for p, f in zip(loop.paths, fronts, strict=True)),
        boiling_temperatures=tuple(front.boiling for front in fronts),
        stagnation_temperatures=tuple(loop.limits),
        steam_powers=tuple(
            group.power(at, case.sun, case.ambient, limit) if share <= 0.0 else 0.0
            for group, at, limit, share in zip(case.groups, boiling, loop.limits, full, strict=True)
        ),
        reaches=tuple(reaches[index] for index in range(len(case.branches))),
        steam_volume=in_pipes + in_collectors,
        vessel_liquid=vessel_liquid,
        vessel_temperature=loop.vessel_temperature(vessel_liquid),
        unspent=sum(left),
        mass_error=abs(loop.gap_with(vessel_liquid, full, fronts)) / loop.total,
    )


def _regime(loop: Loop, vessel_liquid: float, full: list[float], fronts: list[Space]) -> Regime:
    if vessel_liquid >= loop.case.room_for_liquid:
        return "membrane-full"
    if any(share < 1.0 for share in full):
        wet = [fronts[space] for space, share in zip(loop.space_of, full, strict=True) if share < 1.0]
        if any(not COLDEST < front.boiling < HOTTEST for front in wet):
            return "beyond-range"
    if any(share <= 0.0 for share in full):
        return "steam"
    return "pinned" if any(share < 1.0 for share in full) else "no-boiling"


def _heeding_valve(loop: Loop, vessel_liquid: float, shut: Regime) -> Regime:
    """The valve comes first if it opens at a smaller vessel content than the membrane can bear."""
    opening = loop.case.opening_pressure
    if (
        opening is None
        or loop.pressure(min(vessel_liquid, loop.case.room_for_liquid * (1.0 - 1e-7))) <= opening
    ):
        return shut
    return "valve-opens"


def smallest_vessel(case: Case, final_pressure: float) -> float:
    """Nominal volume, m3, at which stagnation ends at the final pressure; relief valve ignored."""

    def excess(volume: float) -> float:
        pressure = stagnation(case.but(vessel=volume, acceptance=None, opening_pressure=None)).vessel_pressure
        return (1e9 if pressure is None else pressure) - final_pressure

    low = high = case.content
    while excess(low) < 0.0:
        low /= 2.0
    while excess(high) > 0.0:
        high *= 2.0
    return float(brentq(excess, low, high, xtol=1e-9, rtol=1e-10))
