"""Reads temperatures of the states, criteria and precharge."""

from loopslack.calc.fluids.base import Fluid
from loopslack.calc.model import Criteria, Precharge, Temperatures
from loopslack.contract.questions import criteria as criteria_asked
from loopslack.contract.questions import vessels as vessels_asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.plant import LoopTemperatures
from loopslack.contract.reading.reader import Reader

_FILL = field_of(LoopTemperatures, "fill")
_INDOOR = field_of(LoopTemperatures, "indoor_cold")
_ROOM = field_of(LoopTemperatures, "vessel_room")
_FLOW = field_of(LoopTemperatures, "flow_pipe")
_RETURN = field_of(LoopTemperatures, "return_pipe")
_CUT_OFF = field_of(LoopTemperatures, "cut_off")
_HOT = field_of(LoopTemperatures, "hot_liquid")

_ASKED = criteria_asked.Criteria
_RESERVE = field_of(_ASKED, "reserve")
_TOP = field_of(_ASKED, "top_pressure")
_WIDTH = field_of(_ASKED, "window_width")
_ABOVE = field_of(_ASKED, "fill_above_precharge")
_EDGE = field_of(_ASKED, "window_edge_distance")
_BOILING = field_of(_ASKED, "boiling_margin")
_MEMBRANE = field_of(_ASKED, "membrane_limit")
_FREEZE = field_of(_ASKED, "freeze_margin")
_ALLOWANCE = field_of(_ASKED, "fluid_allowance")
_DEGRADATION = field_of(_ASKED, "degradation_limit")
_DOUBT = field_of(_ASKED, "stagnation_doubt")

_PRECHARGE = field_of(vessels_asked.PrechargeStated, "pressure")
_PRECHARGE_TEMPERATURE = field_of(vessels_asked.PrechargeStated, "temperature")

_NO_TEMPERATURES, _NO_CRITERIA = LoopTemperatures(), criteria_asked.Criteria()


def read_temperatures(
    reader: Reader,
    stated: LoopTemperatures | None,
    *,
    site_minimum: float,
    vessel_outdoor: bool,
    fluid: Fluid,
) -> Temperatures:
    """Read the temperatures of the states and refuse what cannot be true together."""
    asked, place = stated or _NO_TEMPERATURES, "/temperatures"
    indoor = reader.or_default(asked.indoor_cold, _INDOOR, place, "indoor-cold")
    found = Temperatures(
        fill=reader.or_default(asked.fill, _FILL, place, "fill-temperature"),
        site_minimum=site_minimum,
        indoor_cold=indoor,
        vessel_room=reader.or_default(asked.vessel_room, _ROOM, place, "vessel-room"),
        vessel_cold=site_minimum if vessel_outdoor else indoor,
        flow=reader.or_default(asked.flow_pipe, _FLOW, place, "design-flow-temperature"),
        back=reader.or_default(asked.return_pipe, _RETURN, place, "design-return-temperature"),
        cut_off=reader.or_default(asked.cut_off, _CUT_OFF, place, "pump-cut-off"),
        hot_liquid=reader.or_default(asked.hot_liquid, _HOT, place, "stagnation-liquid"),
    )
    if found.fill <= fluid.freezing_point:
        reader.contradiction(
            f"{place}/fill",
            f"At {found.fill - 273.15:.4g} degC the fluid is partly ice; it freezes at "
            f"{fluid.freezing_point - 273.15:.4g} degC. Such a loop cannot be filled.",
            "Fill on a warmer day or with a stronger mixture.",
        )
    if found.back > found.flow:
        reader.contradiction(
            f"{place}/returnPipe",
            f"The return ({found.back - 273.15:.4g} degC) is hotter than the flow ({found.flow - 273.15:.4g} degC).",
            "Exchange the two, or state both.",
        )
    if found.flow > found.cut_off:
        reader.contradiction(
            f"{place}/cutOff",
            f"The pump stops at {found.cut_off - 273.15:.4g} degC, below the flow of "
            f"{found.flow - 273.15:.4g} degC.",
            "Raise the cut-off or lower the flow temperature.",
        )
    return found


def read_criteria(
    reader: Reader, stated: criteria_asked.Criteria | None, net_positive_suction: float | None
) -> Criteria:
    """Read what must hold."""
    asked, place = stated or _NO_CRITERIA, "/criteria"
    if asked.reserve is None:
        reader.word("reserve", f"{place}/reserve")
    return Criteria(
        reserve=reader.optional(asked.reserve, _RESERVE, place),
        top_pressure=reader.or_default_gauge(asked.top_pressure, _TOP, place, "minimum-top-pressure"),
        window_width=reader.or_default(asked.window_width, _WIDTH, place, "fill-window-width"),
        fill_above_precharge=reader.or_default(
            asked.fill_above_precharge, _ABOVE, place, "fill-above-precharge"
        ),
        window_step=reader.or_default(asked.window_edge_distance, _EDGE, place, "fill-above-lower-bound"),
        boiling_margin=reader.or_default(asked.boiling_margin, _BOILING, place, "boiling-margin"),
        membrane_limit=reader.or_default(asked.membrane_limit, _MEMBRANE, place, "membrane-limit"),
        freeze_margin=reader.or_default(asked.freeze_margin, _FREEZE, place, "freezing-margin"),
        fluid_allowance=reader.or_default(asked.fluid_allowance, _ALLOWANCE, place, "fluid-data-allowance"),
        degradation_limit=reader.or_default(
            asked.degradation_limit, _DEGRADATION, place, "degradation-temperature"
        ),
        stagnation_doubt=reader.or_default(asked.stagnation_doubt, _DOUBT, place, "doubt-stagnation-shift"),
        net_positive_suction=net_positive_suction,
    )


def read_precharge(reader: Reader, stated: vessels_asked.Precharge | None) -> Precharge:
    """Read how the gas side is charged; a stated pressure is a gauge reading on site."""
    if isinstance(stated, vessels_asked.PrechargeStated):
        pressure = reader.gauge(stated.pressure, _PRECHARGE, "/precharge") + reader.atmosphere
        temperature = reader.optional(stated.temperature, _PRECHARGE_TEMPERATURE, "/precharge")
        if temperature is None:
            reader.word("precharge-temperature", "/precharge/temperature")
        return Precharge(kind="stated", pressure=pressure, temperature=temperature)
    if isinstance(stated, vessels_asked.PrechargeOptimised):
        return Precharge(kind="optimised")
    return Precharge(kind="rule")
