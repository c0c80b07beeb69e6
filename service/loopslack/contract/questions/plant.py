"""How a caller describes the site, the relief valve, the station and what else stands in the loop."""

from typing import Annotated, Literal

from msgspec import Meta

from loopslack.contract.quantity import Length, Power, Pressure, PressureDifference, Temperature, Volume
from loopslack.contract.questions.collectors import QuestionPart
from loopslack.contract.questions.fields import quantity, text, trade
from loopslack.contract.questions.pipes import Zone

_HOT = trade("stagnation-liquid")

AllowanceRule = Literal["en-12828", "ten-percent", "task-26", "five-psi", "iso-4126-1"]
ReliefSize = Literal["DN15", "DN20", "DN25", "DN32", "DN40", "DN50"]
PumpSide = Literal["suction", "discharge"]


class Site(QuestionPart, frozen=True, kw_only=True):
    """Where the loop stands."""

    coldest_outdoor_temperature: Annotated[
        Temperature,
        quantity(
            "The coldest air the site must be expected to see. There is no default.", -16, "degC", -60, 35
        ),
    ]
    altitude: Annotated[
        Length | None,
        quantity("Height above mean sea level. If absent, sea level.", 0, "m", -430, 5000),
    ] = None


class AllowanceByRule(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="rule"):
    """How far below its stamp the valve must be expected to open, by a published rule."""

    rule: Annotated[AllowanceRule, text("The rule.", "en-12828")]


class AllowanceStated(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="stated"):
    """How far below its stamp the valve must be expected to open, stated.

    Less than the set tolerance of ISO 4126-1 (3 %, at least 0.1 bar) is refused.
    """

    value: Annotated[PressureDifference, quantity("The allowance.", 0.6, "bar", 0, 8)]


OpeningAllowance = AllowanceByRule | AllowanceStated


class ReliefValve(QuestionPart, frozen=True, kw_only=True):
    """The relief valve (safety valve) of the loop."""

    set_pressure: Annotated[
        Pressure,
        quantity(
            "Set pressure as stamped on the valve. `openingAllowance` must leave some of it.",
            6,
            "barg",
            0.5,
            16,
        ),
    ]
    height: Annotated[
        Length | None,
        quantity("Height above the vessel connection. If absent, 0.", 0, "m", -150, 150),
    ] = None
    opening_allowance: Annotated[
        OpeningAllowance | None,
        text("How far below its set pressure the valve may open. If absent, the rule of EN 12828."),
    ] = None
    blowdown: Annotated[
        PressureDifference | None,
        quantity(
            "How far below its set pressure the valve shuts again. If absent, 20 %, at least 0.6 bar.",
            1.2,
            "bar",
            0,
            15,
        ),
    ] = None
    nominal_size: Annotated[
        ReliefSize | None,
        text("Nominal size of the inlet, to be checked against the collector area.", "DN15"),
    ] = None


class Station(QuestionPart, frozen=True, kw_only=True):
    """Pump group and heat exchanger."""

    content: Annotated[
        Volume | None,
        quantity(
            "Liquid in it. If absent, a figure that grows with the collector area.", 6.4, "L", 0, 20_000
        ),
    ] = None
    height: Annotated[
        Length | None, quantity("Height above the vessel connection. If absent, 0.", 0, "m", -150, 150)
    ] = None
    zone: Annotated[Zone | None, text("Where it stands. If absent, `indoor`.", "indoor")] = None
    rated_pressure: Annotated[
        Pressure | None,
        quantity(
            "Highest permitted pressure of the weakest part in it. Never assumed.", 10, "barg", 0.5, 100
        ),
    ] = None
    highest_temperature: Annotated[
        Temperature | None,
        quantity("Highest permitted temperature of the weakest part in it.", 120, "degC", 30, 400),
    ] = None
    steam_cooler: Annotated[
        Power | None,
        quantity(
            "Heat that a stagnation cooler, or the station itself, takes from steam at its boiling "
            "temperature. If "
            "absent, none.",
            500,
            "W",
            0,
            1e7,
        ),
    ] = None


class VesselLine(QuestionPart, frozen=True, kw_only=True):
    """The line from the loop to the vessel."""

    content: Annotated[
        Volume | None,
        quantity(f"Liquid in it. If absent, {trade('vessel-line-content')}.", 0.5, "L", 0, 5000),
    ] = None


class Pump(QuestionPart, frozen=True, kw_only=True):
    """The pump, for the pressures while it runs."""

    head: Annotated[
        PressureDifference | None, quantity("Head at the design flow. If absent, none.", 0.4, "bar", 0, 20)
    ] = None
    side: Annotated[
        PumpSide | None,
        text("On which side of the pump the vessel is connected. If absent, `suction`.", "suction"),
    ] = None
    height: Annotated[
        Length | None, quantity("Height above the vessel connection. If absent, 0.", 0, "m", -150, 150)
    ] = None
    net_positive_suction: Annotated[
        PressureDifference | None,
        quantity("Net positive suction head the pump asks for. If absent, not assessed.", 2, "mH2O", 0, 5),
    ] = None


class PressureGauge(QuestionPart, frozen=True, kw_only=True):
    """The gauge that people will read."""

    height: Annotated[
        Length | None, quantity("Height above the vessel connection. If absent, 0.", 1.2, "m", -150, 150)
    ] = None


class RatedPart(QuestionPart, frozen=True, kw_only=True):
    """A part that must bear what the relief valve allows."""

    name: Annotated[
        Annotated[str, Meta(min_length=1, max_length=64)], text("What to call the part.", "collectors")
    ]
    height: Annotated[Length, quantity("Height above the vessel connection.", 11, "m", -150, 160)]
    rated_pressure: Annotated[
        Pressure | None,
        quantity("Highest permitted pressure. If absent, the part is not assessed.", 10, "barg", 0.5, 100),
    ] = None
    highest_temperature: Annotated[
        Temperature | None, quantity("Highest permitted temperature.", 200, "degC", 30, 400)
    ] = None


class Construction(QuestionPart, frozen=True, kw_only=True):
    """How a loop is built, where no vessel can make up for it."""

    open_or_drain_back: Annotated[
        bool | None,
        text(
            "Whether the loop is open or drains back. If absent, false. Such a loop is refused: other physics.",
            False,
        ),
    ] = None
    automatic_make_up: Annotated[
        bool | None,
        text("Whether water is made up automatically. If absent, false. A stop with glycol.", False),
    ] = None
    galvanised_parts: Annotated[
        bool | None, text("Whether any part is galvanised. If absent, false. A stop with glycol.", False)
    ] = None


class LoopTemperatures(QuestionPart, frozen=True, kw_only=True):
    """Temperatures of the states, all with defaults of the trade."""

    fill: Annotated[
        Temperature | None,
        quantity(
            f"Temperature while the loop is filled, above its freezing point. If absent, {trade('fill-temperature')}.",
            15,
            "degC",
            -20,
            60,
        ),
    ] = None
    indoor_cold: Annotated[
        Temperature | None,
        quantity(
            f"Temperature of indoor parts in the cold state. If absent, {trade('indoor-cold')}.",
            5,
            "degC",
            -40,
            40,
        ),
    ] = None
    vessel_room: Annotated[
        Temperature | None,
        quantity(
            f"Temperature around the vessel while the loop is hot. If absent, {trade('vessel-room')}.",
            20,
            "degC",
            -40,
            60,
        ),
    ] = None
    flow_pipe: Annotated[
        Temperature | None,
        quantity(
            f"Temperature of the flow while operating, from that of `returnPipe` to that of `cutOff`. "
            f"If absent, {trade('design-flow-temperature')}.",
            70,
            "degC",
            0,
            160,
        ),
    ] = None
    return_pipe: Annotated[
        Temperature | None,
        quantity(
            f"Temperature of the return while operating. If absent, {trade('design-return-temperature')}.",
            40,
            "degC",
            0,
            140,
        ),
    ] = None
    cut_off: Annotated[
        Temperature | None,
        quantity(
            f"Temperature at which the pump is stopped. If absent, {trade('pump-cut-off')}.",
            120,
            "degC",
            40,
            180,
        ),
    ] = None
    hot_liquid: Annotated[
        Temperature | None,
        quantity(
            f"Temperature of liquid in pipes and station in stagnation. If absent, {_HOT}.",
            120,
            "degC",
            20,
            180,
        ),
    ] = None
