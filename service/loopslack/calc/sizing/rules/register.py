"""The register of sizing rules, and all of them run side by side on one loop.

To add a rule: one file with its law and its choices, one line here, one check in the tests. A rule that does not
describe the loop refuses with its reason; it never answers outside its range.
"""

from collections.abc import Iterable, Sequence

from msgspec import Struct

from loopslack.calc.analysis import Analysis
from loopslack.calc.judgement import DoubtPolicy
from loopslack.calc.precharge import precharge_temperature
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.rules import (
    ashrae,
    collector_boil_off,
    en_12828,
    en_12977,
    idae_asit,
    mass_balance,
    steam_range,
    ufc,
    us_mechanical_code,
)
from loopslack.calc.sizing.rules.basis import Basis, basis
from loopslack.calc.sizing.rules.rule import Answer, Rule, RuleId
from loopslack.calc.sizing.rules.seen import VesselSeen, vessel_seen
from loopslack.calc.sizing.volumes import Sized
from loopslack.calc.window import Gas
from loopslack.kernel.errors import CalculationError, NotApplicable

RULES: dict[RuleId, Rule] = {
    rule.id: rule
    for rule in (
        ashrae.DIAPHRAGM,
        ashrae.CLOSED,
        us_mechanical_code.RULE,
        en_12828.RULE,
        collector_boil_off.RULE,
        en_12977.RULE,
        idae_asit.RULE,
        ufc.RULE,
        steam_range.RULE,
        mass_balance.RULE,
    )
}
RECOMMENDED: RuleId = "mass-balance"
PUBLISHED: tuple[RuleId, ...] = tuple(id for id in RULES if id != RECOMMENDED)


class RuleResult(Struct, frozen=True, kw_only=True):
    """One rule's answer beside what its vessel would see: m3, Pa absolute at the vessel.

    ``variant`` tells two answers of one rule apart, empty for the one the rule is known by. ``nominal_volume`` is
    None where the rule does not apply; ``reason`` then says why, and ``seen`` is None. Volume is ``displaced`` times
    ``factor``. ``seen`` is also None when the check was not asked for.
    """

    id: RuleId
    variant: str
    nominal_volume: float | None
    reason: CalculationError | None
    start_pressure: float | None
    final_pressure: float | None
    displaced: float | None
    factor: float | None
    answer: Answer
    seen: VesselSeen | None

    @property
    def key(self) -> str:
        """Rule and variant in one word."""
        return f"{self.id}:{self.variant}" if self.variant else self.id

    @property
    def terms(self) -> dict[str, float]:
        """The numbers of the law that gives the volume, by the name of its arguments."""
        return dict(self.answer.laws[-1].inputs) if self.answer.laws else {}


def rule(id: str) -> Rule:
    """Look up a rule. Raises ``NotApplicable`` for an id that is not in the register."""
    found = RULES.get(id)  # type: ignore[call-overload]  # any text may be asked for
    if found is None:
        raise NotApplicable(
            f"There is no sizing rule {id!r}.",
            remedy=f"Choose among {', '.join(RULES)}.",
            code="unknown-sizing-rule",
            facts={"rule": id, "known": list(RULES)},
        )
    return found  # type: ignore[no-any-return]  # lost by the line above


def run(
    id: str, analysis: Analysis, *, check: bool = True, policy: DoubtPolicy = "single"
) -> tuple[RuleResult, ...]:
    """Run one rule on a loop: its own answer first, then its variants."""
    found = rule(id)
    start = basis(analysis)
    return tuple(
        _result(found, start, answer, check=check, policy=policy) for answer in _answers(found, start)
    )


def run_all(
    analysis: Analysis,
    sized: Sized | None,
    scenarios: Sequence[Scenario],
    *,
    ids: Iterable[str] = RULES,
    check: bool = True,
    policy: DoubtPolicy = "single",
) -> tuple[RuleResult, ...]:
    """Run rules side by side, in the order of the register, the recommended answer last.

    ``sized`` is the sizing that is recommended under ``scenarios``, None where no vessel holds.
    """
    wanted = {rule(id).id for id in ids}
    start = basis(analysis)
    results: list[RuleResult] = []
    for id in PUBLISHED:
        if id in wanted:
            found = RULES[id]
            results.extend(
                _result(found, start, answer, check=check, policy=policy) for answer in _answers(found, start)
            )
    if RECOMMENDED in wanted:
        answer = mass_balance.answer(sized, scenarios)
        results.append(_recommended(answer, sized, check=check, policy=policy))
    return tuple(results)


def _answers(rule: Rule, basis: Basis) -> tuple[Answer, ...]:
    """The answers of a rule; a law that refuses the loop's numbers refuses the rule, not the request."""
    try:
        return rule.run(basis)
    except CalculationError as error:
        return (Answer("", refusal=error),)


def _result(rule: Rule, basis: Basis, answer: Answer, *, check: bool, policy: DoubtPolicy) -> RuleResult:
    volume, choices = answer.nominal_volume, answer.choices
    if volume is not None and not volume > 0:
        answer = answer._replace(refusal=_nothing_left(rule, volume), choices=None)
        volume = None
    if volume is None or choices is None:
        return _without(rule, answer)
    seen = None
    if check:
        analysis = basis.analysis
        if answer.precharge is None:
            gas = Gas(volume, basis.precharge, precharge_temperature(analysis))
        else:
            gas = Gas(volume, answer.precharge, analysis.loop.temperatures.fill)
        seen = vessel_seen(analysis, gas, answer.fill or basis.fill, policy)
    return RuleResult(
        id=rule.id,
        variant=answer.variant,
        nominal_volume=volume,
        reason=None,
        start_pressure=answer.start_pressure,
        final_pressure=choices.final_pressure,
        displaced=choices.displaced,
        factor=choices.factor,
        answer=answer,
        seen=seen,
    )


def _recommended(answer: Answer, sized: Sized | None, *, check: bool, policy: DoubtPolicy) -> RuleResult:
    volume = answer.nominal_volume
    if volume is None or sized is None or answer.fill is None:
        return _without(RULES[RECOMMENDED], answer)
    terms = answer.laws[-1].inputs
    gas = mass_balance.recommended_gas(sized)
    return RuleResult(
        id=RECOMMENDED,
        variant="",
        nominal_volume=volume,
        reason=None,
        start_pressure=answer.start_pressure,
        final_pressure=terms["pressure"],
        displaced=terms["liquid"],
        factor=volume / terms["liquid"],
        answer=answer,
        seen=vessel_seen(sized.analysis, gas, answer.fill, policy) if check else None,
    )


def _without(rule: Rule, answer: Answer) -> RuleResult:
    return RuleResult(
        id=rule.id,
        variant=answer.variant,
        nominal_volume=None,
        reason=answer.refusal,
        start_pressure=None,
        final_pressure=None,
        displaced=None,
        factor=None,
        answer=answer,
        seen=None,
    )


def _nothing_left(rule: Rule, volume: float) -> CalculationError:
    return NotApplicable(
        f"With these pressures the rule gives {volume * 1000:.4g} L, which is no vessel.",
        remedy="Lower the fill pressure or the vessel, or take a relief valve with a higher set pressure.",
        facts={"rule": rule.id, "volume": volume},
    )
