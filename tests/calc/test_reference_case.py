"""The reference loop: its equilibrium table and its smallest vessels, computed by others with other fluid data.

Figures come from an independent solver with ideal Raoult (the first number of a pair) and from a second one (the
other); agreement to expect is 4 % of absolute pressure or 1.5 K, 2 % of volume, 0.7 m or 4 % of reach.
"""

import pytest
from msgspec.structs import replace

from calc import reference
from calc.reference import ATMOSPHERE, BAR, ZERO
from loopslack.calc.balance import Balance, mixing
from loopslack.calc.charge import Charge
from loopslack.calc.equilibrium import Equilibrium, equilibrium
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.kernel.roots import bracketed

PRECHARGE = 1.62 * BAR + ATMOSPHERE
FILL = 1.92 * BAR + ATMOSPHERE
FINAL = 5.4 * BAR + ATMOSPHERE
LOOP = reference.loop(temperatures=replace(reference.TEMPERATURES, vessel_room=ZERO + 15))


def at_rest(nominal: float, scenario: Scenario = BASE, loop=LOOP) -> tuple[Equilibrium, Balance]:
    """The loop with a vessel in m3, valve ignored."""
    balance = Balance(loop, scenario)
    filled = nominal * (1 - PRECHARGE / FILL)
    density = loop.fluid.density(loop.temperatures.fill)
    charge = Charge(
        nominal,
        PRECHARGE,
        loop.temperatures.fill,
        filled,
        filled * density,
        loop.temperatures.vessel_room,
        0.0,
    )
    ceiling = loop.fluid.bubble_pressure(ZERO + 199)
    return equilibrium(
        balance, charge, mixing(loop), gas_follows=scenario.gas_follows, opening=ceiling
    ), balance


# nominal L, regime, vessel bar g, saturation degC, steam power W/m2, reach m, steam L, vessel liquid L
TABLE = [
    (25, "pinned", 6.69, 169.7, 0.0, 0.0, 11.6, 16.5),
    (50, "steam", 5.47, 164.6, 38.3, 9.7, 23.2, 29.7),
    (80, "steam", 4.42, 160.0, 72.3, 19.0, 32.2, 41.2),
    (150, "steam", 3.01, 149.7, 80.0, 22.7, 35.9, 51.7),
]


@pytest.mark.parametrize("row", TABLE, ids=[f"{row[0]} L" for row in TABLE])
def test_the_equilibrium_table_is_reproduced(row) -> None:
    nominal, regime, pressure, saturation, power, reach, steam, liquid = row
    found, balance = at_rest(nominal / 1000)
    space = found.extent.spaces[0]
    assert found.regime == regime
    assert found.pressure == pytest.approx(pressure * BAR + ATMOSPHERE, rel=0.04)
    assert space.temperature - ZERO == pytest.approx(saturation, abs=1.5)
    assert space.power / LOOP.aperture == pytest.approx(power, abs=80 * 0.05)
    assert balance.spaces[0].path.reach(space.place)[0] == pytest.approx(reach, abs=0.7)
    assert found.extent.steam_volume * 1000 == pytest.approx(steam, rel=0.02)
    assert found.liquid * 1000 == pytest.approx(liquid, rel=0.02)
    assert found.extent.unspent == 0


def smallest(scenario: Scenario) -> tuple[float, Equilibrium]:
    def excess(nominal: float) -> float:
        return at_rest(nominal, scenario)[0].pressure - FINAL

    low, high = 0.03, 0.3
    nominal = bracketed(excess, low, high, excess(low), excess(high), 1e-9).at
    return nominal * 1000, at_rest(nominal, scenario)[0]


@pytest.mark.parametrize(
    ("scenario", "first", "second"),
    [
        (BASE, 51.6, 53.0),
        (Scenario(id="warm-gas", gas_follows=True), 64.8, 66.9),
        (Scenario(id="hotter-stagnation", stagnation_shift=15.0), 69.6, 69.6),
        (Scenario(id="both", gas_follows=True, stagnation_shift=15.0), 90.2, 89.9),
    ],
    ids=lambda value: value.id if isinstance(value, Scenario) else str(value),
)
def test_the_smallest_vessel_lies_with_the_two_other_solvers(scenario, first, second) -> None:
    nominal, _ = smallest(scenario)
    assert min(first, second) * 0.99 <= nominal <= max(first, second) * 1.01


def test_warm_gas_stands_at_72_degrees_so_a_cooling_vessel_is_due() -> None:
    _, found = smallest(Scenario(id="warm-gas", gas_follows=True))
    assert found.mixed_temperature - ZERO == pytest.approx(72, abs=1)


def test_with_the_worse_class_every_vessel_that_keeps_the_valve_shut_leaves_steam_at_the_station() -> None:
    worse = Scenario(id="worse", stagnation_shift=15.0, worse_emptying=True)
    nominal, found = smallest(worse)
    assert nominal == pytest.approx(76, rel=0.02)
    assert found.extent.unspent > 440
    for litres in (80, 120, 300):
        assert at_rest(litres / 1000, worse)[0].extent.unspent > 440


def test_larger_is_not_always_safer_with_one_branch_closed() -> None:
    branches = (reference.run("flow", "flow"), reference.run("return", "return", access="closed"))
    loop = replace(LOOP, branches=branches)
    assert at_rest(0.072, loop=loop)[0].extent.unspent == pytest.approx(685, rel=0.05)
    assert at_rest(0.0535, loop=loop)[0].extent.unspent == 0


def test_the_loop_is_the_one_described() -> None:
    assert LOOP.content * 1000 == pytest.approx(42.58, abs=0.005)
    assert LOOP.pipe_content * 1000 == pytest.approx(22.58, abs=0.005)
    assert LOOP.groups[0].stagnation_temperature - ZERO == pytest.approx(169.7, abs=0.05)
    assert LOOP.fluid.expansion(ZERO + 15, ZERO + 120) == pytest.approx(0.0809, abs=0.0002)
