"""Writes a day without flow in the caller's units."""

from loopslack.calc.course.assumptions import Assumption as Taken
from loopslack.calc.course.chronicle import Phases
from loopslack.calc.course.envelope import DayCourse, Span, day_course
from loopslack.calc.course.lumped import Start
from loopslack.calc.course.mapping import Mapped, mapped
from loopslack.calc.course.weather import ClearSky, Weather
from loopslack.calc.fit import Fit
from loopslack.calc.stagnation import charge_of
from loopslack.contract.answers import course as out
from loopslack.contract.quantity import TimeSpan
from loopslack.contract.writing.loop import Pressures
from loopslack.contract.writing.quantities import Writer
from loopslack.contract.writing.shared import source_note
from loopslack.kernel.work import finished

_MINUTE = 60.0


def lumped(
    fitted: Fit,
    mass: float,
    *,
    emptying_stated: bool,
    start: Start | None = None,
    gas_follows: bool = False,
) -> Mapped:
    """The lumped loop of a vessel filled with ``mass`` kg."""
    acceptance = fitted.gas.acceptance
    return mapped(
        fitted.analysis.loop,
        charge_of(fitted.analysis, fitted.gas, mass),
        vessels=fitted.pieces,
        acceptance_volume=None if acceptance == float("inf") else acceptance,
        emptying_stated=emptying_stated,
        gas_follows=gas_follows,
        start=start,
    )


def course(case: Mapped, weather: Weather | None = None, interval: float = _MINUTE) -> DayCourse:
    """The course and its envelope, marched to the end."""
    return finished(day_course(case, weather or ClearSky(), interval=interval))


def summary(found: DayCourse, write: Writer, pressure: Pressures) -> out.CourseSummary:
    """The day in short."""
    largest, own = found.largest, found.curve.largest

    def volume(name: str) -> out.VolumeSpan:
        span = largest[name]
        return out.VolumeSpan(
            course=write.volume(own[name].value), low=write.volume(span.low), high=write.volume(span.high)
        )

    reach, top, absorber = largest["reach"], largest["vessel_pressure"], largest["collector_temperature"]
    lost: Span = found.discharged
    return out.CourseSummary(
        complete=found.complete,
        phases=_phases(found.curve.phases, write),
        largest_steam_volume=volume("steam_volume"),
        largest_reach=out.LengthSpan(
            course=write.length(own["reach"].value),
            low=write.length(reach.low),
            high=write.length(reach.high),
        ),
        highest_vessel_pressure=out.PressureSpan(
            course=pressure(own["vessel_pressure"].value), low=pressure(top.low), high=pressure(top.high)
        ),
        largest_vessel_liquid=volume("vessel_liquid"),
        highest_collector_temperature=out.TemperatureSpan(
            course=write.temperature(own["collector_temperature"].value),
            low=write.temperature(absorber.low),
            high=write.temperature(absorber.high),
        ),
        discharged=out.MassSpan(
            course=write.mass(found.curve.discharged[-1]),
            low=write.mass(lost.low),
            high=write.mass(lost.high),
        ),
        flags=sorted(found.flags),
        certain_flags=sorted(found.certain_flags),
        notes=[_note(taken) for taken in found.assumptions],
    )


def _phases(phases: Phases, write: Writer) -> out.CoursePhases:
    def dated(time: float | None) -> TimeSpan | None:
        return None if time is None else write.time_span(time)

    return out.CoursePhases(
        start=write.time_span(phases.start),
        emptying=dated(phases.emptying),
        boiling=dated(phases.boiling),
        receding=dated(phases.receding),
        refilling=dated(phases.refilling),
        end=dated(phases.end),
    )


def _note(taken: Taken) -> out.CourseNote:
    return out.CourseNote(code=taken.id, note=taken.text, source=source_note(taken.source))


def points(found: DayCourse, write: Writer, pressure: Pressures) -> list[out.CoursePoint]:
    """The day point by point, as long as its shortest course."""
    curve, bands = found.curve, found.bands
    steam, vessel = bands["steam_volume"], bands["vessel_pressure"]
    length = min(len(curve.time), len(steam.low))
    return [
        out.CoursePoint(
            time=write.time_span(curve.time[k]),
            irradiance=write.irradiance(curve.irradiance[k]),
            ambient=write.temperature(curve.ambient[k]),
            collector_temperature=write.temperature(curve.collector_temperature[k]),
            saturation_temperature=write.temperature(curve.saturation_temperature[k]),
            steam_volume=write.volume(curve.steam_volume[k]),
            steam_volume_low=write.volume(steam.low[k]),
            steam_volume_high=write.volume(steam.high[k]),
            reach=write.length(curve.reach[k]),
            vessel_pressure=pressure(curve.vessel_pressure[k]),
            vessel_pressure_low=pressure(vessel.low[k]),
            vessel_pressure_high=pressure(vessel.high[k]),
            vessel_liquid=write.volume(curve.vessel_liquid[k]),
            collector_liquid=write.mass(curve.collector_liquid[k]),
            discharged=write.mass(curve.discharged[k]),
        )
        for k in range(length)
    ]
