"""Parts that several answers share: the judged vessel, and the costly parts computed only when they are wanted."""

from typing import TypedDict

from msgspec.structs import replace

from loopslack.calc.band import band
from loopslack.calc.design import Design
from loopslack.calc.existing import Checked
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import case_of_design, case_of_vessel
from loopslack.calc.remedies.robust import cooler_for_robust
from loopslack.calc.remedies.seek import remedies
from loopslack.contract.answers.band import ToleranceBand
from loopslack.contract.answers.course import CourseSummary
from loopslack.contract.answers.derivation import Derivation
from loopslack.contract.answers.loop import (
    Doubt,
    FillWindow,
    LiquidState,
    LoopContent,
    Provisional,
    StagnationState,
)
from loopslack.contract.answers.remedies import Discharge, Remedies, RobustCooler
from loopslack.contract.answers.shared import Basis, Check, Verdict
from loopslack.contract.questions.operations import LoopQuestion
from loopslack.contract.reading.existing import CheckReading
from loopslack.contract.reading.loop import Reading
from loopslack.contract.reading.tolerances import Tolerances
from loopslack.contract.writing import band as write_band
from loopslack.contract.writing import course as write_course
from loopslack.contract.writing import design as write_design
from loopslack.contract.writing import discharge as write_discharge
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing import remedies as write_remedies
from loopslack.contract.writing.changes import Asked
from loopslack.contract.writing.derivation import derivation
from loopslack.kernel.work import finished


class Judged(TypedDict):
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


def judged(reading: Reading, shown: Fit, judgement: Judgement) -> Judged:
    """Write what every judged vessel has."""
    write, loop = reading.write, shown.analysis.loop
    pressure = write_loop.Pressures(write, loop.atmosphere)
    confirm = write_design.to_confirm(reading, judgement)
    return Judged(
        verdict=judgement.verdict,
        basis=write_design.basis(confirm),
        robust=judgement.robust,
        doubts=write_loop.doubts(loop, judgement),
        checks=write_design.checks(judgement, write, loop.atmosphere),
        to_confirm=confirm,
        content=write_loop.content(write_loop.held_by(loop), write, reading.assumed),
        window=write_loop.window(shown, write, pressure),
        states=[write_loop.liquid_state(state, write, pressure) for state in judgement.states],
        stagnation=write_loop.stagnation(shown.analysis, judgement, write, pressure),
    )


def wants_remedies(reading: Reading, *, holds: bool) -> bool:
    """Whether remedies are asked for, or left open and needed."""
    if reading.include is None:
        return not holds
    return "remedies" in reading.include


def remedies_of_design(reading: Reading, found: Design, asked: Asked) -> Remedies | None:
    """What would make a design hold, if wanted."""
    if not wants_remedies(reading, holds=found.judgement.verdict == "holds"):
        return None
    case = replace(case_of_design(found), strength=reading.strength)
    sought = finished(remedies(case, Bench()))
    return write_remedies.RemedyWriter(case, asked, reading.write).remedies(sought)


def remedies_of_check(asked: CheckReading, found: Checked, pieces: int) -> Remedies | None:
    """What would make a vessel that is there hold, if wanted."""
    reading = asked.reading
    if not wants_remedies(reading, holds=found.judgement.verdict == "holds"):
        return None
    case = case_of_vessel(
        reading.loop,
        asked.vessel,
        pieces,
        reading.policy,
        fill_pressure=asked.fill_pressure,
        accept_without_boiling=reading.accept_without_boiling,
    )
    case = replace(case, strength=reading.strength)
    sought = finished(remedies(case, Bench()))
    return write_remedies.RemedyWriter(case, Asked("check"), reading.write).remedies(sought)


def robust_cooler(reading: Reading, found: Design) -> RobustCooler | None:
    """The cooler a design lacks to be robust; sought with the remedies only."""
    if not wants_remedies(reading, holds=found.judgement.verdict == "holds"):
        return None
    cooler = finished(cooler_for_robust(found))
    return None if cooler is None else write_remedies.robust_cooler(cooler, reading.write)


def discharged(reading: Reading, fitted: Fit, mass: float, judgement: Judgement) -> list[Discharge]:
    """What leaves through the valve in every case in which it opens."""
    if not any(result.regime == "valve-opens" for result in judgement.stagnation.values()):
        return []
    return write_discharge.discharges(
        fitted.analysis, fitted.gas, mass, reading.write, recommended=max(fitted.mass, 0.0) or None
    )


def tolerance_band(
    reading: Reading, fitted: Fit, fill: float, tolerances: Tolerances
) -> ToleranceBand | None:
    """What the stated tolerances do to a filled vessel."""
    found = band(
        fitted,
        fill,
        write_band.by_id(tolerances),
        reading.policy,
        accept_without_boiling=reading.accept_without_boiling,
    )
    pressure = write_loop.Pressures(reading.write, reading.loop.atmosphere)
    return write_band.tolerance_band(found, reading.write, pressure)


def emptying_stated(reading: Reading) -> bool:
    """Whether every emptying class was stated."""
    return not any(entry.code == "emptying-class-assumed" for entry in reading.provisional)


def course(reading: Reading, fitted: Fit, mass: float) -> CourseSummary:
    """A clear day without flow, under the design sun."""
    case = write_course.lumped(fitted, mass, emptying_stated=emptying_stated(reading))
    pressure = write_loop.Pressures(reading.write, reading.loop.atmosphere)
    return write_course.summary(write_course.course(case), reading.write, pressure)


def derived(found: Design | Checked, reading: Reading, question: LoopQuestion) -> Derivation:
    """Every number of the base case as steps to be redone by hand."""
    return derivation(found, reading, question)
