"""The cooling vessel: the smallest content that keeps the membrane at or below its limit.

It stands uninsulated in the line before the expansion vessel, so that its own cool liquid arrives first. Its
content also takes part in the balance, so a vessel and its cooling vessel are found together.
"""

from collections.abc import Callable, Sequence
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import Equilibrium
from loopslack.calc.scenarios import Scenario
from loopslack.calc.stagnation import stagnation
from loopslack.calc.window import Bound, Bounds, Gas, Window
from loopslack.kernel.roots import bracketed

_MOST = 1e3  # m3: no cooling vessel is sought beyond
_TOLERANCE = 1e-7  # of a content or a mass; the answer is then moved to the safe side by as much


class Charged(NamedTuple):
    """A loop (with its cooling vessel), its gas side, and the least mass (kg) it may be filled with."""

    analysis: Analysis
    gas: Gas
    least: float


def hottest(charged: Charged, scenarios: Sequence[Scenario]) -> tuple[float, Scenario]:
    """Highest mixed temperature (K) in the vessel at its least filling, and under which scenario.

    The least filling is the worst: less cool liquid, less pressure, more steam.
    """
    found, worst = _hottest(charged, scenarios)
    return found.mixed_temperature, worst


def _hottest(charged: Charged, scenarios: Sequence[Scenario]) -> tuple[Equilibrium, Scenario]:
    found = [
        (stagnation(charged.analysis, scenario, charged.gas, charged.least), scenario)
        for scenario in scenarios
    ]
    return max(found, key=lambda pair: pair[0].mixed_temperature)


def smallest_content(
    charge: Callable[[float], Charged | None], scenarios: Sequence[Scenario], limit: float
) -> float | None:
    """Smallest cooling content (m3) with which no scenario heats the membrane beyond ``limit`` K; None if none does.

    ``charge`` gives the loop with a cooling vessel of a content, with the vessel that then belongs to it, or None
    where no vessel fits.
    """
    content: float | None = 0.0
    while content is not None:
        charged = charge(content)
        if charged is None:
            return None
        found, worst = _hottest(charged, scenarios)
        excess = found.mixed_temperature - limit
        if excess <= 0:
            return content
        mix = charged.analysis.mix
        if limit <= mix.room:
            return None
        # Cool liquid in place of as much hot: right but for what the content itself changes in the balance.
        step = max(1e-6, 1.1 * found.liquid * excess / max(mix.hot - mix.room, 1.0))
        content = _content_for(charge, worst, limit, (content, excess), step)
    return None


def _content_for(
    charge: Callable[[float], Charged | None],
    scenario: Scenario,
    limit: float,
    start: tuple[float, float],
    step: float,
) -> float | None:
    """Content (m3) with which one scenario just keeps the limit; ``start`` is a content and its excess (K)."""

    def excess(content: float) -> float:
        charged = charge(content)
        if charged is None:
            raise _NoVessel
        return _hottest(charged, (scenario,))[0].mixed_temperature - limit

    low, at_low = start
    high = low + step
    try:
        at_high = excess(high)
        while at_high > 0:
            low, at_low = high, at_high
            high += 0.5 * step + 0.5 * high
            if high > _MOST:
                return None
            at_high = excess(high)
        found = bracketed(excess, low, high, at_low, at_high, _TOLERANCE * high).at
    except _NoVessel:
        return None
    return found * (1 + _TOLERANCE)


def membrane_bound(
    analysis: Analysis, scenarios: Sequence[Scenario], gas: Gas, lower: Bound, upper: Bound, limit: float
) -> Bound:
    """The lower bound on the filling (kg), raised until no scenario heats the membrane beyond ``limit`` K.

    A mass above ``upper`` means that no filling does.
    """
    temperature, worst = hottest(Charged(analysis, gas, lower.mass), scenarios)
    while temperature > limit:
        most = hottest(Charged(analysis, gas, upper.mass), (worst,))[0]
        if most > limit:
            return Bound("membrane-temperature", worst.id, upper.mass * (1 + (most - limit) / limit) + 1e-9)
        scenario = worst
        mass = bracketed(
            lambda m: hottest(Charged(analysis, gas, m), (scenario,))[0] - limit,  # noqa: B023 - used at once
            lower.mass,
            upper.mass,
            temperature - limit,
            most - limit,
            _TOLERANCE * upper.mass,
        ).at
        lower = Bound("membrane-temperature", worst.id, mass * (1 + 2 * _TOLERANCE))
        temperature, worst = hottest(Charged(analysis, gas, lower.mass), scenarios)
        if worst is scenario and temperature > limit:
            lower = lower._replace(mass=lower.mass + _TOLERANCE * upper.mass)
    return lower


def cool_window(analysis: Analysis, scenarios: Sequence[Scenario], gas: Gas, membrane_limit: float) -> Window:
    """The fill window at the fill temperature in which no scenario heats the membrane beyond its limit (K)."""
    bounds = Bounds(analysis, scenarios, gas)
    lower, upper = bounds.masses(gas.nominal, gas.acceptance)
    if 0 <= lower.mass < upper.mass:
        lower = membrane_bound(analysis, scenarios, gas, lower, upper, membrane_limit)
    return bounds.window_between(gas.nominal, lower, upper, analysis.loop.temperatures.fill)


class _NoVessel(Exception):
    """No vessel fits a loop with this cooling content."""
