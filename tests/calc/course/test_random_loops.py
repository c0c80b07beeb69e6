"""A sample of random loops and days; ``all_random_loops`` checks 400 of them."""

from random import Random

import pytest

from calc.course.random_loops import Found, RandomCase, checked, random_case
from calc.loops import random_loop
from loopslack.calc.charge import Charge
from loopslack.calc.course.mapping import mapped
from loopslack.calc.course.march import Accuracy
from loopslack.calc.course.weather import ClearSky
from loopslack.kernel.errors import NotApplicable


@pytest.mark.parametrize("seed", [7, 11, 101, 102])
def test_a_random_loop_has_no_impossible_state(seed):
    draw = Random(seed)  # noqa: S311 - loops, not secrets
    found = [checked(random_case(draw)) for _ in range(12)]
    assert sum(each.curve.phases.boiling is not None for each in found) >= 2
    assert sum(each.curve.phases.emptying is None for each in found) >= 1


def charged(loop) -> Charge:
    """Twice what the rules for boiling collectors would take, half a bar above the static head."""
    fill = loop.temperatures.fill
    density = loop.fluid.density(fill)
    head = max(0.0, *(group.height for group in loop.groups))
    precharge = loop.atmosphere + density * 9.80665 * head + 0.5e5
    nominal = 3 * loop.collector_content + 0.2 * loop.content
    filled = nominal * (1 - precharge / (precharge + 0.4e5))
    return Charge(nominal, precharge, fill, filled, filled * density, loop.temperatures.vessel_room, 0.0)


def answered(seed: int) -> Found | NotApplicable:
    loop = random_loop(seed)
    try:
        case = mapped(loop, charged(loop))
    except NotApplicable as refusal:
        return refusal
    return checked(RandomCase(case.loop, ClearSky(), Accuracy()))


@pytest.mark.parametrize("first", range(0, 40, 10))
def test_a_loop_of_the_sizing_tests_is_answered_or_refused_as_not_applicable(first):
    found = [answered(seed) for seed in range(first, first + 10)]
    refused = [each for each in found if isinstance(each, NotApplicable)]
    assert len(refused) < 6
    assert all(each.code == "course-not-applicable" and each.remedy for each in refused)
    assert all(each.curve.complete for each in found if isinstance(each, Found))
