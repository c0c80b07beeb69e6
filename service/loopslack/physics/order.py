"""What is bought for a loop: glycol, water or ready mix, from the mass that goes into it.

Volumes of glycol and water are those before mixing at 20 degC, as they are sold. What else is on an order list
comes from tables.
"""

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Density, Mass, MassFraction, Ratio, Volume, VolumeFraction

_FROM_ZERO = Range(0.0)
_SHARE = Range(0.0, 1.0)


@equation(
    "mass-to-order",
    law="m = (m_s + m_v) * (1 + l)",
    symbols={"m_s": "in loop", "m_v": "in vessel", "l": "filling loss"},
    source=DERIVED,
    note="What the filled loop and its vessel hold, and what is lost while filling.",
    valid={"in_loop": _FROM_ZERO, "in_vessel": _FROM_ZERO, "filling_loss": _FROM_ZERO},
)
def mass_to_order(in_loop: Mass, in_vessel: Mass, filling_loss: Ratio) -> Mass:
    """Mass of mixture, kg, to have at hand when the loop is filled."""
    return Mass((in_loop + in_vessel) * (1 + filling_loss))


@equation(
    "water-to-order",
    law="V = m * (1 - w) / rho",
    symbols={"m": "mass", "w": "mass fraction", "rho": "water density"},
    source=DERIVED,
    note="Definition of the mass fraction.",
    valid={"mass": _FROM_ZERO, "mass_fraction": _SHARE},
)
def water_to_order(mass: Mass, mass_fraction: MassFraction, water_density: Density) -> Volume:
    """Water, m3, in a mass of mixture, measured before mixing."""
    return Volume(mass * (1 - mass_fraction) / water_density)


@equation(
    "glycol-to-order",
    law="V = V_w * phi / (1 - phi)",
    symbols={"V_w": "water", "phi": "volume fraction"},
    source=DERIVED,
    note="Definition of the volume fraction; both volumes before mixing.",
    valid={"water": _FROM_ZERO, "volume_fraction": _SHARE},
)
def glycol_to_order(water: Volume, volume_fraction: VolumeFraction) -> Volume:
    """Glycol, m3, that goes with so much water. ZeroDivisionError for a fraction of one: no water goes with it."""
    return Volume(water * volume_fraction / (1 - volume_fraction))


@equation(
    "ice-share",
    law="s = 1 - w / w_l",
    symbols={"w": "mass fraction", "w_l": "strength left"},
    source=DERIVED,
    note="Lever rule: the ice is water, the glycol stays in the liquid.",
    valid={"mass_fraction": _SHARE, "strength_left": _SHARE},
)
def ice_share(mass_fraction: MassFraction, strength_left: MassFraction) -> Ratio:
    """Mass fraction of ice once freezing has raised the strength of the liquid left. No promise against bursting."""
    return Ratio(1 - mass_fraction / strength_left)
