"""What a loop does at its highest allowed vessel pressure, in the base case and under every doubt.

At that pressure everything but the vessel is known, so this is worked out once per loop; vessels are then sized,
compared and checked against it. Nothing here knows a vessel.
"""

from copy import copy
from functools import cached_property

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.balance import Balance, Extent, Mixing, mixing
from loopslack.calc.model import Loop
from loopslack.calc.scenarios import BASE, DOUBT_IDS, Scenario, all_doubts, single_doubts
from loopslack.calc.states import LiquidStates, liquid_states
from loopslack.kernel.errors import Contradiction
from loopslack.physics.statics import GRAVITY


class SteamCase(Struct, frozen=True, gc=False):
    """One reading of the steam: its balance, the extent at the final pressure, and where steam meets the station.

    ``station`` is the extent at the lowest vessel pressure that keeps steam out of the station: None if no pressure
    lets it in. ``at_station`` is True when steam reaches the station even at the final pressure.
    """

    balance: Balance
    final: Extent
    station: Extent | None
    at_station: bool


class Analysis:
    """A loop seen at its final pressure, under the base case, each doubt, and all doubts at once."""

    def __init__(self, loop: Loop, cases: dict[tuple[float, bool, bool], SteamCase] | None = None) -> None:
        self.loop = loop
        self.fluid = loop.fluid
        self.states: LiquidStates = liquid_states(loop)
        self.mix: Mixing = mixing(loop)
        self.final_pressure = final_pressure(loop)
        self.content = loop.content
        self.allowance = loop.criteria.fluid_allowance * self.content
        doubts = single_doubts(loop)
        self.not_applicable = tuple(id for id in DOUBT_IDS if doubts[id] is None)
        self.doubts: tuple[Scenario, ...] = tuple(d for d in doubts.values() if d is not None)
        self.combined = all_doubts(loop)
        self._cases = {} if cases is None else cases

    @property
    def singles(self) -> tuple[Scenario, ...]:
        """The base case and each doubt alone."""
        return (BASE, *self.doubts)

    @property
    def every(self) -> tuple[Scenario, ...]:
        """The base case, each doubt alone, and all of them at once."""
        return (BASE, *self.doubts, self.combined)

    @cached_property
    def room_density(self) -> float:
        """Density (kg/m3) of the liquid in a vessel at the temperature of its room."""
        return self.fluid.density(self.loop.temperatures.vessel_room)

    @cached_property
    def cut_off_pressure(self) -> float:
        """Vessel pressure (Pa) that keeps the highest point from boiling at the pump's cut-off temperature."""
        loop = self.loop
        bubble = self.fluid.bubble_pressure(loop.temperatures.cut_off)
        against = loop.pump_head if loop.pump_side == "discharge" else 0.0
        return bubble + loop.criteria.boiling_margin + self.states.cut_off.column + against

    def case(self, scenario: Scenario) -> SteamCase:
        """The steam of a scenario, worked out when first asked for."""
        key = scenario.steam_key
        found = self._cases.get(key)
        if found is None:
            found = self._cases[key] = _steam_case(self.loop, scenario, self.final_pressure)
        return found

    def with_cooling(self, content: float) -> "Analysis":
        """The same loop with a cooling vessel of ``content`` m3: the steam stays, the liquid shifts."""
        loop = replace(self.loop, cooling_content=content)
        change = content - self.loop.cooling_content
        cooled = copy(self)
        cooled.loop = loop
        cooled.content = self.content + change
        cooled.allowance = loop.criteria.fluid_allowance * cooled.content
        cooled.states = self.states.with_more_still(change, cooled.allowance - self.allowance)
        cooled.mix = replace(self.mix, cool=self.mix.cool + change)
        filled = change * self.states.fill.vessel_density
        still = change * self.fluid.density(loop.temperatures.hot_liquid)
        cases = {key: _shifted(case, loop, filled, still) for key, case in self._cases.items()}
        cooled._cases = cases  # noqa: SLF001 - of this class
        return cooled


def final_pressure(loop: Loop) -> float:
    """Highest vessel pressure (Pa absolute) at which the relief valve is sure to stay shut.

    A valve above the vessel sees less than the vessel, by hot liquid (the lighter, so the safe side); one below
    sees more, by cold liquid. Raises ``Contradiction`` for one so far below that even vacuum opens it.
    """
    relief, fluid = loop.relief, loop.fluid
    temperatures = loop.temperatures
    density = fluid.density(temperatures.hot_liquid if relief.height > 0 else temperatures.fill)
    pressure = relief.opening_pressure + loop.atmosphere + density * GRAVITY * relief.height
    if pressure <= 0:
        raise Contradiction(
            f"The relief valve stands {-relief.height:.4g} m below the vessel; the liquid between them opens it "
            "before there is any pressure in the vessel.",
            remedy="Correct the height of the valve or its set pressure.",
            pointer="/reliefValve/height",
            facts={"height": relief.height, "opening": relief.opening_pressure},
        )
    return pressure


def _steam_case(loop: Loop, scenario: Scenario, pressure: float) -> SteamCase:
    balance = Balance(loop, scenario)
    final = balance.at_pressure(pressure)
    arrival = balance.station_pressure()
    station = None
    if arrival is not None and arrival < pressure:
        station = balance.at_pressure(arrival)
    return SteamCase(balance, final, station, final.unspent > 0)


def _shifted(case: SteamCase, loop: Loop, filled: float, still: float) -> SteamCase:
    balance = copy(case.balance)
    balance.loop = loop
    balance.filled_mass += filled
    balance.still_mass += still
    gain = filled - still
    final = replace(case.final, expelled=case.final.expelled + gain)
    station = case.station and replace(case.station, expelled=case.station.expelled + gain)
    return SteamCase(balance, final, station, case.at_station)
