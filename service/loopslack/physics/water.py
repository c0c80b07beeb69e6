"""Water and steam on the saturation line: the three closed equations of IAPWS SR1-86(1992), and what follows.

The full IAPWS-95 formulation is not used: on the saturation line these equations reproduce it to 0.02 % and
cost less than a microsecond. Only water belongs here; mixtures with glycol are in ``mixture``. The functions
compute and do not check; the ranges stand in their papers, and the fluids of the calculation refuse what lies
outside.
"""

from math import exp, log, sqrt

from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, Density, SpecificEnthalpy, Temperature

MOLAR_MASS = 0.018015268
"""kg/mol, IAPWS."""

GAS_CONSTANT = 8.314462618
"""J/(mol K), exact since the SI of 2019 (shortened to ten digits)."""

CRITICAL_TEMPERATURE = 647.096
CRITICAL_PRESSURE = 22.064e6
CRITICAL_DENSITY = 322.0

# The equations begin at the triple point, 273.16 K. The hundredth of a kelvin down to the melting point of
# water under pressure is evaluated with them; it changes the density by less than a millionth.
_SATURATION = {"temperature": Range(273.15, 488.15)}
_IAPWS = "iapws-sr1-86"


@equation(
    "water-saturation-pressure",
    law="p = p_c exp[T_c/T (a1 s + a2 s^1.5 + a3 s^3 + a4 s^3.5 + a5 s^4 + a6 s^7.5)],  s = 1 - T/T_c",
    symbols={"p": "saturation pressure", "T": "temperature", "p_c": "22.064 MPa", "T_c": "647.096 K"},
    source=Cite(_IAPWS, "read-second-hand"),
    valid=_SATURATION,
)
def saturation_pressure(temperature: Temperature) -> AbsolutePressure:
    """Pressure at which water boils at a temperature.

    Plane surface, pure water: dissolved gas, which lowers the boiling point, is neglected. Within 0.02 % of
    IAPWS-95.
    """
    s = 1.0 - temperature / CRITICAL_TEMPERATURE
    r = sqrt(s)
    s2 = s * s
    s3 = s2 * s
    return AbsolutePressure(
        CRITICAL_PRESSURE
        * exp(
            CRITICAL_TEMPERATURE
            / temperature
            * s
            * (
                -7.85951783
                + 1.84408259 * r
                - 11.7866497 * s2
                + 22.6807411 * s2 * r
                - 15.9618719 * s3
                + 1.80122502 * s3 * s3 * r
            )
        )
    )


def saturation_slope(temperature: Temperature) -> float:
    """Rise of the saturation pressure with temperature, Pa/K: the derivative of equation 1, derived."""
    return saturation_rise(temperature, saturation_pressure(temperature))


def saturation_rise(temperature: Temperature, pressure: AbsolutePressure) -> float:
    """See ``saturation_slope``, where the saturation pressure at that temperature is known."""
    s = 1.0 - temperature / CRITICAL_TEMPERATURE
    r = sqrt(s)
    s2 = s * s
    s3 = s2 * s
    bracket = (
        -7.85951783
        + 1.5 * 1.84408259 * r
        - 3.0 * 11.7866497 * s2
        + 3.5 * 22.6807411 * s2 * r
        - 4.0 * 15.9618719 * s3
        + 7.5 * 1.80122502 * s3 * s3 * r
    )
    return -pressure / temperature * (log(pressure / CRITICAL_PRESSURE) + bracket)


@equation(
    "water-liquid-density",
    law="rho = rho_c (1 + b1 s^(1/3) + b2 s^(2/3) + b3 s^(5/3) + b4 s^(16/3) + b5 s^(43/3) + b6 s^(110/3))",
    symbols={"rho": "density of the liquid", "rho_c": "322 kg/m3", "s": "1 - T/T_c"},
    source=Cite(_IAPWS, "read-second-hand"),
    valid=_SATURATION,
)
def liquid_density(temperature: Temperature) -> Density:
    """Density of water that is about to boil.

    Under the few bar of a loop the liquid is denser by less than 0.09 % per 10 bar, which is neglected.
    """
    c = (1.0 - temperature / CRITICAL_TEMPERATURE) ** (1.0 / 3.0)
    c2 = c * c
    return Density(
        CRITICAL_DENSITY
        * (
            1.0
            + 1.99274064 * c
            + 1.09965342 * c2
            - 0.510839303 * c2 * c2 * c
            - 1.75493479 * c**16.0
            - 45.5170352 * c**43.0
            - 6.7469445e5 * c**110.0
        )
    )


@equation(
    "water-vapour-density",
    law="rho = rho_c exp(c1 s^(2/6) + c2 s^(4/6) + c3 s^(8/6) + c4 s^(18/6) + c5 s^(37/6) + c6 s^(71/6))",
    symbols={"rho": "density of the saturated steam", "rho_c": "322 kg/m3", "s": "1 - T/T_c"},
    source=Cite(_IAPWS, "read-second-hand"),
    valid=_SATURATION,
)
def vapour_density(temperature: Temperature) -> Density:
    """Density of dry saturated steam; droplets that it may carry are counted as liquid."""
    c = (1.0 - temperature / CRITICAL_TEMPERATURE) ** (1.0 / 6.0)
    c2 = c * c
    c4 = c2 * c2
    return Density(
        CRITICAL_DENSITY
        * exp(
            -2.03150240 * c2
            - 2.68302940 * c4
            - 5.38626492 * c4 * c4
            - 17.2991605 * c**18.0
            - 44.7586581 * c**37.0
            - 63.9201063 * c**71.0
        )
    )


def vapour_growth(temperature: Temperature) -> float:
    """Relative rise of the density of saturated steam, 1/K: the derivative of equation 3, derived."""
    s = 1.0 - temperature / CRITICAL_TEMPERATURE
    c = s ** (1.0 / 6.0)
    c2 = c * c
    c4 = c2 * c2
    bracket = (
        -2.0 * 2.03150240 * c2
        - 4.0 * 2.68302940 * c4
        - 8.0 * 5.38626492 * c4 * c4
        - 18.0 * 17.2991605 * c**18.0
        - 37.0 * 44.7586581 * c**37.0
        - 71.0 * 63.9201063 * c**71.0
    )
    return float(-bracket / (6.0 * CRITICAL_TEMPERATURE * s))


@equation(
    "water-latent-heat",
    law="h = T dp/dT (1/rho_v - 1/rho_l)",
    symbols={"h": "latent heat", "rho_v": "density of the steam", "rho_l": "density of the liquid"},
    source=Cite("clapeyron", "from-memory"),
    note="Clapeyron's equation is exact; with the three equations above it is within 0.02 % of IAPWS-95.",
    valid=_SATURATION,
)
def latent_heat(temperature: Temperature) -> SpecificEnthalpy:
    """Heat that turns a kilogram of boiling water into saturated steam."""
    swelling = 1.0 / vapour_density(temperature) - 1.0 / liquid_density(temperature)
    return SpecificEnthalpy(temperature * saturation_slope(temperature) * swelling)


def virial_per_pressure(temperature: Temperature, pressure: AbsolutePressure, density: Density) -> float:
    """``B/(R T)`` in 1/Pa, from ``p M / (rho R T) = 1 + B p / (R T)``, for steam of known density.

    Taken at saturation this is the effective second virial coefficient: exact on the saturation line of
    water, and it carries the higher virial terms that a tabulated B would leave out. Derived.
    """
    return MOLAR_MASS / (density * GAS_CONSTANT * temperature) - 1.0 / pressure


def second_virial(temperature: Temperature) -> float:
    """Effective second virial coefficient of steam, m3/mol, at the saturation line. Derived; negative."""
    ratio = virial_per_pressure(temperature, saturation_pressure(temperature), vapour_density(temperature))
    return ratio * GAS_CONSTANT * temperature
