"""The property tables against the fluids they were made from."""

from itertools import pairwise

import pytest

from loopslack.calc.course.properties import tables_of
from loopslack.calc.fluids.making import glycol, own_fluid, water

FLUIDS = [
    water(),
    glycol("propylene-glycol", 0.43),
    glycol("ethylene-glycol", 0.3),
    glycol("propylene-glycol", 0.6),
]
named = pytest.mark.parametrize("fluid", FLUIDS, ids=[fluid.name for fluid in FLUIDS])


@named
def test_density_on_the_grid_is_within_a_hundredth_of_a_per_cent(fluid):
    tables = tables_of(fluid)
    temperature = fluid.lowest + 0.5
    while temperature < min(fluid.highest, 473.15):
        assert tables.density(temperature) == pytest.approx(fluid.density(temperature), rel=1e-4)
        temperature += 3.3


@named
def test_boiling_on_the_grid_follows_the_fluid(fluid):
    tables = tables_of(fluid)
    for k in range(60):
        pressure = 5e3 * 1.095**k
        temperature, density, latent, _ = tables.saturation(pressure)
        exact = fluid.boiling_temperature(pressure)
        assert temperature == pytest.approx(exact, abs=5e-3)
        assert density == pytest.approx(fluid.saturated(exact)[1], rel=4e-4)
        assert latent == pytest.approx(fluid.latent_heat(exact), rel=1e-4)


@pytest.mark.parametrize("kind", ["propylene-glycol", "ethylene-glycol"])
@pytest.mark.parametrize("strength", [0.2, 0.3, 0.43, 0.55, 0.63])
@pytest.mark.parametrize(("pressure", "kelvin"), [(1e5, 0.15), (3e5, 0.3), (8e5, 0.7)])
def test_a_residue_of_another_strength_boils_close_to_the_full_law(kind, strength, pressure, kelvin):
    tables = tables_of(glycol(kind, 0.43))
    boiling, _, _, reference = tables.saturation(pressure)
    exact = glycol(kind, strength).boiling_temperature(pressure)
    activity = tables.activity(strength)
    shift = tables.boiling_shift(pressure, reference, activity, tables.glycol_pressure(exact))
    assert boiling + shift == pytest.approx(exact, abs=kelvin)
    if strength == 0.43:
        assert shift == pytest.approx(0.0, abs=5e-3)


def test_a_stronger_residue_boils_hotter_up_to_hardly_any_water():
    tables = tables_of(glycol("propylene-glycol", 0.43))
    boiling, _, _, reference = tables.saturation(3e5)
    shifts = [
        tables.boiling_shift(3e5, reference, tables.activity(w / 100), tables.glycol_pressure(boiling))
        for w in range(10, 98, 2)
    ]
    assert shifts == sorted(shifts)


@named
def test_beyond_the_range_of_a_fluid_the_tables_run_on_without_a_step_or_a_turn(fluid):
    tables = tables_of(fluid)
    boiling = [tables.saturation(1e5 * 1.02**k) for k in range(220)]
    assert all(b[0] > a[0] and b[1] > a[1] and b[2] < a[2] for a, b in pairwise(boiling))
    assert all(b[2] > 5e5 for b in boiling)
    densities = [tables.density(300.0 + t) for t in range(270)]
    assert densities == sorted(densities, reverse=True)
    assert densities[-1] > 400


def test_tables_of_the_fluids_that_ship_are_made_once():
    assert tables_of(glycol("propylene-glycol", 0.43)) is tables_of(glycol("propylene-glycol", 0.43))


def test_tables_of_two_own_fluids_are_never_mixed_up():
    boiling = [(273.15 + t, p) for t, p in ((100, 0.95e5), (120, 1.9e5), (140, 3.5e5), (180, 9.7e5))]
    points = [(273.15, 1030.0), (323.15, 1005.0), (373.15, 970.0), (423.15, 920.0)]
    heat = [(273.15, 3700.0), (373.15, 3900.0), (423.15, 4000.0)]
    thin = own_fluid(points, 253.15, boiling, heat_capacity=heat)
    thick = own_fluid([(t, 1.05 * d) for t, d in points], 253.15, boiling, heat_capacity=heat)
    assert tables_of(thick).density(300.0) == pytest.approx(1.05 * tables_of(thin).density(300.0))


def test_density_is_held_beyond_the_ends_of_the_grid():
    tables = tables_of(glycol("propylene-glycol", 0.43))
    assert tables.density(150.0) == tables.density(233.15)
    assert tables.density(900.0) == tables.density(573.15)
