"""How a caller describes the pipes between collectors and station."""

from typing import Annotated, Literal

from msgspec import Meta

from loopslack.contract.quantity import Conductivity, ContentPerLength, Length, Temperature
from loopslack.contract.questions.collectors import Label, QuestionPart
from loopslack.contract.questions.fields import quantity, text, trade
from loopslack.library.tubes import tube_standards

Zone = Literal["indoor", "outdoor"]
RunRole = Literal["flow", "return"]
SteamAccess = Literal["open", "closed", "unknown"]
_STANDARDS = ", ".join(f"`{standard}`" for standard in tube_standards())
_WALLS = trade("tube-outer-over-bore")
_DIAMETERS = trade("insulation-thickness-per-diameter")
_CONDUCTIVITY = trade("insulation-conductivity")
_FACTOR = trade("weathered-loss-factor")
_INDOOR = trade("pipe-ambient")

ShortText = Annotated[str, Meta(min_length=1, max_length=40)]


class StandardTube(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="standard"):
    """A tube of a published standard by its nominal size. `GET /v1/tubes` lists them."""

    standard: Annotated[ShortText, text(f"The standard: one of {_STANDARDS}.", "en-1057")]
    size: Annotated[
        ShortText,
        text(
            "Nominal size as `GET /v1/tubes` writes it: `28x1.5` of `en-1057`, `3/4` of `astm-b88-l`.",
            "28x1.5",
        ),
    ]


class BoreTube(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="bore"):
    """A tube by its clear diameter."""

    bore: Annotated[Length, quantity("Clear diameter.", 25, "mm", 2, 500)]
    outer_diameter: Annotated[
        Length | None,
        quantity(f"Outer diameter, above the bore. If absent, bore plus {_WALLS}.", 28, "mm", 2.2, 600),
    ] = None


class ContentTube(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="content"):
    """A tube by its content per length, as for corrugated tube, whose bore under-states it."""

    content_per_length: Annotated[ContentPerLength, quantity("Content per length.", 0.49, "L/m", 0.003, 200)]
    outer_diameter: Annotated[
        Length | None,
        quantity(f"Outer diameter. If absent, bore of equal content plus {_WALLS}.", 28, "mm", 2.2, 600),
    ] = None


Tube = StandardTube | BoreTube | ContentTube


class NoInsulation(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="none"):
    """Bare pipe."""


class Insulated(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="insulated"):
    """Pipe with sound insulation."""

    thickness: Annotated[
        Length | None,
        quantity(f"Thickness. If absent, {_DIAMETERS} times the outer diameter.", 20, "mm", 0, 300),
    ] = None
    conductivity: Annotated[
        Conductivity | None, quantity(f"Conductivity. If absent, {_CONDUCTIVITY}.", 0.04, "W/mK", 0.01, 1)
    ] = None


class Weathered(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="weathered"):
    """Pipe whose insulation has suffered from rain, birds or heat and loses more than new."""

    thickness: Annotated[
        Length | None,
        quantity(f"Thickness. If absent, {_DIAMETERS} times the outer diameter.", 20, "mm", 0, 300),
    ] = None
    conductivity: Annotated[
        Conductivity | None,
        quantity(f"Conductivity when new. If absent, {_CONDUCTIVITY}.", 0.04, "W/mK", 0.01, 1),
    ] = None
    loss_factor: Annotated[
        Annotated[float, Meta(ge=1, le=10)] | None,
        text(
            f"How many times the loss when new. If absent, {_FACTOR}: the safe side for steam.",
            1.5,
        ),
    ] = None


Insulation = NoInsulation | Insulated | Weathered


class PipeSegment(QuestionPart, frozen=True, kw_only=True):
    """A stretch of pipe of one tube, one insulation and one surrounding."""

    length: Annotated[Length, quantity("Length of the stretch.", 23, "m", 0.01, 10_000)]
    tube: Annotated[Tube, text("The tube.")]
    insulation: Annotated[
        Insulation | None,
        text("The insulation. If absent, `insulated` by the defaults of the trade."),
    ] = None
    zone: Annotated[
        Zone | None,
        text("Whether the stretch gets as cold as the site when it is cold. If absent, `outdoor`.", "indoor"),
    ] = None
    ambient: Annotated[
        Temperature | None,
        quantity(
            f"Temperature around the pipe in stagnation. If absent, {_INDOOR} indoors and the air of the "
            "design sun "
            "outdoors.",
            20,
            "degC",
            -40,
            70,
        ),
    ] = None
    end_height: Annotated[
        Length | None,
        quantity(
            "Height above the vessel connection of the end towards the station. If absent anywhere in a "
            "run, heights "
            "run evenly between those that are stated. The last stretch ends at the station.",
            0,
            "m",
            -150,
            160,
        ),
    ] = None
    soft_solder: Annotated[
        bool | None, text("Whether its joints are soft soldered. If absent, false.", False)
    ] = None


class PipeRun(QuestionPart, frozen=True, kw_only=True):
    """A line from the collectors to the station, whichever way the liquid flows in it."""

    id: Annotated[Label | None, text("The caller's name for the run.", "hot line")] = None
    role: Annotated[
        RunRole, text("`flow` carries hot liquid from the collectors, `return` brings it back.", "flow")
    ]
    segments: Annotated[
        list[PipeSegment],
        Meta(min_length=1, max_length=50, description="The stretches, from the collectors to the station."),
    ]
    steam_access: Annotated[
        SteamAccess | None,
        text(
            "Whether steam can push liquid down this run: `closed` if a check valve stands in its way. If "
            "absent, "
            "`unknown`: both are computed and the answer is provisional.",
            "open",
        ),
    ] = None
    steam_space: Annotated[
        Label | None,
        text("The steam space of the groups this run serves. Stated everywhere or nowhere.", "south roof"),
    ] = None
