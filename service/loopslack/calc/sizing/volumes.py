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
from loopslack.calc.sizing.mass_balance import Expected, Interval, feasible, with_upper_end
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
    trail: "Trail | None" = None,
) -> Sized | None:
    """The smallest vessel that holds under every scenario, with the cooling vessel it needs; None if none does.

    ``trail`` is that of other scenarios of the same loop: volumes are looked for near what these needed.
    """

    def least(looked_at: Analysis) -> float:
        return without_boiling_floor(looked_at, accept_without_boiling=accept_without_boiling)

    trail = trail or Trail()
    trail.begin()
    if cooling != "size":
        interval = feasible(analysis, scenarios, membrane_limit)
        if interval is None:
            return None
        return Sized(interval, analysis.loop.cooling_content, analysis, least(analysis))

    tried: dict[float, tuple[Analysis, Interval]] = {}

    def charge(content: float) -> Charged | None:
        cooled = analysis.with_cooling(content) if content else analysis
        interval = feasible(cooled, scenarios, upper_end=False, near=trail.expected(content))
        if interval is None:
            return None
        tried[content] = cooled, interval
        trail.add(content, interval)
        volume = max(interval.smallest, least(cooled))
        gas = Gas(volume, precharge(cooled, volume), precharge_temperature(cooled))
        return Charged(cooled, gas, interval.window.lower_bound.mass)

    content = smallest_content(charge, scenarios, membrane_limit)
    if content is None:
        return None
    cooled, interval = tried[content]
    return Sized(with_upper_end(cooled, scenarios, interval), content, cooled, least(cooled))


class Trail:
    """The smallest volumes found with the cooling contents (m3) tried so far: where to look for the next."""

    def __init__(self) -> None:
        self._without: Interval | None = None
        self._tried: list[tuple[float, Interval]] = []

    def begin(self) -> None:
        """Begin with other scenarios."""
        self._tried = []

    def add(self, content: float, found: Interval) -> None:
        """Note what was found with a cooling content."""
        if content == 0.0:
            self._without = found
        self._tried.append((content, found))

    def expected(self, content: float) -> Expected | None:
        """Where to look with a cooling content, by the last two contents; None where nothing tells."""
        if not self._tried:
            last = self._without
            return None if last is None else Expected(last.smallest, last.rise)
        at, last = self._tried[-1]
        volume = last.smallest
        if len(self._tried) > 1 and at != self._tried[-2][0]:
            before, other = self._tried[-2]
            volume += (volume - other.smallest) * (content - at) / (at - before)
        return Expected(volume, last.rise)
