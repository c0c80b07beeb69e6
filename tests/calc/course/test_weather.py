"""Sun and ambient of the day, stated or assumed."""

import pytest

from calc.course.cases import HOUR, course, lumped
from loopslack.calc.course.lumped import Start
from loopslack.calc.course.march import Accuracy
from loopslack.calc.course.weather import ClearSky, StatedWeather
from loopslack.kernel.errors import Contradiction, NotApplicable, OutOfRange


def stated(times, irradiances=None, ambients=None) -> StatedWeather:
    return StatedWeather(
        times=tuple(times),
        irradiances=tuple(irradiances or (0.0,) * len(times)),
        ambients=tuple(ambients or (293.15,) * len(times)),
    )


def test_the_clear_sky_is_a_half_sine_with_its_top_at_noon():
    sky = ClearSky()
    assert sky.irradiance(12 * HOUR) == 1000.0
    assert sky.irradiance(8 * HOUR) == pytest.approx(500.0)
    assert sky.irradiance(6 * HOUR) == sky.irradiance(18 * HOUR) == sky.irradiance(3 * HOUR) == 0.0
    assert (sky.dawn, sky.end) == (5 * HOUR, 29 * HOUR)


def test_stated_weather_is_straight_between_its_times_and_held_beyond_them():
    weather = stated((0.0, 1800.0, 5400.0), (0.0, 100.0, 500.0), (290.0, 291.0, 295.0))
    assert weather.irradiance(900.0) == 50.0
    assert weather.irradiance(3600.0) == 300.0
    assert weather.ambient(3600.0) == 293.0
    assert weather.ambient(-5.0) == 290.0
    assert weather.ambient(9999.0) == 295.0
    assert (weather.dawn, weather.end) == (0.0, 5400.0)


def test_a_clear_sky_stated_every_five_minutes_gives_the_same_day_as_the_clear_sky():
    sky = ClearSky()
    times = [5 * HOUR + 300 * k for k in range(289)]
    copy = stated(times, map(sky.irradiance, times), map(sky.ambient, times))
    one, other = course(lumped(), sky), course(lumped(), copy)
    assert other.largest["steam_volume"].value == pytest.approx(one.largest["steam_volume"].value, rel=2e-3)
    assert other.phases.end == pytest.approx(one.phases.end, abs=300)


@pytest.mark.parametrize(
    ("times", "kind"),
    [
        ((0.0,), Contradiction),
        ((0.0, 0.0), Contradiction),
        ((0.0, 1800.0, 900.0), Contradiction),
        ((0.0, 3601.0), Contradiction),
        ((0.0, float("nan")), Contradiction),
        ((-5.0, 10.0), OutOfRange),
        (tuple(3600.0 * k for k in range(98)), OutOfRange),
    ],
)
def test_times_that_do_not_rise_by_an_hour_at_most_are_refused(times, kind):
    with pytest.raises(kind):
        stated(times)


@pytest.mark.parametrize("irradiance", [-1.0, 1501.0, float("nan"), float("inf")])
def test_an_irradiance_that_is_not_credible_is_refused(irradiance):
    with pytest.raises(OutOfRange):
        stated((0.0, 10.0), (0.0, irradiance))
    with pytest.raises(OutOfRange):
        ClearSky(highest_irradiance=irradiance)


@pytest.mark.parametrize("ambient", [200.0, 340.0, float("nan")])
def test_an_ambient_that_is_not_credible_is_refused(ambient):
    with pytest.raises(OutOfRange):
        stated((0.0, 10.0), None, (293.15, ambient))
    with pytest.raises(OutOfRange):
        ClearSky(mean_ambient=ambient)


def test_columns_of_different_length_are_refused():
    with pytest.raises(Contradiction):
        StatedWeather(times=(0.0, 10.0), irradiances=(0.0,), ambients=(293.15, 293.15))


@pytest.mark.parametrize(("rise", "fall"), [(18.0, 6.0), (-1.0, 18.0), (6.0, 25.0), (6.0, 6.0)])
def test_a_sun_that_sets_before_it_rises_is_refused(rise, fall):
    with pytest.raises(Contradiction):
        ClearSky(sunrise=rise * HOUR, sunset=fall * HOUR)


def test_a_start_after_the_end_of_the_weather_is_refused():
    with pytest.raises(Contradiction):
        course(lumped(start=Start(time=30 * HOUR)))


def test_frozen_collectors_are_refused_with_both_temperatures():
    with pytest.raises(NotApplicable) as error:
        course(lumped(), ClearSky(mean_ambient=243.15, swing=0.0))
    assert error.value.code == "course-not-applicable"
    assert error.value.facts["start"] == 243.15


def test_liquid_that_freezes_during_the_course_is_flagged():
    times = [600.0 * k for k in range(200)]
    falling = [293.15 - 60 * min(1.0, k / 60) for k in range(200)]
    curve = course(lumped(), stated(times, None, falling))
    assert "liquid-freezes" in curve.flags
    assert "liquid-freezes" not in course(lumped()).flags


def test_no_step_passes_over_a_burst_of_sun_in_the_dark():
    times = [300.0 * k for k in range(100)]
    burst = [1000.0 if k == 61 else 0.0 for k in range(100)]
    curve = course(lumped(), stated(times, burst))
    assert curve.energy["sun"] == pytest.approx(18.4 * 0.79 * 1000 * 300, rel=0.35)
    assert curve.largest["collector_temperature"].value > 293.15 + 15


def test_a_liquid_hotter_than_its_data_is_flagged_with_and_without_steam():
    hot = lumped(linear_loss=1.0, quadratic_loss=0.002, relief=None)
    assert "beyond-property-range" in course(hot).flags
    assert "beyond-property-range" not in course(lumped()).flags


def test_a_loop_has_returned_when_it_is_full_again_and_nothing_was_lost():
    assert course(lumped()).returned
    assert not course(lumped(0.018)).returned
    assert not course(lumped(), accuracy=Accuracy(most_steps=150)).returned
