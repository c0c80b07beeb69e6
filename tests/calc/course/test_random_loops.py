"""A sample of random loops and days; ``python -m calc.course.random_loops`` checks 400 of them."""

from random import Random

import pytest

from calc.course.random_loops import checked, random_case


@pytest.mark.parametrize("seed", [7, 11, 101, 102])
def test_a_random_loop_has_no_impossible_state(seed):
    draw = Random(seed)  # noqa: S311 - loops, not secrets
    found = [checked(random_case(draw)) for _ in range(12)]
    assert sum(each.curve.phases.boiling is not None for each in found) >= 2
    assert sum(each.curve.phases.emptying is None for each in found) >= 1
