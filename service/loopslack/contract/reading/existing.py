"""Reads questions about a vessel that is there: the stagnation check, the day without flow, the audit."""

from typing import NamedTuple

from loopslack.calc.course.lumped import Start
from loopslack.calc.course.weather import ClearSky, StatedWeather, Weather
from loopslack.calc.model import Sun, Vessel
from loopslack.contract.questions import existing as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.operations import StagnationCheckQuestion
from loopslack.contract.reading.again import refusing
from loopslack.contract.reading.loop import Reading, read_loop
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.tolerances import Tolerances, read_tolerances
from loopslack.contract.reading.vessels import read_fill, read_vessel
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.library.defaults import default

_FILL = field_of(StagnationCheckQuestion, "fill_pressure")
_HIGHEST_SUN = field_of(asked.ClearDay, "highest_irradiance")
_WARMEST = field_of(asked.ClearDay, "warmest")
_COOLEST = field_of(asked.ClearDay, "coolest")
_POINT_TIME = field_of(asked.WeatherPoint, "time")
_POINT_SUN = field_of(asked.WeatherPoint, "irradiance")
_POINT_AIR = field_of(asked.WeatherPoint, "ambient")
_STOP = {
    name: field_of(asked.PumpStop, name) for name in ("time", "collectors", "pipes", "station", "vessel")
}
_INTERVAL = field_of(asked.StagnationCourseQuestion, "interval")
_RESIDUE = field_of(asked.StagnationCourseQuestion, "residue_share")
_REFLUX = field_of(asked.StagnationCourseQuestion, "reflux_share")
_READ = field_of(asked.GaugeReading, "pressure")
_READ_AT = field_of(asked.GaugeReading, "temperature")
_MEASURED = field_of(asked.MeasuredPrecharge, "pressure")
_MEASURED_AT = field_of(asked.MeasuredPrecharge, "temperature")
_SET = field_of(asked.CommissioningRecord, "precharge")
_FILLED = field_of(asked.CommissioningRecord, "fill_pressure")
_SET_AT = field_of(asked.CommissioningRecord, "temperature")

_CLEAR = asked.ClearDay()
_SWING = 14.0  # K from coolest to warmest; own assumption
_MINUTE = 60.0


class CheckReading(NamedTuple):
    """A loop with its vessel; ``fill_pressure`` absolute, Pa, or None for the recommended one."""

    reading: Reading
    vessel: Vessel
    fill_pressure: float | None
    tolerances: Tolerances


class CourseReading(NamedTuple):
    """A day to follow; shares are None where the emptying class or the trade decides."""

    check: CheckReading
    weather: Weather
    start: Start
    interval: float
    residue_share: float | None
    reflux_share: float | None
    gas_follows: bool


class GaugePoint(NamedTuple):
    """A pressure, Pa absolute, and the temperature, K, that goes with it."""

    pressure: float
    temperature: float


class Commissioned(NamedTuple):
    """What was set when the loop was filled: pressures Pa absolute, the fill read at the gauge."""

    precharge: float
    fill_pressure: float
    temperature: float


class AuditReading(NamedTuple):
    """A loop with its vessel, what its gauge shows, and what else is known of the gas side."""

    reading: Reading
    vessel: Vessel
    gauge: GaugePoint
    measured_precharge: GaugePoint | None
    commissioned: Commissioned | None


@refusing
def read_check(question: StagnationCheckQuestion, reader: Reader) -> CheckReading:
    """Read a stagnation check."""
    reading = read_loop(question, reader)
    return CheckReading(
        reading,
        read_vessel(reader, question.vessel, "/vessel", question.vessel.id or "given"),
        read_fill(reader, question.fill_pressure, _FILL, ""),
        read_tolerances(reader, question.tolerances),
    )


@refusing
def read_course(question: asked.StagnationCourseQuestion, reader: Reader) -> CourseReading:
    """Read a day without flow."""
    check = read_check(question, reader)
    weather = _weather(reader, question.weather, check.reading.loop.sun)
    interval = _MINUTE if question.interval is None else reader.si(question.interval, _INTERVAL, "")
    return CourseReading(
        check,
        weather,
        _start(reader, question.start),
        interval,
        reader.optional(question.residue_share, _RESIDUE, ""),
        reader.optional(question.reflux_share, _REFLUX, ""),
        question.gas == "follows-liquid",
    )


@refusing
def read_audit(question: asked.VesselAuditQuestion, reader: Reader) -> AuditReading:
    """Read an audit. Pressures are read on site, so gauge ones."""
    reading = read_loop(question, reader)
    vessel = read_vessel(reader, question.vessel, "/vessel", question.vessel.id or "given")
    shown, place = question.gauge_reading, "/gaugeReading"
    gauge = GaugePoint(
        reader.gauge(shown.pressure, _READ, place) + reader.atmosphere,
        reader.si(shown.temperature, _READ_AT, place),
    )
    if gauge.temperature <= reading.loop.fluid.freezing_point:
        reader.contradiction(
            f"{place}/temperature",
            f"At {gauge.temperature - 273.15:.4g} degC the fluid is partly ice; the gauge then tells nothing.",
            "Read the gauge again on a warmer day.",
        )
    return AuditReading(
        reading,
        vessel,
        gauge,
        _measured(reader, question.measured_precharge),
        _commissioned(reader, question.commissioning, reading),
    )


def _weather(reader: Reader, weather: asked.Weather | None, sun: Sun) -> Weather:
    try:
        if isinstance(weather, asked.GivenDay):
            return _given_day(reader, weather)
        return _clear_day(reader, weather or _CLEAR, sun)
    except CalculationError as error:
        reader.refuse(error, error.pointer or "/weather")
        return reader.stand_in(ClearSky())


def _clear_day(reader: Reader, day: asked.ClearDay, sun: Sun) -> ClearSky:
    place = "/weather"
    highest = reader.optional(day.highest_irradiance, _HIGHEST_SUN, place)
    if highest is None:
        why = "The sun at noon is the design sun."
        highest = reader.derived(
            f"{place}/highestIrradiance",
            sun.irradiance,
            kinds.IRRADIANCE,
            why,
            low=sun.irradiance,
            high=sun.irradiance,
        )
    warmest = reader.optional(day.warmest, _WARMEST, place)
    if warmest is None:
        why = "The warmest air of the day is that of the design sun."
        warmest = reader.derived(
            f"{place}/warmest", sun.ambient, kinds.TEMPERATURE, why, low=sun.ambient, high=sun.ambient
        )
    coolest = reader.optional(day.coolest, _COOLEST, place)
    if coolest is None:
        cool = warmest - _SWING
        why = f"The air of a clear day swings by {_SWING:g} K (own assumption)."
        coolest = reader.derived(
            f"{place}/coolest", cool, kinds.TEMPERATURE, why, low=warmest - 20.0, high=warmest - 5.0
        )
    elif coolest > warmest:
        reader.contradiction(
            f"{place}/coolest",
            f"The coolest air ({coolest - 273.15:.4g} degC) is warmer than the warmest ({warmest - 273.15:.4g} degC).",
            "Exchange the two.",
        )
    return ClearSky(
        highest_irradiance=highest, mean_ambient=(warmest + coolest) / 2, swing=(warmest - coolest) / 2
    )


def _given_day(reader: Reader, day: asked.GivenDay) -> StatedWeather:
    rows = [
        (
            reader.si(point.time, _POINT_TIME, f"/weather/points/{k}"),
            reader.si(point.irradiance, _POINT_SUN, f"/weather/points/{k}"),
            reader.si(point.ambient, _POINT_AIR, f"/weather/points/{k}"),
        )
        for k, point in enumerate(day.points)
    ]
    times, irradiances, ambients = zip(*rows, strict=True)
    return StatedWeather(times=times, irradiances=irradiances, ambients=ambients)


def _start(reader: Reader, start: asked.CourseStart | None) -> Start:
    if not isinstance(start, asked.PumpStop):
        return Start()
    return Start(
        time=reader.si(start.time, _STOP["time"], "/start"),
        collectors=reader.si(start.collectors, _STOP["collectors"], "/start"),
        pipes=reader.si(start.pipes, _STOP["pipes"], "/start"),
        station=reader.si(start.station, _STOP["station"], "/start"),
        vessel=reader.si(start.vessel, _STOP["vessel"], "/start"),
    )


def _measured(reader: Reader, measured: asked.MeasuredPrecharge | None) -> GaugePoint | None:
    if measured is None:
        return None
    place = "/measuredPrecharge"
    return GaugePoint(
        reader.gauge(measured.pressure, _MEASURED, place) + reader.atmosphere,
        reader.or_default(measured.temperature, _MEASURED_AT, place, "delivered-precharge-temperature"),
    )


def _commissioned(
    reader: Reader, record: asked.CommissioningRecord | None, reading: Reading
) -> Commissioned | None:
    if record is None:
        return None
    place = "/commissioning"
    temperature = reader.optional(record.temperature, _SET_AT, place)
    if temperature is None:
        temperature = reading.loop.temperatures.fill
        row = default("fill-temperature")
        reader.derived(
            f"{place}/temperature",
            temperature,
            row.kind,
            row.why,
            low=min(row.low, temperature),
            high=max(row.high, temperature),
        )
    found = Commissioned(
        reader.gauge(record.precharge, _SET, place) + reader.atmosphere,
        reader.gauge(record.fill_pressure, _FILLED, place) + reader.atmosphere,
        temperature,
    )
    if found.fill_pressure <= found.precharge:
        reader.contradiction(
            f"{place}/fillPressure",
            "The loop is said to have been filled to no more than the precharge; the vessel then held no liquid.",
            "Exchange the two if they were mixed up.",
        )
    return found
