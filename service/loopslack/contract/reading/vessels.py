"""Reads vessels: stock lists, single vessels, cooling vessels."""

from collections.abc import Sequence
from typing import Literal, NamedTuple

from loopslack.calc.model import Vessel
from loopslack.contract.quantity import Pressure
from loopslack.contract.questions import vessels as asked
from loopslack.contract.questions.fields import Field, field_of
from loopslack.contract.reading.reader import Reader
from loopslack.kernel.kinds import Length
from loopslack.kernel.units import GAUGE_UNITS
from loopslack.physics.atmosphere import atmospheric_pressure

_STOCK_RATING = field_of(asked.StockVessel, "rated_pressure")
_SERIES_RATING = field_of(asked.FromSeries, "rated_pressure")
_NOMINAL = field_of(asked.StockVessel, "nominal_volume")
_ACCEPTANCE = field_of(asked.StockVessel, "acceptance_volume")
_DELIVERED = field_of(asked.StockVessel, "delivered_precharge")
_MEMBRANE = field_of(asked.StockVessel, "membrane_limit")
_FILL = field_of(asked.GivenVessel, "fill_pressure")
_COOLING = field_of(asked.CoolingVesselGiven, "content")

_SEA_LEVEL = atmospheric_pressure(Length(0.0))

Cooling = Literal["given", "none", "size"]


class Choice(NamedTuple):
    """The vessels to choose from: listed ones, the generic series, or one that is given.

    ``fill_pressure`` is absolute, Pa, for a given vessel whose filling is stated;
    ``rated_pressure`` gauge, of the series.
    """

    kind: Literal["stock", "series", "given"]
    vessels: tuple[Vessel, ...] = ()
    rated_pressure: float | None = None
    fill_pressure: float | None = None


def read_choice(reader: Reader, choice: asked.VesselChoice | None) -> Choice:
    """Read the vessels a design may choose from."""
    if isinstance(choice, asked.FromStock):
        return Choice("stock", read_stock(reader, choice.items, "/vessel/items"))
    if isinstance(choice, asked.GivenVessel):
        vessel = read_vessel(reader, choice, "/vessel", choice.id or "given")
        fill = read_fill(reader, choice.fill_pressure, _FILL, "/vessel")
        return Choice("given", (vessel,), fill_pressure=fill)
    if choice is None:
        reader.word("vessel-choice", "/vessel")
    stated = None if choice is None else choice.rated_pressure
    return Choice("series", rated_pressure=reader.optional_gauge(stated, _SERIES_RATING, "/vessel"))


def read_fill(reader: Reader, stated: Pressure | None, field: Field, place: str) -> float | None:
    """Read a fill pressure, Pa absolute, if one is stated."""
    return None if stated is None else reader.gauge(stated, field, place) + reader.atmosphere


def read_stock(reader: Reader, items: Sequence[asked.StockVessel], place: str) -> tuple[Vessel, ...]:
    """Read a stock list; identifiers must differ."""
    found = []
    seen: dict[str, int] = {}
    for k, item in enumerate(items):
        first = seen.setdefault(item.id, k)
        if first != k:
            reader.contradiction(
                f"{place}/{k}/id",
                f"Items {first + 1} and {k + 1} of the stock have the same identifier.",
                "Give every item an identifier of its own.",
            )
        found.append(read_vessel(reader, item, f"{place}/{k}", item.id))
    return tuple(found)


def read_vessel(
    reader: Reader, item: asked.StockVessel | asked.ExpansionVessel, place: str, name: str
) -> Vessel:
    """Read one vessel."""
    nominal = reader.si(item.nominal_volume, _NOMINAL, place)
    rated = reader.optional_gauge(item.rated_pressure, _STOCK_RATING, place)
    acceptance = reader.optional(item.acceptance_volume, _ACCEPTANCE, place)
    delivered = None
    if item.delivered_precharge is not None:
        delivered = _at_sea_level(reader, item.delivered_precharge, place)
    if acceptance is not None and acceptance > nominal * (1 + 1e-9):
        reader.contradiction(
            f"{place}/acceptanceVolume",
            f"The membrane is said to take {1000 * acceptance:.5g} L, more than the nominal {1000 * nominal:.5g} L.",
            "Exchange the two if they were mixed up, or leave the acceptance volume out.",
        )
    if rated is not None and delivered is not None and delivered >= rated:
        reader.contradiction(
            f"{place}/deliveredPrecharge",
            f"A precharge of {delivered / 1e5:.4g} bar reaches the highest permitted {rated / 1e5:.4g} bar.",
            "Check both pressures and their units.",
        )
    if rated is None:
        reader.doubtful("rating-unstated", f"{place}/ratedPressure")
    price = item.price
    adjustable = item.precharge_adjustable
    return Vessel(
        id=name,
        nominal_volume=nominal,
        rated_pressure=rated,
        acceptance_volume=acceptance,
        delivered_precharge=delivered,
        precharge_adjustable=True if adjustable is None else adjustable,
        membrane_limit=reader.optional(item.membrane_limit, _MEMBRANE, place),
        price=None if price is None else price.amount,
        currency="" if price is None else price.currency,
    )


def _at_sea_level(reader: Reader, stated: Pressure, place: str) -> float:
    """Read a precharge as delivered: a gauge reading at sea level, wherever the site is."""
    if stated.unit in GAUGE_UNITS:
        return reader.gauge(stated, _DELIVERED, place)
    return reader.gauge(stated, _DELIVERED, place) + reader.atmosphere - _SEA_LEVEL


def read_cooling(
    reader: Reader, stated: asked.CoolingVessel | None, unstated: Cooling
) -> tuple[Cooling, float]:
    """Read the cooling vessel: how it is decided and, if it is given, its content, m3."""
    if isinstance(stated, asked.CoolingVesselGiven):
        return "given", reader.si(stated.content, _COOLING, "/coolingVessel")
    if stated is None:
        return unstated, 0.0
    return ("none" if isinstance(stated, asked.CoolingVesselNone) else "size"), 0.0
