"""Answers the audit of an existing vessel: reads, asks the calculation, writes."""

from loopslack.calc.audit.whole import Found, Point, Record, audit
from loopslack.contract.advice.audit import AuditAdvisor
from loopslack.contract.advice.loop import Advisor
from loopslack.contract.answers import audit as out
from loopslack.contract.answers.shared import Advisory
from loopslack.contract.questions.existing import VesselAuditQuestion
from loopslack.contract.reading.existing import AuditReading, read_audit
from loopslack.contract.writing import design as write_design
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing.audit import AuditWriter
from loopslack.contract.writing.shared import CAUTIONS, assumptions, provenance
from loopslack.kernel import kinds

_ORDER = {"stop": 0, "warning": 1, "note": 2}
_WHY = {
    "by-rule": "Nobody stated the precharge: taken as the rule sets it for this loop.",
    "as-delivered": "Nobody stated the precharge: taken as delivered.",
}


def audit_vessel(question: VesselAuditQuestion) -> out.VesselAuditAnswer:
    """Answer a vessel audit."""
    asked = read_audit(question)
    reading, vessel = asked.reading, asked.vessel
    loop = reading.loop
    found = audit(
        loop,
        vessel,
        question.vessels_in_parallel or 1,
        reading.policy,
        _found(asked),
        accept_without_boiling=reading.accept_without_boiling,
    )
    if asked.measured_precharge is None and found.set_by != "record":
        gauge = found.set_up.precharge - loop.atmosphere
        pointer = "/commissioning/precharge"
        reading.books.derived(
            pointer, gauge, kinds.GAUGE_PRESSURE, _WHY[found.set_by], low=gauge - 0.5e5, high=gauge + 0.5e5
        )
        reading.books.doubtful("precharge-not-known", pointer)
    write, shown = reading.write, found.shown
    pressure = write_loop.Pressures(write, loop.atmosphere)
    confirm = write_design.to_confirm(reading, shown.judgement)
    parts = AuditWriter(found, asked.gauge.pressure, asked.gauge.temperature, write, loop.atmosphere)
    advisor = AuditAdvisor(
        found, asked.gauge.pressure, asked.gauge.temperature, loop.atmosphere, reading.system
    )
    result = out.VesselAuditResult(
        verdict=found.verdict,
        basis=write_design.basis(confirm),
        finding=parts.finding(),
        standing=parts.standing(shown),
        filling=parts.filling(),
        set_instead=parts.set_instead(),
        actions=list(advisor.actions()),
        checks=write_design.checks(shown.judgement, write, loop.atmosphere),
        doubts=write_loop.doubts(loop, shown.judgement),
        to_confirm=confirm,
        vessel=write_loop.vessel(shown.fitted, write),
        content=write_loop.content(write_loop.held_by(loop), write, reading.assumed),
        window=write_loop.window(shown.fitted, write, pressure),
        states=[write_loop.liquid_state(state, write, pressure) for state in shown.judgement.states],
        stagnation=write_loop.stagnation(shown.fitted.analysis, shown.judgement, write, pressure),
    )
    advisories: list[Advisory] = [
        *Advisor(shown.fitted, shown.judgement, reading.policy, reading.system).all(),
        *advisor.advisories(),
    ]
    return out.VesselAuditAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=sorted(advisories, key=lambda advisory: _ORDER[advisory.severity]),
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def _found(asked: AuditReading) -> Found:
    measured, record = asked.measured_precharge, asked.commissioned
    return Found(
        Point(asked.gauge.pressure, asked.gauge.temperature),
        None if measured is None else Point(measured.pressure, measured.temperature),
        None if record is None else Record(record.precharge, record.fill_pressure, record.temperature),
    )
