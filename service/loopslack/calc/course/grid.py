"""The equivalent pipe cut into cells of equal length. Geometry and sums only; no state, no fluid."""

from bisect import bisect_right
from collections.abc import Sequence
from itertools import pairwise

from loopslack.calc.course.lumped import LumpedPipe


class Grid:
    """Cells of the pipe, counted from the collectors.

    Per cell: ``content`` (m3), ``conductance`` (W/K), ``warmth`` (conductance times ambient, W), ``capacity``
    (J/K). With ``_to``: the sums from the collectors to each cell boundary, ``height_at`` and ``reach_at``
    there (m). A *place* is a distance from the collectors in cells.
    """

    __slots__ = (
        "capacity",
        "capacity_to",
        "cells",
        "conductance",
        "conductance_to",
        "content",
        "content_to",
        "height_at",
        "reach_at",
        "warmth",
        "warmth_to",
    )

    def __init__(self, pipe: LumpedPipe, cells: int) -> None:
        self.cells = cells
        stops = pipe.distance
        bounds = [stops[-1] * i / cells for i in range(cells + 1)]
        self.content_to = [_straight(stops, pipe.content, at) for at in bounds]
        self.conductance_to = [_straight(stops, pipe.conductance, at) for at in bounds]
        self.warmth_to = [_straight(stops, pipe.warmth, at) for at in bounds]
        self.capacity_to = [_straight(stops, pipe.capacity, at) for at in bounds]
        self.height_at = [_straight(stops, pipe.height, at) for at in bounds]
        self.reach_at = [_straight(stops, pipe.reach, at) for at in bounds]
        self.content = _steps(self.content_to)
        self.conductance = _steps(self.conductance_to)
        self.warmth = _steps(self.warmth_to)
        self.capacity = _steps(self.capacity_to)

    def place(self, volume: float) -> float:
        """Where the front stands when so much of the pipe (m3) is filled with steam."""
        sums = self.content_to
        if volume <= 0.0:
            return 0.0
        if volume >= sums[-1]:
            return float(self.cells)
        i = bisect_right(sums, volume) - 1
        return i + (volume - sums[i]) / (sums[i + 1] - sums[i])

    def at(self, column: list[float], place: float) -> float:
        """Value of a column of boundaries at a place."""
        i = int(place)
        if i >= self.cells:
            return column[self.cells]
        return column[i] + (place - i) * (column[i + 1] - column[i])


def _steps(sums: list[float]) -> list[float]:
    return [after - before for before, after in pairwise(sums)]


def _straight(stops: Sequence[float], values: Sequence[float], at: float) -> float:
    k = min(max(bisect_right(stops, at) - 1, 0), len(stops) - 2)
    if at >= stops[-1]:
        return values[-1]
    return values[k] + (at - stops[k]) / (stops[k + 1] - stops[k]) * (values[k + 1] - values[k])
