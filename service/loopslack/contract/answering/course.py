"""Answers a question about a day without flow."""

from msgspec.structs import replace

from loopslack.calc.course.mapping import Mapped
from loopslack.calc.existing import check
from loopslack.contract.advice.loop import Advisor
from loopslack.contract.answering.extras import emptying_stated
from loopslack.contract.answers import operations as answers
from loopslack.contract.answers.course import StagnationCourseResult
from loopslack.contract.questions import existing as questions_existing
from loopslack.contract.reading.existing import CourseReading, read_course
from loopslack.contract.writing import course as write_course
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing.shared import CAUTIONS, assumptions, provenance


def compute_stagnation_course(
    question: questions_existing.StagnationCourseQuestion,
) -> answers.StagnationCourseAnswer:
    """Answer a course question: the day, its envelope, and the verdict of the coupled balance beside it."""
    asked = read_course(question)
    reading = asked.check.reading
    found = check(
        reading.loop,
        asked.check.vessel,
        question.vessels_in_parallel or 1,
        reading.policy,
        fill_pressure=asked.check.fill_pressure,
        accept_without_boiling=reading.accept_without_boiling,
    )
    case = write_course.lumped(
        found.fitted,
        found.mass,
        emptying_stated=emptying_stated(reading),
        start=asked.start,
        gas_follows=asked.gas_follows,
    )
    day = write_course.course(_as_stated(case, asked), asked.weather, asked.interval)
    write = reading.write
    pressure = write_loop.Pressures(write, reading.loop.atmosphere)
    return answers.StagnationCourseAnswer(
        result=StagnationCourseResult(
            verdict=found.judgement.verdict,
            summary=write_course.summary(day, write, pressure),
            points=write_course.points(day, write, pressure),
        ),
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=Advisor(found.fitted, found.judgement, reading.policy, reading.system).all(),
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def _as_stated(case: Mapped, asked: CourseReading) -> Mapped:
    """The lumped loop with a stated residue and reflux."""
    emptying = case.loop.emptying
    if asked.residue_share is not None:
        emptying = replace(emptying, residual_share=asked.residue_share)
    if asked.reflux_share is not None:
        emptying = replace(emptying, reflux=asked.reflux_share)
    return case._replace(loop=replace(case.loop, emptying=emptying))
