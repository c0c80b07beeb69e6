"""Four hundred random loops, too many for every run: ``pytest tests/calc/course/all_random_loops.py``."""

from random import Random

import pytest

from calc.course.random_loops import checked, random_case, report


@pytest.mark.parametrize("seed", range(1001, 1009))
def test_fifty_random_loops_have_no_impossible_state(seed):
    draw = Random(seed)  # noqa: S311 - loops, not secrets
    found = [checked(random_case(draw)) for _ in range(50)]
    print(report(found))
