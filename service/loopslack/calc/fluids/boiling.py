"""The boiling temperature where the bubble pressure is a smooth law: a close start, then one Newton step.

The start is the inverse temperature as a polynomial in the logarithm of the pressure, through eight points of
the fluid's own bubble line; it is within some thousandths of a kelvin, so that one step is enough.
"""

from collections.abc import Callable
from math import cos, log, pi

from loopslack.calc.fluids.base import BOILING_HIGHEST, BOILING_LOWEST

Start = tuple[tuple[float, ...], tuple[float, ...]]

_POINTS = 8


def start_of(bubble_pressure: Callable[[float], float]) -> Start:
    """Nodes and divided differences of ``1/T`` over ``ln p``, through Chebyshev points of the range."""
    middle = 0.5 * (1.0 / BOILING_LOWEST + 1.0 / BOILING_HIGHEST)
    half = 0.5 * (1.0 / BOILING_LOWEST - 1.0 / BOILING_HIGHEST)
    inverses = [middle + half * cos(pi * (2 * point + 1) / (2 * _POINTS)) for point in range(_POINTS)]
    nodes = [log(bubble_pressure(1.0 / inverse)) for inverse in inverses]
    differences = list(inverses)
    for order in range(1, _POINTS):
        for point in range(_POINTS - 1, order - 1, -1):
            rise = differences[point] - differences[point - 1]
            differences[point] = rise / (nodes[point] - nodes[point - order])
    return tuple(nodes), tuple(differences)


def start_at(start: Start, pressure: float) -> float:
    """A temperature within some thousandths of a kelvin of the boiling temperature."""
    s = log(pressure)
    a, b, c, d, e, f, g, _ = start[0]
    d0, d1, d2, d3, d4, d5, d6, d7 = start[1]
    inner = d3 + (s - d) * (d4 + (s - e) * (d5 + (s - f) * (d6 + (s - g) * d7)))
    return 1.0 / (d0 + (s - a) * (d1 + (s - b) * (d2 + (s - c) * inner)))


def inside(temperature: float) -> float:
    """A solved temperature, taken back to the end of the range that a rounding error may have overstepped."""
    return min(max(temperature, BOILING_LOWEST), BOILING_HIGHEST)
