"""How much a liquid grows between two temperatures. Densities come in as numbers; whose they are is not known here."""

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Density, ExpansionCoefficient, Volume

_FROM_ZERO = Range(0.0)


@equation(
    "relative-expansion",
    law="n = rho_1 / rho_2 - 1",
    symbols={"rho_1": "cold density", "rho_2": "hot density"},
    source=DERIVED,
    note="The same mass at two densities.",
    valid={"cold_density": _FROM_ZERO, "hot_density": _FROM_ZERO},
)
def relative_expansion(cold_density: Density, hot_density: Density) -> ExpansionCoefficient:
    """Growth of a liquid as a share of its cold volume. Negative for water that warms from just above freezing."""
    return ExpansionCoefficient(cold_density / hot_density - 1)


@equation(
    "expansion-volume",
    law="V_e = n * V_s",
    symbols={"n": "expansion", "V_s": "content"},
    source=DERIVED,
    note="Liquid only; the expansion of pipes is neglected.",
    valid={"content": _FROM_ZERO},
)
def expansion_volume(expansion: ExpansionCoefficient, content: Volume) -> Volume:
    """Growth, m3, of a content. Neglecting the pipes, which grow too, asks for a little more room: the safe side."""
    return Volume(expansion * content)
