"""Collector coefficients carried from one area of a collector to another: gross, aperture, absorber.

Mixing area bases is a classic error, so nothing here assumes a ratio of areas: both must be stated.
"""

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Area, HeatLossCoefficient, QuadraticHeatLossCoefficient, Ratio

_FROM_ZERO = Range(0.0)
_AREAS = {"stated_area": _FROM_ZERO, "other_area": _FROM_ZERO}


@equation(
    "optical-efficiency-other-area",
    law="eta_b = eta_a * A_a / A_b",
    symbols={"eta_a": "optical efficiency", "A_a": "stated area", "A_b": "other area"},
    source=DERIVED,
    note="The heat of the collector does not depend on which of its areas it is divided by.",
    valid=_AREAS,
)
def optical_efficiency_on_area(optical_efficiency: Ratio, stated_area: Area, other_area: Area) -> Ratio:
    """Optical efficiency on another area.

    The same collector and test; ZeroDivisionError for another area of zero.
    """
    return Ratio(optical_efficiency * stated_area / other_area)


@equation(
    "linear-loss-other-area",
    law="a_b = a_a * A_a / A_b",
    symbols={"a_a": "linear loss", "A_a": "stated area", "A_b": "other area"},
    source=DERIVED,
    note="The heat of the collector does not depend on which of its areas it is divided by.",
    valid=_AREAS,
)
def linear_loss_on_area(
    linear_loss: HeatLossCoefficient, stated_area: Area, other_area: Area
) -> HeatLossCoefficient:
    """Linear loss coefficient, W/m2K, on another area.

    The same collector and test; ZeroDivisionError for another area of zero.
    """
    return HeatLossCoefficient(linear_loss * stated_area / other_area)


@equation(
    "quadratic-loss-other-area",
    law="a_b = a_a * A_a / A_b",
    symbols={"a_a": "quadratic loss", "A_a": "stated area", "A_b": "other area"},
    source=DERIVED,
    note="The heat of the collector does not depend on which of its areas it is divided by.",
    valid=_AREAS,
)
def quadratic_loss_on_area(
    quadratic_loss: QuadraticHeatLossCoefficient, stated_area: Area, other_area: Area
) -> QuadraticHeatLossCoefficient:
    """Quadratic loss coefficient, W/m2K2, on another area.

    The same collector and test; ZeroDivisionError for another area of zero.
    """
    return QuadraticHeatLossCoefficient(quadratic_loss * stated_area / other_area)
