"""Steps of a vessel as it is charged: its gas, its reserve, its precharge by rule, stated, optimised or delivered."""

from typing import NamedTuple

from loopslack.calc.derivation.frame import Frame
from loopslack.calc.model import Vessel
from loopslack.kernel import kinds
from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, precharge, statics, vessel

_SERIES = Cite("iso-3", "from-memory")


class Filled(NamedTuple):
    """What the vessel holds when filled."""

    mass: Value
    liquid: Value


class Charged(NamedTuple):
    """The gas side of a vessel, or of several alike, in the book."""

    nominal: Value
    precharge: Value
    temperature: Value
    acceptance: Value | None


def charged_article(frame: Frame, article: Vessel, pieces: int) -> Charged:
    """The gas side of ``pieces`` equal vessels of an article."""
    nominal, acceptance = _volumes(frame, article, pieces)
    if article.precharge_adjustable or article.delivered_precharge is None:
        return charged(frame, nominal, acceptance)
    book = frame.book
    book.chapter = "precharge"
    pointer = f"{_pointer(frame, article) or '/vessel'}/deliveredPrecharge"
    delivered = book.leaf(
        article.delivered_precharge,
        kinds.GAUGE_PRESSURE,
        "precharge as delivered, read at sea level",
        pointer,
    )
    pressure = book.step(
        statics.absolute_from_gauge,
        "precharge as delivered",
        gauge=delivered,
        atmosphere=frame.site.sea_level,
    )
    return Charged(nominal, pressure, frame.leaves.default("delivered-precharge-temperature"), acceptance)


def charged(frame: Frame, nominal: Value, acceptance: Value | None = None) -> Charged:
    """The gas side of a nominal volume, charged as the question asks."""
    return Charged(nominal, _precharge(frame, nominal), _temperature(frame), acceptance)


def reserve(frame: Frame, nominal: Value) -> Value:
    """Liquid a vessel must still hold when cold."""
    if frame.loop.criteria.reserve is not None:
        return frame.leaves.criterion("reserve")
    return frame.book.step(vessel.reserve_en_12828, "reserve", nominal_volume=nominal, content=frame.content)


def filled_to(frame: Frame, charged: Charged, pressure: Value, tag: str = "when filled") -> Filled:
    """What the vessel holds at a fill pressure at the fill temperature: nothing below its precharge."""
    book, warm = frame.book, frame.leaves.temperature("fill")
    name = f"liquid in the vessel {tag}"
    if pressure.si * charged.temperature.si <= charged.precharge.si * warm.si:
        liquid = book.tabulated(0.0, kinds.VOLUME, name, "this design", "filled below the precharge", DERIVED)
    else:
        liquid = book.step(
            vessel.liquid_held,
            name,
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            pressure=pressure,
            gas_temperature=warm,
            precharge_temperature=charged.temperature,
        )
    title = f"mass in the vessel {tag}"
    mass = book.step(balance.liquid_mass, title, density=frame.fill_density, content=liquid)
    return Filled(mass, liquid)


def _volumes(frame: Frame, article: Vessel, pieces: int) -> tuple[Value, Value | None]:
    book, pointer = frame.book, _pointer(frame, article)
    book.chapter = "precharge"
    if pointer is None:
        one = book.tabulated(
            article.nominal_volume,
            kinds.NOMINAL_VOLUME,
            "nominal volume",
            "vessels_iso_3",
            article.id,
            _SERIES,
        )
    else:
        place = f"{pointer}/nominalVolume"
        one = book.leaf(article.nominal_volume, kinds.NOMINAL_VOLUME, "nominal volume", place)
    acceptance = None
    if article.acceptance_volume is not None:
        place = f"{pointer or '/vessel'}/acceptanceVolume"
        acceptance = book.leaf(article.acceptance_volume, kinds.VOLUME, "acceptance volume", place)
    if pieces == 1:
        return one, acceptance
    count = book.tabulated(float(pieces), kinds.RATIO, "equal vessels", "this design", "pieces", DERIVED)
    nominal = book.step(balance.nominal_of_equal, "nominal volume of all", pieces=count, nominal_volume=one)
    if acceptance is not None:
        acceptance = book.step(
            balance.content_of_equal, "acceptance volume of all", pieces=count, content=acceptance
        )
    return nominal, acceptance


def _pointer(frame: Frame, article: Vessel) -> str | None:
    return frame.parts.ground.vessels.get(article.id)


def _temperature(frame: Frame) -> Value:
    """Temperature the precharge is set at: as stated, else that of filling."""
    stated = frame.loop.precharge.temperature
    if stated is None:
        return frame.leaves.temperature("fill")
    return frame.book.leaf(stated, kinds.TEMPERATURE, "precharge temperature", "/precharge/temperature")


def start_precharge(frame: Frame) -> Value:
    """The precharge as stated, else by rule."""
    book, choice, leaves = frame.book, frame.loop.precharge, frame.leaves
    air, cold = frame.site.atmosphere, frame.cold
    book.chapter = "precharge"
    if choice.kind == "stated":
        reading = book.leaf(
            choice.pressure - air.si, kinds.GAUGE_PRESSURE, "precharge as stated", "/precharge/pressure"
        )
        return book.step(statics.absolute_from_gauge, "precharge", gauge=reading, atmosphere=air)
    return book.step(
        precharge.precharge_for_top_pressure,
        "precharge by rule",
        atmosphere=air,
        cold_density=cold.column_density,
        top_height=leaves.top,
        least_top_pressure=leaves.criterion("top_pressure"),
        precharge_temperature=_temperature(frame),
        cold_gas_temperature=cold.temperature,
    )


def _precharge(frame: Frame, nominal: Value) -> Value:
    start = start_precharge(frame)
    if frame.loop.precharge.kind != "optimised" or nominal.si <= 0:
        return start
    return frame.book.step(
        balance_pressure.optimised_precharge,
        "precharge, optimised",
        precharge_by_rule=start,
        reserve=reserve(frame, nominal),
        nominal_volume=nominal,
        atmosphere=frame.site.atmosphere,
    )
