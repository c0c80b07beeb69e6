"""What must hold at every step, and what must change in one direction only. Invented loops."""

from itertools import pairwise
from math import cos, pi

import pytest
from msgspec.structs import replace

from calc.course.cases import BAR, HOUR, NOON, course, lumped, march
from calc.course.checks import check_step
from loopslack.calc.course.lumped import Start
from loopslack.calc.course.march import Accuracy
from loopslack.calc.course.weather import ClearSky, StatedWeather

CLASSES = ("good", "fair", "poor")
STARTS = {"dawn": Start(), "noon": NOON}


def outside_strength(going) -> float:
    plant, state = going.plant, going.state
    filled = plant.mass - state.discharged
    return (filled * plant.tables.strength - state.glycol) / (filled - state.left - state.vapour)


@pytest.mark.parametrize("start", list(STARTS))
@pytest.mark.parametrize("emptying", CLASSES)
@pytest.mark.parametrize("nominal", [0.018, 0.08])
def test_mass_glycol_and_volumes_are_kept_at_every_step(emptying, nominal, start):
    end = march(lumped(nominal, emptying=emptying, start=STARTS[start]), each=check_step)
    assert end.complete
    assert end.books.worst_mass < 1e-12


@pytest.mark.parametrize(("emptying", "weakest"), [("good", 0.418), ("fair", 0.403), ("poor", 0.380)])
def test_the_liquid_outside_is_thinned_by_condensate_as_far_as_the_residue_gets_stronger(emptying, weakest):
    strengths = []
    march(lumped(emptying=emptying), each=lambda going: strengths.append(outside_strength(going)))
    assert min(strengths) == pytest.approx(weakest, abs=0.004)
    assert max(strengths) == pytest.approx(0.43, abs=1e-3)


@pytest.mark.parametrize("emptying", CLASSES)
@pytest.mark.parametrize("reflux", [0.0, 1.0])
def test_energy_is_kept_to_a_ten_thousandth_of_the_sun(emptying, reflux):
    curve = course(lumped(emptying=emptying, reflux=reflux))
    assert abs(curve.energy_residual) < 1e-4
    assert curve.mass_residual < 1e-12


@pytest.mark.parametrize("wets_all", [False, True])
@pytest.mark.parametrize("emptying", CLASSES)
def test_steam_power_stays_below_the_bound_while_the_steam_gets_hotter(emptying, wets_all):
    steam, checked = [0.0], [0]

    def watch(going):
        state, loop = going.state, going.plant.loop
        if "refilling" in going.chronicle.phases:
            return
        if state.volume > 0 and state.steam > steam[0] > 0:
            rise = state.steam - going.weather.ambient(state.time)
            bound = loop.peak_efficiency * going.weather.irradiance(state.time)
            bound -= rise * (loop.linear_loss + loop.quadratic_loss * rise)
            assert -1e-9 <= state.steam_power <= bound
            checked[0] += 1
        steam[0] = state.steam

    march(lumped(emptying=emptying, wets_all=wets_all), each=watch)
    assert checked[0] > 40


@pytest.mark.parametrize("loss", [3.2, 3.7, 4.5])
@pytest.mark.parametrize("emptying", CLASSES)
def test_no_collector_gets_hotter_than_its_stagnation_temperature(emptying, loss):
    gain = 0.79 * 1000
    stagnation = 303.15 + 2 * gain / (loss + (loss**2 + 4 * 0.014 * gain) ** 0.5)
    curve = course(lumped(emptying=emptying, linear_loss=loss))
    assert curve.largest["collector_temperature"].value < stagnation


def half_sine(hours: float) -> float:
    clock = hours % 24
    return ClearSky().irradiance(clock * HOUR)


def several_days(days: int, sunny: int) -> StatedWeather:
    """Every five minutes, ambient always 20 degC, sun on the first days only."""
    times = tuple(300.0 * k for k in range(days * 288 + 1))
    return StatedWeather(
        times=times,
        irradiances=tuple(half_sine(t / HOUR) if t < sunny * 24 * HOUR else 0.0 for t in times),
        ambients=(293.15,) * len(times),
    )


@pytest.mark.parametrize("follows", [False, True], ids=["gas of the room", "gas of the liquid"])
@pytest.mark.parametrize("emptying", CLASSES)
def test_two_days_later_the_loop_is_back_in_its_filling_state(emptying, follows):
    loop = lumped(emptying=emptying)
    if follows:
        loop = replace(loop, vessel=replace(loop.vessel, gas_temperature=None))
    weather = several_days(2, sunny=1)
    begin = march(loop, StatedWeather(times=(0.0, 1.0), irradiances=(0.0, 0.0), ambients=(293.15, 293.15)))
    end = march(loop, weather)
    assert end.chronicle.extremes["steam_volume"].value > 0.015
    assert end.state.volume == 0.0
    assert end.state.vessel_pressure == pytest.approx(begin.state.vessel_pressure, rel=1e-5)
    assert end.state.masses[-1] == pytest.approx(begin.state.masses[-1], rel=1e-4)
    assert end.state.left == pytest.approx(begin.state.left, rel=1e-4)
    # Only flow would mix the stronger liquid back.
    assert end.state.strength == pytest.approx(
        {"good": 0.437, "fair": 0.457, "poor": 0.526}[emptying], abs=0.005
    )


def test_a_second_sunny_day_peaks_lower_because_the_residue_starts_stronger():
    weather = several_days(2, sunny=2)
    peaks = [0.0, 0.0]

    def watch(going):
        day = min(1, int(going.state.time // 86400))
        peaks[day] = max(peaks[day], going.state.volume)

    march(lumped(), weather, each=watch)
    assert 0.96 < peaks[1] / peaks[0] < 0.99
    peaks = [0.0, 0.0]
    march(lumped(concentrates=False), weather, each=watch)
    assert peaks[1] == pytest.approx(peaks[0], rel=1e-3)


def largest(loop, name: str) -> float:
    return course(loop).largest[name].value


def falls(values: list[float]) -> bool:
    return all(after < before for before, after in pairwise(values))


def test_a_larger_vessel_sees_less_pressure():
    assert falls(
        [largest(lumped(n / 1000, relief=None), "vessel_pressure") for n in (25, 35, 50, 80, 150, 300)]
    )


def test_a_larger_residue_sends_steam_further():
    assert falls([-largest(lumped(residual_share=s), "reach") for s in (0.05, 0.1, 0.2, 0.45, 0.8, 0.95)])


def test_a_collector_that_loses_more_gets_less_hot():
    assert falls([largest(lumped(linear_loss=a), "collector_temperature") for a in (3.0, 3.5, 4.0, 5.0)])


def test_heavier_pipes_take_less_steam():
    loop = lumped()
    heavier = [
        replace(loop, pipe=replace(loop.pipe, capacity=tuple(f * c for c in loop.pipe.capacity)))
        for f in (0.1, 0.5, 1.0, 2.0, 5.0)
    ]
    assert falls([largest(each, "steam_volume") for each in heavier])


def test_more_reflux_makes_more_steam():
    assert falls([-largest(lumped(reflux=r), "steam_volume") for r in (0.0, 0.25, 0.5, 0.75, 1.0)])


def test_without_a_valve_or_below_its_set_pressure_nothing_is_lost():
    assert course(lumped(0.018, relief=None)).discharged[-1] == 0.0
    assert course(lumped(0.080)).discharged[-1] == 0.0


@pytest.mark.parametrize("emptying", CLASSES)
def test_finer_steps_and_cells_hardly_move_the_answer(emptying):
    loop = lumped(emptying=emptying)
    coarse = course(loop, accuracy=Accuracy(cells=20, longest=60.0))
    fine = course(loop, accuracy=Accuracy(cells=40, longest=30.0))
    steam = fine.largest["steam_volume"].value
    assert coarse.largest["steam_volume"].value == pytest.approx(steam, rel=0.005)
    assert coarse.largest["reach"].value == pytest.approx(fine.largest["reach"].value, abs=0.15)
    pressure = fine.largest["vessel_pressure"].value
    assert coarse.largest["vessel_pressure"].value == pytest.approx(pressure, abs=0.005 * BAR)
    for phase in ("emptying", "boiling", "receding", "refilling"):
        assert getattr(coarse.phases, phase) == pytest.approx(getattr(fine.phases, phase), abs=180)


def test_the_clear_sky_repeats_itself_and_is_dark_after_its_days():
    sky = ClearSky(days=1)
    assert sky.irradiance(12 * HOUR) == 1000.0
    assert sky.irradiance(36 * HOUR) == 0.0
    assert ClearSky().irradiance(36 * HOUR) == 1000.0
    assert sky.ambient(15 * HOUR) == pytest.approx(303.15)
    assert sky.ambient(21 * HOUR) == pytest.approx(296.15 + 7 * cos(pi / 2))
