"""Pressures and temperatures that the balance is held against: limits, fill pressures, mixing, what a root leaves over.

Boyle's law is in ``vessel``, columns are in ``statics``, the precharge for the top of the loop in ``precharge``.
"""

from loopslack.kernel.citations import COMMON_PRACTICE, DERIVED, OWN_ASSUMPTION
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    AbsolutePressure,
    GaugePressure,
    NominalVolume,
    PressureDifference,
    Temperature,
    TemperatureDifference,
    Volume,
)

_FROM_ZERO = Range(0.0)


@equation(
    "larger-allowance",
    law="a = max(a_1, a_2)",
    symbols={"a_1": "of rule", "a_2": "set tolerance"},
    source=DERIVED,
    note="No verdict rests on less than the set tolerance of a sound valve.",
    valid={"of_rule": _FROM_ZERO, "set_tolerance": _FROM_ZERO},
)
def larger_allowance(of_rule: PressureDifference, set_tolerance: PressureDifference) -> PressureDifference:
    """Distance below the set pressure, Pa, that a verdict keeps."""
    return max(of_rule, set_tolerance)


@equation(
    "optimised-precharge",
    law="p_0 = max(p_r * (1 - V_wr / V_N), p_atm)",
    symbols={"p_r": "precharge by rule", "V_wr": "reserve", "V_N": "nominal volume", "p_atm": "atmosphere"},
    source=DERIVED,
    note="With the reserve in it, the vessel still holds the pressure at the top. No gauge shows less than nought.",
    valid={"precharge_by_rule": _FROM_ZERO, "reserve": _FROM_ZERO, "atmosphere": _FROM_ZERO},
)
def optimised_precharge(
    precharge_by_rule: AbsolutePressure,
    reserve: Volume,
    nominal_volume: NominalVolume,
    atmosphere: AbsolutePressure,
) -> AbsolutePressure:
    """Lowest precharge, Pa absolute, that holds the top pressure in the cold with just the reserve in the vessel.

    Never below the atmosphere's, since nobody sets a vessel to less.
    """
    return AbsolutePressure(max(precharge_by_rule * (1 - reserve / nominal_volume), atmosphere))


@equation(
    "pressure-for-top",
    law="p = p_atm + p_top + dp",
    symbols={"p_atm": "atmosphere", "p_top": "least top pressure", "dp": "column"},
    source=DERIVED,
    note="Column pressure between the vessel and the highest point.",
    valid={"atmosphere": _FROM_ZERO},
)
def pressure_for_top(
    atmosphere: AbsolutePressure, least_top_pressure: GaugePressure, column: PressureDifference
) -> AbsolutePressure:
    """Vessel pressure, Pa absolute, that keeps the least pressure at the highest point of the cold loop."""
    return AbsolutePressure(atmosphere + least_top_pressure + column)


@equation(
    "pressure-against-boiling",
    law="p = p_b + dp_m + dp_c + dp_h",
    symbols={"p_b": "bubble pressure", "dp_m": "margin", "dp_c": "column", "dp_h": "pump head"},
    source=OWN_ASSUMPTION,
    note="The head counts only where the vessel is connected on the discharge side of the pump.",
    valid={"bubble_pressure": _FROM_ZERO},
)
def pressure_against_boiling(
    bubble_pressure: AbsolutePressure,
    margin: PressureDifference,
    column: PressureDifference,
    pump_head: PressureDifference,
) -> AbsolutePressure:
    """Vessel pressure, Pa absolute, that keeps the highest point from boiling when the pump cuts off."""
    return AbsolutePressure(bubble_pressure + margin + column + pump_head)


@equation(
    "fill-above-precharge",
    law="p = p_0 * T_f / T_0 + dp",
    symbols={
        "p_0": "precharge",
        "T_f": "fill temperature",
        "T_0": "precharge temperature",
        "dp": "distance",
    },
    source=COMMON_PRACTICE,
    note="The precharge carried to the fill temperature, and a distance that puts liquid into the vessel.",
    valid={"precharge": _FROM_ZERO},
)
def fill_above_precharge(
    precharge: AbsolutePressure,
    fill_temperature: Temperature,
    precharge_temperature: Temperature,
    distance: PressureDifference,
) -> AbsolutePressure:
    """Least fill pressure, Pa absolute, that keeps its distance from the precharge."""
    return AbsolutePressure(precharge * fill_temperature / precharge_temperature + distance)


@equation(
    "recommended-fill",
    law="p = max(p_l + dp, p_b)",
    symbols={"p_l": "lower bound", "dp": "distance", "p_b": "least"},
    source=OWN_ASSUMPTION,
    note="A step above the lower bound, and no closer to the precharge than the trade fills.",
    valid={"lower_bound": _FROM_ZERO, "least": _FROM_ZERO},
)
def recommended_fill(
    lower_bound: AbsolutePressure, distance: PressureDifference, least: AbsolutePressure
) -> AbsolutePressure:
    """Recommended fill pressure, Pa absolute."""
    return AbsolutePressure(max(lower_bound + distance, least))


@equation(
    "pressure-residual",
    law="r = p_1 - p_2",
    symbols={"p_1": "first", "p_2": "second"},
    source=DERIVED,
    note="Nought where the two agree.",
)
def pressure_residual(first: AbsolutePressure, second: AbsolutePressure) -> PressureDifference:
    """How far two pressures differ, Pa: the width of a window, or what a root leaves over."""
    return PressureDifference(first - second)


@equation(
    "window-slack",
    law="r = p_1 - p_2 - w",
    symbols={"p_1": "upper", "p_2": "lower", "w": "demanded"},
    source=DERIVED,
    note="Nought at the smallest vessel whose window is just as wide as demanded.",
)
def window_slack(
    upper: AbsolutePressure, lower: AbsolutePressure, demanded: PressureDifference
) -> PressureDifference:
    """How much wider, Pa, a window is than demanded."""
    return PressureDifference(upper - lower - demanded)


@equation(
    "temperature-residual",
    law="r = T_1 - T_2",
    symbols={"T_1": "first", "T_2": "second"},
    source=DERIVED,
    note="Nought where the two agree.",
)
def temperature_residual(first: Temperature, second: Temperature) -> TemperatureDifference:
    """How far two temperatures differ, K: a margin, or what a root leaves over."""
    return TemperatureDifference(first - second)


@equation(
    "volume-residual",
    law="r = V_1 - V_2",
    symbols={"V_1": "first", "V_2": "second"},
    source=DERIVED,
    note="Nought where the two agree.",
)
def volume_residual(first: Volume, second: Volume) -> Volume:
    """How far two volumes differ, m3: liquid that finds no room, or what a root leaves over."""
    return Volume(first - second)


@equation(
    "mixed-vessel-temperature",
    law=(
        "T = ((max(V_f, 0) + min(V_l - max(V_f, 0), V_k)) * T_v "
        "+ min(max(V_l - max(V_f, 0) - V_k, 0), V_r) * T_r "
        "+ max(V_l - max(V_f, 0) - V_k - V_r, 0) * T_h) / V_l if V_l > max(V_f, 0) else T_v"
    ),
    symbols={
        "V_f": "filled",
        "V_l": "held",
        "V_k": "vessel side",
        "V_r": "return pipes",
        "T_v": "room temperature",
        "T_r": "return temperature",
        "T_h": "hot temperature",
    },
    source=DERIVED,
    note="By volume and without losses, in the order of arrival: vessel line and cooling vessel, return, the rest hot.",
    valid={"vessel_side": _FROM_ZERO, "return_pipes": _FROM_ZERO},
)
def mixed_vessel_temperature(
    filled: Volume,
    held: Volume,
    vessel_side: Volume,
    return_pipes: Volume,
    room_temperature: Temperature,
    return_temperature: Temperature,
    hot_temperature: Temperature,
) -> Temperature:
    """Temperature, K, of the liquid in the vessel, of which a part was there when the loop was filled.

    Errs on the hot side, which is safe for the membrane. A loop that was short of liquid (``filled`` below 0) had
    none in the vessel.
    """
    filled = Volume(max(filled, 0))
    if held <= filled:
        return room_temperature
    arrived = held - filled
    cool = min(arrived, vessel_side)
    back = min(max(arrived - vessel_side, 0), return_pipes)
    hot = max(arrived - vessel_side - return_pipes, 0)
    mixed = (filled + cool) * room_temperature + back * return_temperature + hot * hot_temperature
    return Temperature(mixed / held)


@equation(
    "last-arriving-temperature",
    law="T = T_v if V_l - max(V_f, 0) <= V_k else T_r if V_l - max(V_f, 0) <= V_k + V_r else T_h",
    symbols={
        "V_f": "filled",
        "V_l": "held",
        "V_k": "vessel side",
        "V_r": "return pipes",
        "T_v": "room temperature",
        "T_r": "return temperature",
        "T_h": "hot temperature",
    },
    source=DERIVED,
    note="In the order of arrival: vessel line and cooling vessel, return, the rest hot.",
    valid={"vessel_side": _FROM_ZERO, "return_pipes": _FROM_ZERO},
)
def last_arriving_temperature(
    filled: Volume,
    held: Volume,
    vessel_side: Volume,
    return_pipes: Volume,
    room_temperature: Temperature,
    return_temperature: Temperature,
    hot_temperature: Temperature,
) -> Temperature:
    """Temperature, K, of the liquid that came into the vessel last."""
    arrived = held - max(filled, 0)
    if arrived <= vessel_side:
        return room_temperature
    return return_temperature if arrived <= vessel_side + return_pipes else hot_temperature
