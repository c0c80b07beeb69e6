"""Steps of the order list and of the closed forms that stand on the settings card for comparison."""

from loopslack.calc.derivation.charge import Charged, Filled, reserve
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.order_list import ROOM
from loopslack.kernel import kinds
from loopslack.kernel.citations import DERIVED
from loopslack.physics import balance, balance_pressure, expansion, order, statics, vessel

_ORDER = "/result/order"


def write_order(frame: Frame, filled: Filled) -> None:
    """Write what is ordered for a loop and its filled vessel."""
    book, fluid, leaves = frame.book, frame.fluid, frame.leaves
    book.chapter = "order"
    book.report(frame.content, f"{_ORDER}/content")
    book.report(frame.parts.collectors, f"{_ORDER}/dischargeContainer")
    margin = book.step(
        balance_pressure.temperature_residual,
        "site minimum less freezing point",
        first=leaves.temperature("site_minimum"),
        second=fluid.freezing,
    )
    book.report(fluid.freezing, f"{_ORDER}/freezingPoint")
    book.report(margin, f"{_ORDER}/freezingMargin")
    if filled.mass.si < 0:
        return
    book.report(filled.liquid, f"{_ORDER}/vesselContent")
    mass = book.step(
        order.mass_to_order,
        "mass to order",
        in_loop=frame.filled_mass,
        in_vessel=filled.mass,
        filling_loss=leaves.default("filling-loss"),
    )
    twenty = book.tabulated(ROOM, kinds.TEMPERATURE, "20 degC", "definition", "order list", DERIVED)
    ready = book.step(balance.mass_volume, "ready mix to order", mass=mass, density=fluid.density(twenty))
    book.report(ready, f"{_ORDER}/readyMix")
    if frame.loop.fluid.kind != "own":
        water = book.step(
            order.water_to_order,
            "water to order",
            mass=mass,
            mass_fraction=fluid.strength,
            water_density=fluid.water_at_20(),
        )
        glycol = book.step(
            order.glycol_to_order, "glycol to order", water=water, volume_fraction=fluid.volume_fraction
        )
        for value, member in (
            (water, "water"),
            (glycol, "glycol"),
            (fluid.strength, "massConcentration"),
            (fluid.volume_fraction, "volumeConcentration"),
        ):
            book.report(value, f"{_ORDER}/{member}")
    minimum = frame.loop.temperatures.site_minimum
    if minimum < frame.loop.fluid.freezing_point and fluid.freezes_slowly:
        book.report(fluid.ice(leaves.temperature("site_minimum")), f"{_ORDER}/iceFraction")


def write_closed_forms(frame: Frame, charged: Charged) -> None:
    """Write EN 12828's closed forms, where the vessel is larger than its reserve."""
    book = frame.book
    book.chapter = "window"
    kept = reserve(frame, charged.nominal)
    if kept.si >= charged.nominal.si:
        return
    growth = book.step(
        expansion.relative_expansion,
        "expansion from filled to hot",
        cold_density=frame.fill_density,
        hot_density=frame.hot_density,
    )
    volume = book.step(
        expansion.expansion_volume, "expansion volume", expansion=growth, content=frame.content
    )
    gas = {"nominal_volume": charged.nominal, "precharge": charged.precharge}
    low = book.step(
        vessel.lowest_fill_pressure_en_12828, "lowest fill pressure by the closed form", **gas, reserve=kept
    )
    high = book.step(
        vessel.highest_fill_pressure_en_12828,
        "highest fill pressure by the closed form",
        **gas,
        final_pressure=frame.site.final,
        expansion=volume,
    )
    for value, member in ((low, "lower"), (high, "upper")):
        gauge = book.step(
            statics.gauge_from_absolute,
            f"{value.name}, gauge",
            pressure=value,
            atmosphere=frame.site.atmosphere,
        )
        book.report(gauge, f"/result/settings/closedForms/{member}")
