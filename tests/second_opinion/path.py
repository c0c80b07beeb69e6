"""How steam fills the open branches of one steam space: one number, the extent, says how far it has come.

The extent counts knots. Between two knots the front elevation, the filled length of each branch, the loss and
the volume are linear in it. Rules (own assumptions where no source is known):

* all fronts of a space stand at one elevation, so branches that fall fill in step with elevation;
* a stretch that does not get lower than where the front already was (level, crest, trap) fills at the point
  where it is met, all branches that meet theirs at that elevation side by side, in proportion to length;
  meanwhile the elevation that counts for pressure is the highest of the fronts (lowest pressure, most steam:
  the safe side).

Must not live here: pressures, temperatures, solving.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from itertools import pairwise

from .case import Branch, Case, Segment

SAME_HEIGHT = 9  # decimals


def profile(branch: Branch, start: float, end: float) -> list[tuple[float, float]]:
    """(length from the collectors, height) at every segment end; unknown heights linear between known."""
    points: list[tuple[float, float | None]] = [(0.0, start)]
    for segment in branch.segments:
        points.append((points[-1][0] + segment.length, segment.end_height))
    if points[-1][1] is None:
        points[-1] = (points[-1][0], end)
    known = [(x, z) for x, z in points if z is not None]
    return [(x, round(z if z is not None else _between(known, x), SAME_HEIGHT)) for x, z in points]


def _between(points: Sequence[tuple[float, float]], x: float) -> float:
    right = next(index for index, point in enumerate(points) if point[0] >= x)
    if right == 0:
        return points[0][1]
    (x0, z0), (x1, z1) = points[right - 1], points[right]
    return z0 + (z1 - z0) * (x - x0) / (x1 - x0)


class _Course:
    """One branch as the front meets it: falling pieces, and stretches held at one elevation."""

    def __init__(self, points: list[tuple[float, float]]) -> None:
        self.points = points
        self.falls: list[tuple[float, float, float, float]] = []  # x0, x1, z0, z1
        self.held: dict[float, tuple[float, float]] = {}  # elevation -> x0, x1
        lowest = points[0][1]
        for (start, z0), (x1, z1) in pairwise(points):
            x0 = start
            if z1 >= lowest:
                self._hold(lowest, x0, x1)
                continue
            if z0 > lowest:
                crossing = x0 + (x1 - x0) * (z0 - lowest) / (z0 - z1)
                self._hold(lowest, x0, crossing)
                x0 = crossing
            self.falls.append((x0, x1, lowest, z1))
            lowest = z1

    def _hold(self, elevation: float, x0: float, x1: float) -> None:
        start = self.held.get(elevation, (x0, x0))[0]
        self.held[elevation] = (start, x1)

    def filled_down_to(self, elevation: float) -> float:
        """Length filled once all above the elevation is full, a stretch held just there not counted."""
        filled = 0.0
        for x0, x1, z0, z1 in self.falls:
            if z0 <= elevation:
                break
            filled = x1 if z1 >= elevation else x0 + (x1 - x0) * (z0 - elevation) / (z0 - z1)
        passed = [x1 for height, (_, x1) in self.held.items() if height > elevation]
        return max([filled, *passed])


class SteamPath:
    """Extent -> front elevation, filled lengths, loss and steam volume of one space."""

    def __init__(self, case: Case, space: int) -> None:
        self.start = round(case.space_height(space), SAME_HEIGHT)
        self.indices = [i for i, b in enumerate(case.branches) if b.space == space and b.open]
        self.branches = [case.branches[i] for i in self.indices]
        self._courses = [_Course(profile(b, self.start, case.station_height)) for b in self.branches]
        self.elevations: list[float] = []
        self.reaches: list[list[float]] = []
        self._walk()
        self.rises = any(
            below > above for above, below in zip(self.elevations, self.elevations[1:], strict=False)
        )
        amounts = [[_amounts(b, x) for b, x in zip(self.branches, r, strict=True)] for r in self.reaches]
        self._slopes = [sum(a[0] for a in row) for row in amounts]
        self._offsets = [sum(a[1] for a in row) for row in amounts]
        self._volumes = [sum(a[2] for a in row) for row in amounts]

    @property
    def end(self) -> int:
        """The extent at which every open branch is full."""
        return len(self.elevations) - 1

    def _knot(self, elevation: float, reaches: list[float]) -> None:
        if self.reaches and reaches == self.reaches[-1]:
            return
        self.elevations.append(elevation)
        self.reaches.append(reaches)

    def _walk(self) -> None:
        levels = {self.start}
        for course in self._courses:
            levels |= {fall[3] for fall in course.falls} | set(course.held)
        self._knot(self.start, [0.0] * len(self.branches))
        for elevation in sorted(levels, reverse=True):
            arrived = [course.filled_down_to(elevation) for course in self._courses]
            self._knot(elevation, arrived)
            holding = {i: c.held[elevation] for i, c in enumerate(self._courses) if elevation in c.held}
            if holding:
                self._walk_held(elevation, arrived, holding)

    def _walk_held(
        self, elevation: float, arrived: list[float], holding: dict[int, tuple[float, float]]
    ) -> None:
        shares = {1.0}
        for index, (x0, x1) in holding.items():
            shares |= {(x - x0) / (x1 - x0) for x, _ in self._courses[index].points if x0 < x < x1}
        for share in sorted(shares):
            reaches = list(arrived)
            fronts = [elevation] if len(holding) < len(self.branches) else []
            for index, (x0, x1) in holding.items():
                reaches[index] = x0 + share * (x1 - x0)
                fronts.append(_between(self._courses[index].points, reaches[index]))
            self._knot(max(fronts), reaches)

    def _at(self, values: Sequence[float], extent: float) -> float:
        index = min(int(extent), self.end - 1)
        if index < 0:
            return values[0]
        return values[index] + (extent - index) * (values[index + 1] - values[index])

    def elevation(self, extent: float) -> float:
        return self._at(self.elevations, extent)

    def loss(self, extent: float, temperature: float) -> float:
        """Heat lost by the filled lengths at a steam temperature, W."""
        return self._at(self._slopes, extent) * temperature - self._at(self._offsets, extent)

    def volume(self, extent: float) -> float:
        return self._at(self._volumes, extent)

    def filled(self, extent: float) -> dict[int, float]:
        """Steam reach by branch number, m."""
        columns = zip(self.indices, zip(*self.reaches, strict=True), strict=True)
        return {index: self._at(column, extent) for index, column in columns}

    def extent_of_loss(self, temperature: float, power: float) -> float:
        """Extent whose loss at a temperature is a power; the end of the path if all of it loses less."""
        losses = [a * temperature - b for a, b in zip(self._slopes, self._offsets, strict=True)]
        if power >= losses[-1]:
            return float(self.end)
        index = bisect_right(losses, power) - 1
        return index + (power - losses[index]) / (losses[index + 1] - losses[index])


def _amounts(branch: Branch, reach: float) -> tuple[float, float, float]:
    """Loss slope W/K, loss slope times ambient W, and volume m3 of the first `reach` metres."""
    slope = offset = volume = start = 0.0
    for segment in branch.segments:
        part = min(max(reach - start, 0.0), segment.length)
        slope += segment.loss_coefficient * part
        offset += segment.loss_coefficient * part * segment.ambient
        volume += _section(segment) * part
        start += segment.length
    return slope, offset, volume


def _section(segment: Segment) -> float:
    return segment.content / segment.length
