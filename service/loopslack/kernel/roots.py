"""One root finder for functions that change sign once between two ends.

Bracketing, so that it always ends with an answer; no derivative is needed. Written here because a numerics package
would cost a second of start-up and 60 MB for these thirty lines.
"""

from collections.abc import Callable, Iterable
from typing import NamedTuple


class Root(NamedTuple):
    """Where the function crosses zero, and how many evaluations that took."""

    at: float
    evaluations: int


class SlopedRoot(NamedTuple):
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
    the ends. Ends when the value is within ``accuracy`` of nought, or nothing is left between the ends. The slope
    told is the last one seen.
    """
    here = guess if low < guess < high else 0.5 * (low + high)
    value = function(here)
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
        following = function(beside)
        slope = (following - value) / (beside - here)
        here, value = beside, following
    return SlopedRoot(here, most, slope)


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
