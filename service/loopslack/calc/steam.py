"""Steam in the loop at a given vessel pressure: what boils, how far steam reaches, what liquid it displaces.

Everything here depends on the loop and the scenario only, never on the vessel: the vessel comes in through its
pressure. That is what lets a vessel be sized and thousands of vessels be compared without trial.
"""

from typing import NamedTuple

from loopslack.calc.front import SteamPath
from loopslack.calc.model import Branch, CollectorGroup, Loop
from loopslack.calc.scenarios import Scenario
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.roots import bracketed, first_crossing
from loopslack.physics.statics import GRAVITY

_KELVIN = 1e-9  # tolerance of a temperature root


class Steam(NamedTuple):
    """One steam space at one vessel pressure.

    ``temperature`` (K) of the steam, or of the hottest liquid where nothing boils; ``place`` of the front on the
    path; ``emptied`` collector content and ``pipe`` content filled by steam (m3); ``power`` sent out as steam and
    ``unspent`` (W); ``liquid_mass`` left in the collectors and open branches plus the vapour (kg).
    """

    temperature: float
    boiling: bool
    place: float
    height: float
    emptied: float
    pipe: float
    power: float
    unspent: float
    mass: float
    vapour_density: float


class SteamSpace:
    """The collector groups and open branches that share one steam pressure."""

    def __init__(
        self, loop: Loop, scenario: Scenario, groups: list[CollectorGroup], branches: list[Branch]
    ) -> None:
        fluid, sun = loop.fluid, loop.sun
        self.fluid = fluid
        self.groups = groups
        start = max(group.height for group in groups)
        self.path = SteamPath(branches, start)
        self.hot_density = fluid.density(loop.temperatures.hot_liquid)
        self.column = self.hot_density * GRAVITY
        self.ambient = sun.ambient
        self.sun = sun.irradiance
        # (stagnation temperature, aperture, gain, loss 1, loss 2, highest power, content, liquid mass there)
        rows = []
        for group in groups:
            stagnation = group.stagnation_temperature + scenario.stagnation_shift
            power = group.steam_power
            if scenario.worse_emptying and group.worse_steam_power is not None:
                power = group.worse_steam_power
            gain = group.peak_efficiency * sun.irradiance
            rise = stagnation - sun.ambient
            nominal = rise * (group.linear_loss + group.quadratic_loss * rise)
            # Losses scaled so that the group sends nothing out at this stagnation temperature.
            scale = gain / nominal if nominal > 0 else 0.0
            rows.append(
                (
                    stagnation,
                    group.aperture,
                    gain,
                    group.linear_loss * scale,
                    group.quadratic_loss * scale,
                    power,
                    group.content,
                )
            )
        rows.sort(key=lambda row: row[0])
        self.rows = rows
        self.stagnations = sorted({row[0] for row in rows})
        self.hottest = self.stagnations[-1]
        # The bubble line is known from 5 degC; steam colder than the pipes' surroundings cannot stand in them.
        self.coldest = max(fluid.boiling_lowest, self.path.warmest, sun.ambient)

    def power(self, temperature: float) -> float:
        """Power the groups send out as steam at a temperature (K), W."""
        total = 0.0
        rise = temperature - self.ambient
        for stagnation, aperture, gain, linear, quadratic, highest, _ in self.rows:
            if temperature < stagnation:
                bound = gain - rise * (linear + quadratic * rise)
                total += aperture * (bound if bound < highest else highest)
        return total

    def pressure(self, temperature: float) -> float:
        """Vessel pressure (Pa) at which the steam has this temperature; rises with it on a falling path."""
        front = self.path.front(self.power(temperature), temperature)
        return self.fluid.bubble_pressure(temperature) + self.column * front.height

    def at(self, temperature: float, *, below: bool = True) -> tuple[float, Steam]:
        """Vessel pressure (Pa) and steam at a steam temperature (K).

        Groups whose stagnation temperature is exactly this one count as emptied when ``below``, else as liquid.
        """
        bubble, vapour = self.fluid.saturated(temperature)
        power = self.power(temperature)
        front = self.path.front(power, temperature)
        emptied = mass = 0.0
        for row in self.rows:
            if temperature < row[0] or (below and temperature == row[0]):
                emptied += row[6]
            else:
                mass += self.fluid.density(row[0]) * row[6]
        mass += self.hot_density * (self.path.total_volume - front.volume)
        mass += vapour * (emptied + front.volume)
        steam = Steam(
            temperature,
            emptied > 0,
            front.place,
            front.height,
            emptied,
            front.volume,
            power,
            front.unspent,
            mass,
            vapour,
        )
        return bubble + self.column * front.height, steam

    def liquid(self) -> Steam:
        """The space with nothing boiling: every group stands at its stagnation temperature."""
        mass = sum(self.fluid.density(row[0]) * row[6] for row in self.rows)
        mass += self.hot_density * self.path.total_volume
        return Steam(self.hottest, False, 0.0, self.path.heights[0], 0.0, 0.0, 0.0, 0.0, mass, 0.0)

    def highest_boiling(self) -> float:
        """The steam temperature (K) above which the space cannot boil or the bubble line is not known."""
        return min(self.hottest, self.fluid.boiling_highest)

    def at_pressure(self, pressure: float, *, below: bool = True) -> Steam:
        """Steam at a vessel pressure (Pa): the largest extent, where a rising path allows several."""
        top = self.highest_boiling()
        ends = self.path.heights
        guess_low = self.boiling_below(pressure)
        guess_high = min(top, self._boiling(pressure - self.column * min(ends)))
        if guess_low >= top:
            return self._liquid_at(pressure)
        if self.path.falling:
            low = self.pressure(guess_low) - pressure
            high = self.pressure(guess_high) - pressure
            if high < 0:
                if guess_high >= top:
                    return self._liquid_at(pressure)
                return self.at(guess_high, below=below)[1]
            if low >= 0 or guess_low == guess_high:
                return self.at(guess_low, below=below)[1]
            found = bracketed(
                lambda t: self.pressure(t) - pressure, guess_low, guess_high, low, high, _KELVIN
            )
        else:
            stops = _stops(guess_low, guess_high)
            crossing = first_crossing(lambda t: self.pressure(t) - pressure, stops, _KELVIN)
            if crossing is None:
                beyond = guess_high >= top and self.pressure(guess_high) < pressure
                return self._liquid_at(pressure) if beyond else self.at(guess_low)[1]
            found = crossing
        return self.at(found.at, below=below)[1]

    def station_pressure(self, taken: float) -> float | None:
        """Lowest vessel pressure (Pa) at which the branches and ``taken`` W at their end condense all steam.

        None where no pressure lets more arrive, infinite where every pressure does.
        """
        top, low = self.highest_boiling(), self.coldest

        def spare(temperature: float) -> float:
            return self.path.loss(temperature) + taken - self.power(temperature)

        at_top, at_low = spare(top), spare(low)
        if at_top < 0:
            return float("inf")
        if at_low >= 0:
            return None
        temperature = bracketed(spare, low, top, at_low, at_top, _KELVIN).at
        return self.fluid.bubble_pressure(temperature) + self.column * self.path.heights[-1]

    def boiling_below(self, pressure: float) -> float:
        """A steam temperature (K) the space cannot fall below at a vessel pressure (Pa)."""
        return self._boiling(pressure - self.column * max(self.path.heights))

    def _boiling(self, pressure: float) -> float:
        """Boiling temperature kept inside the bracket the bubble line allows."""
        fluid = self.fluid
        if pressure <= fluid.lowest_pressure:
            return self.coldest
        if pressure >= fluid.highest_pressure:
            return fluid.boiling_highest
        return max(self.coldest, fluid.boiling_temperature(pressure))

    def _liquid_at(self, pressure: float) -> Steam:
        """Nothing boils at this vessel pressure; refused where the bubble line ends before that is certain."""
        if self.hottest > self.fluid.boiling_highest:
            raise OutOfRange(
                f"At {pressure / 1e5:.2f} bar absolute in the vessel the collectors ({self.hottest - 273.15:.0f} degC) "
                f"may or may not boil: the bubble line is known up to {self.fluid.boiling_highest - 273.15:.0f} degC.",
                remedy="Choose a relief valve with a lower set pressure.",
                pointer="/reliefValve/setPressure",
                facts={"pressure": pressure, "stagnationTemperature": self.hottest},
            )
        return self.liquid()


def _stops(low: float, high: float) -> list[float]:
    """Temperatures to walk on a path with rising stretches; 48 resolve a crest of a fiftieth of the column."""
    return [low + (high - low) * k / 48 for k in range(49)]
