"""Pressures of a liquid at rest: columns, heights, and the step between gauge and absolute.

Friction is not here: the pressures of this service are those of a loop without flow, or with the pump's
head added by the calculation.
"""

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, Density, GaugePressure, Length, PressureDifference

GRAVITY = 9.80665

_FROM_ZERO = Range(0.0)


@equation(
    "column-pressure",
    law="dp = rho * 9.80665 * z",
    symbols={"rho": "density", "z": "height"},
    source=Cite("si-brochure", "from-memory"),
    note="Hydrostatics with the standard acceleration of free fall; local gravity differs by up to 0.3 %.",
    valid={"density": _FROM_ZERO},
)
def column_pressure(density: Density, height: Length) -> PressureDifference:
    """Pressure of a column of liquid, Pa, positive when the height is.

    One density over the whole column. The height counts upwards from where the pressure acts, so that a
    part below the reference has a negative height and a negative column.
    """
    return PressureDifference(density * GRAVITY * height)


@equation(
    "pressure-at-height",
    law="p_z = p - rho * 9.80665 * z",
    symbols={"p": "pressure", "rho": "density", "z": "height"},
    source=DERIVED,
    note="Column pressure, subtracted on the way up.",
    valid={"pressure": _FROM_ZERO, "density": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def pressure_at_height(pressure: AbsolutePressure, density: Density, height: Length) -> AbsolutePressure:
    """Absolute pressure, Pa, at a height above (positive) or below (negative) a point of known pressure.

    Not above zero when the column is longer than the pressure can carry: the liquid column then breaks. The
    number is returned as it is and the caller must treat it as a broken column; a derivation refuses it.
    """
    return AbsolutePressure(pressure - density * GRAVITY * height)


@equation(
    "absolute-from-gauge",
    law="p = p_g + p_atm",
    symbols={"p_g": "gauge", "p_atm": "atmosphere"},
    source=DERIVED,
    note="Definition of gauge pressure.",
    valid={"atmosphere": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def absolute_from_gauge(gauge: GaugePressure, atmosphere: AbsolutePressure) -> AbsolutePressure:
    """Absolute pressure, Pa, behind a gauge reading at the site. Negative for an impossible vacuum."""
    return AbsolutePressure(gauge + atmosphere)


@equation(
    "gauge-from-absolute",
    law="p_g = p - p_atm",
    symbols={"p": "pressure", "p_atm": "atmosphere"},
    source=DERIVED,
    note="Definition of gauge pressure.",
    valid={"pressure": _FROM_ZERO, "atmosphere": _FROM_ZERO},
)
def gauge_from_absolute(pressure: AbsolutePressure, atmosphere: AbsolutePressure) -> GaugePressure:
    """Gauge pressure, Pa, that is read at the site. Negative below the atmosphere."""
    return GaugePressure(pressure - atmosphere)
