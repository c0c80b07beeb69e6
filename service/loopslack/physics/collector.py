"""What a collector without flow can give off, and how hot it gets.

The steady efficiency curve of ISO 9806 on one stated area basis; ``collector_area`` carries coefficients to
another. Emptying classes are figures of the library; the balance with the loop is the calculation's.
"""

from math import sqrt

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import (
    HeatLossCoefficient,
    Irradiance,
    QuadraticHeatLossCoefficient,
    Ratio,
    Temperature,
)

ISO_9806 = Cite("iso-9806", "from-memory")

_FROM_ZERO = Range(0.0)


@equation(
    "collector-loss",
    law="l = a_1 * (T - T_a) + a_2 * (T - T_a) * abs(T - T_a)",
    symbols={"a_1": "linear loss", "a_2": "quadratic loss", "T": "temperature", "T_a": "ambient"},
    source=ISO_9806,
    note="The square keeps the sign of the difference, so that a collector colder than the air gains heat.",
    valid={"linear_loss": _FROM_ZERO, "quadratic_loss": _FROM_ZERO},
)
def collector_loss(
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    temperature: Temperature,
    ambient: Temperature,
) -> Irradiance:
    """Heat loss per area of a collector, W/m2, on the area basis of its coefficients. Negative below ambient.

    Wind and sky temperature beyond the test's are neglected. Coefficients are measured up to about 100 K
    above ambient; carried on to stagnation they are commonly 10-20 K off.
    """
    difference = temperature - ambient
    return Irradiance(linear_loss * difference + quadratic_loss * difference * abs(difference))


@equation(
    "collector-heat-bound",
    law="q = eta_0 * G - a_1 * (T - T_a) - a_2 * (T - T_a) * abs(T - T_a)",
    symbols={
        "eta_0": "optical efficiency",
        "G": "irradiance",
        "a_1": "linear loss",
        "a_2": "quadratic loss",
        "T": "temperature",
        "T_a": "ambient",
    },
    source=ISO_9806,
    note="Steady heat of a collector held at one temperature; the most that can leave it as steam.",
    valid={"optical_efficiency": Range(0.0, 1.0), "irradiance": _FROM_ZERO},
)
def heat_bound(
    optical_efficiency: Ratio,
    irradiance: Irradiance,
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    temperature: Temperature,
    ambient: Temperature,
) -> Irradiance:
    """Heat per area, W/m2, of a fully wetted collector at a temperature: an upper bound of its steam power.

    Real collectors are partly dry when they boil and stay far below it. Negative above the stagnation
    temperature, where the collector would have to be heated; the caller decides what that means.
    """
    difference = temperature - ambient
    return Irradiance(
        optical_efficiency * irradiance
        - linear_loss * difference
        - quadratic_loss * difference * abs(difference)
    )


@equation(
    "stagnation-temperature",
    law="T_stg = T_a + 2 * eta_0 * G / (a_1 + sqrt(a_1^2 + 4 * a_2 * eta_0 * G))",
    symbols={
        "eta_0": "optical efficiency",
        "G": "irradiance",
        "a_1": "linear loss",
        "a_2": "quadratic loss",
        "T_a": "ambient",
    },
    source=DERIVED,
    note="Root of the efficiency curve of ISO 9806, written so that it also holds without a quadratic term.",
    valid={"optical_efficiency": Range(0.0, 1.0), "irradiance": _FROM_ZERO},
)
def stagnation_temperature(
    optical_efficiency: Ratio,
    irradiance: Irradiance,
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    ambient: Temperature,
) -> Temperature:
    """Temperature, K, at which a collector without flow loses all it absorbs.

    The usual textbook root divides by the quadratic coefficient; this form does not. 10-20 K too low is
    common, since coefficients are carried beyond where they were measured. Raises ``OutOfRange`` if both
    coefficients are zero: such a collector has no stagnation temperature.
    """
    gain = optical_efficiency * irradiance
    return Temperature(ambient + _excess_for_loss(gain, linear_loss, quadratic_loss))


@equation(
    "stagnation-temperature-other-sun",
    law=(
        "T_stg = T_a + 2 * L * G / G_m / (a_1 + sqrt(a_1^2 + 4 * a_2 * L * G / G_m)) "
        "where L = a_1 * (T_m - T_am) + a_2 * (T_m - T_am)^2"
    ),
    symbols={
        "T_m": "measured",
        "G_m": "measured irradiance",
        "T_am": "measured ambient",
        "a_1": "linear loss",
        "a_2": "quadratic loss",
        "G": "irradiance",
        "T_a": "ambient",
    },
    source=DERIVED,
    note="Losses grow with the sun, their shape over temperature taken from the coefficients.",
)
def stagnation_temperature_at_other_sun(
    measured: Temperature,
    measured_irradiance: Irradiance,
    measured_ambient: Temperature,
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    irradiance: Irradiance,
    ambient: Temperature,
) -> Temperature:
    """Stagnation temperature, K, in another sun and air than those it was measured in.

    The coefficients give only the shape of the loss curve; the measurement gives its size. Raises
    ``OutOfRange`` if the measurement was taken without sun or not above its ambient, or if both
    coefficients are zero.
    """
    if not (measured_irradiance > 0 and measured > measured_ambient):
        raise OutOfRange(
            f"A stagnation temperature of {measured:g} K measured at {measured_irradiance:g} W/m2 in air of "
            f"{measured_ambient:g} K says nothing about another sun.",
            remedy="State the sun it was measured in and an air temperature below the measured one.",
            facts={
                "measured": measured,
                "measured_irradiance": measured_irradiance,
                "measured_ambient": measured_ambient,
            },
        )
    loss = (
        collector_loss(linear_loss, quadratic_loss, measured, measured_ambient)
        * irradiance
        / measured_irradiance
    )
    return Temperature(ambient + _excess_for_loss(loss, linear_loss, quadratic_loss))


@equation(
    "loss-scale",
    law="k = eta_0 * G / (a_1 * (T_stg - T_a) + a_2 * (T_stg - T_a)^2)",
    symbols={
        "eta_0": "optical efficiency",
        "G": "irradiance",
        "a_1": "linear loss",
        "a_2": "quadratic loss",
        "T_stg": "stagnation",
        "T_a": "ambient",
    },
    source=DERIVED,
    note="One at the collector's own stagnation temperature, below one if it stagnates hotter.",
)
def loss_scale(
    optical_efficiency: Ratio,
    irradiance: Irradiance,
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    stagnation: Temperature,
    ambient: Temperature,
) -> Ratio:
    """Factor on the losses of a collector that makes it stagnate at a given temperature.

    Both coefficients are scaled alike. Raises ``OutOfRange`` if the stagnation temperature is not above
    ambient or both coefficients are zero: no factor then exists.
    """
    loss = collector_loss(linear_loss, quadratic_loss, stagnation, ambient)
    if not loss > 0:
        raise OutOfRange(
            f"With a_1 = {linear_loss:g} W/m2K and a_2 = {quadratic_loss:g} W/m2K2 a collector in air of "
            f"{ambient:g} K cannot stagnate at {stagnation:g} K.",
            remedy="State a stagnation temperature above the air's and a loss coefficient above zero.",
            facts={"stagnation": stagnation, "ambient": ambient},
        )
    return Ratio(optical_efficiency * irradiance / loss)


@equation(
    "collector-heat-bound-shifted",
    law=(
        "q = eta_0 * G * (1 - (a_1 * (T - T_a) + a_2 * (T - T_a) * abs(T - T_a)) "
        "/ (a_1 * (T_stg - T_a) + a_2 * (T_stg - T_a)^2))"
    ),
    symbols={
        "eta_0": "optical efficiency",
        "G": "irradiance",
        "a_1": "linear loss",
        "a_2": "quadratic loss",
        "T": "temperature",
        "T_stg": "stagnation",
        "T_a": "ambient",
    },
    source=DERIVED,
    note="The heat bound with losses scaled so that it vanishes at the given stagnation temperature.",
)
def heat_bound_shifted(
    optical_efficiency: Ratio,
    irradiance: Irradiance,
    linear_loss: HeatLossCoefficient,
    quadratic_loss: QuadraticHeatLossCoefficient,
    temperature: Temperature,
    stagnation: Temperature,
    ambient: Temperature,
) -> Irradiance:
    """Heat per area, W/m2, of a collector whose stagnation temperature is known or doubted.

    At the collector's own stagnation temperature it equals ``heat_bound``; for a higher one it gives more
    heat at every temperature above ambient, which is the safe side. Negative above the stagnation
    temperature. Raises ``OutOfRange`` as ``loss_scale`` does.
    """
    scale = loss_scale(optical_efficiency, irradiance, linear_loss, quadratic_loss, stagnation, ambient)
    loss = collector_loss(linear_loss, quadratic_loss, temperature, ambient)
    return Irradiance(optical_efficiency * irradiance - scale * loss)


def _excess_for_loss(loss: float, linear_loss: float, quadratic_loss: float) -> float:
    """Kelvin above ambient at which a collector loses ``loss`` W/m2."""
    slope = linear_loss + sqrt(linear_loss * linear_loss + 4 * quadratic_loss * loss)
    if slope <= 0:
        raise OutOfRange(
            "A collector without heat loss has no stagnation temperature.",
            remedy="State a linear or a quadratic heat loss coefficient above zero.",
            facts={"linear_loss": linear_loss, "quadratic_loss": quadratic_loss},
        )
    return 2 * loss / slope
