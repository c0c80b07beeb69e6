"""The answer about a day without flow: the course, its phases, and how far it may lie off."""

from typing import Annotated

from loopslack.calc.course.chronicle import Flag
from loopslack.contract import quantity as q
from loopslack.contract.answers.shared import AnswerPart, SourceNote, Verdict
from loopslack.contract.questions.fields import text


class CoursePhases(AnswerPart, frozen=True, kw_only=True):
    """When each phase began, from midnight. A phase that never came is absent."""

    start: Annotated[q.TimeSpan, text("Heating and expansion: the day begins.")]
    emptying: Annotated[q.TimeSpan | None, text("First steam: liquid is pushed out of the collectors.")] = (
        None
    )
    boiling: Annotated[q.TimeSpan | None, text("Steam enters the pipes; the residue boils.")] = None
    receding: Annotated[q.TimeSpan | None, text("The largest steam volume is passed.")] = None
    refilling: Annotated[q.TimeSpan | None, text("The front is back at the collectors.")] = None
    end: Annotated[q.TimeSpan | None, text("The last steam is gone.")] = None


class PressureSpan(AnswerPart, frozen=True, kw_only=True):
    """Largest vessel pressure: the one course and the range of its assumptions."""

    course: Annotated[q.Pressure, text("In the course shown.")]
    low: Annotated[q.Pressure, text("Lowest over the envelope.")]
    high: Annotated[q.Pressure, text("Highest over the envelope.")]


class VolumeSpan(AnswerPart, frozen=True, kw_only=True):
    """A largest volume: the one course and the range of its assumptions."""

    course: Annotated[q.Volume, text("In the course shown.")]
    low: Annotated[q.Volume, text("Lowest over the envelope.")]
    high: Annotated[q.Volume, text("Highest over the envelope.")]


class LengthSpan(AnswerPart, frozen=True, kw_only=True):
    """A largest length: the one course and the range of its assumptions."""

    course: Annotated[q.Length, text("In the course shown.")]
    low: Annotated[q.Length, text("Lowest over the envelope.")]
    high: Annotated[q.Length, text("Highest over the envelope.")]


class TemperatureSpan(AnswerPart, frozen=True, kw_only=True):
    """A largest temperature: the one course and the range of its assumptions."""

    course: Annotated[q.Temperature, text("In the course shown.")]
    low: Annotated[q.Temperature, text("Lowest over the envelope.")]
    high: Annotated[q.Temperature, text("Highest over the envelope.")]


class MassSpan(AnswerPart, frozen=True, kw_only=True):
    """A mass: the one course and the range of its assumptions."""

    course: Annotated[q.Mass, text("In the course shown.")]
    low: Annotated[q.Mass, text("Lowest over the envelope.")]
    high: Annotated[q.Mass, text("Highest over the envelope.")]


class CourseNote(AnswerPart, frozen=True, kw_only=True):
    """Something the course takes for granted."""

    code: Annotated[str, text("Stable code.", "residue")]
    note: Annotated[str, text("What is taken for granted.", "Residue by emptying class.")]
    source: Annotated[SourceNote, text("Where it comes from.")]


class CourseSummary(AnswerPart, frozen=True, kw_only=True):
    """A day without flow in short. It is milder than the coupled balance and never replaces it for sizing."""

    complete: Annotated[
        bool, text("False where a course ended early; its figures are then lower bounds.", True)
    ]
    phases: Annotated[CoursePhases, text("The phases of the course shown.")]
    largest_steam_volume: Annotated[VolumeSpan, text("Largest steam volume.")]
    largest_reach: Annotated[LengthSpan, text("Largest reach of steam.")]
    highest_vessel_pressure: Annotated[PressureSpan, text("Highest vessel pressure.")]
    largest_vessel_liquid: Annotated[VolumeSpan, text("Most liquid in the vessel.")]
    highest_collector_temperature: Annotated[TemperatureSpan, text("Hottest absorber.")]
    discharged: Annotated[MassSpan, text("Liquid lost through the relief valve.")]
    flags: Annotated[list[Flag], text("What happened in any of the courses.")]
    certain_flags: Annotated[list[Flag], text("What happened in all of them.")]
    notes: Annotated[list[CourseNote], text("What the course takes for granted.")]


class CoursePoint(AnswerPart, frozen=True, kw_only=True, gc=False):
    """One instant of the course."""

    time: Annotated[q.TimeSpan, text("Time since midnight.")]
    irradiance: Annotated[q.Irradiance, text("Sun on the collectors.")]
    ambient: Annotated[q.Temperature, text("Temperature of the outdoor air.")]
    collector_temperature: Annotated[q.Temperature, text("Temperature of the absorber.")]
    saturation_temperature: Annotated[q.Temperature, text("Boiling point at the pressure of the collectors.")]
    steam_volume: Annotated[q.Volume, text("Steam in collectors and pipes.")]
    steam_volume_low: Annotated[q.Volume, text("Lowest over the envelope.")]
    steam_volume_high: Annotated[q.Volume, text("Highest over the envelope.")]
    reach: Annotated[q.Length, text("Reach of steam in the pipe run filled furthest.")]
    vessel_pressure: Annotated[q.Pressure, text("Pressure at the vessel.")]
    vessel_pressure_low: Annotated[q.Pressure, text("Lowest over the envelope.")]
    vessel_pressure_high: Annotated[q.Pressure, text("Highest over the envelope.")]
    vessel_liquid: Annotated[q.Volume, text("Liquid in the vessel.")]
    collector_liquid: Annotated[q.Mass, text("Liquid left in the collectors.")]
    discharged: Annotated[q.Mass, text("Lost through the relief valve so far.")]


class StagnationCourseResult(AnswerPart, frozen=True, kw_only=True):
    """A day without flow, beside the coupled balance that stays the design case."""

    verdict: Annotated[Verdict, text("Verdict of the coupled balance on this vessel.", "holds")]
    summary: Annotated[CourseSummary, text("The day in short.")]
    points: Annotated[list[CoursePoint], text("The day, point by point.")]
