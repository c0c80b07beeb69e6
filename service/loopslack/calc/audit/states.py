"""The ways an audited vessel may stand: with liquid lost or added, with gas lost, or as measured; each judged.

The steam of a loop does not depend on its gas, so it is worked out once for everything that is looked at. Which way
explains a reading is decided in ``whole``.
"""

from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis, SteamCase
from loopslack.calc.audit.gauge import Held, gas_holding, held_at, liquid_of, to_reach
from loopslack.calc.fit import Fit, best_fit
from loopslack.calc.judge import judge, required
from loopslack.calc.judgement import DoubtPolicy, Judgement, Verdict
from loopslack.calc.model import Loop, Precharge, Vessel
from loopslack.calc.window import Gas

Cause = Literal["liquid", "precharge"]

WORSE: dict[Verdict, int] = {"holds": 0, "favourable-only": 1, "not-assessed": 2, "does-not-hold": 3}
"""Verdicts in the order in which the worse one counts."""


class Filling(NamedTuple):
    """A gas and the mass (kg) the vessel was filled with: what an audit holds a vessel against."""

    gas: Gas
    mass: float


class State(NamedTuple):
    """One way the vessel may stand: its gas, what it holds, and how that judges.

    ``missing`` is the liquid (m3, at the fill temperature) lost since filling, ``lost`` the precharge (Pa, at the
    temperature it was set at) lost since it was set; negative where there is more.
    """

    gas: Gas
    held: Held
    missing: float
    lost: float
    fitted: Fit
    judgement: Judgement


class Explanation(NamedTuple):
    """One of the two explanations of a reading; ``state`` is None where nothing in the vessel could bear it out.

    ``at_least`` marks a loss of liquid that may be larger, since the vessel is empty. ``isolated`` is what the drained
    vessel would then show today (Pa absolute), ``refill`` the liquid (m3) that brings the gauge to what it should show.
    """

    cause: Cause
    state: State | None
    at_least: bool = False
    isolated: float | None = None
    refill: float | None = None


class Bench:
    """One loop under audit with its vessel, to be charged this way or that."""

    def __init__(
        self, loop: Loop, vessel: Vessel, pieces: int, policy: DoubtPolicy, *, accept_without_boiling: bool
    ) -> None:
        self.loop, self.vessel, self.pieces, self.policy = loop, vessel, pieces, policy
        self.accept_without_boiling = accept_without_boiling
        self._cases: dict[tuple[float, bool, bool], SteamCase] = {}
        self.analysis = Analysis(loop, self._cases)
        self.scenarios = required(self.analysis, policy)
        own = vessel.membrane_limit
        self.membrane_limit = loop.criteria.membrane_limit if own is None else own

    def fit(self, gas: Gas) -> Fit:
        """The vessel charged to a gas, with the best window it has."""
        stated = Precharge(kind="stated", pressure=gas.precharge, temperature=gas.temperature)
        analysis = Analysis(replace(self.loop, precharge=stated), self._cases)
        vessel = replace(self.vessel, precharge_adjustable=True)
        return best_fit(analysis, self.scenarios, vessel, self.pieces, "given")

    def judged(self, fitted: Fit, mass: float) -> Judgement:
        """The vessel filled with a mass (kg)."""
        return judge(
            fitted.analysis,
            fitted.vessel,
            fitted.gas,
            mass,
            policy=self.policy,
            membrane_limit=self.membrane_limit,
            accept_without_boiling=self.accept_without_boiling,
        )

    def holds(self, judgement: Judgement) -> bool:
        """Whether a judgement is good enough for the policy asked for."""
        return judgement.verdict == "holds" or (self.policy == "none" and judgement.base == "holds")

    def state(self, filled: Filling, gas: Gas, held: Held) -> State:
        """A vessel that stands otherwise than it was filled, judged."""
        fitted = self.fit(gas)
        density = self.analysis.states.fill.vessel_density
        same = gas.temperature == filled.gas.temperature
        precharge = gas.precharge if same else gas.precharge * filled.gas.temperature / gas.temperature
        return State(
            gas,
            held,
            (filled.mass - held.mass) / density,
            filled.gas.precharge - precharge,
            fitted,
            self.judged(fitted, held.mass),
        )


def by_liquid(
    bench: Bench, filled: Filling, pressure: float, temperature: float, expected: float | None
) -> Explanation:
    """The gas is as it was set, so the reading tells the liquid."""
    analysis, gas = bench.analysis, filled.gas
    held = held_at(analysis, gas, pressure, temperature)
    refill = None if expected is None else to_reach(analysis, gas, held, expected, temperature)
    isolated = gas.precharge * temperature / gas.temperature
    return Explanation("liquid", bench.state(filled, gas, held), held.empty, isolated, refill)


def by_precharge(
    bench: Bench, filled: Filling, pressure: float, temperature: float, expected: float | None
) -> Explanation:
    """The liquid is as it was filled, so the reading tells the gas."""
    analysis = bench.analysis
    gas = gas_holding(analysis, filled.gas, filled.mass, pressure, temperature)
    if gas is None:
        return Explanation("precharge", None)
    held = Held(liquid_of(analysis, filled.mass, temperature), filled.mass, empty=False)
    refill = None if expected is None else to_reach(analysis, gas, held, expected, temperature)
    isolated = gas.precharge * temperature / gas.temperature
    return Explanation(
        "precharge", bench.state(filled, gas, held), at_least=False, isolated=isolated, refill=refill
    )
