"""The mass balance of the closed loop, term by term: contents, masses, and the liquid the vessel takes up.

The calculation works these sums in its own loops; here each stands as a law, so that a derivation can print it and a
reader redo it. What boils is in ``balance_steam``, pressures and margins are in ``balance_pressure``.
"""

from loopslack.kernel.citations import DERIVED, OWN_ASSUMPTION
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Density, Length, LinearConductance, Mass, NominalVolume, Ratio, Volume

_FROM_ZERO = Range(0.0)
_CONSERVED = "Conservation of mass: the loop is filled once, and nothing leaves until the relief valve opens."


@equation(
    "content-of-equal",
    law="V = n * V_1",
    symbols={"n": "pieces", "V_1": "content"},
    source=DERIVED,
    note="Equal pieces hold alike.",
    valid={"pieces": _FROM_ZERO, "content": _FROM_ZERO},
)
def content_of_equal(pieces: Ratio, content: Volume) -> Volume:
    """Content, m3, of so many equal pieces."""
    return Volume(pieces * content)


@equation(
    "nominal-of-equal",
    law="V_N = n * V_1",
    symbols={"n": "pieces", "V_1": "nominal volume"},
    source=DERIVED,
    note="Equal vessels side by side see one pressure and act as one.",
    valid={"pieces": _FROM_ZERO, "nominal_volume": _FROM_ZERO},
)
def nominal_of_equal(pieces: Ratio, nominal_volume: NominalVolume) -> NominalVolume:
    """Nominal volume, m3, of so many equal vessels. Their lines are neglected."""
    return NominalVolume(pieces * nominal_volume)


@equation(
    "content-sum",
    law="V = V_1 + V_2",
    symbols={"V_1": "first", "V_2": "second"},
    source=DERIVED,
    note="Contents add up.",
    valid={"first": _FROM_ZERO, "second": _FROM_ZERO},
)
def content_sum(first: Volume, second: Volume) -> Volume:
    """Content, m3, of two parts."""
    return Volume(first + second)


@equation(
    "content-left",
    law="V = V_1 - V_2",
    symbols={"V_1": "whole", "V_2": "part"},
    source=DERIVED,
    note="What a part does not take is left.",
    valid={"whole": _FROM_ZERO, "part": _FROM_ZERO},
)
def content_left(whole: Volume, part: Volume) -> Volume:
    """Content, m3, left of a whole once a part is taken. Negative where the part is the larger."""
    return Volume(whole - part)


@equation(
    "loop-content",
    law="V_s = V_c + V_p + V_st + V_l + V_k",
    symbols={
        "V_c": "collectors",
        "V_p": "pipes",
        "V_st": "station",
        "V_l": "vessel line",
        "V_k": "cooling vessel",
    },
    source=DERIVED,
    note="The expansion vessel is not part of the content.",
    valid={"collectors": _FROM_ZERO, "pipes": _FROM_ZERO, "station": _FROM_ZERO, "vessel_line": _FROM_ZERO},
)
def loop_content(
    collectors: Volume, pipes: Volume, station: Volume, vessel_line: Volume, cooling_vessel: Volume
) -> Volume:
    """Content, m3, of the loop without its expansion vessel."""
    return Volume(collectors + pipes + station + vessel_line + cooling_vessel)


@equation(
    "all-liquid",
    law="V_l = V_N",
    symbols={"V_N": "nominal volume"},
    source=DERIVED,
    note="A vessel that has no gas left holds its nominal volume.",
    valid={"nominal_volume": _FROM_ZERO},
)
def all_liquid(nominal_volume: NominalVolume) -> Volume:
    """Liquid, m3, in a vessel whose gas has no room left."""
    return Volume(nominal_volume)


@equation(
    "length-sum",
    law="L = L_1 + L_2",
    symbols={"L_1": "first", "L_2": "second"},
    source=DERIVED,
    note="Lengths along a run add up.",
    valid={"first": _FROM_ZERO, "second": _FROM_ZERO},
)
def length_sum(first: Length, second: Length) -> Length:
    """Length, m, of two stretches one after the other."""
    return Length(first + second)


@equation(
    "weathered-conductance",
    law="U = f * U_n",
    symbols={"f": "loss factor", "U_n": "conductance"},
    source=OWN_ASSUMPTION,
    note="Insulation that has suffered loses a multiple of what it lost when new.",
    valid={"loss_factor": Range(1.0), "conductance": _FROM_ZERO},
)
def weathered_conductance(loss_factor: Ratio, conductance: LinearConductance) -> LinearConductance:
    """Heat loss of a pipe per length and kelvin, W/mK, once its insulation has weathered."""
    return LinearConductance(loss_factor * conductance)


@equation(
    "liquid-mass",
    law="m = rho * V",
    symbols={"rho": "density", "V": "content"},
    source=DERIVED,
    note="Definition of density; one temperature over the whole content.",
    valid={"density": _FROM_ZERO},
)
def liquid_mass(density: Density, content: Volume) -> Mass:
    """Mass, kg, of a content at one density."""
    return Mass(density * content)


@equation(
    "mass-volume",
    law="V = m / rho",
    symbols={"m": "mass", "rho": "density"},
    source=DERIVED,
    note="Definition of density.",
    valid={"density": _FROM_ZERO},
)
def mass_volume(mass: Mass, density: Density) -> Volume:
    """Volume, m3, of a mass. ZeroDivisionError for a density of zero."""
    return Volume(mass / density)


@equation(
    "mass-sum",
    law="m = m_1 + m_2",
    symbols={"m_1": "first", "m_2": "second"},
    source=DERIVED,
    note="Masses add up.",
)
def mass_sum(first: Mass, second: Mass) -> Mass:
    """Mass, kg, of two parts."""
    return Mass(first + second)


@equation(
    "loop-mass-cold",
    law="m = rho_o * V_o + rho_i * V_i",
    symbols={
        "rho_o": "outdoor density",
        "V_o": "outdoor content",
        "rho_i": "indoor density",
        "V_i": "indoor content",
    },
    source=DERIVED,
    note="Every part counts as outdoors or indoors; collectors stand outdoors.",
    valid={"outdoor_density": _FROM_ZERO, "indoor_density": _FROM_ZERO},
)
def loop_mass_cold(
    outdoor_density: Density, outdoor_content: Volume, indoor_density: Density, indoor_content: Volume
) -> Mass:
    """Mass, kg, in the loop when it is coldest: two temperatures, nothing between them.

    Insulation, which keeps pipes warmer for hours, is neglected: more liquid leaves the vessel, the safe side.
    """
    return Mass(outdoor_density * outdoor_content + indoor_density * indoor_content)


@equation(
    "loop-mass-running",
    law="m = rho_c * V_c + rho_f * V_f + rho_r * V_r + rho_m * V_st + rho_v * V_l",
    symbols={
        "rho_c": "collector density",
        "V_c": "collectors",
        "rho_f": "flow density",
        "V_f": "flow pipes",
        "rho_r": "return density",
        "V_r": "return pipes",
        "rho_m": "mean density",
        "V_st": "station",
        "rho_v": "room density",
        "V_l": "vessel side",
    },
    source=DERIVED,
    note="Flow and return at their design temperatures, the station at their mean, the vessel side at the room's.",
    valid={"collector_density": _FROM_ZERO, "flow_density": _FROM_ZERO, "return_density": _FROM_ZERO},
)
def loop_mass_running(
    collector_density: Density,
    collectors: Volume,
    flow_density: Density,
    flow_pipes: Volume,
    return_density: Density,
    return_pipes: Volume,
    mean_density: Density,
    station: Volume,
    room_density: Density,
    vessel_side: Volume,
) -> Mass:
    """Mass, kg, in a loop whose pump runs: each part at one temperature of its own."""
    return Mass(
        collector_density * collectors
        + flow_density * flow_pipes
        + return_density * return_pipes
        + mean_density * station
        + room_density * vessel_side
    )


@equation(
    "mass-expelled",
    law="m_x = m_f - m_s",
    symbols={"m_f": "filled", "m_s": "in state"},
    source=DERIVED,
    note=_CONSERVED,
)
def mass_expelled(filled: Mass, in_state: Mass) -> Mass:
    """Mass, kg, that the loop has pushed into the vessel since filling. Negative when the vessel feeds the loop."""
    return Mass(filled - in_state)


@equation(
    "liquid-in-vessel",
    law="V_l = (m_v + m_x) / rho + dV",
    symbols={"m_v": "filled", "m_x": "expelled", "rho": "density", "dV": "allowance"},
    source=DERIVED,
    note=_CONSERVED,
    valid={"density": _FROM_ZERO},
)
def liquid_in_vessel(filled: Mass, expelled: Mass, density: Density, allowance: Volume) -> Volume:
    """Liquid, m3, in the vessel in a state, from the mass it was filled with and what the loop pushed out since.

    The allowance stands for the uncertainty of the fluid's data: added when hot, taken off when cold. Negative where
    the loop wants more than the vessel has: it is then empty and its pressure is not defined.
    """
    return Volume((filled + expelled) / density + allowance)


@equation(
    "mass-to-hold",
    law="m_v = (V_l - dV) * rho - m_x",
    symbols={"V_l": "liquid", "dV": "allowance", "rho": "density", "m_x": "expelled"},
    source=DERIVED,
    note="The liquid in the vessel solved for the mass it was filled with.",
    valid={"density": _FROM_ZERO},
)
def mass_to_hold(liquid: Volume, allowance: Volume, density: Density, expelled: Mass) -> Mass:
    """Mass, kg, a vessel must be filled with to hold so much liquid in a state."""
    return Mass((liquid - allowance) * density - expelled)


@equation(
    "fluid-allowance",
    law="dV = a * V_s",
    symbols={"a": "share", "V_s": "content"},
    source=OWN_ASSUMPTION,
    note="For the uncertainty of the fluid's data; it adds liquid to the vessel in hot states.",
    valid={"share": _FROM_ZERO, "content": _FROM_ZERO},
)
def fluid_allowance(share: Ratio, content: Volume) -> Volume:
    """Liquid, m3, that the vessel is taken to hold beyond the balance when hot."""
    return Volume(share * content)


@equation(
    "fluid-allowance-cold",
    law="dV = -a * V_s",
    symbols={"a": "share", "V_s": "content"},
    source=OWN_ASSUMPTION,
    note="For the uncertainty of the fluid's data; it takes liquid from the vessel in the cold.",
    valid={"share": _FROM_ZERO, "content": _FROM_ZERO},
)
def fluid_allowance_cold(share: Ratio, content: Volume) -> Volume:
    """Liquid, m3, that the vessel is taken to miss in the cold; negative."""
    return Volume(-share * content)
