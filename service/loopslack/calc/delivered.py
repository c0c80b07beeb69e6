"""A vessel whose precharge cannot be changed: the nearest precharge with which it would do."""

from collections.abc import Callable, Sequence
from math import inf

from loopslack.calc.fit import Fit
from loopslack.calc.precharge import DELIVERY_TEMPERATURE, SEA_LEVEL
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.mass_balance import slack_between
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.roots import bracketed

_HALVINGS = 20
_TOLERANCE = 20.0  # Pa, far less than any gauge shows


def nearest_precharge(
    adjusted: Fit, bounds: Bounds, delivered: float, holds: Callable[[float], bool]
) -> float:
    """Delivered precharge (gauge Pa at sea level) nearest to ``delivered`` that leaves a wide enough window.

    ``adjusted`` is the same vessel with a precharge that does, ``bounds`` are those of its loop for any precharge;
    ``holds`` says whether the vessel would do with a delivered precharge, its cooling vessel found anew.
    """
    gas = adjusted.gas

    def slack(precharge: float) -> float:
        charged = Gas(gas.nominal, precharge + SEA_LEVEL, DELIVERY_TEMPERATURE, gas.acceptance)
        own = bounds.charged(charged)
        lower, upper = own.masses(charged.nominal, charged.acceptance)
        return slack_between(own, charged.nominal, lower.mass, upper.mass)

    works = gas.precharge * DELIVERY_TEMPERATURE / gas.temperature - SEA_LEVEL
    inside, outside = (works, slack(works)), (delivered, slack(delivered))
    if inside[1] <= 0 or outside[1] >= 0:
        return works
    jump = _hot_gas_fills(adjusted, bounds.scenarios)
    if works < jump < delivered:
        at_jump = jump, slack(jump)
        inside, outside = (at_jump, outside) if at_jump[1] > 0 else (inside, at_jump)
    found = inside[0]
    if found != jump:
        (low, at_low), (high, at_high) = sorted((inside, outside))
        found = bracketed(slack, low, high, at_low, at_high, _TOLERANCE).at
    # Beyond the tolerance towards the one that works, so that the answer itself works.
    found += 2 * _TOLERANCE if works > found else -2 * _TOLERANCE
    if holds(found):
        return found
    # Another precharge may ask for another cooling vessel, which narrows the window: halve the way to what works.
    for _ in range(_HALVINGS):
        middle = 0.5 * (found + works)
        if holds(middle):
            works = middle
        else:
            found = middle
    return works


def _hot_gas_fills(fitted: Fit, scenarios: Sequence[Scenario]) -> float:
    """Delivered precharge (gauge Pa) from which hot gas alone fills the vessel, so that the window jumps shut.

    A hair below it; infinite where no scenario warms the gas.
    """
    if not any(scenario.gas_follows for scenario in scenarios):
        return inf
    analysis = fitted.analysis
    return analysis.final_pressure * DELIVERY_TEMPERATURE / analysis.mix.hot * (1 - 1e-9) - SEA_LEVEL
