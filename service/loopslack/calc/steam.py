"""Steam in the loop at a given vessel pressure: what boils, how far steam reaches, what liquid it displaces.

Everything here depends on the loop and the scenario only, never on the vessel: the vessel comes in through its
pressure. That is what lets a vessel be sized and thousands of vessels be compared without trial.
"""

from bisect import bisect_left
from itertools import accumulate, pairwise
from typing import NamedTuple

from loopslack.calc.front import SteamPath
from loopslack.calc.model import Branch, CollectorGroup, Loop
from loopslack.calc.scenarios import Scenario
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.roots import bracketed, near
from loopslack.physics.statics import GRAVITY

_KELVIN = 1e-9  # tolerance of a temperature root
_ACCURACY = 1e-12  # of a pressure, to which a steam temperature belongs: 1e-9 K at the flattest
_NEAR = 1e-6  # K within which two steam temperatures are one
_PARTS = 4  # steps between two stops of a path with rising stretches, in case a peak should lie between
BAR = 1e5

Rise = tuple[float, float, float]
"""Steam temperatures (K) between which a pressure lies, and how steeply it rises there (Pa/K), 0 where they are one."""


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
        # Where the last steam temperature was found, the vessel pressure it belongs to and its rise there, if known.
        self._last = self.coldest, 0.0, 0.0
        self._knots: list[float] | None = None
        self._highest: list[float] = []

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
        found = self.boiling_at(pressure)
        return self._liquid_at(pressure) if found is None else self.at(found, below=below)[1]

    def unspent(self, pressure: float) -> float:
        """Power (W) that arrives at the end of the branches at a vessel pressure (Pa)."""
        found = self.boiling_at(pressure)
        return 0.0 if found is None else self.path.front(self.power(found), found).unspent

    def boiling_at(self, pressure: float) -> float | None:
        """Steam temperature (K) at a vessel pressure (Pa); None where nothing boils or the bubble line has ended."""
        bracket = self._bracket(pressure) if self.path.falling else self._first_rise(pressure)
        if bracket is None:
            return None
        low, high, slope = bracket
        if slope <= 0:
            return low
        guess, at, steep = self._last
        found = near(
            lambda t: self.pressure(t) - pressure,
            low,
            high,
            guess + (pressure - at) / steep if steep > 0 else guess,
            steep if steep > 0 else slope,
            _ACCURACY * max(abs(pressure), BAR),
        )
        self._last = found.at, pressure, found.slope
        return found.at

    def _bracket(self, pressure: float) -> Rise | None:
        """Where a falling path's steam temperature lies at a pressure (Pa); None where nothing boils."""
        low, top = self.boiling_below(pressure), self.highest_boiling()
        if low >= top:
            return None
        high = min(top, self._boiling(pressure - self.column * min(self.path.heights)))
        if high >= top and self.pressure(top) < pressure:
            return None
        if low >= high or (low <= self.coldest and self.pressure(low) >= pressure):
            return low, low, 0.0
        if high < top and self.power(high) >= self.path.loss(high):
            # The runs are full of steam there, and at every lower temperature: the column is known.
            return high, high, 0.0
        return low, high, self.column * (max(self.path.heights) - min(self.path.heights)) / (high - low)

    def knots(self) -> list[float]:
        """Steam temperatures (K), rising, between which pressure on a path with rising stretches has no peak.

        There the front stands at a stop of the path. Along a rising stretch the column shrinks while the steam gets
        hotter, so that pressure may fall; it then falls first, since the bubble line gets ever steeper.
        """
        if self._knots is None:
            path, low, top = self.path, self.coldest, self.highest_boiling()
            found = {low, top}
            for conductance, offset in zip(path.conductance[1:], path.offset[1:], strict=True):

                def spare(t: float, c: float = conductance, o: float = offset) -> float:
                    return c * t - o - self.power(t)

                at_low, at_top = spare(low), spare(top)
                if at_low < 0 < at_top:
                    found.add(bracketed(spare, low, top, at_low, at_top, _KELVIN).at)
            stops = sorted(found)
            parts = [a + (b - a) * k / _PARTS for a, b in pairwise(stops) for k in range(_PARTS)]
            self._knots = [*parts, stops[-1]]
        return self._knots

    def stops(self, low: float, high: float) -> list[float]:
        """Where to look between two steam temperatures (K) for a first crossing on a path with rising stretches."""
        return [low, *(t for t in self.knots() if low < t < high), high]

    def is_largest(self, temperature: float, pressure: float) -> bool:
        """Whether no cooler steam stands at the vessel pressure (Pa) at which steam of a temperature (K) does."""
        if self.path.falling:
            return True
        cooler = bisect_left(self.knots(), temperature - _NEAR)
        return not cooler or self._peaks()[cooler - 1] < pressure

    def peak(self) -> float:
        """Vessel pressure (Pa) above which nothing boils on a path with rising stretches."""
        return self._peaks()[-1]

    def _peaks(self) -> list[float]:
        """The highest pressure (Pa) up to each of the knots."""
        if not self._highest:
            self._highest = list(accumulate((self.pressure(t) for t in self.knots()), max))
        return self._highest

    def _first_rise(self, pressure: float) -> Rise | None:
        """The first two knots between which pressure on a rising path comes up to one (Pa); None if it never does."""
        knots, peaks = self.knots(), self._peaks()
        place = bisect_left(peaks, pressure)
        if place == len(peaks):
            return None
        if not place:
            return knots[0], knots[0], 0.0
        low, high = knots[place - 1], knots[place]
        return low, high, (peaks[place] - peaks[place - 1]) / (high - low)

    def station_pressure(self, taken: float) -> float | None:
        """Lowest vessel pressure (Pa) at which the branches and ``taken`` W at their end condense all steam.

        None where no pressure lets more arrive, infinite where every pressure does.
        """
        top, low = self.highest_boiling(), self.coldest
        if top <= low:
            return None  # nothing ever boils

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
                facts={"pressure": pressure, "stagnationTemperature": self.hottest, "rule": "bubble line"},
            )
        return self.liquid()
