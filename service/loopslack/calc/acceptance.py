"""The liquid a membrane has to take: how much, and whether a stated acceptance volume is enough for it.

The gas counts at the temperature of the vessel's room, which lets most liquid in.
"""

from collections.abc import Sequence
from functools import cached_property
from math import floor

from msgspec.structs import replace

from loopslack.calc.cooling import Charged, most_held
from loopslack.calc.fit import Fit
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import FillLaw

Extents = dict[tuple[tuple[float, bool, bool], int], float]
"""Mass (kg) pushed out at a vessel pressure under a reading of the steam: shared by the vessels of one loop."""

_GRID = 50.0  # Pa to which a pressure is rounded down, so that vessels with like shares of acceptance share a look


class AcceptanceNeeded:
    """The acceptance volume with which the window of a vessel would be just wide enough.

    ``extents`` are those of the same loop that other vessels have asked for.
    """

    def __init__(self, fitted: Fit, scenarios: Sequence[Scenario], extents: Extents | None = None) -> None:
        analysis, window = fitted.analysis, fitted.window
        self.analysis = analysis
        self.gas = replace(fitted.gas, acceptance=float("inf"))
        readings = {scenario.steam_key: replace(scenario, gas_follows=False) for scenario in scenarios}
        self.readings = tuple(readings.values())
        self._extents: Extents = {} if extents is None else extents
        criteria, fill = analysis.loop.criteria, analysis.loop.temperatures.fill
        base = self.gas.precharge * fill / self.gas.temperature + criteria.fill_above_precharge
        # The least filling that leaves the demanded width below it.
        pressure = max(window.lower + criteria.window_width, base + criteria.window_step)
        self.mass = FillLaw(analysis, self.gas).mass(self.gas.nominal, pressure)

    @cached_property
    def volume(self) -> float:
        """It, in m3."""
        return most_held(Charged(self.analysis, self.gas, self.mass), self.readings) * (1 + 1e-9)

    def suffices(self, accepted: float) -> bool:
        """Whether an acceptance volume (m3) is enough.

        Most are far from where that changes. Then a look at the steam at a pressure a little below the one at which
        the vessel holds that much tells: there the loop pushes out no less.
        """
        analysis = self.analysis
        held = min(accepted, self.gas.nominal)
        room = self.gas.nominal - held
        if room > 0:
            squeeze = self.gas.precharge * analysis.loop.temperatures.vessel_room / self.gas.temperature
            step = floor(min(squeeze * self.gas.nominal / room, analysis.final_pressure) / _GRID)
            expelled = (held - analysis.allowance) * analysis.room_density - self.mass
            if all(self._expelled(reading, step) <= expelled for reading in self.readings):
                return True
        return accepted >= self.volume

    def _expelled(self, reading: Scenario, step: int) -> float:
        key = reading.steam_key, step
        found = self._extents.get(key)
        if found is None:
            balance = self.analysis.case(reading).balance
            falling = all(space.path.falling for space in balance.spaces)
            found = balance.at_pressure(step * _GRID).expelled if falling else float("inf")
            self._extents[key] = found
        return found
