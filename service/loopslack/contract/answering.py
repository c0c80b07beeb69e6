"""From a question to its answer: reads, asks the calculation, writes. One function per operation, nothing more."""

from typing import NamedTuple, TypedDict

from loopslack.calc.band import band
from loopslack.calc.design import Design, Request, design
from loopslack.calc.existing import check
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.model import Vessel
from loopslack.contract import answers, questions
from loopslack.contract import writing_band as write_band
from loopslack.contract import writing_course as write_course
from loopslack.contract import writing_design as write_design
from loopslack.contract import writing_loop as write_loop
from loopslack.contract import writing_sizing as write_sizing
from loopslack.contract.advice import Advisor
from loopslack.contract.answering_course import emptying_stated
from loopslack.contract.answers_band import ToleranceBand
from loopslack.contract.answers_common import Basis, Check, Verdict
from loopslack.contract.answers_course import CourseSummary
from loopslack.contract.answers_loop import (
    Doubt,
    FillWindow,
    LiquidState,
    LoopContent,
    Provisional,
    StagnationState,
)
from loopslack.contract.fields import field_of
from loopslack.contract.reader import Reader
from loopslack.contract.reading import Reading, read_loop
from loopslack.contract.reading_tolerances import Tolerances, read_tolerances
from loopslack.contract.reading_vessels import Choice, read_choice, read_fill, read_vessel
from loopslack.contract.writing_common import CAUTIONS, assumptions, provenance
from loopslack.library.vessels import preferred_vessels

_FILL = field_of(questions.StagnationCheckQuestion, "fill_pressure")


class Designed(NamedTuple):
    """A designed loop with how it was asked for."""

    reading: Reading
    design: Design
    tolerances: Tolerances


def designed(question: questions.SizingQuestion) -> Designed:
    """Read a question about sizing or design and design the loop."""
    reader = Reader()
    reading = read_loop(question, reader)
    choice = read_choice(reader, question.vessel)
    tolerances = read_tolerances(reader, question.tolerances)
    reader.finish()
    request = Request(
        candidates(choice),
        question.vessels_in_parallel or 1,
        reading.cooling,
        reading.policy,
        reading.accept_without_boiling,
        choice.fill_pressure,
    )
    return Designed(reading, design(reading.loop, request), tolerances)


def design_loop(question: questions.LoopDesignQuestion) -> answers.LoopDesignAnswer:
    """Answer a loop design question."""
    reading, found, tolerances = designed(question)
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    shown, judgement = found.shown, found.judgement
    result = answers.LoopDesignResult(
        **_judged(reading, shown, judgement),
        band=_band(reading, shown, shown.window.recommended, tolerances),
        chosen_vessel=None if found.chosen is None else write_loop.vessel(found.chosen, write),
        nearest_vessel=None if found.chosen is not None else write_loop.vessel(shown, write),
        volumes=write_design.volumes(found, write, pressure),
        selection=write_design.selection(found.selection, write),
        settings=write_design.settings(shown, judgement, write, pressure),
        order=write_design.order(shown, write),
    )
    include = reading.include or frozenset()
    rules = write_sizing.compared(found) if "rules" in include else None
    return answers.LoopDesignAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(shown, judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
        rules=None if rules is None else write_sizing.rules(rules, write, pressure, wanted_rules(question)),
        walk=None if rules is None else write_sizing.walk(found, rules, write, reading.loop.atmosphere),
        sensitivity=write_sizing.sensitivities(found, write) if "sensitivity" in include else None,
        course=_course(reading, shown, shown.mass) if "course" in include else None,
    )


def size_vessel(question: questions.VesselSizingQuestion) -> answers.VesselSizingAnswer:
    """Answer a vessel sizing question: every rule side by side, and the vessel to take."""
    reading, found, tolerances = designed(question)
    write, loop = reading.write, reading.loop
    pressure = write_loop.Pressures(write, loop.atmosphere)
    shown, judgement = found.shown, found.judgement
    confirm = write_design.to_confirm(reading, judgement)
    rules = write_sizing.compared(found)
    result = answers.VesselSizingResult(
        verdict=judgement.verdict,
        basis=write_design.basis(confirm),
        chosen_vessel=None if found.chosen is None else write_loop.vessel(found.chosen, write),
        nearest_vessel=None if found.chosen is not None else write_loop.vessel(shown, write),
        volumes=write_design.volumes(found, write, pressure),
        rules=write_sizing.rules(rules, write, pressure, wanted_rules(question)),
        walk=write_sizing.walk(found, rules, write, loop.atmosphere),
        window=write_loop.window(shown.window, write, pressure),
        precharge=pressure(shown.gas.precharge),
        selection=write_design.selection(found.selection, write),
        checks=write_design.checks(judgement, write, loop.atmosphere),
        doubts=write_loop.doubts(loop, judgement),
        to_confirm=confirm,
        band=_band(reading, shown, shown.window.recommended, tolerances),
    )
    return answers.VesselSizingAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(shown, judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def wanted_rules(question: questions.SizingQuestion) -> frozenset[str] | None:
    """The rules a question names, None for all of them."""
    return None if question.rules is None else frozenset(question.rules)


def check_stagnation(question: questions.StagnationCheckQuestion) -> answers.StagnationCheckAnswer:
    """Answer a stagnation check of a given vessel."""
    reader = Reader()
    reading = read_loop(question, reader)
    stated = question.vessel
    vessel = read_vessel(reader, stated, "/vessel", stated.id or "given")
    fill = read_fill(reader, question.fill_pressure, _FILL, "")
    tolerances = read_tolerances(reader, question.tolerances)
    reader.finish()
    found = check(reading.loop, vessel, question.vessels_in_parallel or 1, reading.policy, fill_pressure=fill)
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    result = answers.StagnationCheckResult(
        **_judged(reading, found.fitted, found.judgement),
        band=_band(reading, found.fitted, found.fill_pressure, tolerances),
        vessel=write_loop.vessel(found.fitted, write),
        precharge=pressure(found.fitted.gas.precharge),
        fill_pressure=pressure.optional(found.fill_pressure),
    )
    include = reading.include or frozenset()
    return answers.StagnationCheckAnswer(
        result=result,
        course=_course(reading, found.fitted, found.mass) if "course" in include else None,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(found.fitted, found.judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def candidates(choice: Choice) -> tuple[Vessel, ...]:
    """The vessels to choose from; the generic series has a rating only where one is stated for it."""
    if choice.kind != "series":
        return choice.vessels
    return tuple(
        Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=choice.rated_pressure)
        for size in preferred_vessels()
    )


def _band(reading: Reading, fitted: Fit, fill: float, tolerances: Tolerances) -> ToleranceBand | None:
    """What the stated tolerances do to a filled vessel."""
    found = band(fitted, fill, write_band.by_id(tolerances), reading.policy)
    pressure = write_loop.Pressures(reading.write, reading.loop.atmosphere)
    return write_band.tolerance_band(found, reading.write, pressure)


def _course(reading: Reading, fitted: Fit, mass: float) -> CourseSummary:
    """A clear day without flow, under the design sun."""
    case = write_course.lumped(fitted, mass, emptying_stated=emptying_stated(reading))
    pressure = write_loop.Pressures(reading.write, reading.loop.atmosphere)
    return write_course.summary(write_course.course(case), reading.write, pressure)


class _Judged(TypedDict):
    """The members of every judged result."""

    verdict: Verdict
    basis: Basis
    robust: bool
    doubts: list[Doubt]
    checks: list[Check]
    to_confirm: list[Provisional]
    content: LoopContent
    window: FillWindow | None
    states: list[LiquidState]
    stagnation: list[StagnationState]


def _judged(reading: Reading, shown: Fit, judgement: Judgement) -> _Judged:
    """Write what every judged vessel has."""
    write, loop = reading.write, shown.analysis.loop
    pressure = write_loop.Pressures(write, loop.atmosphere)
    confirm = write_design.to_confirm(reading, judgement)
    return _Judged(
        verdict=judgement.verdict,
        basis=write_design.basis(confirm),
        robust=judgement.robust,
        doubts=write_loop.doubts(loop, judgement),
        checks=write_design.checks(judgement, write, loop.atmosphere),
        to_confirm=confirm,
        content=write_loop.content(write_loop.held_by(loop), write, reading.assumed),
        window=write_loop.window(shown.window, write, pressure),
        states=[write_loop.liquid_state(state, write, pressure) for state in judgement.states],
        stagnation=write_loop.stagnation(shown.analysis, judgement, write, pressure),
    )
