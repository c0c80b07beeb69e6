"""How a caller names vessels: a stock list, the generic series, or one vessel."""

from typing import Annotated

from msgspec import Meta

from loopslack.contract.quantity import Pressure, Price, Temperature, Volume
from loopslack.contract.questions.collectors import Label, QuestionPart
from loopslack.contract.questions.fields import quantity, text

MOST_STOCK_ITEMS = 10_000


class PrechargeByRule(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="rule"):
    """The lowest precharge that carries the static head and the least pressure at the top."""


class PrechargeStated(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="stated"):
    """A precharge that is given."""

    pressure: Annotated[Pressure, quantity("Precharge, vessel empty of liquid.", 1.6, "barg", 0, 30)]
    temperature: Annotated[
        Temperature | None,
        quantity("Temperature it was set at. If absent, the fill temperature.", 15, "degC", -30, 60),
    ] = None


class PrechargeOptimised(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="optimised"):
    """The lowest precharge that still holds the pressure at the top when cold, with the reserve held."""


Precharge = PrechargeByRule | PrechargeStated | PrechargeOptimised

_NOMINAL = quantity("Nominal volume: gas volume of the empty vessel.", 80, "L", 0.5, 50_000)
_RATED = "Highest permitted pressure."
_ACCEPTANCE = quantity(
    "Most liquid the membrane may take. If absent, the maker states no limit.", 54, "L", 0.1, 50_000
)
_DELIVERED = quantity(
    "Precharge as delivered, a gauge reading at sea level. If absent, unknown.", 1.5, "barg", 0, 30
)
_ADJUSTABLE = text("Whether the precharge can be changed on site. If absent, true.", True)
_MEMBRANE = quantity(
    "Highest lasting membrane temperature. If absent, that of the criteria.", 70, "degC", 30, 150
)


class StockVessel(QuestionPart, frozen=True, kw_only=True, gc=False):
    """A vessel of the caller's stock."""

    id: Annotated[Label, text("The caller's article number, echoed in the answer.", "EV-80")]
    nominal_volume: Annotated[Volume, _NOMINAL]
    rated_pressure: Annotated[Pressure, quantity(_RATED, 10, "barg", 0.5, 100)]
    acceptance_volume: Annotated[Volume | None, _ACCEPTANCE] = None
    delivered_precharge: Annotated[Pressure | None, _DELIVERED] = None
    precharge_adjustable: Annotated[bool | None, _ADJUSTABLE] = None
    membrane_limit: Annotated[Temperature | None, _MEMBRANE] = None
    price: Annotated[Price | None, text("Price of one. Prices of one currency rank the choice.")] = None


class ExpansionVessel(QuestionPart, frozen=True, kw_only=True):
    """One vessel that is there already or under discussion."""

    id: Annotated[Label | None, text("The caller's name for the vessel.", "EV-80")] = None
    nominal_volume: Annotated[Volume, _NOMINAL]
    rated_pressure: Annotated[
        Pressure | None, quantity(f"{_RATED} If absent, not assessed.", 10, "barg", 0.5, 100)
    ] = None
    acceptance_volume: Annotated[Volume | None, _ACCEPTANCE] = None
    delivered_precharge: Annotated[Pressure | None, _DELIVERED] = None
    precharge_adjustable: Annotated[bool | None, _ADJUSTABLE] = None
    membrane_limit: Annotated[Temperature | None, _MEMBRANE] = None
    price: Annotated[Price | None, text("Price of one.")] = None


class FromStock(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="stock"):
    """Choose from the caller's stock list."""

    items: Annotated[
        list[StockVessel],
        Meta(min_length=1, max_length=MOST_STOCK_ITEMS, description="The vessels; identifiers must differ."),
    ]


class FromSeries(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="series"):
    """Choose from the preferred numbers of ISO 3, series R10. Generic sizes, not an offer."""

    rated_pressure: Annotated[
        Pressure | None, quantity(f"{_RATED} If absent, not assessed.", 10, "barg", 0.5, 100)
    ] = None


class GivenVessel(ExpansionVessel, frozen=True, kw_only=True, tag_field="kind", tag="given"):
    """Take this vessel and say whether it holds."""

    fill_pressure: Annotated[
        Pressure | None,
        quantity(
            "Pressure at the vessel when filled, at the fill temperature. If absent, the recommended one.",
            1.9,
            "barg",
            0,
            30,
        ),
    ] = None


VesselChoice = FromStock | FromSeries | GivenVessel


class CoolingVesselGiven(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="given"):
    """A cooling vessel that is there or decided on."""

    content: Annotated[Volume, quantity("Its content.", 20, "L", 0.1, 50_000)]
    rated_pressure: Annotated[
        Pressure | None, quantity(f"{_RATED} If absent, not assessed.", 10, "barg", 0.5, 100)
    ] = None


class CoolingVesselNone(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="none"):
    """No cooling vessel, whatever the membrane sees."""


class CoolingVesselSize(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="size"):
    """Add the smallest cooling vessel that keeps the membrane at or below its limit, if one is needed."""


CoolingVessel = CoolingVesselGiven | CoolingVesselNone | CoolingVesselSize
FixedCoolingVessel = CoolingVesselGiven | CoolingVesselNone
