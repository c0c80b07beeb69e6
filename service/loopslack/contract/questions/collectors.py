"""How a caller describes the collectors and the sun on them."""

from typing import Annotated, Literal

from msgspec import Meta, Struct

from loopslack.calc.model import Build
from loopslack.contract.quantity import (
    Area,
    HeatLossCoefficient,
    Irradiance,
    Length,
    Pressure,
    QuadraticHeatLossCoefficient,
    Temperature,
    Volume,
)
from loopslack.contract.questions.fields import quantity, text, trade

AreaBasis = Literal["gross", "aperture", "absorber"]
EmptyingClass = Literal["good", "fair", "poor"]
EMPTYING_CLASSES: dict[str, str] = {
    "good": "Both connections at the bottom, nothing can be trapped",
    "fair": "Some liquid stays behind and boils off",
    "poor": "Connections at the top or sagging pipes: much liquid stays behind and boils off",
}
"""What the classes mean."""
Label = Annotated[str, Meta(min_length=1, max_length=64)]


class QuestionPart(
    Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, rename="camel", omit_defaults=True
):
    """A part of a question. Members that are not known are refused."""


class CollectorCoefficients(QuestionPart, frozen=True, kw_only=True):
    """Coefficients of the steady-state efficiency curve of ISO 9806, all on one area basis."""

    eta0: Annotated[float, Meta(ge=0.05, le=1, description="Peak efficiency.", examples=[0.79])]
    a1: Annotated[HeatLossCoefficient, quantity("Linear heat loss coefficient.", 3.7, "W/m2K", 0, 30)]
    a2: Annotated[
        QuadraticHeatLossCoefficient, quantity("Quadratic heat loss coefficient.", 0.014, "W/m2K2", 0, 1)
    ]
    basis: Annotated[
        AreaBasis,
        text(
            "The area the coefficients refer to, as the test report says. If it is not `aperture`, the "
            "collector's areas "
            "on both bases must be stated.",
            "aperture",
        ),
    ]


class MeasuredStagnation(QuestionPart, frozen=True, kw_only=True):
    """A stagnation temperature that was measured, with the sun and the air it was measured in."""

    temperature: Annotated[Temperature, quantity("Measured stagnation temperature.", 182, "degC", 80, 400)]
    irradiance: Annotated[
        Irradiance, quantity("Irradiance on the collector plane at that time.", 1000, "W/m2", 300, 1500)
    ]
    ambient: Annotated[Temperature, quantity("Air temperature at that time.", 30, "degC", -30, 60)]


class CollectorGroup(QuestionPart, frozen=True, kw_only=True):
    """Equal collectors that boil together: same height, same pipes, same emptying."""

    id: Annotated[Label | None, text("The caller's name for the group.", "roof")] = None
    count: Annotated[int, Meta(ge=1, le=10_000, description="Number of collectors.", examples=[8])]
    area: Annotated[Area, quantity("Area of one collector on the basis of `areaBasis`.", 2.3, "m2", 0.1, 100)]
    area_basis: Annotated[
        AreaBasis,
        text(
            "Which of the collector's areas `area` is. If not `aperture`, `apertureArea` is needed too.",
            "aperture",
        ),
    ]
    aperture_area: Annotated[
        Area | None,
        quantity(
            "Aperture area of one collector; needed if `areaBasis` is not `aperture`.", 2.3, "m2", 0.1, 100
        ),
    ] = None
    gross_area: Annotated[
        Area | None,
        quantity(
            "Gross area of one collector; needed if it is the `basis` of the coefficients.",
            2.52,
            "m2",
            0.1,
            100,
        ),
    ] = None
    absorber_area: Annotated[
        Area | None,
        quantity(
            "Absorber area of one collector; needed if it is the `basis` of the coefficients.",
            2.25,
            "m2",
            0.1,
            100,
        ),
    ] = None
    type: Annotated[Build, text("Build of the collector.", "flat-plate")]
    content: Annotated[
        Volume | None,
        quantity("Liquid in one collector. If absent, a figure for the type stands in.", 1.7, "L", 0.01, 500),
    ] = None
    coefficients: Annotated[
        CollectorCoefficients | None,
        text(
            "Efficiency coefficients. If absent, safe-side figures for the type make the answer provisional."
        ),
    ] = None
    measured_stagnation: Annotated[
        MeasuredStagnation | None,
        text("A measured stagnation temperature. The higher of it and the computed one is used."),
    ] = None
    emptying_class: Annotated[
        EmptyingClass | None,
        text(
            "How well the field lets steam push its liquid out. If absent, `poor` stands in and the answer "
            "is "
            "provisional.",
            "fair",
        ),
    ] = None
    measured_steam_power: Annotated[
        Irradiance | None,
        quantity(
            "Measured steam power per aperture area, stated instead of `emptyingClass`.", 60, "W/m2", 5, 600
        ),
    ] = None
    rated_pressure: Annotated[
        Pressure | None,
        quantity("Highest permitted pressure of the collectors. Never assumed.", 10, "barg", 0.5, 100),
    ] = None
    height: Annotated[
        Length | None,
        quantity(
            "Height above the vessel connection. If absent, `staticHeight`, which lies within these where all "
            "groups state one.",
            11,
            "m",
            -150,
            150,
        ),
    ] = None
    steam_space: Annotated[
        Label | None,
        text(
            "Groups and pipe runs of the same name share their steam. Stated everywhere or nowhere; if "
            "nowhere, all do.",
            "south roof",
        ),
    ] = None


class DesignSun(QuestionPart, frozen=True, kw_only=True):
    """The sun and the air of the stagnation that the loop is designed for."""

    irradiance: Annotated[
        Irradiance | None,
        quantity(
            f"Irradiance on the collector plane. If absent, {trade('design-irradiance')}.",
            1000,
            "W/m2",
            200,
            1500,
        ),
    ] = None
    ambient: Annotated[
        Temperature | None,
        quantity(f"Air temperature. If absent, {trade('design-ambient')}.", 30, "degC", -20, 60),
    ] = None
