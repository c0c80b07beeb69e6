"""The root finder against functions whose roots are known by hand."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.kernel.roots import bracketed, first_crossing, near


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

    assert bracketed(never, low, high, low, high, 1e-9) == (0.0, 0)


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
