"""How much steam a heat flow makes and how much room it takes.

Fluid properties come in as numbers; what they are is the business of ``water`` and ``mixture``.
"""

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Area, Density, Duration, Irradiance, Mass, Power, Ratio, SpecificEnthalpy

_FROM_ZERO = Range(0.0)


@equation(
    "collector-power",
    law="Q = q * A",
    symbols={"q": "heat", "A": "area"},
    source=DERIVED,
    note="Area on the basis that the heat per area was computed on.",
    valid={"area": _FROM_ZERO},
)
def collector_power(heat: Irradiance, area: Area) -> Power:
    """Heat of a field, W, from heat per area and the area on the same basis. Keeps the sign of the heat."""
    return Power(heat * area)


@equation(
    "steam-mass",
    law="m = Q * t / h_fg",
    symbols={"Q": "power", "t": "duration", "h_fg": "latent heat"},
    source=DERIVED,
    note="Steady boiling; with one hour it is the capacity that a valve must pass in kg/h.",
    valid={"duration": _FROM_ZERO, "latent_heat": _FROM_ZERO},
)
def steam_mass(power: Power, duration: Duration, latent_heat: SpecificEnthalpy) -> Mass:
    """Steam, kg, that a power makes in a time. Heating up to boiling is neglected: more steam.

    Negative for a negative power, condensation. ZeroDivisionError for a latent heat of zero.
    """
    return Mass(power * duration / latent_heat)


@equation(
    "steam-volume-ratio",
    law="r = rho_l / rho_g",
    symbols={"rho_l": "liquid density", "rho_g": "steam density"},
    source=DERIVED,
    note="The 1700 often quoted holds at atmospheric pressure only.",
    valid={"liquid_density": _FROM_ZERO, "steam_density": _FROM_ZERO},
)
def steam_volume_ratio(liquid_density: Density, steam_density: Density) -> Ratio:
    """Litres of steam from one litre of liquid. ZeroDivisionError for a steam density of zero."""
    return Ratio(liquid_density / steam_density)
