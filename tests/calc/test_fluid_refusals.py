"""Outside what is known, a fluid refuses, naming number, range, rule and remedy; it never clamps."""

from math import inf, nan

import pytest

from loopslack.calc.fluids.making import (
    BoilsLike,
    Fluid,
    glycol,
    glycol_by_volume,
    glycol_protecting_to,
    own_fluid,
    water,
)
from loopslack.kernel.errors import CalculationError, Contradiction, Missing, NotApplicable, OutOfRange

ZERO = 273.15
DENSITIES = [(ZERO - 20, 1050.0), (ZERO + 40, 1020.0), (ZERO + 100, 975.0), (ZERO + 160, 918.0)]
BUBBLES = [(ZERO + 80, 0.42e5), (ZERO + 120, 1.8e5), (ZERO + 160, 5.7e5)]


def table(**changes: object) -> Fluid:
    stated = {"points": DENSITIES, "freezing_point": ZERO - 18, "boiling": BUBBLES} | changes
    return own_fluid(**stated)


def refused(ask: object, error: type[CalculationError] = OutOfRange) -> CalculationError:
    with pytest.raises(error) as caught:
        ask()
    assert caught.value.message
    assert caught.value.remedy
    return caught.value


@pytest.mark.parametrize(
    ("method", "fluid", "low", "high"),
    [
        ("density", water(), 0.0, 215.0),
        ("density", glycol("propylene-glycol", 0.6), -40.0, 200.0),
        ("density", glycol("ethylene-glycol", 0.6), -40.0, 200.0),
        ("heat_capacity", water(), 0.0, 200.0),
        ("heat_capacity", glycol("propylene-glycol", 0.6), -40.0, 200.0),
        ("viscosity", water(), 0.0, 125.0),
        ("viscosity", glycol("propylene-glycol", 0.6), -40.0, 125.0),
        ("saturated", water(), 5.0, 212.0),
        ("saturated", glycol("ethylene-glycol", 0.3), 5.0, 212.0),
        ("vapour", water(), 5.0, 212.0),
        ("vapour", glycol("ethylene-glycol", 0.3), 5.0, 212.0),
        ("latent_heat", glycol("ethylene-glycol", 0.3), 5.0, 212.0),
        ("bubble_pressure", glycol("propylene-glycol", 0.3), 5.0, 212.0),
        ("density", table(), -18.0, 160.0),
        ("saturated", table(), 80.0, 160.0),
        (
            "heat_capacity",
            table(heat_capacity=[(280.0, 3600.0), (320.0, 3700.0), (360.0, 3800.0)]),
            6.85,
            86.85,
        ),
        ("viscosity", table(viscosity=[(280.0, 6e-3), (320.0, 2e-3), (360.0, 1e-3)]), 6.85, 86.85),
    ],
)
def test_a_temperature_outside_the_range_is_refused_and_both_limits_are_answered(
    method: str, fluid: Fluid, low: float, high: float
) -> None:
    ask = getattr(fluid, method)
    for inside in (low, high):
        assert ask(inside + ZERO)
    for outside in (low - 0.001, high + 0.001, nan, inf, -inf):
        error = refused(lambda temperature=outside + ZERO: ask(temperature))
        assert f"from {low:g} to {high:g} degC" in error.message
        assert error.facts["low"] == pytest.approx(low + ZERO)
        assert error.facts["high"] == pytest.approx(high + ZERO)


def test_the_refusal_names_number_range_rule_and_remedy() -> None:
    error = refused(lambda: glycol("propylene-glycol", 0.4).density(ZERO - 30))
    assert error.message == (
        "The temperature is -30 degC; density of 40 % propylene glycol by mass is known "
        "from -20.57 to 200 degC."
    )
    assert "stronger mixture" in error.remedy
    assert error.facts["rule"] == "density of 40 % propylene glycol by mass"


def test_a_liquid_that_would_be_slush_is_refused() -> None:
    """The warmer of the two freezing curves decides, here at -21.1 (inhibited) and -20.57 degC (pure)."""
    fluid = glycol("propylene-glycol", 0.4)
    assert fluid.density(fluid.freezing_point)
    refused(lambda: fluid.density(fluid.freezing_point - 0.01))
    refused(lambda: fluid.heat_capacity(fluid.freezing_point - 0.01))
    refused(lambda: fluid.viscosity(fluid.freezing_point - 0.01))


@pytest.mark.parametrize("fluid", [water(), glycol("ethylene-glycol", 0.5), table()], ids=lambda f: f.name)
def test_a_pressure_without_a_boiling_point_is_refused_in_bar(fluid: Fluid) -> None:
    for pressure in (fluid.lowest_pressure * 0.999, fluid.highest_pressure * 1.001, nan, inf, 0.0, -1e5):
        error = refused(lambda stated=pressure: fluid.boiling_temperature(stated))
        assert "bar" in error.message
        assert error.facts["low"] == fluid.lowest_pressure
        assert error.facts["high"] == fluid.highest_pressure


@pytest.mark.parametrize("kind", ["propylene-glycol", "ethylene-glycol"])
def test_a_strength_outside_the_fit_is_refused(kind: str) -> None:
    assert glycol(kind, 0.63).density(300.0)
    for strength in (0.6301, 1.0, -0.01, nan):
        assert "% by mass" in refused(lambda w=strength: glycol(kind, w)).message
    for share in (0.7, 1.0, 1.5, -0.1, nan):
        refused(lambda phi=share: glycol_by_volume(kind, phi))


@pytest.mark.parametrize(("kind", "coldest"), [("propylene-glycol", -50.0), ("ethylene-glycol", -48.6)])
def test_protection_beyond_sixty_per_cent_is_refused(kind: str, coldest: float) -> None:
    assert glycol_protecting_to(kind, ZERO + coldest).mass_fraction <= 0.6
    error = refused(lambda: glycol_protecting_to(kind, ZERO + coldest + 4, 5.0))
    assert "60 % by mass" in error.message
    refused(lambda: glycol_protecting_to(kind, nan))


def test_ice_beyond_the_freezing_curve_is_refused() -> None:
    refused(lambda: glycol("propylene-glycol", 0.3).ice_fraction(ZERO - 60))
    refused(lambda: glycol("propylene-glycol", 0.3).ice_fraction(nan))
    refused(lambda: glycol("propylene-glycol", 0.62).ice_fraction(ZERO - 55))


def test_what_an_own_fluid_was_not_told_is_missing_and_not_guessed() -> None:
    assert "heat capacity" in refused(lambda: table().heat_capacity(300.0), Missing).message
    assert "viscosity" in refused(lambda: table().viscosity(300.0), Missing).message
    refused(lambda: table().ice_fraction(ZERO - 30), Missing)


@pytest.mark.parametrize("field", ["points", "boiling", "heat_capacity", "viscosity"])
def test_a_table_of_two_points_is_missing_a_third(field: str) -> None:
    two = {"points": DENSITIES, "boiling": BUBBLES}.get(field, [(280.0, 1.0), (300.0, 1.0)])[:2]
    assert "at least 3" in refused(lambda: table(**{field: two}), Missing).message


def test_a_density_that_rises_on_heating_contradicts_itself() -> None:
    rising = [(ZERO - 20, 1050.0), (ZERO + 40, 1020.0), (ZERO + 100, 1021.0)]
    assert "expands" in refused(lambda: table(points=rising), Contradiction).message


def test_a_dilute_own_fluid_may_be_densest_near_four_degrees() -> None:
    points = [(ZERO, 1000.8), (ZERO + 5, 1000.9), (ZERO + 60, 984.0), (ZERO + 120, 944.0)]
    assert own_fluid(points, ZERO - 0.5, BUBBLES).density(ZERO + 2) > 1000.8


@pytest.mark.parametrize("density", [1.05, 1050e3, 499.0, 2001.0])
def test_a_density_in_another_unit_is_caught(density: float) -> None:
    refused(lambda: table(points=[(ZERO - 20, density), *DENSITIES[1:]]), Contradiction)


@pytest.mark.parametrize("bad", [nan, inf, -1.0, 0.0])
def test_a_table_with_an_impossible_number_contradicts_itself(bad: float) -> None:
    refused(lambda: table(points=[(ZERO - 20, bad), *DENSITIES[1:]]), Contradiction)
    refused(lambda: table(boiling=[(ZERO + 80, bad), *BUBBLES[1:]]), Contradiction)
    refused(lambda: table(points=[(bad, 1060.0), *DENSITIES]), Contradiction)


def test_a_temperature_stated_twice_contradicts_itself() -> None:
    refused(lambda: table(points=[*DENSITIES, (ZERO + 40, 1019.0)]), Contradiction)


def test_a_bubble_pressure_that_falls_contradicts_itself() -> None:
    falling = [(ZERO + 80, 0.42e5), (ZERO + 100, 0.93e5), (ZERO + 101, 0.92e5)]
    assert "rise" in refused(lambda: table(boiling=falling), Contradiction).message


def test_gauge_pressures_in_a_bubble_table_are_caught() -> None:
    """At 120 degC water boils at 1.99 bar absolute; 0.8 bar gauge would be read as 0.8 bar absolute."""
    gauge = [(ZERO + 120, 0.8e5), (ZERO + 140, 2.2e5), (ZERO + 160, 4.7e5)]
    assert "absolute" in refused(lambda: table(boiling=gauge), NotApplicable).message


def test_a_fluid_that_boils_below_water_has_no_steam_for_vapour() -> None:
    spirit = [(ZERO + 80, 0.6e5), (ZERO + 120, 2.3e5), (ZERO + 160, 7e5)]
    refused(lambda: table(boiling=spirit), NotApplicable)


def test_a_bubble_table_beyond_the_steam_range_is_refused() -> None:
    assert table(boiling=[*BUBBLES, (ZERO + 212, 18e5)])
    refused(lambda: table(boiling=[*BUBBLES, (ZERO + 213, 18.5e5)]))
    refused(lambda: table(boiling=[(ZERO + 4, 700.0), *BUBBLES]))


def test_an_own_fluid_frozen_at_all_its_densities_contradicts_itself() -> None:
    refused(lambda: table(freezing_point=ZERO + 160), Contradiction)


def test_an_own_fluid_boils_like_the_mixture_it_names() -> None:
    like = table(boiling=BoilsLike(kind="ethylene-glycol", mass_fraction=0.35))
    mixture = glycol("ethylene-glycol", 0.35)
    assert like.saturated(400.0) == mixture.saturated(400.0)
    assert like.boiling_temperature(3e5) == mixture.boiling_temperature(3e5)
    assert like.vapour(400.0) == mixture.vapour(400.0)
    assert like.mass_fraction == 0.35
    assert (like.water_activity, like.glycol_activity) == (mixture.water_activity, mixture.glycol_activity)


def test_the_vapour_of_an_own_fluid_by_table_is_steam_at_the_pressure_of_the_table() -> None:
    vapour = table().vapour(ZERO + 120)
    steam = water().vapour(ZERO + 120)
    assert vapour.pressure == pytest.approx(1.8e5, rel=1e-12)
    assert vapour.latent_heat == steam.latent_heat
    assert vapour.density / vapour.pressure == pytest.approx(steam.density / steam.pressure, rel=5e-3)
    assert vapour.density < steam.density
    assert vapour.glycol_mass_fraction == vapour.glycol_mole_fraction == 0.0


def test_the_order_of_the_points_does_not_matter() -> None:
    assert table(points=DENSITIES[::-1]).density(300.0) == table().density(300.0)
