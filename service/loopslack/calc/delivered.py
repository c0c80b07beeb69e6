"""A vessel whose precharge cannot be changed: the nearest precharge with which it would do."""

from collections.abc import Callable, Sequence

from loopslack.calc.fit import Fit
from loopslack.calc.precharge import DELIVERY_TEMPERATURE, SEA_LEVEL
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.mass_balance import slack_between
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.roots import bracketed

_HALVINGS = 20


def nearest_precharge(
    adjusted: Fit, scenarios: Sequence[Scenario], delivered: float, holds: Callable[[float], bool]
) -> float:
    """Delivered precharge (gauge Pa at sea level) nearest to ``delivered`` that leaves a wide enough window.

    ``adjusted`` is the same vessel with a precharge that does; ``holds`` says whether the vessel would do with a
    delivered precharge, its cooling vessel found anew.
    """
    gas = adjusted.gas

    def slack(precharge: float) -> float:
        charged = Gas(gas.nominal, precharge + SEA_LEVEL, DELIVERY_TEMPERATURE, gas.acceptance)
        bounds = Bounds(adjusted.analysis, scenarios, charged)
        lower, upper = bounds.masses(charged.nominal, charged.acceptance)
        return slack_between(bounds, charged.nominal, lower.mass, upper.mass)

    works = gas.precharge * DELIVERY_TEMPERATURE / gas.temperature - SEA_LEVEL
    at_works, at_delivered = slack(works), slack(delivered)
    if at_works <= 0 or at_delivered >= 0:
        return works
    low, high = sorted((works, delivered))
    ends = (at_works, at_delivered) if low == works else (at_delivered, at_works)
    found = bracketed(slack, low, high, *ends, 0.01).at
    # A pascal towards the one that works, so that the answer itself works.
    found += 1.0 if works > found else -1.0
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
