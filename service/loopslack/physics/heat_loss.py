"""What a pipe in still surroundings loses to them, per metre.

One layer of insulation on a round pipe. How thick the insulation is, whether it is weathered and how much
of it is missing is for the caller to decide and to express in thickness and conductivity.
"""

from math import log, pi

from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import (
    Conductivity,
    HeatLossCoefficient,
    Length,
    LinearConductance,
    LinearHeatLoss,
    Temperature,
)

_FROM_ZERO = Range(0.0)


@equation(
    "pipe-conductance",
    law="U = pi / (ln((d + 2 * s) / d) / (2 * lambda) + 1 / (h * (d + 2 * s)))",
    symbols={
        "d": "outer diameter",
        "s": "insulation thickness",
        "lambda": "conductivity",
        "h": "film coefficient",
    },
    source=Cite("iso-12241", "from-memory"),
    note="Steady conduction through one cylindrical layer and a film at its surface.",
    valid={
        "outer_diameter": _FROM_ZERO,
        "insulation_thickness": _FROM_ZERO,
        "conductivity": _FROM_ZERO,
        "film_coefficient": _FROM_ZERO,
    },
)
def pipe_conductance(
    outer_diameter: Length,
    insulation_thickness: Length,
    conductivity: Conductivity,
    film_coefficient: HeatLossCoefficient,
) -> LinearConductance:
    """Heat loss of a pipe per length and kelvin, W/mK, from the fluid to the surroundings.

    Neglected: the resistance of the tube wall and of the inner film (right within 1 % for condensing steam
    in metal tube), clips, fittings and wind, all of which lose more; for the reach of steam that is the
    safe side. A thickness of zero is the bare pipe, whose loss then rests on the film coefficient alone.
    Raises ``OutOfRange`` for a diameter, conductivity or film coefficient that is not positive, or a
    negative thickness.
    """
    if not (outer_diameter > 0 and insulation_thickness >= 0 and conductivity > 0 and film_coefficient > 0):
        raise OutOfRange(
            f"A pipe of {outer_diameter:g} m with {insulation_thickness:g} m of insulation, "
            f"{conductivity:g} W/mK and a film of {film_coefficient:g} W/m2K has no defined heat loss.",
            remedy="State a positive diameter, conductivity and film, and a thickness of zero or more.",
            facts={
                "outer_diameter": outer_diameter,
                "insulation_thickness": insulation_thickness,
                "conductivity": conductivity,
                "film_coefficient": film_coefficient,
            },
        )
    surface_diameter = outer_diameter + 2 * insulation_thickness
    layer = log(surface_diameter / outer_diameter) / (2 * conductivity)
    film = 1 / (film_coefficient * surface_diameter)
    return LinearConductance(pi / (layer + film))


@equation(
    "pipe-heat-loss",
    law="q = U * (T - T_a)",
    symbols={"U": "conductance", "T": "temperature", "T_a": "ambient"},
    source=DERIVED,
    note="Definition of the conductance.",
    valid={"conductance": _FROM_ZERO, "temperature": _FROM_ZERO, "ambient": _FROM_ZERO},
)
def pipe_heat_loss(
    conductance: LinearConductance, temperature: Temperature, ambient: Temperature
) -> LinearHeatLoss:
    """Heat loss of a pipe per length, W/m. Negative, a gain, for a pipe colder than its surroundings."""
    return LinearHeatLoss(conductance * (temperature - ambient))
