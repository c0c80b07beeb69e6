"""The numbers that published rules start from, taken once from a loop.

Contents and pressures only; what a rule makes of them is the rule's. All pressures are absolute at the vessel and
count with the site's atmosphere, also where a publication prints 1 bar.
"""

from collections.abc import Callable
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.model import Loop, Segment
from loopslack.calc.precharge import precharge_temperature, top_requirement
from loopslack.kernel.kinds import GaugePressure, NominalVolume, PressureDifference, Volume
from loopslack.physics.relief import opening_pressure
from loopslack.physics.vessel import reserve_en_12828


class Basis(NamedTuple):
    """A loop as the rules see it: m3, Pa absolute at the vessel, K.

    ``precharge`` carries the static head and the least pressure at the top, unless one is stated, and ``fill`` is
    the least pressure above it that the trade fills to. ``expansion`` is that of the liquid from the fill temperature
    to the hot liquid's; ``final`` the lowest opening pressure of the relief valve under the loop's own allowance.
    """

    analysis: Analysis
    content: float
    collectors: float
    expansion: float
    reserve: float
    precharge: float
    fill: float
    final: float

    @property
    def loop(self) -> Loop:
        """The loop itself."""
        return self.analysis.loop

    @property
    def set_pressure(self) -> float:
        """Set pressure of the relief valve, carried to the vessel, Pa absolute."""
        return self.at_vessel(self.loop.relief.set_pressure)

    def at_vessel(self, gauge: float) -> float:
        """A gauge pressure (Pa) at the relief valve as an absolute pressure at the vessel."""
        return self.final + gauge - self.loop.relief.opening_pressure

    def opening(self, allowance: Callable[[GaugePressure], PressureDifference]) -> float:
        """Lowest opening pressure under a rule's own allowance, carried to the vessel, Pa absolute."""
        stamped = GaugePressure(self.loop.relief.set_pressure)
        return self.at_vessel(opening_pressure(stamped, allowance(stamped)))

    @property
    def elongation_range(self) -> float:
        """Kelvin between filling and the hot liquid."""
        temperatures = self.loop.temperatures
        return temperatures.hot_liquid - temperatures.fill


def basis(analysis: Analysis) -> Basis:
    """Take the numbers from a loop. Raises ``OutOfRange`` where the fluid has no density at a temperature."""
    loop = analysis.loop
    temperatures = loop.temperatures
    start = rule_precharge(analysis)
    reserve = loop.criteria.reserve
    if reserve is None:
        reserve = reserve_en_12828(NominalVolume(1.0), Volume(loop.content))
    return Basis(
        analysis=analysis,
        content=loop.content,
        collectors=loop.collector_content,
        expansion=loop.fluid.expansion(temperatures.fill, temperatures.hot_liquid),
        reserve=reserve,
        precharge=start,
        fill=start * temperatures.fill / precharge_temperature(analysis) + loop.criteria.fill_above_precharge,
        final=analysis.final_pressure,
    )


def rule_precharge(analysis: Analysis) -> float:
    """Precharge (Pa absolute) the rules start from: the stated one, else what the cold loop's top asks for.

    No rule knows a precharge that is optimised for the vessel it is about to find.
    """
    stated = analysis.loop.precharge
    if stated.kind == "stated":
        return stated.pressure
    return top_requirement(analysis) * precharge_temperature(analysis) / analysis.states.cold.vessel


def pipes_above_collectors(loop: Loop, *, level: bool) -> float:
    """Content (m3) of the pipes above the collectors they belong to; with ``level`` also of pipes at their height."""
    total = 0.0
    for branch in loop.branches:
        height = min(group.height for group in loop.groups if group.space == branch.space)
        total += sum(_content_above(segment, height, level=level) for segment in branch.segments)
    return total


def _content_above(segment: Segment, height: float, *, level: bool) -> float:
    low, high = sorted((segment.start_height, segment.end_height))
    if low == high:
        share = 1.0 if low > height or (level and low == height) else 0.0
    else:
        share = min(1.0, max(0.0, (high - height) / (high - low)))
    return share * segment.length * segment.area
