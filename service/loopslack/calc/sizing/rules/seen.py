"""What the vessel of a rule would see in stagnation: the service's own check, run on somebody else's answer.

The vessel is charged and filled as its rule says; where the rule is silent, with the precharge of the loop and the
least fill pressure of the trade above it. Only stagnation is looked at, and what is left when cold: which fill window
such a vessel has is the business of an audit.
"""

from typing import NamedTuple

from loopslack.calc import checks
from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import Equilibrium, Regime
from loopslack.calc.judge import verdict_of
from loopslack.calc.judgement import Check, CheckCode, CheckVerdict, DoubtPolicy, DoubtVerdict, Verdict
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.stagnation import stagnation, unrelieved_pressure
from loopslack.calc.window import Gas
from loopslack.kernel.errors import CalculationError


class ScenarioSeen(NamedTuple):
    """Stagnation in the base case or under one doubt: ``pressure`` (Pa absolute) as if the valve stayed shut.

    ``pressure`` is None where it lies beyond the bubble line or the membrane is full; ``at_least`` marks a lower
    bound, as power is left at the station. ``failing`` names the checks that do not hold; ``reason`` says why
    nothing could be assessed.
    """

    scenario: str
    verdict: CheckVerdict
    regime: Regime | None
    pressure: float | None
    at_least: bool = False
    failing: tuple[CheckCode, ...] = ()
    reason: str = ""


class VesselSeen(NamedTuple):
    """Stagnation of a vessel: precharge and fill pressure (Pa absolute, at the fill temperature), then the outcome.

    ``cold_liquid`` (m3) is what is left in the vessel when the loop is coldest; negative, the vessel is empty.
    """

    precharge: float
    fill: float
    verdict: Verdict
    scenarios: tuple[ScenarioSeen, ...]
    not_applicable: tuple[str, ...]
    cold_liquid: float

    @property
    def base(self) -> ScenarioSeen:
        """The base case."""
        return self.scenarios[0]

    @property
    def doubts(self) -> tuple[ScenarioSeen, ...]:
        """Each doubt alone, then all at once."""
        return self.scenarios[1:]


def vessel_seen(analysis: Analysis, gas: Gas, fill: float, policy: DoubtPolicy) -> VesselSeen:
    """Check a vessel filled to ``fill`` (Pa absolute, fill temperature), in the base case and under every doubt."""
    temperature = analysis.loop.temperatures.fill
    precharge = gas.precharge * temperature / gas.temperature
    mass = analysis.states.fill.vessel_density * gas.nominal * (1 - precharge / fill)
    found = tuple(_scenario(analysis, scenario, gas, mass) for scenario in analysis.every)
    outcome: dict[str, DoubtVerdict] = {seen.scenario: seen.verdict for seen in found}
    combined = found[-1].verdict
    doubts = [outcome[scenario.id] for scenario in analysis.doubts]
    return VesselSeen(
        precharge,
        fill,
        verdict_of(found[0].verdict, doubts, combined, policy),
        found,
        analysis.not_applicable,
        analysis.states.cold.held(mass),
    )


def _scenario(analysis: Analysis, scenario: Scenario, gas: Gas, mass: float) -> ScenarioSeen:
    try:
        found = stagnation(analysis, scenario, gas, mass)
    except CalculationError as error:
        return ScenarioSeen(scenario.id, "not-assessed", None, None, reason=str(error))
    pressure: float | None = found.pressure
    if found.regime == "valve-opens":
        pressure = unrelieved_pressure(analysis, scenario, gas, mass)
    failing = tuple(check.code for check in _checks(analysis, found) if check.verdict == "does-not-hold")
    verdict: CheckVerdict = "does-not-hold" if failing else "holds"
    return ScenarioSeen(scenario.id, verdict, found.regime, pressure, found.extent.unspent > 0, failing)


def _checks(analysis: Analysis, found: Equilibrium) -> tuple[Check, ...]:
    """The checks of stagnation; a valve that opens has failed at the very pressure it opens at."""
    pressure = found.pressure * (1 + 1e-6) if found.regime == "valve-opens" else found.pressure
    return (
        checks.relief_valve(analysis, BASE.id, pressure, at_least=found.bound),
        checks.membrane(BASE.id, found, analysis.loop.criteria.membrane_limit),
        checks.steam_at_station(analysis, BASE.id, found),
    )
