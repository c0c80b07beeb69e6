"""From a question to its answer: reads, asks the calculation, writes. One function per operation, nothing more.

A question that turns out to need costly parts is answered with ``Unfinished`` where the caller says it can finish it
elsewhere, so that a service need not hold its event loop.
"""

from collections.abc import Callable
from typing import Generic, NamedTuple, TypeVar

from loopslack.calc.design import Design, Request, Selected, judging, selecting
from loopslack.calc.existing import Checked, check
from loopslack.calc.model import Vessel
from loopslack.contract.advice.loop import Advisor
from loopslack.contract.answering import extras
from loopslack.contract.answers import operations as answers
from loopslack.contract.answers.shared import Advisory
from loopslack.contract.questions import operations as questions
from loopslack.contract.reading.existing import CheckReading, read_check
from loopslack.contract.reading.loop import Reading
from loopslack.contract.reading.sizing import read_sizing
from loopslack.contract.reading.tolerances import Tolerances
from loopslack.contract.reading.vessels import Choice
from loopslack.contract.writing import design as write_design
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing import sizing as write_sizing
from loopslack.contract.writing.changes import Asked
from loopslack.contract.writing.shared import CAUTIONS, assumptions, provenance
from loopslack.kernel.work import Work, finished
from loopslack.library.vessels import preferred_vessels

A = TypeVar("A")


class Unfinished(NamedTuple, Generic[A]):
    """An answer whose costly rest is still to be computed."""

    finish: Callable[[], A]


class Selecting(NamedTuple):
    """A sized loop with what was chosen for it, not judged yet, and how it was asked for."""

    reading: Reading
    choice: Choice
    selected: Selected
    tolerances: Tolerances

    def judging(self) -> "Work[Designed]":
        """The design."""
        return Designed(self.reading, self.choice, (yield from judging(self.selected)), self.tolerances)


class Designed(NamedTuple):
    """A designed loop with how it was asked for."""

    reading: Reading
    choice: Choice
    design: Design
    tolerances: Tolerances


def designed(question: questions.SizingQuestion) -> Designed:
    """Read a question about sizing or design and design the loop."""
    return finished(finished(_selecting(question)).judging())


def _selecting(question: questions.SizingQuestion) -> Work[Selecting]:
    reading, choice, tolerances = read_sizing(question)
    request = Request(
        candidates(choice),
        question.vessels_in_parallel or 1,
        reading.cooling,
        reading.policy,
        reading.accept_without_boiling,
        choice.fill_pressure,
    )
    yield
    return Selecting(reading, choice, (yield from selecting(reading.loop, request)), tolerances)


def design_loop(question: questions.LoopDesignQuestion) -> answers.LoopDesignAnswer:
    """Answer a loop design question."""
    return _design_answer(question, designed(question))


def design_loop_in_turns(
    question: questions.LoopDesignQuestion,
) -> Work[answers.LoopDesignAnswer | Unfinished[answers.LoopDesignAnswer]]:
    """Answer a loop design question with pauses, or leave the rest where remedies have to be sought.

    Where nothing was chosen that is known before anything is judged.
    """
    begun = yield from _selecting(question)
    if extras.wants_remedies(begun.reading, holds=begun.selected.selection.chosen is not None):
        return Unfinished(lambda: _design_answer(question, finished(begun.judging())))
    found = yield from begun.judging()
    if extras.wants_remedies(found.reading, holds=found.design.judgement.verdict == "holds"):
        return Unfinished(lambda: _design_answer(question, found))
    yield
    return _design_answer(question, found)


def _design_answer(question: questions.LoopDesignQuestion, asked: Designed) -> answers.LoopDesignAnswer:
    reading, found = asked.reading, asked.design
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    shown, judgement = found.shown, found.judgement
    chosen = None if found.chosen is None else write_loop.vessel(found.chosen, write)
    result = answers.LoopDesignResult(
        **extras.judged(reading, shown, judgement),
        band=extras.tolerance_band(reading, shown, shown.window.recommended, asked.tolerances),
        chosen_vessel=chosen,
        nearest_vessel=None if found.chosen is not None else write_loop.vessel(shown, write),
        volumes=write_design.volumes(found, write, pressure),
        selection=write_design.selection(found.selection, write),
        settings=write_design.settings(shown, judgement, write, pressure),
        order=write_design.order(shown, chosen, write),
        discharge=extras.discharged(reading, shown, shown.mass, judgement),
    )
    include = reading.include or frozenset()
    rules = write_sizing.compared(found) if "rules" in include else None
    stock = len(asked.choice.vessels) if asked.choice.kind == "stock" else 0
    return answers.LoopDesignAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=_advisories(reading, found),
        cautions=CAUTIONS,
        provenance=provenance(),
        remedies=extras.remedies_of_design(reading, found, Asked("design", stock)),
        robust_cooler=extras.robust_cooler(reading, found),
        rules=None if rules is None else write_sizing.rules(rules, write, pressure, _wanted_rules(question)),
        walk=None if rules is None else write_sizing.walk(found, rules, write, reading.loop.atmosphere),
        sensitivity=write_sizing.sensitivities(found, write) if "sensitivity" in include else None,
        course=extras.course(reading, shown, shown.mass) if "course" in include else None,
        derivation=extras.derived(found, reading, question) if "derivation" in include else None,
    )


def _advisories(reading: Reading, found: Design) -> list[Advisory]:
    robust = found.volumes.robust is not None
    advisor = Advisor(found.shown, found.judgement, reading.policy, reading.system, robust_volume=robust)
    return advisor.all()


def size_vessel(question: questions.VesselSizingQuestion) -> answers.VesselSizingAnswer:
    """Answer a vessel sizing question: every rule side by side, and the vessel to take."""
    asked = designed(question)
    reading, found = asked.reading, asked.design
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
        rules=write_sizing.rules(rules, write, pressure, _wanted_rules(question)),
        walk=write_sizing.walk(found, rules, write, loop.atmosphere),
        window=write_loop.window(shown, write, pressure),
        precharge=pressure(shown.gas.precharge),
        selection=write_design.selection(found.selection, write),
        checks=write_design.checks(judgement, write, loop.atmosphere),
        doubts=write_loop.doubts(loop, judgement),
        to_confirm=confirm,
        band=extras.tolerance_band(reading, shown, shown.window.recommended, asked.tolerances),
    )
    include = reading.include or frozenset()
    return answers.VesselSizingAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=_advisories(reading, found),
        cautions=CAUTIONS,
        provenance=provenance(),
        derivation=extras.derived(found, reading, question) if "derivation" in include else None,
    )


class CheckedVessel(NamedTuple):
    """A judged vessel with how it was asked for."""

    asked: CheckReading
    found: Checked
    pieces: int


def checked(question: questions.StagnationCheckQuestion) -> CheckedVessel:
    """Read a question about a vessel that is there and judge it."""
    asked = read_check(question)
    reading, pieces = asked.reading, question.vessels_in_parallel or 1
    found = check(
        reading.loop,
        asked.vessel,
        pieces,
        reading.policy,
        fill_pressure=asked.fill_pressure,
        accept_without_boiling=reading.accept_without_boiling,
    )
    return CheckedVessel(asked, found, pieces)


def check_stagnation(question: questions.StagnationCheckQuestion) -> answers.StagnationCheckAnswer:
    """Answer a stagnation check of a given vessel."""
    return _check_answer(question, checked(question))


def check_stagnation_in_turns(
    question: questions.StagnationCheckQuestion,
) -> answers.StagnationCheckAnswer | Unfinished[answers.StagnationCheckAnswer]:
    """Answer a stagnation check, or leave the rest where remedies have to be sought."""
    asked = checked(question)
    if extras.wants_remedies(asked.asked.reading, holds=asked.found.judgement.verdict == "holds"):
        return Unfinished(lambda: _check_answer(question, asked))
    return _check_answer(question, asked)


def _check_answer(
    question: questions.StagnationCheckQuestion, asked: CheckedVessel
) -> answers.StagnationCheckAnswer:
    reading, found = asked.asked.reading, asked.found
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    result = answers.StagnationCheckResult(
        **extras.judged(reading, found.fitted, found.judgement),
        band=extras.tolerance_band(reading, found.fitted, found.fill_pressure, asked.asked.tolerances),
        vessel=write_loop.vessel(found.fitted, write),
        precharge=pressure(found.fitted.gas.precharge),
        fill_pressure=pressure.optional(found.fill_pressure),
        discharge=extras.discharged(reading, found.fitted, found.mass, found.judgement),
    )
    include = reading.include or frozenset()
    return answers.StagnationCheckAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(found.fitted, found.judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
        remedies=extras.remedies_of_check(asked.asked, found, asked.pieces),
        course=extras.course(reading, found.fitted, found.mass) if "course" in include else None,
        derivation=extras.derived(found, reading, question) if "derivation" in include else None,
    )


def _wanted_rules(question: questions.SizingQuestion) -> frozenset[str] | None:
    """The rules a question names, None for all of them."""
    return None if question.rules is None else frozenset(question.rules)


def candidates(choice: Choice) -> tuple[Vessel, ...]:
    """The vessels to choose from; the generic series has a rating only where one is stated for it."""
    if choice.kind != "series":
        return choice.vessels
    return tuple(
        Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=choice.rated_pressure)
        for size in preferred_vessels()
    )
