"""The root finder against functions whose roots are known by hand."""

import math
from collections.abc import Callable
from math import log

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.kernel.roots import Met, Root, bracketed, first_crossing, met_from_below, near


@given(st.floats(-50, 50), st.floats(0.01, 100), st.floats(0.01, 100), st.sampled_from([1, 3, 5]))
def test_a_bracketed_root_is_found(root: float, below: float, above: float, power: int) -> None:
    def function(x: float) -> float:
        return (x - root) ** power + 0.01 * (x - root)

    low, high = root - below, root + above
    found = bracketed(function, low, high, function(low), function(high), 1e-10)
    assert low <= found.at <= high
    assert found.at == pytest.approx(root, abs=1e-7)
    assert found.evaluations <= 80


def test_a_first_step_that_hardly_moves_is_not_taken_for_the_root() -> None:
    """Between -1e-6 and 1e6 a straight line meets zero a hair beside the lower end, far from the root."""

    def kinked(x: float) -> float:
        return x * 1e6 if x > 0 else x * 1e-6

    assert bracketed(kinked, -1.0, 1.0, -1e-6, 1e6, 1e-9).at == pytest.approx(0, abs=1e-8)


@pytest.mark.parametrize(("low", "high"), [(0.0, 2.0), (-1.0, 0.0)])
def test_a_root_at_an_end_costs_no_evaluation(low: float, high: float) -> None:
    def never(x: float) -> float:
        raise AssertionError(x)

    assert bracketed(never, low, high, low, high, 1e-9) == Root(0.0, 0)


def test_a_jump_through_zero_is_found_where_it_jumps() -> None:
    found = bracketed(lambda x: -1.0 if x < 0.3 else 2.0, 0.0, 1.0, -1.0, 2.0, 1e-9)
    assert found.at == pytest.approx(0.3, abs=1e-6)


def test_a_falling_function_is_as_good_as_a_rising_one() -> None:
    found = bracketed(lambda x: math.exp(-x) - 0.5, 0.0, 5.0, 0.5, math.exp(-5) - 0.5, 1e-12)
    assert found.at == pytest.approx(math.log(2), abs=1e-9)


def test_the_lowest_of_several_crossings_is_taken() -> None:
    found = first_crossing(math.sin, [1.0 + 0.5 * n for n in range(20)], 1e-10)
    assert found is not None
    assert found.at == pytest.approx(math.pi, abs=1e-8)


def test_no_crossing_is_told_apart_from_a_root() -> None:
    assert first_crossing(lambda x: x * x + 1, [-1.0, 0.0, 1.0], 1e-9) is None
    assert first_crossing(math.sin, [1.0], 1e-9) is None


@given(
    st.floats(-50, 50), st.floats(0.01, 100), st.floats(0.01, 100), st.floats(-0.5, 1.5), st.floats(-1, 30)
)
def test_a_root_looked_for_nearby_is_found_wherever_the_look_begins(root, below, above, place, slope) -> None:
    def rising(x: float) -> float:
        return (x - root) ** 3 + 2 * (x - root) + (1.0 if x > root + 1 else 0.0)

    low, high = root - below, root + above
    found = near(rising, low, high, low + place * (high - low), slope, 1e-10)
    assert low <= found.at <= high
    assert found.at == pytest.approx(root, abs=1e-9)


def test_a_root_at_an_end_that_is_never_evaluated_is_come_to() -> None:
    assert near(lambda x: x - 1.0, 0.0, 1.0, 0.4, 3.0, 1e-12).at == pytest.approx(1.0, abs=1e-11)
    assert near(lambda x: x, 0.0, 1.0, 0.4, 3.0, 1e-12).at == pytest.approx(0.0, abs=1e-11)


def test_a_good_start_takes_three_evaluations() -> None:
    assert near(lambda x: math.exp(x) - 2, 0.0, 5.0, math.log(2) + 1e-3, 2.0, 1e-9).evaluations <= 3


def counted(function: Callable[[float], float]) -> tuple[Callable[[float], float], list[float]]:
    seen: list[float] = []

    def at(x: float) -> float:
        seen.append(x)
        return function(x)

    return at, seen


@pytest.mark.parametrize("guess", [0.1, 0.5, 0.99, 1.0, 1.01, 3.0, 50.0])
@pytest.mark.parametrize("slope", [0.0, 0.3, 1.0, 5.0])
@pytest.mark.parametrize(
    "function",
    [lambda x: x - 1, log, lambda x: x**3 - 1, lambda x: min(x - 1, 0.1 * (x - 1))],
    ids=["straight", "concave", "convex", "bent at its root"],
)
def test_what_is_met_from_below_lies_at_or_just_beyond_the_root(
    function: Callable[[float], float], guess: float, slope: float
) -> None:
    at, seen = counted(function)
    found = met_from_below(at, 0.1, guess, slope, 1e-11)
    assert found is not None
    assert 0 <= function(found.at) < 1e-9
    assert found.at in seen
    assert 1 <= found.at <= 1 + 1e-9
    assert len(seen) <= 45


def test_a_good_guess_with_its_slope_takes_few_looks() -> None:
    at, seen = counted(log)
    found = met_from_below(at, 0.1, 0.999, 1.0, 1e-11)
    assert found is not None
    assert len(seen) <= 5
    assert found.slope == pytest.approx(1.0, rel=1e-3)


@pytest.mark.parametrize("guess", [0.1, 0.2, 0.3, 0.7])
def test_what_jumps_through_nought_is_met_on_the_far_side_of_the_jump(guess: float) -> None:
    found = met_from_below(lambda x: -1e5 if x < 0.3 else 3e4, 0.1, guess, 0.0, 1e-9)
    assert found is not None
    assert 0.3 <= found.at <= 0.3 * (1 + 1e-8)


def test_what_is_not_negative_at_the_low_end_is_met_there() -> None:
    assert met_from_below(lambda x: x, 0.5, 3.0, 1.0, 1e-9) == Met(0.5, 1.0)


def test_what_stays_negative_is_never_met() -> None:
    assert met_from_below(lambda x: -1 / x, 0.1, 0.1, 0.0, 1e-9) is None
    assert met_from_below(lambda x: x - 7, 0.0, 1.0, 1.0, 1e-9, highest=5.0) is None
