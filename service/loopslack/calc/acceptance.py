"""The liquid a membrane has to take: how much, and whether a stated acceptance volume is enough for it.

The gas counts at the temperature of the vessel's room, which lets most liquid in.
"""

from collections.abc import Sequence
from functools import cached_property

from msgspec.structs import replace

from loopslack.calc.cooling import Charged, most_held
from loopslack.calc.extents import Extents
from loopslack.calc.fit import Fit
from loopslack.calc.scenarios import Scenario


def readings(scenarios: Sequence[Scenario]) -> tuple[Scenario, ...]:
    """The different readings of the steam of some scenarios, the gas at the room's temperature."""
    found = {scenario.steam_key: scenario for scenario in reversed(scenarios)}
    return tuple(
        replace(reading, gas_follows=False) if reading.gas_follows else reading for reading in found.values()
    )


class AcceptanceNeeded:
    """The acceptance volume with which the window of a vessel would be just wide enough.

    ``extents`` are those of the same loop that other vessels have asked for.
    """

    def __init__(self, fitted: Fit, scenarios: Sequence[Scenario], extents: Extents | None = None) -> None:
        analysis, window = fitted.analysis, fitted.window
        self.analysis = analysis
        self.gas = replace(fitted.gas, acceptance=float("inf"))
        self.readings = readings(scenarios)
        self._extents = Extents(analysis) if extents is None else extents
        self._enough = float("inf")  # the least acceptance volume seen to be enough
        criteria, fill = analysis.loop.criteria, analysis.loop.temperatures.fill
        base = self.gas.precharge * fill / self.gas.temperature + criteria.fill_above_precharge
        # The least filling that leaves the demanded width below it.
        pressure = max(window.lower + criteria.window_width, base + criteria.window_step)
        self.mass = fitted.mass_at(pressure)

    @cached_property
    def volume(self) -> float:
        """It, in m3."""
        charged = Charged(self.analysis, self.gas, self.mass)
        return most_held(charged, self.readings, self._extents) * (1 + 1e-9)

    def suffices(self, accepted: float) -> bool:
        """Whether an acceptance volume (m3) is enough.

        Most are far from where that changes. Then a look at the steam at a pressure a little below the one at which
        the vessel holds that much tells: there the loop pushes out no less.
        """
        if accepted >= self._enough:
            return True
        if "volume" in self.__dict__:  # once solved for one vessel, for all
            return accepted >= self.volume
        analysis = self.analysis
        held = min(accepted, self.gas.nominal)
        room = self.gas.nominal - held
        if room > 0:
            squeeze = self.gas.precharge * analysis.loop.temperatures.vessel_room / self.gas.temperature
            pressure = squeeze * self.gas.nominal / room
            expelled = (held - analysis.allowance) * analysis.room_density - self.mass
            if all(self._extents.at_most(reading, pressure) <= expelled for reading in self.readings):
                self._enough = accepted
                return True
        return accepted >= self.volume
