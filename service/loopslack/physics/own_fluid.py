"""A property of a caller's own fluid by table: a monotone curve through stated points, and its inverse.

No extrapolation: whoever holds the curve refuses what lies outside the table. Nothing about loops or units.
"""

from bisect import bisect_right
from collections.abc import Sequence


class MonotoneCurve:
    """Piecewise cubic through points of rising ``x`` that never overshoots them.

    Slopes after Fritsch and Butland (1984): the weighted harmonic mean of the neighbouring chords, nought at
    a turn of the data, and at the ends a three-point slope held within the first chord's sign and three times
    its size. From memory; equal to the widely used PCHIP scheme.
    """

    __slots__ = ("_pieces", "first", "last", "xs", "ys")

    def __init__(self, points: Sequence[tuple[float, float]]) -> None:
        self.xs = [x for x, _ in points]
        self.ys = [y for _, y in points]
        self.first, self.last = self.xs[0], self.xs[-1]
        steps = [after - before for before, after in zip(self.xs, self.xs[1:], strict=False)]
        chords = [
            (after - before) / step for before, after, step in zip(self.ys, self.ys[1:], steps, strict=False)
        ]
        slopes = _slopes(steps, chords)
        self._pieces = [
            (y, left, (3 * chord - 2 * left - right) / step, (left + right - 2 * chord) / (step * step))
            for y, left, right, chord, step in zip(self.ys, slopes, slopes[1:], chords, steps, strict=False)
        ]

    def at(self, x: float) -> float:
        """Value at an ``x`` of the table's range; the ends included, a rounding error past them too."""
        piece = min(max(bisect_right(self.xs, x) - 1, 0), len(self._pieces) - 1)
        a, b, c, d = self._pieces[piece]
        h = x - self.xs[piece]
        return a + h * (b + h * (c + h * d))

    def inverse(self, y: float) -> float:
        """The ``x`` at which a curve of rising ``ys`` takes a value of its range.

        Newton's steps within the piece, each kept inside a bracket that shrinks, so that a flat end cannot
        mislead.
        """
        piece = min(max(bisect_right(self.ys, y) - 1, 0), len(self._pieces) - 1)
        a, b, c, d = self._pieces[piece]
        low, high = 0.0, self.xs[piece + 1] - self.xs[piece]
        h = high * (y - a) / (self.ys[piece + 1] - a)
        close = 1e-12 * (self.ys[-1] - self.ys[0])
        for _ in range(60):  # pragma: no branch - a bracket halved so often has met the value
            excess = a + h * (b + h * (c + h * d)) - y
            if abs(excess) <= close:
                break
            if excess > 0:
                high = h
            else:
                low = h
            slope = b + h * (2 * c + 3 * h * d)
            step = h - excess / slope if slope > 0 else low
            h = step if low < step < high else 0.5 * (low + high)
        return self.xs[piece] + h


def _slopes(steps: list[float], chords: list[float]) -> list[float]:
    if len(chords) == 1:
        return [chords[0], chords[0]]
    inner = [_harmonic(steps[i - 1], steps[i], chords[i - 1], chords[i]) for i in range(1, len(chords))]
    return [
        _end(steps[0], steps[1], chords[0], chords[1]),
        *inner,
        _end(steps[-1], steps[-2], chords[-1], chords[-2]),
    ]


def _harmonic(before: float, after: float, chord_before: float, chord_after: float) -> float:
    if chord_before * chord_after <= 0.0:
        return 0.0
    weight_before, weight_after = 2 * after + before, after + 2 * before
    return (weight_before + weight_after) / (weight_before / chord_before + weight_after / chord_after)


def _end(near: float, far: float, chord_near: float, chord_far: float) -> float:
    slope = ((2 * near + far) * chord_near - near * chord_far) / (near + far)
    if slope * chord_near <= 0.0:
        return 0.0
    if chord_near * chord_far <= 0.0 and abs(slope) > 3 * abs(chord_near):
        return 3 * chord_near
    return slope
