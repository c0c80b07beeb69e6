"""The volumes a design reports: what the base case needs, what every single doubt needs, what all at once need.

Each comes with the cooling vessel it needs, if the design may add one.
"""

from collections.abc import Sequence
from typing import Literal, NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, smallest_content
from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.floor import without_boiling_floor
from loopslack.calc.sizing.mass_balance import Interval, feasible, with_upper_end
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

    def least(looked_at: Analysis) -> float:
        return without_boiling_floor(looked_at, accept_without_boiling=accept_without_boiling)

    if cooling != "size":
        interval = feasible(analysis, scenarios, membrane_limit)
        return interval and Sized(interval, analysis.loop.cooling_content, analysis, least(analysis))

    tried: list[tuple[float, Analysis, Interval]] = []

    def charge(content: float) -> Charged | None:
        cooled = analysis.with_cooling(content) if content else analysis
        interval = feasible(cooled, scenarios, upper_end=False, near=_expected(tried, content))
        if interval is None:
            return None
        tried.append((content, cooled, interval))
        volume = max(interval.smallest, least(cooled))
        gas = Gas(volume, precharge(cooled, volume), precharge_temperature(cooled))
        return Charged(cooled, gas, interval.window.lower_bound.mass)

    content = smallest_content(charge, scenarios, membrane_limit)
    if content is None:
        return None
    _, cooled, interval = next(trial for trial in reversed(tried) if trial[0] == content)
    return Sized(with_upper_end(cooled, scenarios, interval), content, cooled, least(cooled))


def _expected(tried: Sequence[tuple[float, Analysis, Interval]], content: float) -> float | None:
    """The smallest volume (m3) to expect with a cooling content (m3), by the last two contents and theirs."""
    if not tried:
        return None
    last, volume = tried[-1][0], tried[-1][2].smallest
    before, other = (tried[-2][0], tried[-2][2].smallest) if len(tried) > 1 else (last, volume)
    return volume if last == before else volume + (volume - other) * (content - last) / (last - before)
