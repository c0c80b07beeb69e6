"""The gas pressure a vessel is set to before it sees liquid, by the rules of the trade.

Absolute pressures. What gauge shows on site and which rule applies is decided elsewhere.
"""

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    AbsolutePressure,
    Density,
    GaugePressure,
    Length,
    PressureDifference,
    Temperature,
)
from loopslack.physics.statics import GRAVITY

_FROM_ZERO = Range(0.0)
_TOP = {
    "atmosphere": _FROM_ZERO,
    "cold_density": _FROM_ZERO,
    "top_height": _FROM_ZERO,
    "precharge_temperature": _FROM_ZERO,
    "cold_gas_temperature": _FROM_ZERO,
}


@equation(
    "precharge-top-pressure",
    law="p_0 = (p_atm + rho * 9.80665 * z + p_top) * T_0 / T_c",
    symbols={
        "p_atm": "atmosphere",
        "rho": "cold density",
        "z": "top height",
        "p_top": "least top pressure",
        "T_0": "precharge temperature",
        "T_c": "cold gas temperature",
    },
    source=DERIVED,
    note="Static head plus the least top pressure, carried to the temperature at which the gas is set.",
    valid=_TOP,
)
def precharge_for_top_pressure(
    atmosphere: AbsolutePressure,
    cold_density: Density,
    top_height: Length,
    least_top_pressure: GaugePressure,
    precharge_temperature: Temperature,
    cold_gas_temperature: Temperature,
) -> AbsolutePressure:
    """Least precharge, Pa absolute, at which an all but empty vessel still holds the top pressure.

    ``top_height`` is the height of the highest point above the vessel, zero if the vessel is the highest
    part; a negative one would lower the precharge below the least pressure and a derivation refuses it.
    Loops that empty on purpose when they boil use 0.2 bar at the top, ordinary ones 0.5 bar and more.
    """
    return AbsolutePressure(
        (atmosphere + cold_density * GRAVITY * top_height + least_top_pressure)
        * precharge_temperature
        / cold_gas_temperature
    )


@equation(
    "precharge-din-4807-2",
    law="p_0 = max((p_atm + rho * 9.80665 * z + p_top) * T_0 / T_c, p_atm + 70000)",
    symbols={
        "p_atm": "atmosphere",
        "rho": "cold density",
        "z": "top height",
        "p_top": "least top pressure",
        "T_0": "precharge temperature",
        "T_c": "cold gas temperature",
    },
    source=Cite("din-4807-2", "from-memory"),
    note="As for the top pressure, and never below 0.7 bar gauge.",
    valid=_TOP,
)
def precharge_din_4807_2(
    atmosphere: AbsolutePressure,
    cold_density: Density,
    top_height: Length,
    least_top_pressure: GaugePressure,
    precharge_temperature: Temperature,
    cold_gas_temperature: Temperature,
) -> AbsolutePressure:
    """Precharge by DIN 4807-2, Pa absolute: at least 0.7 bar above the atmosphere of the site."""
    by_top = precharge_for_top_pressure(
        atmosphere,
        cold_density,
        top_height,
        least_top_pressure,
        precharge_temperature,
        cold_gas_temperature,
    )
    return AbsolutePressure(max(by_top, atmosphere + 70_000.0))


@equation(
    "precharge-below-fill",
    law="p_0 = p_f - dp",
    symbols={"p_f": "fill pressure", "dp": "difference"},
    source=Cite("ufc-3-440-01", "read"),
    note="The publication asks for 5 to 10 psi below the fill pressure.",
    valid={"fill_pressure": _FROM_ZERO, "difference": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def precharge_below_fill(fill_pressure: AbsolutePressure, difference: PressureDifference) -> AbsolutePressure:
    """Precharge, Pa absolute, a stated distance below the fill pressure. Negative is impossible."""
    return AbsolutePressure(fill_pressure - difference)
