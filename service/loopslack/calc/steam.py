"""Steam in the loop at a given vessel pressure: what boils, how far steam reaches, what liquid it displaces.

Everything here depends on the loop and the scenario only, never on the vessel: the vessel comes in through its
pressure. That is what lets a vessel be sized and thousands of vessels be compared without trial.
"""

from bisect import bisect_left
from functools import cached_property
from itertools import accumulate, pairwise
from math import inf, log

from loopslack.calc.front import SteamPath
from loopslack.calc.model import Branch, CollectorGroup, Loop
from loopslack.calc.scenarios import Scenario
from loopslack.calc.steam_source import SteamSource
from loopslack.calc.steam_state import Steam
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
        self.source = SteamSource(groups, scenario, sun)
        self.power = self.source.power
        self.stagnations = self.source.stagnations
        self.hottest = self.stagnations[-1]
        # The bubble line is known from 5 degC; steam colder than the pipes' surroundings cannot stand in them.
        self.coldest = max(fluid.boiling_lowest, self.path.warmest, sun.ambient)
        # Where the last steam temperature was found, the vessel pressure it belongs to and its rise there, if known,
        # and where the front stood: a search asks for similar ones.
        self._last = self.coldest, 0.0, 0.0
        self._height = 0.5 * (max(self.path.heights) + min(self.path.heights))
        self._known: dict[float, float | None] = {}
        # Of the logarithm of the bubble pressure over the inverse temperature, K, as a mean.
        self._steepness = log(fluid.highest_pressure / fluid.lowest_pressure) / (
            1.0 / fluid.boiling_lowest - 1.0 / fluid.boiling_highest
        )
        self._knots: list[float] | None = None
        self._highest: list[float] = []

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
        for stagnation, content in self.source.contents:
            if temperature < stagnation or (below and temperature == stagnation):
                emptied += content
            else:
                mass += self.fluid.density(stagnation) * content
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
        mass = sum(self.fluid.density(at) * content for at, content in self.source.contents)
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
        low, top = self.coldest, self.highest_boiling()
        if low >= top:
            return None
        if not self.path.falling:
            return self._boiling_on_a_rise(pressure)
        if pressure > self._highest_pressure or (pressure == self._highest_pressure and self.power(top) <= 0):
            return None
        full = self._full
        if full is None:
            if pressure <= self._lowest_pressure:
                return low
        elif pressure <= full[1]:
            return self._boiling(pressure - self.column * self.path.heights[-1])
        # The column changes little, so that the boiling point under the last one is a close start.
        needed = pressure - self.column * self._height
        guess = self._boiling(needed, exact=False)
        return self._search(pressure, (low, top, self._steepness * needed / (guess * guess)), guess)

    def _boiling_on_a_rise(self, pressure: float) -> float | None:
        """See ``boiling_at``: the first temperature at which the pressure is reached, which may be one of several."""
        bracket = self._first_rise(pressure)
        if bracket is None:
            return None
        low, _, slope = bracket
        if slope <= 0:
            return low
        guess, at, steep = self._last
        if steep <= 0:
            return self._search(pressure, bracket, guess)
        return self._search(pressure, (*bracket[:2], steep), guess + (pressure - at) / steep)

    def _search(self, pressure: float, bracket: Rise, guess: float) -> float:
        """The steam temperature (K) at a vessel pressure (Pa), looked for at a guess first."""
        path, fluid, column, power = self.path, self.fluid, self.column, self.power

        def missing(temperature: float) -> float:
            self._height = path.front(power(temperature), temperature).height
            return fluid.bubble_pressure(temperature) + column * self._height - pressure

        low, high, slope = bracket
        found = near(missing, low, high, guess, slope, _ACCURACY * max(abs(pressure), BAR))
        self._last = found.at, pressure, found.slope
        return found.at

    @cached_property
    def _highest_pressure(self) -> float:
        """Vessel pressure (Pa) of the hottest steam of a falling path; at stagnation the front has not left the top."""
        top = self.highest_boiling()
        if self.power(top) > 0:
            return self.pressure(top)
        return self.fluid.bubble_pressure(top) + self.column * self.path.heights[0]

    @cached_property
    def _lowest_pressure(self) -> float:
        """Vessel pressure (Pa) of the coldest steam of a falling path."""
        return self.pressure(self.coldest)

    @cached_property
    def _full(self) -> tuple[float, float] | None:
        """Hottest steam (K) that fills the branches of a falling path, and its vessel pressure (Pa), if any does."""
        full = self._condensing(0.0)
        if full is None:
            return None
        temperature = min(full, self.highest_boiling())
        return temperature, self.fluid.bubble_pressure(temperature) + self.column * self.path.heights[-1]

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
        if self.highest_boiling() <= self.coldest:
            return None  # nothing ever boils
        temperature = self._condensing(taken)
        if temperature is None or temperature == inf:
            return temperature
        return self.fluid.bubble_pressure(temperature) + self.column * self.path.heights[-1]

    def _condensing(self, taken: float) -> float | None:
        """Steam temperature (K) from which the branches and ``taken`` W at their end condense all steam.

        None where it is below the coldest, infinite where it is above the hottest.
        """
        if taken not in self._known:
            self._known[taken] = self._condensing_all(taken)
        return self._known[taken]

    def _condensing_all(self, taken: float) -> float | None:
        top, low = self.highest_boiling(), self.coldest

        def spare(temperature: float) -> float:
            return self.path.loss(temperature) + taken - self.power(temperature)

        at_top, at_low = spare(top), spare(low)
        if at_top < 0:
            return inf
        if at_low >= 0:
            return None
        return bracketed(spare, low, top, at_low, at_top, _KELVIN).at

    def boiling_below(self, pressure: float) -> float:
        """A steam temperature (K) the space cannot fall below at a vessel pressure (Pa)."""
        return self._boiling(pressure - self.column * max(self.path.heights))

    def _boiling(self, pressure: float, *, exact: bool = True) -> float:
        """Boiling temperature kept inside the bracket the bubble line allows; not ``exact`` to some hundredths."""
        fluid = self.fluid
        if pressure <= fluid.lowest_pressure:
            return self.coldest
        if pressure >= fluid.highest_pressure:
            return fluid.boiling_highest
        found = fluid.boiling_temperature(pressure) if exact else fluid.boiling_about(pressure)
        return max(self.coldest, found)

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
