"""One root finder for functions that change sign once between two ends.

Bracketing, so that it always ends with an answer; no derivative is needed. Written here because a numerics package
would cost a second of start-up and 60 MB for these thirty lines.
"""

from collections.abc import Callable, Iterable
from math import inf

from msgspec import Struct

_LADDER = 1.2  # step of a search outwards where nothing tells more
_LEAP = 10.0  # most it steps at once where a slope tells how far
_RUNGS = 55  # 1.2^55 is 22,000
_CLOSE = 3.0  # tolerances by which a place that is met may lie beyond the root
_SOON = 1e3  # times the accuracy: what a step that is not looked at may leave where the function bends
_MARGIN = 10.0  # by which the next step of a search is expected to do better than it must


class Root(Struct, frozen=True, gc=False):
    """Where the function crosses zero, and how many evaluations that took."""

    at: float
    evaluations: int


class SlopedRoot(Struct, frozen=True, gc=False):
    """Where the function crosses zero, how many evaluations that took, and how steeply it rises there."""

    at: float
    evaluations: int
    slope: float


def bracketed(
    function: Callable[[float], float],
    low: float,
    high: float,
    at_low: float,
    at_high: float,
    tolerance: float,
    most: int = 80,
) -> Root:
    """Root between ``low`` and ``high``, whose values have different signs.

    Regula falsi with the Anderson-Bjorck weighting, and a bisection whenever three steps have not halved the
    bracket. Ends when the bracket is within ``tolerance``, or when the last step is and the sign changes that close
    to it: a step that hugs an end of a lopsided bracket is small too, and no root.
    """
    if at_low == 0:
        return Root(low, 0)
    if at_high == 0:
        return Root(high, 0)
    rising = at_high > 0
    width, count, guess = high - low, 0, low
    while count < most:
        previous = guess
        guess = high - at_high * (high - low) / (at_high - at_low)
        if count % 3 == 2:
            if high - low > 0.5 * width:
                guess = 0.5 * (low + high)
            width = high - low
        value = function(guess)
        count += 1
        if value == 0 or high - low <= tolerance:
            return Root(guess, count)
        below = (value > 0) != rising
        if below:
            share = 1 - value / at_low
            at_high *= share if share > 0 else 0.5
            low, at_low = guess, value
        else:
            share = 1 - value / at_high
            at_low *= share if share > 0 else 0.5
            high, at_high = guess, value
        if abs(guess - previous) <= tolerance:
            beside = guess + tolerance if below else guess - tolerance
            if not low < beside < high:
                return Root(guess, count)
            value = function(beside)
            count += 1
            if ((value > 0) != rising) != below:
                return Root(guess, count)
            if below:
                low, at_low = beside, value
            else:
                high, at_high = beside, value
    return Root(guess, count)


def near(
    function: Callable[[float], float],
    low: float,
    high: float,
    guess: float,
    slope: float,
    accuracy: float,
    most: int = 120,
) -> SlopedRoot:
    """Root of a rising function between ``low`` and ``high``, looked for at ``guess`` first.

    For functions asked again and again at little changed places: the ends are never evaluated (the sign must change
    between them), the first step goes along ``slope``, the next ones are secants kept inside what is left between
    the ends. Ends when the value is within ``accuracy`` of nought, or the next step should bring it well inside and
    may leave no more than a thousand times that, or nothing is left between the ends. The slope told is the last one
    seen.
    """
    here = guess if low < guess < high else 0.5 * (low + high)
    value = function(here)
    last = before = 0.0
    for count in range(1, most):
        if -accuracy <= value <= accuracy:
            return SlopedRoot(here, count, slope)
        if value < 0:
            low = here
        else:
            high = here
        halve = count % 5 == 0 if count < 20 else count % 2 == 0
        beside = low if halve or slope <= 0 else here - value / slope
        if not low < beside < high:
            beside = 0.5 * (low + high)
            if not low < beside < high:
                return SlopedRoot(here, count, slope)
        elif abs(value) < _SOON * accuracy and value * value * _MARGIN < accuracy * abs(before):
            # What a secant leaves is a constant times the two values before it, but for a bend on the way.
            return SlopedRoot(beside, count, slope)
        following = function(beside)
        slope = (following - value) / (beside - here)
        before, last, here, value = last, value, beside, following
    return SlopedRoot(here, most, slope)


class Met(Struct, frozen=True, gc=False):
    """Where a function is nought or just above, and its slope there, 0 where none was seen."""

    at: float
    slope: float


def met_from_below(
    function: Callable[[float], float],
    low: float,
    guess: float,
    slope: float,
    tolerance: float,
    *,
    highest: float = inf,
    most: int = 400,
) -> Met | None:
    """The lowest place from ``low`` on where a rising function is not negative, None if none is found.

    For functions that are nearly straight, looked at at ``guess`` first and then along ``slope`` (0 if unknown) and
    along secants, up to ``highest``. The place found has a value of nought or above and lies within a few
    ``tolerance`` (a share) of the root, or of the jump, if the function has one there.
    """
    below = above = None
    here, last, rungs = max(guess, low), None, 0
    first = here - low
    for count in range(most):
        value = function(here)
        if last is not None and here != last[0]:
            slope = (value - last[1]) / (here - last[0])
        last = here, value
        if value < 0:
            below = last
        elif here <= low or (slope > 0 and value <= _CLOSE * tolerance * here * slope):
            return Met(here, max(slope, 0.0))
        else:
            above = last
        left = low if below is None else below[0]
        ahead = here - value / slope + tolerance * here if slope > 0 else inf
        if above is None:
            rungs += 1
            if rungs > _RUNGS or here >= highest:
                return None
            farthest = here * _LEAP + first
            here = min(ahead if ahead < inf else here * _LADDER + first, farthest, highest)
            continue
        if above[0] - left <= tolerance * above[0]:
            return Met(above[0], 0.0)
        if below is None and ahead <= low:
            here = low
        elif left < ahead < above[0] and count % 4 != 3:
            here = ahead
        else:
            here = 0.5 * (left + above[0])
    return above and Met(above[0], 0.0)


def first_crossing(
    function: Callable[[float], float], stops: Iterable[float], tolerance: float
) -> Root | None:
    """The lowest root found by walking ``stops`` upwards until the sign changes; None if it never does."""
    previous: tuple[float, float] | None = None
    for count, stop in enumerate(stops, start=1):
        value = function(stop)
        if previous is not None and (previous[1] < 0) != (value < 0):
            found = bracketed(function, previous[0], stop, previous[1], value, tolerance)
            return Root(found.at, found.evaluations + count)
        previous = (stop, value)
    return None
