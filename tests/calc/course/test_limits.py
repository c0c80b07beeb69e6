"""The course against the coupled balance: equal where both say the same, below it everywhere else."""

import pytest
from msgspec.structs import replace

from calc import reference
from calc.course.cases import BAR, HOUR, NOON, charge, course, lumped, march
from calc.course.quasi_static import at_rest, liquid_of
from loopslack.calc.balance import Balance, mixing
from loopslack.calc.course.weather import ClearSky, StatedWeather
from loopslack.calc.equilibrium import equilibrium
from loopslack.calc.scenarios import BASE

CONSTANT = StatedWeather(
    times=tuple(HOUR * h for h in range(31)), irradiances=(1000.0,) * 31, ambients=(303.15,) * 31
)

# L, W/m2, and what an earlier implementation of the same equations came to: L, m, bar gauge
IN_THE_LIMIT = [
    (25, None, 13.464, 2.093, 6.6063),
    (25, 80.0, 13.464, 2.093, 6.6063),
    (50, None, 23.636, 12.392, 5.2718),
    (50, 80.0, 23.635, 12.393, 5.2717),
    (80, None, 31.936, 20.815, 4.3065),
    (80, 80.0, 31.936, 20.815, 4.3065),
    (150, 80.0, 34.022, 22.931, 2.9232),
]


@pytest.mark.parametrize(("nominal", "cap", "litres", "metres", "gauge"), IN_THE_LIMIT)
def test_constant_sun_on_a_wet_absorber_with_all_condensate_back_ends_in_the_coupled_balance(
    nominal, cap, litres, metres, gauge
):
    loop = lumped(
        nominal * 1e-3,
        residual_share=0.15,
        wets_all=True,
        reflux=1.0,
        concentrates=False,
        steam_power=cap,
        relief=None,
    )
    end = march(loop, CONSTANT)
    state = end.state
    rest = at_rest(end.plant, liquid_of(state), 1000.0, 303.15, cap)
    assert end.complete
    assert not end.chronicle.flags
    assert state.volume == pytest.approx(rest.volume, rel=5e-4)
    assert state.vessel_pressure == pytest.approx(rest.vessel_pressure, rel=5e-4)
    assert state.volume * 1e3 == pytest.approx(litres, rel=5e-3)
    assert end.plant.grid.at(end.plant.grid.reach_at, state.place) == pytest.approx(metres, abs=0.15)
    assert (state.vessel_pressure - 101325) / BAR == pytest.approx(gauge, abs=0.01)


def largest_and_bound(loop, weather):
    """Largest steam volume of a day and the balance for the liquid of that instant, at the day's worst weather."""
    best = [0.0, None]

    def watch(going):
        if going.state.volume > best[0]:
            best[:] = going.state.volume, liquid_of(going.state)

    end = march(loop, weather, each=watch)
    times = [end.recorder.times[0] + 300 * k for k in range(289)]
    sun, ambient = max(map(weather.irradiance, times)), max(map(weather.ambient, times))
    if best[1] is None:
        return 0.0, 0.0
    return best[0], at_rest(end.plant, best[1], sun, ambient).volume


@pytest.mark.parametrize(("emptying", "share"), [("good", 0.54), ("fair", 0.63), ("poor", 0.72)])
def test_the_day_stays_below_the_coupled_balance_by_a_known_share(emptying, share):
    largest, bound = largest_and_bound(lumped(emptying=emptying), ClearSky())
    assert largest / bound == pytest.approx(share, abs=0.01)


@pytest.mark.parametrize("nominal", [0.025, 0.05, 0.08, 0.15])
@pytest.mark.parametrize("reflux", [0.0, 0.5, 1.0])
@pytest.mark.parametrize("wets_all", [False, True])
@pytest.mark.parametrize("start", [None, NOON])
def test_no_day_without_discharge_exceeds_the_coupled_balance(nominal, reflux, wets_all, start):
    changes = {} if start is None else {"start": start}
    loop = lumped(nominal, reflux=reflux, wets_all=wets_all, relief=None, **changes)
    largest, bound = largest_and_bound(loop, ClearSky())
    assert 0 < largest <= 1.02 * bound


@pytest.mark.parametrize("nominal", [0.025, 0.05, 0.08, 0.15])
@pytest.mark.parametrize("emptying", ["good", "fair", "poor"])
def test_the_pressure_of_the_day_stays_below_that_of_the_stagnation_check(nominal, emptying):
    # Not so its steam volume: the check takes all liquid at 120 degC, the colder liquid of the day leaves more room.
    loop = reference.loop()
    at_worst = equilibrium(
        Balance(loop, BASE), charge(nominal, loop), mixing(loop), gas_follows=False, opening=12 * BAR
    )
    day = course(lumped(nominal, emptying=emptying, relief=None))
    assert day.largest["steam_volume"].value > 0
    assert day.largest["vessel_pressure"].value < at_worst.pressure


def test_a_collector_that_loses_nothing_in_proportion_gets_through_the_night() -> None:
    """Its stagnation rise without sun is nought over nought."""
    loop = replace(lumped(), linear_loss=0.0, quadratic_loss=0.03)
    assert course(loop).complete
