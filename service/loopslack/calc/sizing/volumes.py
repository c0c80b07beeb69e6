"""The volumes a design reports: what the base case needs, what every single doubt needs, what all at once need.

Each comes with the cooling vessel it needs, if the design may add one.
"""

from collections.abc import Sequence
from typing import Literal, NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, smallest_content
from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.mass_balance import Interval, feasible, with_upper_end
from loopslack.calc.sizing.rules.en_12977 import en_12977_volume
from loopslack.calc.window import Gas

CoolingMode = Literal["given", "none", "size"]


class Sized(NamedTuple):
    """A sizing: the feasible interval, the cooling vessel's content (m3) and the loop that has it.

    ``floor`` (m3) is the least volume accepted although a smaller one would hold, 0 where none applies.
    """

    interval: Interval
    cooling: float
    analysis: Analysis
    floor: float

    @property
    def smallest(self) -> float:
        """The smallest nominal volume (m3) that may be recommended."""
        return max(self.interval.smallest, self.floor)


def size(
    analysis: Analysis,
    scenarios: Sequence[Scenario],
    cooling: CoolingMode,
    membrane_limit: float,
    *,
    accept_without_boiling: bool = False,
) -> Sized | None:
    """The smallest vessel that holds under every scenario, with the cooling vessel it needs; None if none does."""
    floor = without_boiling_floor(analysis, accept_without_boiling=accept_without_boiling)
    if cooling != "size":
        interval = feasible(analysis, scenarios, membrane_limit)
        return interval and Sized(interval, analysis.loop.cooling_content, analysis, floor)

    tried: list[tuple[float, Analysis, Interval]] = []

    def charge(content: float) -> Charged | None:
        cooled = analysis.with_cooling(content) if content else analysis
        interval = feasible(cooled, scenarios, upper_end=False, near=_expected(tried, content))
        if interval is None:
            return None
        tried.append((content, cooled, interval))
        volume = max(interval.smallest, floor)
        gas = Gas(volume, precharge(cooled, volume), precharge_temperature(cooled))
        return Charged(cooled, gas, interval.window.lower_bound.mass)

    content = smallest_content(charge, scenarios, membrane_limit)
    if content is None:
        return None
    _, cooled, interval = next(trial for trial in reversed(tried) if trial[0] == content)
    return Sized(with_upper_end(cooled, scenarios, interval), content, cooled, floor)


def _expected(tried: Sequence[tuple[float, Analysis, Interval]], content: float) -> float | None:
    """The smallest volume (m3) to expect with a cooling content (m3), by the last two contents and theirs."""
    if not tried:
        return None
    last, volume = tried[-1][0], tried[-1][2].smallest
    before, other = (tried[-2][0], tried[-2][2].smallest) if len(tried) > 1 else (last, volume)
    return volume if last == before else volume + (volume - other) * (content - last) / (last - before)


def without_boiling_floor(analysis: Analysis, *, accept_without_boiling: bool) -> float:
    """Least volume (m3) for a loop that relies on its collectors not boiling at the final pressure.

    Such a loop stands on a computed stagnation temperature alone, so the volume of EN 12977 is asked for, unless
    the caller accepts less and states measured stagnation temperatures.
    """
    if analysis.case(BASE).final.boiling:
        return 0.0
    measured = all(group.measured_stagnation for group in analysis.loop.groups)
    if accept_without_boiling and measured:
        return 0.0
    return en_12977_volume(analysis)
