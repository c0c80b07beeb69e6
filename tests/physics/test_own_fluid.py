"""The monotone curve of a caller's own table."""

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.interpolate import PchipInterpolator

from loopslack.physics.own_fluid import MonotoneCurve

steps = st.lists(st.tuples(st.floats(0.1, 50.0), st.floats(-5.0, 5.0)), min_size=2, max_size=12)
rises = st.lists(st.tuples(st.floats(0.1, 50.0), st.floats(0.01, 5.0)), min_size=2, max_size=12)


def points(moves: list[tuple[float, float]]) -> list[tuple[float, float]]:
    xs = np.cumsum([1.0, *(step for step, _ in moves)])
    ys = np.cumsum([10.0, *(rise for _, rise in moves)])
    return list(zip(xs.tolist(), ys.tolist(), strict=True))


@given(steps, st.floats(0.0, 1.0))
def test_the_curve_is_the_one_of_the_second_opinion(moves: list[tuple[float, float]], share: float) -> None:
    table = points(moves)
    curve, other = MonotoneCurve(table), PchipInterpolator(*zip(*table, strict=True))
    x = min(curve.first + share * (curve.last - curve.first), curve.last)
    assert curve.at(x) == pytest.approx(float(other(x)), abs=1e-9)


@given(steps)
def test_the_curve_goes_through_its_points(moves: list[tuple[float, float]]) -> None:
    table = points(moves)
    curve = MonotoneCurve(table)
    for x, y in table:
        assert curve.at(x) == pytest.approx(y, abs=1e-11)


@given(steps, st.floats(0.0, 1.0))
def test_the_curve_never_overshoots_the_points_beside_it(
    moves: list[tuple[float, float]], share: float
) -> None:
    table = points(moves)
    curve = MonotoneCurve(table)
    for (left, before), (right, after) in pairwise(table):
        value = curve.at(left + share * (right - left))
        assert min(before, after) - 1e-9 <= value <= max(before, after) + 1e-9


@given(rises, st.floats(0.0, 1.0))
def test_the_inverse_gives_back_the_value(moves: list[tuple[float, float]], share: float) -> None:
    table = points(moves)
    curve = MonotoneCurve(table)
    y = table[0][1] + share * (table[-1][1] - table[0][1])
    assert curve.at(curve.inverse(y)) == pytest.approx(y, abs=1e-10)


def test_three_points_on_a_line_stay_a_line() -> None:
    curve = MonotoneCurve([(0.0, 1.0), (1.0, 3.0), (4.0, 9.0)])
    assert curve.at(2.5) == pytest.approx(6.0, rel=1e-14)
    assert curve.inverse(6.0) == pytest.approx(2.5, rel=1e-12)


def test_two_points_are_joined_by_a_line() -> None:
    assert MonotoneCurve([(1.0, 5.0), (3.0, 9.0)]).at(2.0) == 7.0


def test_a_rounding_error_past_either_end_is_answered() -> None:
    curve = MonotoneCurve([(0.0, 1.0), (1.0, 3.0), (4.0, 9.0)])
    assert curve.at(-1e-9) == pytest.approx(1.0, abs=1e-8)
    assert curve.at(4.0 + 1e-9) == pytest.approx(9.0, abs=1e-8)
