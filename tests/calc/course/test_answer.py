"""The answer: one course, its envelope, its pauses, and its limit of steps."""

import pytest

from calc.course.cases import BAR, HOUR, case, course, lumped
from loopslack.calc.course.curve import COLUMNS
from loopslack.calc.course.envelope import day_course
from loopslack.calc.course.march import Accuracy, marching
from loopslack.calc.course.weather import ClearSky
from loopslack.kernel.work import finished


@pytest.fixture(scope="module")
def answer():
    return finished(day_course(case(), ClearSky()))


def test_the_course_has_a_row_a_minute_for_a_day(answer):
    curve = answer.curve
    assert len(curve.time) == 24 * 60 + 1
    assert curve.time[0] == 5 * HOUR
    assert all(b - a == pytest.approx(60.0) for a, b in zip(curve.time, curve.time[1:], strict=False))
    assert all(len(getattr(curve, name)) == len(curve.time) for name in COLUMNS)


def test_the_one_course_is_that_of_the_stated_class_without_reflux(answer):
    assert answer.curve.largest == course(case().loop).largest


def test_the_envelope_runs_over_good_and_poor_with_and_without_reflux(answer):
    corners = {(corner.residual_share, corner.reflux) for corner in answer.corners}
    assert corners == {(0.2, 0.0), (0.2, 1.0), (0.8, 0.0), (0.8, 1.0)}


def test_no_course_leaves_the_envelope_and_its_edges_are_reached(answer):
    curves = [answer.curve, *(corner.curve for corner in answer.corners)]
    for name in COLUMNS:
        band, columns = answer.bands[name], [getattr(curve, name) for curve in curves]
        for k in range(0, len(band.low), 7):
            values = [column[k] for column in columns]
            assert band.low[k] == min(values)
            assert band.high[k] == max(values)


def test_the_spans_hold_the_largest_values_and_the_dates_of_all_courses(answer):
    curves = [answer.curve, *(corner.curve for corner in answer.corners)]
    for name, span in answer.largest.items():
        values = [curve.largest[name].value for curve in curves]
        assert (span.low, span.high) == (min(values), max(values))
    for name, span in answer.phases.items():
        dates = [getattr(curve.phases, name) for curve in curves]
        assert (span.low, span.high) == (min(dates), max(dates))
        assert span.always


def test_the_envelope_of_the_reference_day_is_as_wide_as_its_assumptions(answer):
    assert answer.largest["steam_volume"].low * 1e3 == pytest.approx(17.15, abs=0.1)
    assert answer.largest["steam_volume"].high * 1e3 == pytest.approx(24.0, abs=0.2)
    assert answer.largest["reach"].high > 22
    assert answer.largest["reach"].low < 6
    assert answer.largest["vessel_pressure"].high < 6 * BAR + 101325
    assert answer.discharged.high == 0.0
    assert answer.complete
    assert {"residue", "wetted-share", "reflux", "design-case"} <= {each.id for each in answer.assumptions}


def test_a_flag_of_one_course_is_not_certain():
    found = finished(day_course(case(0.018), ClearSky(), interval=600.0))
    assert "discharge" in found.flags
    assert found.certain_flags <= found.flags
    assert found.certain_flags == frozenset.intersection(
        found.curve.flags, *(corner.curve.flags for corner in found.corners)
    )
    assert found.discharged.high > found.discharged.low


def test_a_day_without_steam_dates_no_phase():
    found = finished(day_course(case(), ClearSky(highest_irradiance=400.0), interval=600.0))
    assert found.phases == {}
    assert found.largest["steam_volume"].high == 0.0


def test_a_march_that_runs_out_of_steps_says_so_and_ends_early():
    curve = course(lumped(), accuracy=Accuracy(most_steps=150))
    assert not curve.complete
    assert curve.time[-1] < 29 * HOUR - 60
    assert curve.steps <= 150
    found = finished(day_course(case(), ClearSky(), Accuracy(most_steps=150)))
    assert not found.complete
    assert len(found.bands["reach"].low) <= len(found.curve.time)


def test_the_work_pauses_often():
    assert sum(1 for _ in day_course(case(), ClearSky())) > 150


def test_pausing_changes_nothing():
    pauses, found = 0, None
    work = marching(lumped(), ClearSky())
    while found is None:
        try:
            next(work)
            pauses += 1
        except StopIteration as end:
            found = end.value
    assert pauses > 20
    assert found == course(lumped())


def test_the_same_question_gives_the_same_answer():
    assert course(lumped()) == course(lumped())
