"""The cooling vessel: the smallest content that keeps the membrane at or below its limit.

It stands uninsulated in the line before the expansion vessel, so that its own cool liquid arrives first. Its
content also takes part in the balance, so a vessel and its cooling vessel are found together.
"""

from collections.abc import Callable, Sequence
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.judge import stagnation
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bound, Gas
from loopslack.kernel.roots import bracketed

_MOST = 64.0  # times the content of the loop: no cooling vessel is sought beyond
_TOLERANCE = 1e-9


class Charged(NamedTuple):
    """A loop (with its cooling vessel), its gas side, and the least mass (kg) it may be filled with."""

    analysis: Analysis
    gas: Gas
    least: float


def hottest(charged: Charged, scenarios: Sequence[Scenario]) -> tuple[float, Scenario]:
    """Highest mixed temperature (K) in the vessel at its least filling, and under which scenario.

    The least filling is the worst: less cool liquid, less pressure, more steam.
    """
    found = [
        (stagnation(charged.analysis, scenario, charged.gas, charged.least).mixed_temperature, scenario)
        for scenario in scenarios
    ]
    return max(found, key=lambda pair: pair[0])


def smallest_content(
    charge: Callable[[float], Charged | None], scenarios: Sequence[Scenario], limit: float
) -> float | None:
    """Smallest cooling content (m3) with which no scenario heats the membrane beyond ``limit`` K; None if none does.

    ``charge`` gives the loop with a cooling vessel of a content, with the vessel that then belongs to it, or None
    where no vessel fits.
    """
    plain = charge(0.0)
    if plain is None:
        return None
    temperature, worst = hottest(plain, scenarios)
    if temperature <= limit:
        return 0.0
    if limit <= plain.analysis.mix.room:
        return None
    excess: dict[float, float] = {0.0: temperature - limit}

    def at(content: float) -> float:
        charged = charge(content)
        if charged is None:
            raise _NoVessel
        excess[content] = hottest(charged, (worst,))[0] - limit
        return excess[content]

    try:
        high = _first_guess(plain, temperature, limit)
        while at(high) > 0:
            high *= 1.5
            if high > _MOST * plain.analysis.loop.content:
                return None
        low = max(content for content, value in excess.items() if value > 0)
        content = bracketed(at, low, high, excess[low], excess[high], _TOLERANCE * high).at
        while True:
            charged = charge(content)
            if charged is None:
                return None
            temperature, worst_now = hottest(charged, scenarios)
            if temperature <= limit:
                return content
            if worst_now is worst:
                content *= 1 + _TOLERANCE
                continue
            # Another scenario takes over: find its content instead.
            worst, low, at_low = worst_now, content, temperature - limit
            while at(high) > 0:
                high *= 1.5
                if high > _MOST * plain.analysis.loop.content:
                    return None
            content = bracketed(at, low, high, at_low, excess[high], _TOLERANCE * high).at
    except _NoVessel:
        return None


class _NoVessel(Exception):
    """No vessel fits a loop with this cooling content."""


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


def _first_guess(charged: Charged, temperature: float, limit: float) -> float:
    """Cool content that mixes the vessel's liquid down to the limit, were nothing else to change."""
    room, hot = charged.analysis.mix.room, charged.analysis.mix.hot
    held = charged.gas.nominal
    return max(1e-5, held * (temperature - limit) / max(hot - room, 1.0))
