"""The smallest nominal volume whose fill window is wide enough, found without trying sizes.

At the final pressure the loop is known, so the window of any vessel is a few multiplications; its width is the
function whose root is the answer. A larger vessel is not always safer, so both ends of the feasible interval are
looked for and a candidate is always checked itself.
"""

from collections.abc import Sequence
from math import inf
from typing import NamedTuple

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import membrane_bound
from loopslack.calc.hot_limits import hot_limits
from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bound, Bounds, Gas, Window
from loopslack.kernel.roots import bracketed, met_from_below

_VOLUME = 1e-11  # relative tolerance of a volume
_FAR = 5.0**6  # times the smallest volume; where such a vessel has a window, so has every size between


class Interval(Struct, frozen=True, gc=False):
    """Feasible nominal volumes (m3); ``largest`` is infinite where no upper end was found.

    ``rise`` (kg/m3) is what the window gains with the volume at its smallest, 0 where that is not known.
    """

    smallest: float
    largest: float
    window: Window
    precharge: float
    rise: float = 0.0


class Expected(NamedTuple):
    """Where a smallest volume (m3) is looked for first, and the rise (kg/m3) expected there."""

    volume: float
    rise: float


def feasible(
    analysis: Analysis,
    scenarios: Sequence[Scenario],
    membrane_limit: float | None = None,
    *,
    upper_end: bool = True,
    near: Expected | None = None,
) -> Interval | None:
    """The interval of nominal volumes with a wide enough window under every scenario; None if there is none.

    With a ``membrane_limit`` (K) the filling must also keep the membrane at or below it. Without ``upper_end`` the
    largest volume is not looked for and left infinite; ``near`` is where the smallest is expected.
    """
    if any(analysis.case(scenario).at_station for scenario in scenarios):
        return None
    slack = _Slack(analysis, scenarios, membrane_limit)
    low = slack.least()
    if low is None:
        return None
    guess, rise = near or (low, 0.0)
    met = met_from_below(slack.at, low, guess, rise, _VOLUME)
    if met is None:
        return None
    smallest = met.at
    found = Interval(smallest, inf, slack.window(smallest), slack.precharge(smallest), met.slope)
    return replace(found, largest=slack.upper_end(smallest)) if upper_end else found


def with_upper_end(
    analysis: Analysis, scenarios: Sequence[Scenario], found: Interval, membrane_limit: float | None = None
) -> Interval:
    """An interval that was found without its upper end, with it."""
    slack = _Slack(analysis, scenarios, membrane_limit)
    return replace(found, largest=slack.upper_end(found.smallest))


class _Slack:
    """By how much (kg) the window of a nominal volume is wider than demanded; negative where it is too narrow."""

    def __init__(
        self, analysis: Analysis, scenarios: Sequence[Scenario], membrane_limit: float | None
    ) -> None:
        self.analysis, self.scenarios, self.membrane_limit = analysis, scenarios, membrane_limit
        self.temperature = precharge_temperature(analysis)
        self.hot = hot_limits(analysis, scenarios)
        self.fixed = analysis.loop.precharge.kind != "optimised"
        self._bounds = self._for(1.0) if self.fixed else None
        self._last: tuple[float, tuple[Bounds, Bound, Bound]] | None = None

    def _for(self, nominal: float) -> Bounds:
        gas = Gas(nominal, precharge(self.analysis, nominal), self.temperature)
        return Bounds(self.analysis, self.scenarios, gas, self.hot)

    def precharge(self, nominal: float) -> float:
        """Precharge (Pa) of a vessel of this size."""
        return precharge(self.analysis, nominal)

    def window(self, nominal: float) -> Window:
        """The window of a vessel of this size."""
        bounds, lower, upper = self._masses(nominal)
        return bounds.window_between(nominal, lower, upper, self.analysis.loop.temperatures.fill)

    def at(self, nominal: float) -> float:
        """Slack in kg."""
        bounds, lower, upper = self._masses(nominal)
        return slack_between(bounds, nominal, lower.mass, upper.mass)

    def _masses(self, nominal: float) -> tuple[Bounds, Bound, Bound]:
        # The last volume is asked about twice: whether it does, and what window it has.
        if self._last is None or self._last[0] != nominal:
            self._last = nominal, self._found(nominal)
        return self._last[1]

    def _found(self, nominal: float) -> tuple[Bounds, Bound, Bound]:
        bounds = self._bounds or self._for(nominal)
        lower, upper = bounds.masses(nominal)
        if self.membrane_limit is not None and 0 <= lower.mass < upper.mass:
            gas = Gas(nominal, bounds.precharge, bounds.temperature)
            limit = self.membrane_limit
            lower = membrane_bound(self.analysis, self.scenarios, gas, lower, upper, limit)
        return bounds, lower, upper

    def least(self) -> float | None:
        """A volume (m3) no feasible one lies below: where the bounds that are linear in it first leave a window.

        None where a vessel has no room at the final pressure, however large.
        """
        bounds = self._bounds or self._for(1.0)
        if bounds.squeeze >= self.analysis.final_pressure:
            return None
        least = 1e-6
        for _, _, upper_slope, upper_offset in bounds.upper:
            least = max(least, upper_offset / upper_slope)
            for _, _, slope, offset in bounds.lower:
                if upper_slope > slope:
                    least = max(least, (upper_offset - offset) / (upper_slope - slope))
        # An optimised precharge lies below that of the bounds, which are then no more than a guide.
        return least if self.fixed else 0.25 * least

    def upper_end(self, volume: float) -> float:
        """The largest feasible volume (m3) above a feasible one, infinite if the slack never runs out."""
        if self.at(volume * _FAR) >= 0:
            return inf
        for _ in range(6):
            following = volume * 5
            value = self.at(following)
            if value < 0:
                found = bracketed(self.at, volume, following, self.at(volume), value, 1e-12 * following).at
                step = 1e-12
                while found > volume and self.at(found) < 0:
                    found = max(found * (1 - step), volume)
                    step *= 4
                return found
            volume = following
        return inf


def slack_between(bounds: Bounds, nominal: float, lower: float, upper: float) -> float:
    """By how much (kg) the upper of two masses lies above what a wide enough window asks for.

    As a mass it is nearly straight in the vessel and in its precharge, where the width itself is steep and bent.
    """
    criteria = bounds.analysis.loop.criteria
    fill = bounds.analysis.loop.temperatures.fill
    low = bounds.pressure(nominal, max(lower, 0.0), fill)
    base = bounds.precharge * fill / bounds.temperature + criteria.fill_above_precharge
    return upper - bounds.mass(nominal, max(low + criteria.window_width, base + criteria.window_step))
