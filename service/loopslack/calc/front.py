"""The steam front: how far steam reaches into the branches of one steam space, and what it loses on the way.

Branches joined below the front share one steam pressure, so their fronts stand at one elevation. Where every
branch runs linearly between the same two heights, that means equal shares of length. A level stretch fills at
constant elevation; a rising one (a crest) is filled on the way and makes the elevation rise, so a path that is not
``falling`` may have more than one equilibrium. Geometry only: no fluid here.
"""

from collections.abc import Sequence
from typing import NamedTuple

from msgspec import Struct

from loopslack.calc.model import Branch, Segment

_SAME_HEIGHT = 1e-9


class Front(Struct, frozen=True, gc=False):
    """Where the steam ends: pipe volume filled (m3), elevation (m), power not spent (W), place on the path."""

    volume: float
    height: float
    unspent: float
    place: float


class SteamPath:
    """Volume, loss and elevation of the steam-filled pipes, piecewise linear between ``stops``.

    Stop ``k`` has the cumulative volume (m3), conductance (W/K), conductance times ambient (W) and the elevation
    (m) of the front there; ``reaches[k]`` is the length filled in each branch (m).
    """

    __slots__ = ("branches", "conductance", "falling", "heights", "offset", "reaches", "volume", "warmest")

    def __init__(self, branches: Sequence[Branch], start_height: float) -> None:
        self.branches = tuple(branches)
        self.volume, self.conductance, self.offset = [0.0], [0.0], [0.0]
        self.heights = [start_height]
        self.reaches = [[0.0] * len(self.branches)]
        self.warmest = max((s.ambient for b in branches for s in b.segments), default=0.0)
        if not branches:
            pass
        elif _is_linear(self.branches):
            self._advance(dict(enumerate(_stretches(b.segments, 0.0) for b in self.branches)))
        else:
            _Descent(self).run()
        self.falling = all(
            b <= a + _SAME_HEIGHT for a, b in zip(self.heights, self.heights[1:], strict=False)
        )

    @property
    def total_volume(self) -> float:
        """Content of all open branches, m3."""
        return self.volume[-1]

    def loss(self, temperature: float) -> float:
        """Power lost with every branch full of steam, W."""
        return self.conductance[-1] * temperature - self.offset[-1]

    def front(self, power: float, temperature: float) -> Front:
        """Where the losses of the filled lengths equal ``power`` at a steam temperature (K)."""
        conductance, offset = self.conductance, self.offset
        last = len(conductance) - 1
        before = 0.0
        if power > 0:
            for k in range(1, last + 1):
                here = conductance[k] * temperature - offset[k]
                if here >= power:
                    share = (power - before) / (here - before)
                    j = k - 1
                    volume, heights = self.volume, self.heights
                    return Front(
                        volume[j] + share * (volume[k] - volume[j]),
                        heights[j] + share * (heights[k] - heights[j]),
                        0.0,
                        j + share,
                    )
                before = here
            return Front(self.volume[last], self.heights[last], power - before, float(last))
        return Front(0.0, self.heights[0], 0.0, 0.0)

    def reach(self, place: float) -> list[float]:
        """Length filled in each branch (m) with the front at a ``place``."""
        k = int(place)
        if k >= len(self.reaches) - 1:
            return list(self.reaches[-1])
        share = place - k
        pairs = zip(self.reaches[k], self.reaches[k + 1], strict=True)
        return [a + share * (b - a) for a, b in pairs]

    def stop(self, filled: dict[int, list[tuple[Segment, float]]], height: float) -> None:
        """Add a stop after filling lengths of segments, per branch."""
        volume, conductance, offset = self.volume[-1], self.conductance[-1], self.offset[-1]
        reach = list(self.reaches[-1])
        for branch, pieces in filled.items():
            for segment, length in pieces:
                volume += segment.area * length
                conductance += segment.conductance * length
                offset += segment.conductance * length * segment.ambient
                reach[branch] += length
        self.volume.append(volume)
        self.conductance.append(conductance)
        self.offset.append(offset)
        self.heights.append(height)
        self.reaches.append(reach)

    def _advance(self, stretches: dict[int, list["_Stretch"]]) -> None:
        """Fill several stretches side by side, each by the same share of its own length."""
        lengths = {b: sum(s.length for s in parts) for b, parts in stretches.items()}
        marks: set[float] = {1.0}
        for branch, parts in stretches.items():
            done = 0.0
            for part in parts[:-1]:
                done += part.length
                marks.add(done / lengths[branch])
        previous = 0.0
        for mark in sorted(marks):
            filled: dict[int, list[tuple[Segment, float]]] = {}
            height = -float("inf")
            for branch, parts in stretches.items():
                pieces, here = _between(parts, previous * lengths[branch], mark * lengths[branch])
                filled[branch] = pieces
                height = max(height, here)
            self.stop(filled, height)
            previous = mark


class _Stretch(NamedTuple):
    segment: Segment
    length: float
    low: float  # height at the collector side of the stretch
    high: float  # height at the far side


def _stretches(segments: Sequence[Segment], skip: float) -> list[_Stretch]:
    """What is left of a branch after ``skip`` metres."""
    found = []
    for segment in segments:
        if skip >= segment.length - _SAME_HEIGHT:
            skip -= segment.length
            continue
        start = segment.start_height
        if skip > 0:
            start += (segment.end_height - start) * skip / segment.length
        found.append(_Stretch(segment, segment.length - max(skip, 0.0), start, segment.end_height))
        skip = 0.0
    return found


def _between(parts: list[_Stretch], begin: float, end: float) -> tuple[list[tuple[Segment, float]], float]:
    """Segments and lengths between two distances along stretches, and the height at the second."""
    pieces, height, done = [], parts[0].low, 0.0
    for part in parts:
        first, last = max(begin, done), min(end, done + part.length)
        if last > first:
            pieces.append((part.segment, last - first))
            height = part.low + (part.high - part.low) * (last - done) / part.length
        done += part.length
    return pieces, height


def _is_linear(branches: Sequence[Branch]) -> bool:
    """Whether all branches run straight between the same two heights."""
    start, end = branches[0].segments[0].start_height, branches[0].segments[-1].end_height
    for branch in branches:
        done, length = 0.0, branch.length
        for segment in branch.segments:
            if abs(segment.start_height - (start + (end - start) * done / length)) > 1e-6:
                return False
            done += segment.length
        if abs(branch.segments[-1].end_height - end) > 1e-6:
            return False
    return True


class _Descent:
    """Lets the front sink from elevation to elevation along branches of different profiles."""

    def __init__(self, path: SteamPath) -> None:
        self.path = path
        self.left = {k: _stretches(b.segments, 0.0) for k, b in enumerate(path.branches)}

    def run(self) -> None:
        """Fill the path until no branch is left."""
        while self.left:
            level = max(parts[0].low for parts in self.left.values())
            here = {k: p for k, p in self.left.items() if p[0].low >= level - _SAME_HEIGHT}
            rising = {k: p for k, p in here.items() if p[0].high >= p[0].low - _SAME_HEIGHT}
            if rising:
                self._climb(rising, level)
            else:
                self._sink(here, level)

    def _climb(self, rising: dict[int, list[_Stretch]], level: float) -> None:
        """Fill each level or rising stretch until its branch is back at the level."""
        excursions = {}
        for branch, parts in rising.items():
            excursion: list[_Stretch] = []
            rest = list(parts)
            while rest:
                part = rest.pop(0)
                if part.high >= level - _SAME_HEIGHT:
                    excursion.append(part)
                    if part.high <= level + _SAME_HEIGHT:
                        break
                    continue
                if part.low > level + _SAME_HEIGHT:
                    share = (part.low - level) / (part.low - part.high)
                    excursion.append(_Stretch(part.segment, part.length * share, part.low, level))
                    part = _Stretch(part.segment, part.length * (1 - share), level, part.high)
                rest.insert(0, part)
                break
            excursions[branch] = excursion
            self._keep(branch, rest)
        self.path._advance(excursions)  # noqa: SLF001 - the descent is the path's own construction

    def _sink(self, here: dict[int, list[_Stretch]], level: float) -> None:
        """Let the front fall to the next height at which anything changes."""
        others = [p[0].low for k, p in self.left.items() if k not in here]
        target = max([p[0].high for p in here.values()] + others)
        filled: dict[int, list[tuple[Segment, float]]] = {}
        for branch, parts in here.items():
            part = parts[0]
            share = min(1.0, (level - target) / (part.low - part.high))
            filled[branch] = [(part.segment, part.length * share)]
            rest = parts[1:]
            if share < 1 - 1e-12:
                rest = [_Stretch(part.segment, part.length * (1 - share), target, part.high), *rest]
            self._keep(branch, rest)
        self.path.stop(filled, target)

    def _keep(self, branch: int, rest: list[_Stretch]) -> None:
        if rest:
            self.left[branch] = rest
        else:
            del self.left[branch]
