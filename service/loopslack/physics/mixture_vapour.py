"""Water with glycol as it boils: activities, bubble pressure, and the vapour above the liquid.

Laws only; coefficients come in from outside, as in ``mixture``, and ranges stand in the papers. Properties of
the liquid that do not concern boiling must not come here.
"""

from math import exp

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    AbsolutePressure,
    Coefficients,
    Density,
    MassFraction,
    MolarMass,
    SpecificEnthalpy,
    Temperature,
)
from loopslack.physics import water

_FIT = Cite("glycol-fit", "derived")
_SPAN = Range(278.15, 485.15)
_BOILING = {"temperature": _SPAN, "mass_fraction": Range(0.0, 0.63)}


def mole_fraction(mass_fraction: float, molar_mass: float) -> float:
    """Glycol molecules among all molecules of the liquid. Exact."""
    glycol = mass_fraction / molar_mass
    return glycol / (glycol + (1.0 - mass_fraction) / water.MOLAR_MASS)


def activities(mass_fraction: float, molar_mass: float, margules: tuple[float, ...]) -> tuple[float, float]:
    """Activity of the water and of the glycol in the liquid: mole fraction times activity coefficient.

    Two-constant Margules, taken as independent of temperature: over 5 to 212 degC that is within the scatter
    of the boiling points it was fitted to. Source: textbook form, from memory; constants fitted.
    """
    glycol = mole_fraction(mass_fraction, molar_mass)
    pure = 1.0 - glycol
    a, b = margules
    water_activity = pure * exp(glycol * glycol * (a + b * (4.0 * pure - 1.0)))
    return water_activity, glycol * exp(pure * pure * (a + b * (1.0 - 4.0 * glycol)))


@equation(
    "glycol-vapour-pressure",
    law="ln(p/Pa) = a - b/(T + c)",
    symbols={"p": "vapour pressure of the pure glycol", "T": "temperature in K"},
    source=_FIT,
    note="Antoine's form.",
    valid={"temperature": _SPAN},
)
def glycol_pressure(temperature: Temperature, antoine: Coefficients) -> AbsolutePressure:
    """Vapour pressure of the pure glycol, some hundredth of that of water."""
    a, b, c = antoine
    return AbsolutePressure(exp(a - b / (temperature + c)))


def partial_pressures(
    temperature: Temperature, activity: tuple[float, float], antoine: tuple[float, float, float]
) -> tuple[float, float, float]:
    """Bubble pressure, part of the glycol in it, and ``B/(R T)`` of the steam; Pa, Pa, 1/Pa.

    Modified Raoult's law: ``p = a1 p_sat exp[B (p_sat - p)/(R T)] + a2 p_g``. The pressure stands on both
    sides. The exponential expanded to first order gives a start within 0.05 %, after which one Newton step
    leaves less than 1e-8. This is the inner loop of every stagnation balance; keep it short.
    """
    return _parts(temperature, water.saturation_pressure(temperature), activity, antoine)


def _parts(
    temperature: Temperature,
    steam: AbsolutePressure,
    activity: tuple[float, float],
    antoine: tuple[float, float, float],
) -> tuple[float, float, float]:
    """See ``partial_pressures``, where the saturation pressure of water is known."""
    k = water.virial_per_pressure(temperature, steam, water.vapour_density(temperature))
    ideal = activity[0] * steam
    glycol = activity[1] * exp(antoine[0] - antoine[1] / (temperature + antoine[2]))
    expanded = ideal * (1.0 + k * steam) + glycol
    pressure = expanded / (1.0 + k * ideal)
    corrected = ideal * exp(k * (steam - pressure))
    pressure -= (pressure - corrected - glycol) / (1.0 + k * corrected)
    return pressure, glycol, k


def saturated(
    temperature: Temperature,
    activity: tuple[float, float],
    antoine: tuple[float, float, float],
    molar_mass: float,
) -> tuple[float, float]:
    """Bubble pressure in Pa and density of the vapour in kg/m3, for a liquid of known activities."""
    pressure, glycol, k = partial_pressures(temperature, activity, antoine)
    molar = water.MOLAR_MASS + glycol / pressure * (molar_mass - water.MOLAR_MASS)
    return pressure, pressure * molar / ((1.0 + k * pressure) * water.GAS_CONSTANT * temperature)


@equation(
    "mixture-bubble-pressure",
    law="p = x1 g1 p_sat exp[B (p_sat - p)/(R T)] + x2 g2 p_g;  "
    "ln g1 = x2^2 [A + B' (4 x1 - 1)],  ln g2 = x1^2 [A + B' (1 - 4 x2)]",
    symbols={
        "x1, x2": "mole fraction of water and glycol",
        "g1, g2": "activity coefficients",
        "p_sat, p_g": "vapour pressure of water and glycol",
        "B": "effective second virial coefficient of steam",
    },
    source=_FIT,
    note="Modified Raoult's law with Margules activities; the vapour corrected as if it were all steam.",
    valid=_BOILING,
)
def bubble_pressure(
    temperature: Temperature,
    mass_fraction: MassFraction,
    molar_mass: MolarMass,
    margules: Coefficients,
    antoine: Coefficients,
) -> AbsolutePressure:
    """Pressure below which the liquid starts to boil.

    Inhibitors, a few per cent of the glycol, are neglected: they raise the boiling point by some tenths of a
    kelvin, so that the real fluid boils a little later than computed. Dissolved air is neglected too.
    """
    activity = activities(mass_fraction, molar_mass, margules)
    a, b, c = antoine
    return AbsolutePressure(partial_pressures(temperature, activity, (a, b, c))[0])


@equation(
    "mixture-vapour-density",
    law="rho = p M / (Z R T),  M = (1-y) M_w + y M_g,  Z = 1 + B p/(R T)",
    symbols={
        "y": "mole fraction of glycol in the vapour",
        "Z": "compressibility",
        "M": "molar mass of the vapour",
    },
    source=DERIVED,
    valid=_BOILING,
)
def vapour_density(
    temperature: Temperature,
    mass_fraction: MassFraction,
    molar_mass: MolarMass,
    margules: Coefficients,
    antoine: Coefficients,
) -> Density:
    """Density of the vapour over the liquid: 4 to 8 % of its mass may be glycol, so it is no pure steam."""
    a, b, c = antoine
    activity = activities(mass_fraction, molar_mass, margules)
    return Density(saturated(temperature, activity, (a, b, c), molar_mass)[1])


def mass_fraction_of_vapour(glycol_share: float, molar_mass: float) -> float:
    """Mass fraction of glycol in a vapour from its mole fraction. Exact."""
    glycol = glycol_share * molar_mass
    return glycol / (glycol + (1.0 - glycol_share) * water.MOLAR_MASS)


@equation(
    "glycol-latent-heat",
    law="h = R b [T/(T + c)]^2 / M_g",
    symbols={"b, c": "Antoine constants of the glycol", "M_g": "molar mass of the glycol"},
    source=Cite("clapeyron", "from-memory"),
    note="Clausius-Clapeyron on Antoine's form, ideal vapour, volume of the liquid neglected.",
    valid={"temperature": _SPAN},
)
def glycol_latent_heat(
    temperature: Temperature, molar_mass: MolarMass, antoine: Coefficients
) -> SpecificEnthalpy:
    """Latent heat of the pure glycol."""
    slope = antoine[1] * (temperature / (temperature + antoine[2])) ** 2
    return SpecificEnthalpy(water.GAS_CONSTANT * slope / molar_mass)


def bubble_slope(
    temperature: Temperature, activity: tuple[float, float], antoine: tuple[float, float, float]
) -> tuple[float, float]:
    """Bubble pressure in Pa and its rise with temperature in Pa/K. Derived from the law above."""
    steam = water.saturation_pressure(temperature)
    pressure, glycol, k = _parts(temperature, steam, activity, antoine)
    water_part = pressure - glycol
    rise = water.saturation_rise(temperature, steam) / steam
    # k = M/(rho R T) - 1/p_sat, so its first term is k + 1/p_sat.
    k_rise = rise / steam - (k + 1.0 / steam) * (water.vapour_growth(temperature) + 1.0 / temperature)
    relative = rise * (1.0 + k * steam) + k_rise * (steam - pressure)
    hot = temperature + antoine[2]
    of_glycol = glycol * antoine[1] / (hot * hot)
    return pressure, (water_part * relative + of_glycol) / (1.0 + k * water_part)
