"""Steam in the loop, term by term: what the collectors send out, how far it reaches, which pressure it makes.

At a steam temperature that is known; finding that temperature is the calculation's. Heat of a collector is in
``collector``, of a pipe in ``heat_loss``, liquid masses are in ``balance``.
"""

from loopslack.kernel.citations import DERIVED, OWN_ASSUMPTION, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    AbsolutePressure,
    Area,
    Density,
    Irradiance,
    Length,
    LinearHeatLoss,
    Power,
    Ratio,
    Temperature,
    TemperatureDifference,
    Volume,
)
from loopslack.physics.statics import GRAVITY
from loopslack.physics.water import GAS_CONSTANT, MOLAR_MASS

_FROM_ZERO = Range(0.0)


@equation(
    "area-of-equal",
    law="A = n * A_1",
    symbols={"n": "pieces", "A_1": "area"},
    source=DERIVED,
    note="Equal collectors.",
    valid={"pieces": _FROM_ZERO, "area": _FROM_ZERO},
)
def area_of_equal(pieces: Ratio, area: Area) -> Area:
    """Area, m2, of so many equal collectors."""
    return Area(pieces * area)


@equation(
    "higher-temperature",
    law="T = max(T_1, T_2)",
    symbols={"T_1": "first", "T_2": "second"},
    source=DERIVED,
    note="The higher of two temperatures decides.",
    valid={"first": _FROM_ZERO, "second": _FROM_ZERO},
)
def higher_temperature(first: Temperature, second: Temperature) -> Temperature:
    """The higher of two temperatures, K: of a stagnation computed and measured, or of two freezing curves."""
    return max(first, second)


@equation(
    "mean-temperature",
    law="T = (T_1 + T_2) / 2",
    symbols={"T_1": "first", "T_2": "second"},
    source=DERIVED,
    note="Half way between the two.",
    valid={"first": _FROM_ZERO, "second": _FROM_ZERO},
)
def mean_temperature(first: Temperature, second: Temperature) -> Temperature:
    """Mean of two temperatures, K."""
    return Temperature((first + second) / 2)


@equation(
    "doubted-stagnation-temperature",
    law="T = T_stg + dT",
    symbols={"T_stg": "stagnation", "dT": "doubt"},
    source=OWN_ASSUMPTION,
    note="Coefficients are carried beyond where they were measured; the doubt is how far they may be off.",
    valid={"stagnation": _FROM_ZERO},
)
def doubted_stagnation_temperature(stagnation: Temperature, doubt: TemperatureDifference) -> Temperature:
    """Stagnation temperature, K, of a collector that gets hotter than computed."""
    return Temperature(stagnation + doubt)


@equation(
    "steam-power-per-area",
    law="q = min(q_c, q_b)",
    symbols={"q_c": "of class", "q_b": "bound"},
    source=Cite("scheuren-2008", "from-memory"),
    note="The emptying class says what a half dry field sends out, the efficiency curve what it can at most.",
    valid={"of_class": _FROM_ZERO},
)
def steam_power_per_area(of_class: Irradiance, bound: Irradiance) -> Irradiance:
    """Steam power per area of aperture, W/m2."""
    return min(of_class, bound)


@equation(
    "doubted-steam-power",
    law="q = f * q_m",
    symbols={"f": "factor", "q_m": "measured"},
    source=OWN_ASSUMPTION,
    note="A measurement on one day may have missed a worse one.",
    valid={"factor": Range(1.0), "measured": _FROM_ZERO},
)
def doubted_steam_power(factor: Ratio, measured: Irradiance) -> Irradiance:
    """Steam power per area, W/m2, of a field whose measured figure is doubted."""
    return Irradiance(factor * measured)


@equation(
    "power-sum",
    law="Q = Q_1 + Q_2",
    symbols={"Q_1": "first", "Q_2": "second"},
    source=DERIVED,
    note="Powers add up.",
)
def power_sum(first: Power, second: Power) -> Power:
    """Power, W, of two parts."""
    return Power(first + second)


@equation(
    "power-left",
    law="dQ = Q - Q_l",
    symbols={"Q": "steam power", "Q_l": "lost"},
    source=DERIVED,
    note="Nought where the front stands within the pipes; what is left at their ends reaches the station.",
)
def power_left(steam_power: Power, lost: Power) -> Power:
    """Steam power, W, that the pipes filled with steam do not lose."""
    return Power(steam_power - lost)


@equation(
    "unspent-power",
    law="dQ = max(Q - Q_c, 0)",
    symbols={"Q": "arriving", "Q_c": "taken"},
    source=DERIVED,
    note="What reaches the station beyond what is said to be taken there.",
    valid={"taken": _FROM_ZERO},
)
def unspent_power(arriving: Power, taken: Power) -> Power:
    """Steam power, W, that nothing condenses."""
    return Power(max(arriving - taken, 0))


@equation(
    "share-of-length",
    law="L = s * L_b",
    symbols={"s": "share", "L_b": "length"},
    source=DERIVED,
    note="Runs that fall evenly between the same two heights fill to equal shares of their lengths.",
    valid={"share": Range(0.0, 1.0), "length": _FROM_ZERO},
)
def share_of_length(share: Ratio, length: Length) -> Length:
    """Length, m, of a run that steam fills."""
    return Length(share * length)


@equation(
    "filled-length",
    law="l = min(max(L_b - d, 0), L)",
    symbols={"L_b": "reach", "d": "distance", "L": "length"},
    source=DERIVED,
    note="The reach of the run less what lies before the stretch.",
    valid={"reach": _FROM_ZERO, "distance": _FROM_ZERO, "length": _FROM_ZERO},
)
def filled_length(reach: Length, distance: Length, length: Length) -> Length:
    """Length, m, filled with steam of a stretch that begins at a distance from the collectors."""
    return Length(min(max(reach - distance, 0), length))


@equation(
    "stretch-loss",
    law="Q = q * l",
    symbols={"q": "loss", "l": "length"},
    source=DERIVED,
    note="One temperature along the stretch.",
    valid={"length": _FROM_ZERO},
)
def stretch_loss(loss: LinearHeatLoss, length: Length) -> Power:
    """Power, W, that a length of pipe loses."""
    return Power(loss * length)


@equation(
    "front-height",
    law="z = z_a + s * (z_b - z_a)",
    symbols={"z_a": "start height", "s": "share", "z_b": "end height"},
    source=DERIVED,
    note="Runs that fall evenly.",
    valid={"share": Range(0.0, 1.0)},
)
def front_height(start_height: Length, share: Ratio, end_height: Length) -> Length:
    """Height, m, of a steam front that stands a share of the way down runs that fall evenly."""
    return Length(start_height + share * (end_height - start_height))


@equation(
    "pressure-below-steam",
    law="p_v = p + rho * 9.80665 * z",
    symbols={"p": "steam pressure", "rho": "density", "z": "front height"},
    source=DERIVED,
    note="Column of hot liquid between the steam front and the vessel connection.",
    valid={"steam_pressure": _FROM_ZERO, "density": _FROM_ZERO},
)
def pressure_below_steam(
    steam_pressure: AbsolutePressure, density: Density, front_height: Length
) -> AbsolutePressure:
    """Pressure, Pa absolute, that steam makes at the vessel through the liquid column below its front."""
    return AbsolutePressure(steam_pressure + density * GRAVITY * front_height)


@equation(
    "share-of-content",
    law="V = s * V_c",
    symbols={"s": "share", "V_c": "content"},
    source=DERIVED,
    note="Definition of the share.",
    valid={"share": Range(0.0, 1.0), "content": _FROM_ZERO},
)
def share_of_content(share: Ratio, content: Volume) -> Volume:
    """Content, m3, of a group that has evaporated while its steam holds the pressure."""
    return Volume(share * content)


@equation(
    "steam-density-at-pressure",
    law="rho = p * 0.018015268 / ((1 + (0.018015268 / (rho_s * 8.314462618 * T) - 1 / p_s) * p) * 8.314462618 * T)",
    symbols={"p": "pressure", "T": "temperature", "p_s": "saturation pressure", "rho_s": "saturated density"},
    source=DERIVED,
    note="Steam beside its saturation line, with the virial coefficient that holds on it.",
    valid={"pressure": _FROM_ZERO, "temperature": _FROM_ZERO},
)
def steam_density_at_pressure(
    pressure: AbsolutePressure,
    temperature: Temperature,
    saturation_pressure: AbsolutePressure,
    saturated_density: Density,
) -> Density:
    """Density of steam, kg/m3, over a liquid that boils at another pressure than water."""
    molar = GAS_CONSTANT * temperature
    virial = MOLAR_MASS / (saturated_density * molar) - 1 / saturation_pressure
    return Density(pressure * MOLAR_MASS / ((1 + virial * pressure) * molar))
