"""Judges a charged vessel in its loop: every state, every check, every doubt, one verdict.

The base case is not the answer: the verdict is the worst of the core checks in the base case and under the doubts
the policy asks for. A scenario whose properties are unknown is not assessed, and never passes.
"""

from collections.abc import Iterable

from loopslack.calc import checks
from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import cool_window
from loopslack.calc.equilibrium import ROUNDING, Equilibrium
from loopslack.calc.judgement import (
    Check,
    CheckVerdict,
    DoubtPolicy,
    DoubtVerdict,
    Judgement,
    StateResult,
    Verdict,
)
from loopslack.calc.model import Part, Vessel
from loopslack.calc.relief_size import relief_size_check
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.floor import without_boiling_floor
from loopslack.calc.stagnation import stagnation, unrelieved_pressure
from loopslack.calc.states import LiquidState
from loopslack.calc.window import FillLaw, Gas, Window
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.physics.statics import GRAVITY

_EMPTY = "the vessel is empty in this state, so that its pressure is not defined"
_FULL = "the membrane is full in this state, so that nothing bounds the pressure below the relief valve's"

JOINT = "required-doubts"  # the state under which checks of all required scenarios together stand


def judge(
    analysis: Analysis,
    vessel: Vessel,
    gas: Gas,
    mass: float,
    *,
    policy: DoubtPolicy,
    membrane_limit: float,
    window: Window | None = None,
    accept_without_boiling: bool = False,
) -> Judgement:
    """Judge vessels of one article, charged as ``gas`` and filled with ``mass`` kg.

    ``window`` is that of the scenarios the policy requires, if it is known already. A loop that relies on its
    collectors not boiling is asked for its least volume, unless less is accepted and the loop allows that.
    """
    states = {id: _state(analysis, state, gas, mass) for id, state in analysis.states.by_id.items()}
    found = list(_static(analysis, vessel, gas, mass, states))
    found.append(_window(analysis, (BASE,), gas, mass, membrane_limit, None, BASE.id))
    found.extend(_without_boiling(analysis, gas.nominal, accepted=accept_without_boiling))
    static = worst(found)
    # The window that survives every required doubt counts with the doubts, not with the base case.
    joint = (
        []
        if policy == "none"
        else [_window(analysis, required(analysis, policy), gas, mass, membrane_limit, window, JOINT)]
    )
    results: dict[str, Equilibrium] = {}
    refused: dict[str, str] = {}
    outcome: dict[str, CheckVerdict] = {}
    for scenario in analysis.every:
        try:
            result = stagnation(analysis, scenario, gas, mass)
        except CalculationError as error:
            refused[scenario.id] = str(error)
            own: list[Check] = [_unknown(scenario, str(error))]
        else:
            results[scenario.id] = result
            own = list(_hot(analysis, scenario, gas, mass, result, membrane_limit))
        outcome[scenario.id] = worst(own)
        found.extend(own)
    base = _worse(static, outcome[BASE.id])
    doubts: dict[str, DoubtVerdict] = dict.fromkeys(analysis.not_applicable, "not-applicable")
    for scenario in analysis.doubts:
        doubts[scenario.id] = outcome[scenario.id]
    combined = outcome[analysis.combined.id]
    found.extend(joint)
    verdict = verdict_of(base, [*doubts.values(), *(check.verdict for check in joint)], combined, policy)
    return Judgement(
        verdict,
        base,
        doubts,
        combined,
        base == "holds" and combined == "holds",
        tuple(found),
        tuple(states.values()),
        results,
        refused,
    )


def verdict_of(
    base: CheckVerdict, doubts: Iterable[DoubtVerdict], combined: DoubtVerdict, policy: DoubtPolicy
) -> Verdict:
    """The verdict from the base case, the doubts and what the policy asks to survive."""
    if base != "holds":
        return base
    if policy == "none":
        return "favourable-only"
    required = [*doubts, combined] if policy == "combined" else list(doubts)
    if "does-not-hold" in required:
        return "favourable-only"
    return "not-assessed" if "not-assessed" in required else "holds"


def _static(
    analysis: Analysis,
    vessel: Vessel,
    gas: Gas,
    mass: float,
    states: dict[str, StateResult],
) -> Iterable[Check]:
    """Checks that no doubt about the steam touches."""
    loop = analysis.loop
    yield checks.reserve(FillLaw(analysis, gas), analysis.states.cold, mass, gas.nominal)
    yield checks.top_pressure(analysis, states["cold"])
    yield checks.cut_off(analysis, states["cut-off"])
    yield checks.freezing(analysis)
    yield checks.protected(
        analysis, Part(name="expansion vessel", height=0.0, rated_pressure=vessel.rated_pressure)
    )
    for part in loop.parts:
        yield checks.protected(analysis, part)
    yield from checks.part_temperatures(analysis)
    yield from checks.construction(analysis)
    yield checks.suction(analysis, states["cut-off"])
    yield relief_size_check(loop.aperture, loop.relief.nominal_size)


def required(analysis: Analysis, policy: DoubtPolicy) -> tuple[Scenario, ...]:
    """The scenarios a policy wants survived."""
    return {"single": analysis.singles, "combined": analysis.every, "none": (BASE,)}[policy]


def _window(
    analysis: Analysis,
    scenarios: tuple[Scenario, ...],
    gas: Gas,
    mass: float,
    membrane_limit: float,
    known: Window | None,
    state: str,
) -> Check:
    """The fill window of some scenarios, and whether the filling lies in it."""
    try:
        window = known or cool_window(analysis, scenarios, gas, membrane_limit)
    except CalculationError as error:
        return Check("fill-window", True, state, "not-assessed", checks.DIFFERENCE, reason=str(error))
    pressure = FillLaw(analysis, gas).pressure(gas.nominal, mass, analysis.loop.temperatures.fill)
    return checks.fill_window(analysis, window, pressure, state)


def _without_boiling(analysis: Analysis, nominal: float, *, accepted: bool) -> Iterable[Check]:
    """The least volume of a loop that relies on its collectors not boiling; nothing where they boil."""
    try:
        least = without_boiling_floor(analysis, accept_without_boiling=accepted)
    except CalculationError as error:
        yield Check(
            "volume-without-boiling", True, BASE.id, "not-assessed", kinds.NOMINAL_VOLUME, reason=str(error)
        )
        return
    if least > 0:
        yield checks.without_boiling(nominal, least)


def _hot(
    analysis: Analysis,
    scenario: Scenario,
    gas: Gas,
    mass: float,
    found: Equilibrium,
    membrane_limit: float,
) -> Iterable[Check]:
    """Checks of one stagnation equilibrium."""
    id = scenario.id
    pressure, at_least = found.pressure, found.bound
    if found.regime == "valve-opens":
        ignored = unrelieved_pressure(analysis, scenario, gas, mass)
        # Beyond the bubble line the shortage is known to be real, its size is not: the valve's own pressure
        # stands in as a lower bound, a hair above the limit so that it cannot read as a pass.
        pressure = found.pressure * (1 + 1e-6) if ignored is None else max(ignored, pressure * (1 + 1e-6))
        at_least = ignored is None
    if found.liquid < 0:
        yield _unknown(scenario, _EMPTY)
    elif membrane_full(found, gas):
        yield _unknown(scenario, _FULL)
    else:
        yield checks.relief_valve(analysis, id, pressure, at_least=at_least)
    yield checks.acceptance(id, found, gas.acceptance, gas.nominal)
    yield checks.membrane(id, found, membrane_limit)
    at_station = checks.steam_at_station(analysis, id, found)
    yield at_station
    told = (
        checks.steam_reach(id, analysis.case(scenario), found, at_station.verdict),
        checks.degradation(analysis, id, found),
    )
    yield from (check for check in told if check is not None)


def membrane_full(found: Equilibrium, gas: Gas) -> bool:
    """Whether the membrane would be full before the gas balances the loop: no pressure is then the vessel's."""
    return found.regime != "valve-opens" and found.liquid > min(gas.acceptance, gas.nominal) * (1 + ROUNDING)


def _unknown(scenario: Scenario, reason: str) -> Check:
    return Check("relief-valve", True, scenario.id, "not-assessed", checks.PRESSURE, reason=reason)


def _state(analysis: Analysis, state: LiquidState, gas: Gas, mass: float) -> StateResult:
    """Pressures of a liquid state; none is given for an empty or full vessel, nor one below vacuum."""
    liquid = state.held(mass)
    if not 0 < liquid < gas.nominal:
        reason = "vessel-empty" if liquid <= 0 else "vessel-full"
        return StateResult(state.id, liquid, None, None, None, state.vessel, state.frozen, reason)
    pressure = gas.precharge * gas.nominal / (gas.nominal - liquid) * state.vessel / gas.temperature
    top, gauge = (
        pressure - state.column,
        pressure - state.vessel_density * GRAVITY * analysis.loop.gauge_height,
    )
    return StateResult(
        state.id,
        liquid,
        pressure,
        top if top > 0 else None,
        gauge if gauge > 0 else None,
        state.vessel,
        state.frozen,
    )


_ORDER: dict[CheckVerdict, int] = {"holds": 0, "not-assessed": 1, "does-not-hold": 2}


def _worse(one: CheckVerdict, other: CheckVerdict) -> CheckVerdict:
    return one if _ORDER[one] >= _ORDER[other] else other


def worst(found: Iterable[Check]) -> CheckVerdict:
    """The worst verdict of the core checks among some."""
    verdict: CheckVerdict = "holds"
    for check in found:
        if check.core:
            verdict = _worse(verdict, check.verdict)
    return verdict
