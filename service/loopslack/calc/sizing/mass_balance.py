"""The smallest nominal volume whose fill window is wide enough, found without trying sizes.

At the final pressure the loop is known, so the window of any vessel is a few multiplications; its width is the
function whose root is the answer. A larger vessel is not always safer, so both ends of the feasible interval are
looked for and a candidate is always checked itself.
"""

from collections.abc import Sequence
from math import inf
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import membrane_bound
from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bound, Bounds, Gas, Window
from loopslack.kernel.roots import bracketed

_LADDER = 1.2  # step of the search for the bracket where nothing tells more
_LEAP = 10.0  # most it steps at once where the slack tells how far
_BEYOND = 1e-3  # of such a step, what is added to come out beyond the root
_NEAR = 1e-3  # share around an expected volume in which it is looked for first
_VOLUME = 1e-11  # relative tolerance of a volume
_RUNGS = 55  # 1.2^55 is 22,000 times the smallest vessel that could work at all


class Interval(NamedTuple):
    """Feasible nominal volumes (m3); ``largest`` is infinite where no upper end was found."""

    smallest: float
    largest: float
    window: Window
    precharge: float


def feasible(
    analysis: Analysis,
    scenarios: Sequence[Scenario],
    membrane_limit: float | None = None,
    *,
    upper_end: bool = True,
    near: float | None = None,
) -> Interval | None:
    """The interval of nominal volumes with a wide enough window under every scenario; None if there is none.

    With a ``membrane_limit`` (K) the filling must also keep the membrane at or below it. Without ``upper_end`` the
    largest volume is not looked for and left infinite; ``near`` (m3) is where the smallest is expected.
    """
    if any(analysis.case(scenario).at_station for scenario in scenarios):
        return None
    slack = _Slack(analysis, scenarios, membrane_limit)
    smallest = _smallest(slack, near)
    if smallest is None:
        return None
    found = Interval(smallest, inf, slack.window(smallest), slack.precharge(smallest))
    return found._replace(largest=slack.upper_end(smallest)) if upper_end else found


def with_upper_end(
    analysis: Analysis, scenarios: Sequence[Scenario], found: Interval, membrane_limit: float | None = None
) -> Interval:
    """An interval that was found without its upper end, with it."""
    slack = _Slack(analysis, scenarios, membrane_limit)
    return found._replace(largest=slack.upper_end(found.smallest))


def _smallest(slack: "_Slack", near: float | None) -> float | None:
    """The smallest volume (m3) with a wide enough window; None if there is none."""
    low = slack.least()
    if low is None:
        return None
    volume, following = low, low * _LADDER
    if near is not None and low < near * (1 - _NEAR):
        volume, following = near * (1 - _NEAR), near * (1 + _NEAR)
    value = slack.at(volume)
    if value >= 0 and volume > low:
        volume, value, following = low, slack.at(low), volume
    rungs = 0
    while value < 0:
        previous, before = volume, value
        volume = following
        rungs += 1
        if rungs > _RUNGS:
            return None
        value = slack.at(volume)
        # The slack is the least of many that are nearly straight, so that the line through two volumes that are too
        # small ends before any that does; a little beyond is where to look next.
        following = volume * _LADDER
        if value > before:
            following = volume - value * (volume - previous) / (value - before) * (1 + _BEYOND)
            following = min(max(following, volume * (1 + _VOLUME)), volume * _LEAP)
    if not rungs:
        return volume
    smallest = bracketed(slack.at, previous, volume, before, value, _VOLUME * volume).at
    # The root is met from above, so that the smallest vessel reported has its window. Where the slack jumps, the
    # root may be some way off: the steps grow, up to the volume known to do.
    step = 2 * _VOLUME
    while smallest < volume and slack.at(smallest) < 0:
        smallest = min(smallest * (1 + step), volume)
        step *= 4
    return smallest


class _Slack:
    """By how much (kg) the window of a nominal volume is wider than demanded; negative where it is too narrow."""

    def __init__(
        self, analysis: Analysis, scenarios: Sequence[Scenario], membrane_limit: float | None
    ) -> None:
        self.analysis, self.scenarios, self.membrane_limit = analysis, scenarios, membrane_limit
        self.temperature = precharge_temperature(analysis)
        self.fixed = analysis.loop.precharge.kind != "optimised"
        self._bounds = self._for(1.0) if self.fixed else None
        self._last: tuple[float, tuple[Bounds, Bound, Bound]] | None = None

    def _for(self, nominal: float) -> Bounds:
        gas = Gas(nominal, precharge(self.analysis, nominal), self.temperature)
        return Bounds(self.analysis, self.scenarios, gas)

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
