"""What the course answers when one thing changes, against an earlier implementation of the same equations.

All with 20 cells and steps of 60 s at most: largest steam volume L, reach at that time m, highest vessel pressure bar
gauge, highest collector temperature degC, liquid discharged kg. Invented loop.
"""

import pytest
from msgspec.structs import replace

from calc import reference
from calc.course.cases import ATMOSPHERE, BAR, course, lumped
from loopslack.calc.course.lumped import ReliefValve
from loopslack.calc.course.march import Accuracy
from loopslack.calc.course.weather import ClearSky

ACCURACY = Accuracy(cells=20, longest=60.0)


def valve(gauge: float, blowdown: float = 0.2) -> ReliefValve:
    return ReliefValve(
        set_pressure=gauge * BAR + ATMOSPHERE,
        closing_pressure=gauge * (1 - blowdown) * BAR + ATMOSPHERE,
        flow_area=3.3e-5,
    )


def heavier(factor: float):
    loop = lumped()
    return replace(loop, pipe=replace(loop.pipe, capacity=tuple(factor * c for c in loop.pipe.capacity)))


def bare():
    runs = [
        reference.run(name, name, insulation=0.0, conductance=reference.conductance(0.028, 0.0))
        for name in ("flow", "return")
    ]
    return lumped(loop=reference.loop(branches=tuple(runs)))


def following():
    loop = lumped()
    return replace(loop, vessel=replace(loop.vessel, gas_temperature=None))


VARIANTS = {
    "reference": (lumped(), (19.27, 10.29, 3.053, 164.5, 0)),
    "a twentieth left": (lumped(residual_share=0.05), (14.76, 1.69, 2.713, 167.3, 0)),
    "a tenth left": (lumped(residual_share=0.1), (15.71, 3.16, 2.777, 167.1, 0)),
    "a fifth left": (lumped(residual_share=0.2), (17.16, 5.64, 2.881, 166.3, 0)),
    "three fifths left": (lumped(residual_share=0.6), (19.94, 12.46, 3.117, 163.5, 0)),
    "four fifths left": (lumped(residual_share=0.8), (20.40, 14.89, 3.171, 162.2, 0)),
    "nearly all left": (lumped(residual_share=0.95), (20.51, 16.46, 3.194, 161.4, 0)),
    "a tenth of the pipe's capacity": (heavier(0.1), (19.46, 10.61, 3.075, 164.3, 0)),
    "twice the pipe's capacity": (heavier(2.0), (18.94, 9.74, 3.021, 164.8, 0)),
    "bare pipe": (bare(), (13.22, 3.84, 2.619, 166.1, 0)),
    "residue keeps its strength": (lumped(concentrates=False), (21.18, 11.43, 3.202, 162.9, 0)),
    "residue wets all": (lumped(wets_all=True), (22.49, 13.32, 3.324, 166.7, 0)),
    "half the condensate back": (lumped(reflux=0.5), (21.09, 12.61, 3.200, 162.0, 0)),
    "all condensate back": (lumped(reflux=1.0), (23.08, 16.21, 3.380, 159.6, 0)),
    "good, wets all, all back": (
        lumped(emptying="good", wets_all=True, reflux=1.0),
        (30.18, 19.77, 4.103, 157.5, 0),
    ),
    "light collectors": (lumped(collector_capacity=6000.0), (19.29, 10.29, 3.055, 164.8, 0)),
    "heavy collectors": (lumped(collector_capacity=12000.0), (19.25, 10.30, 3.052, 163.8, 0)),
    "less linear loss": (lumped(linear_loss=3.2), (20.58, 11.45, 3.159, 175.5, 0)),
    "gas follows the liquid": (following(), (19.10, 10.14, 3.112, 164.4, 0)),
    "vessel of 18 L": (lumped(0.018), (11.52, 3.93, 6.000, 165.4, 3.77)),
    "vessel of 25 L": (lumped(0.025), (11.34, 3.43, 5.441, 165.7, 0)),
    "vessel of 35 L": (lumped(0.035), (14.20, 5.71, 4.609, 164.8, 0)),
    "vessel of 50 L": (lumped(0.050), (16.79, 7.96, 3.805, 164.3, 0)),
    "vessel of 150 L": (lumped(0.150), (21.28, 12.22, 2.493, 165.5, 0)),
    "vessel of 12 L": (lumped(0.012), (10.68, 3.09, 6.000, 165.8, 5.86)),
    "12 L, blowdown a tenth": (lumped(0.012, relief=valve(6, 0.1)), (10.49, 3.06, 6.006, 166.0, 5.64)),
    "valve of 3 bar": (lumped(relief=valve(3)), (22.25, 13.27, 3.001, 164.9, 12.07)),
    "3 bar, blowdown a twentieth": (
        lumped(relief=valve(3, 0.05)),
        (19.97, 11.00, 3.001, 164.6, 2.72),
    ),
}


@pytest.mark.parametrize("variant", list(VARIANTS))
def test_a_variant_of_the_reference_day(variant):
    loop, (steam, reach, pressure, hottest, discharged) = VARIANTS[variant]
    curve = course(loop, accuracy=ACCURACY)
    assert curve.complete
    assert curve.largest["steam_volume"].value * 1e3 == pytest.approx(steam, abs=0.1)
    assert curve.reach_at_largest == pytest.approx(reach, abs=0.2)
    assert (curve.largest["vessel_pressure"].value - ATMOSPHERE) / BAR == pytest.approx(pressure, abs=0.01)
    assert curve.largest["collector_temperature"].value - 273.15 == pytest.approx(hottest, abs=0.5)
    assert curve.discharged[-1] == pytest.approx(discharged, rel=0.05, abs=1e-9)
    assert ("discharge" in curve.flags) == (discharged > 0)


def test_steam_that_fills_all_pipes_is_flagged_and_its_power_counted_as_unspent():
    curve = course(lumped(emptying="poor", wets_all=True, reflux=1.0), accuracy=ACCURACY)
    assert curve.largest["steam_volume"].value * 1e3 == pytest.approx(24.98, abs=0.1)
    assert curve.largest["reach"].value == pytest.approx(23.0)
    assert "steam-at-station" in curve.flags
    assert curve.energy["unspent"] > 0
    assert abs(curve.energy_residual) < 1e-4


def test_a_cooler_at_the_station_takes_the_steam_that_arrives_and_no_more():
    loop = lumped(emptying="poor", wets_all=True, reflux=1.0)
    unspent = course(loop, accuracy=ACCURACY).energy["unspent"]
    weak = course(replace(loop, station_loss=20.0), accuracy=ACCURACY)
    strong = course(replace(loop, station_loss=20_000.0), accuracy=ACCURACY)
    assert "steam-at-station" in weak.flags
    assert weak.energy["cooled"] > 0
    assert weak.energy["cooled"] + weak.energy["unspent"] == pytest.approx(unspent)
    assert strong.flags & {"steam-at-station", "steam-at-cooler"} == {"steam-at-cooler"}
    assert strong.energy["unspent"] == 0


@pytest.mark.parametrize(("sun", "gauge", "hottest"), [(600.0, 1.968, 122.1), (400.0, 1.955, 95.7)])
def test_a_weak_sun_makes_no_steam(sun, gauge, hottest):
    curve = course(lumped(), ClearSky(highest_irradiance=sun), ACCURACY)
    assert max(curve.steam_volume) == 0.0
    assert curve.phases.emptying is None
    assert curve.phases.end is None
    assert (curve.largest["vessel_pressure"].value - ATMOSPHERE) / BAR == pytest.approx(gauge, abs=0.005)
    assert curve.largest["collector_temperature"].value - 273.15 == pytest.approx(hottest, abs=0.5)


def test_an_acceptance_volume_below_what_the_day_needs_is_flagged():
    loop = lumped()
    small = replace(loop, vessel=replace(loop.vessel, acceptance_volume=0.028))
    large = replace(loop, vessel=replace(loop.vessel, acceptance_volume=0.029))
    assert "membrane-full" in course(small).flags
    assert "membrane-full" not in course(large).flags


def test_a_valve_that_is_exceeded_below_its_stamp_is_flagged_without_discharge():
    low = replace(valve(6), lowest_opening=3.0 * BAR + ATMOSPHERE)
    high = replace(valve(6), lowest_opening=3.1 * BAR + ATMOSPHERE)
    assert course(lumped(relief=low)).flags & {"above-lowest-opening", "discharge"} == {
        "above-lowest-opening"
    }
    assert "above-lowest-opening" not in course(lumped(relief=high)).flags


def test_a_start_above_the_set_pressure_is_flagged():
    curve = course(lumped(relief=valve(1.8)))
    assert "start-above-set" in curve.flags
    assert "start-above-set" not in course(lumped(relief=valve(2.2))).flags


def test_a_valve_too_small_for_the_collectors_is_flagged_as_overloaded():
    small = replace(valve(3), flow_area=2e-8)
    curve = course(lumped(relief=small, emptying="good", wets_all=True, reflux=1.0))
    assert "valve-overloaded" in curve.flags
    assert curve.largest["vessel_pressure"].value > 1.1 * small.set_pressure
    assert "valve-overloaded" not in course(lumped(relief=valve(3))).flags
