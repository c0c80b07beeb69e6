"""From a question to its answer: reads, asks the calculation, writes. One function per operation, nothing more."""

from typing import TypedDict

from loopslack.calc.design import Request, design
from loopslack.calc.existing import check
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.model import Vessel
from loopslack.contract import answers, questions
from loopslack.contract import writing_design as write_design
from loopslack.contract import writing_loop as write_loop
from loopslack.contract.advice import Advisor
from loopslack.contract.answers_common import Basis, Check, Verdict
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
from loopslack.contract.reading_vessels import Choice, read_choice, read_fill, read_vessel
from loopslack.contract.writing_common import CAUTIONS, assumptions, provenance
from loopslack.library.vessels import preferred_vessels

_FILL = field_of(questions.StagnationCheckQuestion, "fill_pressure")


def design_loop(question: questions.LoopDesignQuestion) -> answers.LoopDesignAnswer:
    """Answer a loop design question."""
    reader = Reader()
    reading = read_loop(question, reader)
    choice = read_choice(reader, question.vessel)
    reader.finish()
    most = question.vessels_in_parallel or 1
    found = design(
        reading.loop,
        Request(
            candidates(choice),
            most,
            reading.cooling,
            reading.policy,
            reading.accept_without_boiling,
            choice.fill_pressure,
        ),
    )
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    shown, judgement = found.shown, found.judgement
    judged = _judged(reading, shown, judgement)
    result = answers.LoopDesignResult(
        **judged,
        chosen_vessel=None if found.chosen is None else write_loop.vessel(found.chosen, write),
        nearest_vessel=None if found.chosen is not None else write_loop.vessel(shown, write),
        volumes=write_design.volumes(found, write, pressure),
        selection=write_design.selection(found.selection, write),
        settings=write_design.settings(shown, judgement, write, pressure),
        order=write_design.order(shown, write),
    )
    return answers.LoopDesignAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(shown, judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def check_stagnation(question: questions.StagnationCheckQuestion) -> answers.StagnationCheckAnswer:
    """Answer a stagnation check of a given vessel."""
    reader = Reader()
    reading = read_loop(question, reader)
    stated = question.vessel
    vessel = read_vessel(reader, stated, "/vessel", stated.id or "given")
    fill = read_fill(reader, question.fill_pressure, _FILL, "")
    reader.finish()
    found = check(reading.loop, vessel, question.vessels_in_parallel or 1, reading.policy, fill_pressure=fill)
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    result = answers.StagnationCheckResult(
        **_judged(reading, found.fitted, found.judgement),
        vessel=write_loop.vessel(found.fitted, write),
        precharge=pressure(found.fitted.gas.precharge),
        fill_pressure=pressure.optional(found.fill_pressure),
    )
    return answers.StagnationCheckAnswer(
        result=result,
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
