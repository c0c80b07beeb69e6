"""Writes rules side by side, walks, sensitivities and head-room in the caller's units."""

from math import isfinite
from typing import cast

from loopslack.calc.design import Design
from loopslack.calc.head_room import Filled, HeadRoom, head_room
from loopslack.calc.judge import required
from loopslack.calc.sensitivity import Asked, Effect, Moved, sensitivity
from loopslack.calc.sizing.reconciliation import smallest, walk_to_recommended
from loopslack.calc.sizing.rules.register import RULES, RuleResult, run_all
from loopslack.calc.sizing.walk import Step
from loopslack.calc.sizing.walk import Walk as WalkResult
from loopslack.contract.answers import sizing as out
from loopslack.contract.answers.loop import ScenarioId
from loopslack.contract.answers.shared import AnyQuantity
from loopslack.contract.writing.loop import Pressures
from loopslack.contract.writing.quantities import System, Writer
from loopslack.contract.writing.shared import any_quantity, source_note
from loopslack.kernel import kinds
from loopslack.kernel.errors import NotApplicable
from loopslack.kernel.kinds import Kind


def compared(design: Design) -> tuple[RuleResult, ...]:
    """Every rule on a designed loop, each vessel checked under the policy of the design."""
    analysis, policy = design.analysis, design.request.policy
    return run_all(analysis, design.volumes.recommended, required(analysis, policy), policy=policy)


def rules(
    found: tuple[RuleResult, ...], write: Writer, pressure: Pressures, wanted: frozenset[str] | None = None
) -> list[out.RuleComparison]:
    """The rules side by side."""
    return [_rule(result, write, pressure) for result in found if wanted is None or result.id in wanted]


def _rule(found: RuleResult, write: Writer, pressure: Pressures) -> out.RuleComparison:
    rule, seen = RULES[found.id], found.seen
    return out.RuleComparison(
        rule=found.id,
        variant=found.variant or None,
        title=rule.title,
        counts=rule.counts,
        source=source_note(rule.sources[0]),
        nominal_volume=None if found.nominal_volume is None else write.volume(found.nominal_volume),
        reason=None if found.reason is None else str(found.reason),
        displaced_volume=None if found.displaced is None else write.volume(found.displaced),
        pressure_factor=None if found.factor is None else write.ratio(found.factor),
        start_pressure=pressure.optional(found.start_pressure),
        final_pressure=pressure.optional(found.final_pressure),
        verdict="not-assessed" if seen is None else seen.verdict,
        cold_liquid=None if seen is None else write.volume(seen.cold_liquid),
        stagnation=[]
        if seen is None
        else [
            out.SeenStagnation(
                scenario=cast("ScenarioId", each.scenario),
                verdict=each.verdict,
                regime=each.regime,
                pressure=pressure.optional(each.pressure),
                at_least=True if each.at_least else None,
                failing=list(each.failing),
            )
            for each in seen.scenarios
        ],
    )


def walk(design: Design, found: tuple[RuleResult, ...], write: Writer, atmosphere: float) -> out.Walk | None:
    """From the smallest rule's answer to the recommended volume; none where there is no such volume."""
    first, sized = smallest(found), design.volumes.recommended
    if first is None or sized is None:
        return None
    try:
        result = walk_to_recommended(
            design.analysis, first, sized, required(design.analysis, design.request.policy)
        )
    except NotApplicable:
        return None
    return _walk(result, write, atmosphere)


def _walk(found: WalkResult, write: Writer, atmosphere: float) -> out.Walk:
    return out.Walk(
        start=found.start,
        end=found.end,
        start_volume=write.volume(found.start_volume),
        end_volume=write.volume(found.end_volume),
        steps=[_step(step, write, atmosphere) for step in found.steps],
    )


def _step(step: Step, write: Writer, atmosphere: float) -> out.WalkStep:
    system = write.system

    def show(kind: Kind, si: float) -> str:
        quantity = _quantity(kind, si, system, atmosphere)
        return f"{quantity.value:.4g} {quantity.unit}" if quantity.unit != "1" else f"{quantity.value:.4g}"

    return out.WalkStep(
        codes=list(step.codes),
        before=write.volume(step.before),
        after=write.volume(step.after),
        change=write.volume(step.change),
        sentence=step.sentence(show),
        parameters=[
            out.WalkParameter(code=code, name=name, value=_quantity(fact.kind, fact.si, system, atmosphere))
            for code, facts in step.parameters.items()
            for name, fact in facts.items()
        ],
        subject=cast("ScenarioId", step.subject),
    )


def _quantity(kind: Kind, si: float, system: System, atmosphere: float) -> AnyQuantity:
    """A number; an absolute pressure is told as a gauge reading on the site."""
    if kind is kinds.ABSOLUTE_PRESSURE:
        return any_quantity(si - atmosphere, kinds.GAUGE_PRESSURE, system)
    return any_quantity(si, kind, system)


def sensitivities(design: Design, write: Writer) -> out.Sensitivity:
    """What moves the recommended volume, and what the shown vessel still tolerates."""
    request, shown = design.request, design.shown
    asked = Asked(
        policy=request.policy,
        cooling=request.cooling,
        accept_without_boiling=request.accept_without_boiling,
    )
    limit = shown.vessel.membrane_limit or design.loop.criteria.membrane_limit
    filled = Filled(
        shown.analysis,
        shown.gas,
        shown.mass,
        required(shown.analysis, request.policy),
        limit,
        request.accept_without_boiling,
    )
    return out.Sensitivity(
        inputs=[_effect(effect, write) for effect in sensitivity(design.loop, asked)],
        head_room=[_room(found, write.system) for found in head_room(filled)],
    )


def _effect(effect: Effect, write: Writer) -> out.SensitivityRow:
    lever = effect.lever
    return out.SensitivityRow(
        input=lever.id,
        present=any_quantity(lever.value, lever.kind, write.system),
        range_from=lever.basis,
        low=_end(effect.at_low, lever.kind, write),
        high=_end(effect.at_high, lever.kind, write),
        largest_change=write.volume(effect.change) if isfinite(effect.change) else None,
        decides=effect.decides,
    )


def _end(moved: Moved, kind: Kind, write: Writer) -> out.SensitivityEnd:
    return out.SensitivityEnd(
        value=any_quantity(moved.number, kind, write.system),
        nominal_volume=None if moved.nominal_volume is None else write.volume(moved.nominal_volume),
        reason=moved.reason or None,
    )


def _room(found: HeadRoom, system: System) -> out.HeadRoomRow:
    return out.HeadRoomRow(
        id=found.id,
        outcome=found.outcome,
        value=None if found.value is None else any_quantity(found.value, found.kind, system),
        ended_by=found.code or None,
        scenario=found.scenario or None,
    )
