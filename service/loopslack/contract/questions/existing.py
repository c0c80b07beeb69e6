"""The questions about a day without flow and about a vessel that is there."""

from typing import Annotated, Literal

from msgspec import Meta

from loopslack.contract.quantity import Irradiance, Pressure, Ratio, Temperature, TimeSpan
from loopslack.contract.questions.collectors import QuestionPart
from loopslack.contract.questions.fields import quantity, text, trade
from loopslack.contract.questions.operations import StagnationCheckQuestion, VesselQuestion

GasBehaviour = Literal["isothermal", "follows-liquid"]


class WeatherPoint(QuestionPart, frozen=True, kw_only=True):
    """Sun and air at one time of the day."""

    time: Annotated[TimeSpan, quantity("Time since midnight.", 12, "h", 0, 48)]
    irradiance: Annotated[Irradiance, quantity("Irradiance on the collector plane.", 950, "W/m2", 0, 1500)]
    ambient: Annotated[Temperature, quantity("Air temperature.", 28, "degC", -40, 60)]


class ClearDay(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="clear"):
    """A clear day: half a sine of sun from 6 to 18 o'clock over a daily wave of air temperature."""

    highest_irradiance: Annotated[
        Irradiance | None,
        quantity("Irradiance at noon. If absent, that of the design sun.", 1000, "W/m2", 0, 1500),
    ] = None
    warmest: Annotated[
        Temperature | None,
        quantity("Warmest air, at 15 o'clock. If absent, that of the design sun.", 30, "degC", -30, 60),
    ] = None
    coolest: Annotated[
        Temperature | None,
        quantity("Coolest air, at 3 o'clock. If absent, 14 K below the warmest.", 16, "degC", -40, 60),
    ] = None


class GivenDay(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="given"):
    """A day by its points, hourly or finer, joined by straight lines."""

    points: Annotated[
        list[WeatherPoint],
        Meta(min_length=2, max_length=3000, description="The points, in rising time, an hour apart at most."),
    ]


Weather = ClearDay | GivenDay


class ColdDawn(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="cold-dawn"):
    """The loop rests overnight and no pump starts in the morning."""


class PumpStop(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="pump-stop"):
    """The pump stops while the loop is hot."""

    time: Annotated[TimeSpan, quantity("Time at which the pump stops, since midnight.", 12, "h", 0, 24)]
    collectors: Annotated[Temperature, quantity("Temperature of the collectors then.", 90, "degC", -20, 160)]
    pipes: Annotated[Temperature, quantity("Temperature of the pipes then.", 80, "degC", -20, 140)]
    station: Annotated[Temperature, quantity("Temperature of the station then.", 75, "degC", -20, 140)]
    vessel: Annotated[Temperature, quantity("Temperature of the vessel then.", 30, "degC", -20, 100)]


CourseStart = ColdDawn | PumpStop


class StagnationCourseQuestion(StagnationCheckQuestion, frozen=True, kw_only=True):
    """A loop with its vessel, to be followed through a day without flow."""

    weather: Annotated[Weather | None, text("The day. If absent, a clear one.")] = None
    start: Annotated[CourseStart | None, text("How the day begins. If absent, `cold-dawn`.")] = None
    interval: Annotated[
        TimeSpan | None, quantity("Distance of the points answered. If absent, 1 min.", 1, "min", 1, 60)
    ] = None
    residue_share: Annotated[
        Ratio | None,
        quantity(
            "Share of the collectors' content that steam cannot push out. If absent, by emptying class.",
            45,
            "percent",
            2,
            98,
        ),
    ] = None
    reflux_share: Annotated[
        Ratio | None,
        quantity(
            "Share of the condensate that runs back into the collectors. If absent, 0.", 0, "percent", 0, 100
        ),
    ] = None
    gas: Annotated[
        GasBehaviour | None,
        text("Whether the gas keeps the room's temperature. If absent, `isothermal`.", "isothermal"),
    ] = None


class MeasuredPrecharge(QuestionPart, frozen=True, kw_only=True):
    """A precharge measured with the vessel empty of liquid."""

    pressure: Annotated[Pressure, quantity("Gauge reading on site.", 1.5, "barg", 0, 30)]
    temperature: Annotated[
        Temperature | None,
        quantity(
            f"Temperature of the vessel then. If absent, {trade('delivered-precharge-temperature')}.",
            20,
            "degC",
            -30,
            60,
        ),
    ] = None


class GaugeReading(QuestionPart, frozen=True, kw_only=True):
    """What the gauge of a loop at rest shows."""

    pressure: Annotated[Pressure, quantity("What the gauge shows.", 1.4, "barg", 0, 30)]
    temperature: Annotated[
        Temperature,
        quantity(
            "Temperature of the loop then, the same all over; above its freezing point.", 18, "degC", -40, 100
        ),
    ]


class CommissioningRecord(QuestionPart, frozen=True, kw_only=True):
    """What was set when the loop was filled."""

    precharge: Annotated[Pressure, quantity("Precharge set, a reading on site.", 1.6, "barg", 0, 30)]
    fill_pressure: Annotated[
        Pressure, quantity("Fill pressure at the gauge, above the precharge.", 1.9, "barg", 0, 30)
    ]
    temperature: Annotated[
        Temperature | None,
        quantity("Temperature of the loop then. If absent, the fill temperature.", 15, "degC", -20, 60),
    ] = None


class VesselAuditQuestion(VesselQuestion, frozen=True, kw_only=True):
    """An existing loop: does its vessel hold, what does the gauge say, what should be set instead."""

    gauge_reading: Annotated[GaugeReading, text("What the gauge shows.")]
    measured_precharge: Annotated[
        MeasuredPrecharge | None,
        text("The precharge as measured. If absent, a low reading may mean lost liquid or lost gas."),
    ] = None
    commissioning: Annotated[CommissioningRecord | None, text("What was set when the loop was filled.")] = (
        None
    )
