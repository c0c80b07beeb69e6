"""Water with glycol as a liquid: density, freezing, heat capacity, viscosity, and ways to state a strength.

Its boiling and its vapour are in ``mixture_vapour``. Laws only. The fitted numbers come in as coefficients,
one set per glycol, and are kept in the library with their provenance. Nothing here checks a range or chooses
a fluid; the ranges stand in the papers of each law. Strength is the mass fraction of glycol in the liquid.
Reduced temperature ``x = (T - 363.15)/110`` and asymmetry ``u = 1 - 2w``.
"""

from math import exp

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    Coefficients,
    Density,
    MassFraction,
    SpecificHeat,
    Temperature,
    Viscosity,
    VolumeFraction,
)

MIDDLE = 363.15
"""Temperature in the middle of the fitted range, 90 degC, at which ``x`` is nought."""

HALF_SPAN = 110.0
"""Kelvin that change ``x`` by one."""

_FIT = Cite("glycol-fit", "derived")
_STRENGTH = Range(0.0, 0.63)
_LIQUID = {"temperature": Range(233.15, 473.15), "mass_fraction": _STRENGTH}


def polynomial(coefficients: tuple[float, ...], x: float) -> float:
    """Value of ``c0 + c1 x + c2 x^2 + ...``."""
    value = 0.0
    for coefficient in reversed(coefficients):
        value = value * x + coefficient
    return value


def volume_polynomial(
    mass_fraction: float,
    water_volume: tuple[float, ...],
    glycol_volume: tuple[float, ...],
    excess: tuple[float, ...],
) -> tuple[float, float, float, float, float, float, float]:
    """Specific volume in L/kg at one strength as a single polynomial in ``x``, seven coefficients. Derived.

    At a fixed strength every term of the mixing law is a power of ``x``, so a loop that asks for thousands of
    densities need not evaluate the law of the mixture each time.
    """
    w, u = mass_fraction, 1.0 - 2.0 * mass_fraction
    z = w * (1.0 - w)
    sums = [0.0] * 7
    for power, coefficient in enumerate(water_volume):
        sums[power] += (1.0 - w) * coefficient
    for power, coefficient in enumerate(glycol_volume):
        sums[power] += w * coefficient
    for power, coefficient in enumerate(excess[:4]):
        sums[power] += z * coefficient
    sums[0] += z * u * (excess[4] + u * excess[6])
    sums[1] += z * u * (excess[5] + u * excess[7])
    return sums[0], sums[1], sums[2], sums[3], sums[4], sums[5], sums[6]


@equation(
    "mixture-density",
    law="1/rho = (1-w) v_w(x) + w v_g(x) "
    "+ w(1-w) [c0 + c1 x + c2 x^2 + c3 x^3 + u (c4 + c5 x) + u^2 (c6 + c7 x)]",
    symbols={
        "w": "mass fraction of glycol",
        "v_w": "volume of water",
        "v_g": "volume of glycol",
        "u": "1 - 2w",
    },
    source=_FIT,
    note="The published tables of inhibited fluids lie 0.1 to 0.8 % above; a sizing adds its own allowance.",
    valid=_LIQUID,
)
def liquid_density(
    temperature: Temperature,
    mass_fraction: MassFraction,
    water_volume: Coefficients,
    glycol_volume: Coefficients,
    excess: Coefficients,
) -> Density:
    """Density of the liquid mixture; volumes of the fit are in L/kg.

    Pure glycol without inhibitors, near its boiling pressure: compression, below 0.09 % per 10 bar, is
    neglected.
    """
    volume = volume_polynomial(mass_fraction, water_volume, glycol_volume, excess)
    return Density(1000.0 / polynomial(volume, (temperature - MIDDLE) / HALF_SPAN))


@equation(
    "freezing-point",
    law="T = 273.15 + w (f0 + f1 w + f2 w^2 + f3 w^3 + f4 w^4)",
    symbols={"w": "mass fraction of glycol"},
    source=_FIT,
    note="One curve follows Melinder (pure glycol), one ASHRAE (inhibited); the warmer decides.",
    valid={"mass_fraction": Range(0.0, 0.60)},
)
def freezing_point(mass_fraction: MassFraction, curve: Coefficients) -> Temperature:
    """Temperature at which the first ice crystals form; the liquid is slush below and solid far below."""
    return Temperature(273.15 + mass_fraction * polynomial(curve, mass_fraction))


def ice_share(mass_fraction: float, strength_left: float) -> float:
    """Mass fraction of ice once freezing has raised the strength of the liquid left. Lever rule, exact.

    The ice is pure water. Informative; no promise that a pipe will not burst.
    """
    return 1.0 - mass_fraction / strength_left


@equation(
    "mixture-heat-capacity",
    law="c = (1-w) c_w(x) + w (d0 + d1 x) + w(1-w) [d2 + d3 x + d4 x^2 + u (d5 + d6 x)]",
    symbols={"c_w": "heat capacity of water", "w": "mass fraction of glycol", "u": "1 - 2w"},
    source=_FIT,
    note="Fitted to 125 degC; above, only the pure ends hold it.",
    valid=_LIQUID,
)
def heat_capacity(
    temperature: Temperature, mass_fraction: MassFraction, water_heat: Coefficients, mixing: Coefficients
) -> SpecificHeat:
    """Heat capacity of the liquid at constant pressure; the fit is in kJ/(kg K)."""
    x = (temperature - MIDDLE) / HALF_SPAN
    w, u = mass_fraction, 1.0 - 2.0 * mass_fraction
    d = mixing
    excess = d[2] + x * (d[3] + x * d[4]) + u * (d[5] + d[6] * x)
    pure = (1.0 - w) * polynomial(water_heat, x) + w * (d[0] + d[1] * x)
    return SpecificHeat(1000.0 * (pure + w * (1.0 - w) * excess))


@equation(
    "mixture-viscosity",
    law="ln(mu/mPas) = m_w(h) + w (m0 + m1 h + m2 h^2 + m3 h^3) + w^2 (m4 + m5 h + m6 h^2) + w^3 (m7 + m8 h)",
    symbols={"h": "1000 K/T - 2.9", "w": "mass fraction of glycol"},
    source=_FIT,
    valid={"temperature": Range(233.15, 398.15), "mass_fraction": _STRENGTH},
)
def viscosity(
    temperature: Temperature, mass_fraction: MassFraction, water_viscosity: Coefficients, mixing: Coefficients
) -> Viscosity:
    """Dynamic viscosity, for information: 14 % uncertain, and nothing is sized by it."""
    h = 1000.0 / temperature - 2.9
    w, m = mass_fraction, mixing
    mixed = polynomial(m[:4], h) + w * (polynomial(m[4:7], h) + w * polynomial(m[7:], h))
    return Viscosity(0.001 * exp(polynomial(water_viscosity, h) + w * mixed))


@equation(
    "mass-fraction-of-volumes",
    law="w = phi rho_g / (phi rho_g + (1 - phi) rho_w)",
    symbols={"phi": "volume fraction of glycol", "rho_g, rho_w": "density of glycol and water at 20 degC"},
    source=DERIVED,
    note="Volumes measured apart, before mixing, at 20 degC.",
)
def mass_fraction_of(
    volume_fraction: VolumeFraction, glycol_density: Density, water_density: Density
) -> MassFraction:
    """Strength by mass of a strength by volume; the volumes are unmixed, so shrinking does not enter."""
    glycol = volume_fraction * glycol_density
    return MassFraction(glycol / (glycol + (1.0 - volume_fraction) * water_density))


@equation(
    "volume-fraction-of-masses",
    law="phi = (w/rho_g) / (w/rho_g + (1 - w)/rho_w)",
    symbols={"w": "mass fraction of glycol", "rho_g, rho_w": "density of glycol and water at 20 degC"},
    source=DERIVED,
    note="The inverse of the conversion above.",
)
def volume_fraction_of(
    mass_fraction: MassFraction, glycol_density: Density, water_density: Density
) -> VolumeFraction:
    """Strength by volume, unmixed at 20 degC, of a strength by mass."""
    glycol = mass_fraction / glycol_density
    return VolumeFraction(glycol / (glycol + (1.0 - mass_fraction) / water_density))
