"""Mass of the loop and its liquid states: fill, cold, operating.

Lives here: the mass balance without steam. Must not live here: boiling.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from .case import Case
from .fluid import Fluid, fluid

StateName = Literal["holds", "vessel-empty", "membrane-full"]


@dataclass(frozen=True, kw_only=True)
class Temperatures:
    """Temperature, K, of each zone of a liquid state; branches in the order of the case."""

    collectors: float
    branches: tuple[float, ...]
    station: float
    vessel_line: float
    cooling_vessel: float
    vessel: float


@dataclass(frozen=True, kw_only=True)
class LiquidState:
    """Vessel pressure is none where it has no meaning: no liquid in the vessel, or no room left."""

    state: StateName
    vessel_pressure: float | None
    vessel_liquid: float
    freezes: bool = False


def liquid_of(case: Case) -> Fluid:
    return fluid(case.fluid, case.glycol_mass_fraction)


def loop_mass(case: Case) -> float:
    """All liquid, kg, from the filling."""
    return liquid_of(case).density(case.fill_temperature) * (case.content + case.liquid_at_filling)


def boyle_pressure(case: Case, vessel_liquid: float, gas_temperature: float) -> float:
    """Absolute vessel pressure for a liquid volume and a gas temperature."""
    gas_volume = case.vessel - vessel_liquid
    return case.precharge * case.vessel / gas_volume * gas_temperature / case.precharge_temperature


def boyle_liquid(case: Case, pressure: float, gas_temperature: float) -> float:
    """Inverse of `boyle_pressure`."""
    warm = gas_temperature / case.precharge_temperature
    return case.vessel * (1.0 - case.precharge * warm / pressure)


def liquid_state(case: Case, at: Temperatures, extra_liquid: float = 0.0) -> LiquidState:
    """Vessel liquid and pressure with every zone full of liquid at its temperature.

    `extra_liquid` is the fluid-data allowance with its sign; it is no part of the mass balance.
    """
    rho = liquid_of(case).density
    held = rho(at.collectors) * case.collector_content + rho(at.station) * case.station_content
    held += (
        rho(at.vessel_line) * case.vessel_line_content + rho(at.cooling_vessel) * case.cooling_vessel_content
    )
    for branch, temperature in zip(case.branches, at.branches, strict=True):
        held += sum(rho(temperature) * segment.content for segment in branch.segments)
    return _in_vessel(case, (loop_mass(case) - held) / rho(at.vessel) + extra_liquid, at.vessel)


def _in_vessel(case: Case, liquid: float, temperature: float, freezes: bool = False) -> LiquidState:
    state: StateName = "holds"
    pressure: float | None = None
    if liquid < 0.0:
        state = "vessel-empty"
    elif liquid >= case.room_for_liquid:
        state = "membrane-full"
    else:
        pressure = boyle_pressure(case, liquid, temperature)
    return LiquidState(state=state, vessel_pressure=pressure, vessel_liquid=liquid, freezes=freezes)


def filled(case: Case) -> LiquidState:
    """As filled: all of it at the fill temperature."""
    return _in_vessel(case, case.liquid_at_filling, case.fill_temperature)


def cold(case: Case) -> LiquidState:
    """Coldest night: outdoor zones at the site minimum, indoor ones at theirs, allowance taken off.

    Collectors count as outdoor; station, vessel line, cooling vessel as indoor. Nothing gets colder than the
    freezing point; if it would, the state says so.
    """
    liquid = liquid_of(case)
    freezing = liquid.freezing_point

    def held_at(temperature: float) -> float:
        return liquid.density(max(temperature, freezing))

    indoor, outdoor = held_at(case.indoor_minimum), held_at(case.site_minimum)
    indoor_content = case.station_content + case.vessel_line_content + case.cooling_vessel_content
    held = outdoor * case.collector_content + indoor * indoor_content
    for branch in case.branches:
        held += sum((outdoor if segment.outdoor else indoor) * segment.content for segment in branch.segments)
    in_vessel = (loop_mass(case) - held) / held_at(case.cold_vessel_room)
    freezes = min(case.site_minimum, case.indoor_minimum, case.cold_vessel_room) < freezing
    return _in_vessel(case, in_vessel - case.allowance * case.content, case.cold_vessel_room, freezes)


def operating(case: Case) -> LiquidState:
    """Pump on at design temperatures: collectors and, unless stated, station at the mean of both.

    Vessel line, cooling vessel and vessel stand at room temperature: nothing has been pushed through them for
    good.
    """
    mean = (case.operating_flow + case.operating_return) / 2.0
    by_role = {"flow": case.operating_flow, "return": case.operating_return}
    at = Temperatures(
        collectors=mean,
        branches=tuple(by_role[branch.role] for branch in case.branches),
        station=mean if case.operating_station is None else case.operating_station,
        vessel_line=case.room_temperature,
        cooling_vessel=case.room_temperature,
        vessel=case.room_temperature,
    )
    return liquid_state(case, at, case.allowance * case.content)
