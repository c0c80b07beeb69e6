"""What the stagnation of a loop asks of any vessel, whatever its size and gas: worked out once, asked for each."""

from collections.abc import Sequence
from typing import NamedTuple

from loopslack.calc.analysis import Analysis, SteamCase
from loopslack.calc.balance import Extent
from loopslack.calc.scenarios import Scenario


class HotLimits(NamedTuple):
    """What the stagnation of some scenarios asks of any vessel, whatever its gas.

    ``upper`` and ``lower`` are rows of check, scenario, vessel pressure (Pa) and mass pushed out (kg); ``warm`` the
    scenarios whose gas follows, with the extent that keeps steam out of the station where that bounds the filling;
    ``spoiled`` those with steam at the station whatever the vessel.
    """

    upper: list[tuple[str, str, float, float]]
    lower: list[tuple[str, str, float, float]]
    warm: list[tuple[str, SteamCase, Extent | None]]
    spoiled: list[str]


def hot_limits(analysis: Analysis, scenarios: Sequence[Scenario]) -> HotLimits:
    """What scenarios ask of a vessel in a loop."""
    found = HotLimits([], [], [], [])
    cold_gas = {scenario.steam_key for scenario in scenarios if not scenario.gas_follows}
    for scenario in scenarios:
        id, case = scenario.id, analysis.case(scenario)
        station = case.station
        if case.at_station:
            found.spoiled.append(id)
        if scenario.gas_follows:
            twin = scenario.steam_key in cold_gas and _cold_twin_bounds(analysis, station)
            found.warm.append((id, case, None if twin else station))
            continue
        found.upper.append(("relief-valve", id, analysis.final_pressure, case.final.expelled))
        if station is not None and not case.at_station:
            found.lower.append(("steam-at-station", id, station.pressure, station.expelled))
    return found


def _cold_twin_bounds(analysis: Analysis, station: Extent | None) -> bool:
    """Whether the same steam with the gas at the room's temperature bounds the filling from below already.

    Warm gas leaves less room, so that at the pressure that keeps steam out of the station less is held.
    """
    mix = analysis.mix
    return mix.room <= mix.back and mix.room <= mix.hot and (station is None or station.expelled >= 0)
