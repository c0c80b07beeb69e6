"""What every fluid must keep to: shape, conservation, inverses and limits."""

import pickle
from math import exp, log

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.calc.fluids.making import (
    STRENGTH_HIGHEST,
    BoilsLike,
    Fluid,
    glycol,
    glycol_by_volume,
    glycol_protecting_to,
    own_fluid,
    water,
)
from loopslack.library.fluids import glycol_data, water_data
from loopslack.physics import mixture, mixture_vapour
from loopslack.physics import water as water_law

ZERO = 273.15
KINDS = ("propylene-glycol", "ethylene-glycol")
kinds = st.sampled_from(KINDS)
strengths = st.floats(0.001, STRENGTH_HIGHEST)
shares = st.floats(0.0, 1.0)
boiling = st.floats(278.15, 485.15)


def own() -> Fluid:
    return own_fluid(
        [(ZERO - 25, 1054.0), (ZERO + 20, 1032.0), (ZERO + 80, 992.0), (ZERO + 150, 930.0)],
        ZERO - 22,
        [(ZERO + 60, 0.18e5), (ZERO + 100, 0.93e5), (ZERO + 140, 3.3e5), (ZERO + 180, 9.1e5)],
    )


fluids = st.one_of(
    st.builds(glycol, kinds, strengths),
    st.builds(water),
    st.builds(own),
    st.builds(
        lambda kind, strength: own_fluid(
            [(250.0, 1060.0), (300.0, 1040.0), (440.0, 930.0)],
            248.0,
            BoilsLike(kind=kind, mass_fraction=strength),
        ),
        kinds,
        strengths,
    ),
)


def between(low: float, high: float, share: float) -> float:
    return low + share * (high - low)


@given(fluids, shares, shares)
def test_a_liquid_expands_when_heated(fluid: Fluid, first: float, second: float) -> None:
    """Dilute mixtures are densest a little above their freezing point; above 10 degC none is an exception."""
    low = max(fluid.lowest, 283.15)
    cold, hot = sorted((between(low, fluid.highest, first), between(low, fluid.highest, second)))
    if hot - cold > 1e-6:
        assert fluid.density(hot) < fluid.density(cold)
        assert fluid.expansion(cold, hot) > 0


@given(kinds, st.floats(0.3, STRENGTH_HIGHEST), shares, st.floats(0.1, 5.0))
def test_a_strong_mixture_expands_down_to_its_freezing_point(
    kind: str, strength: float, share: float, step: float
) -> None:
    fluid = glycol(kind, strength)
    cold = between(fluid.lowest, fluid.highest - 5.0, share)
    assert fluid.density(cold + step) < fluid.density(cold)


@given(fluids, shares, shares, shares)
def test_expansion_in_two_steps_is_expansion_in_one(fluid: Fluid, a: float, b: float, c: float) -> None:
    first, middle, last = (between(fluid.lowest, fluid.highest, share) for share in (a, b, c))
    compounded = (1 + fluid.expansion(first, middle)) * (1 + fluid.expansion(middle, last))
    assert compounded == pytest.approx(1 + fluid.expansion(first, last), rel=1e-12)


@given(fluids, shares)
def test_the_boiling_temperature_inverts_the_bubble_pressure(fluid: Fluid, share: float) -> None:
    pressure = exp(between(log(fluid.lowest_pressure), log(fluid.highest_pressure), share))
    pressure = min(max(pressure, fluid.lowest_pressure), fluid.highest_pressure)
    temperature = fluid.boiling_temperature(pressure)
    assert fluid.boiling_lowest <= temperature <= fluid.boiling_highest
    assert fluid.bubble_pressure(temperature) == pytest.approx(pressure, rel=1e-9)


@given(fluids)
def test_both_ends_of_the_boiling_range_come_back(fluid: Fluid) -> None:
    assert fluid.boiling_temperature(fluid.lowest_pressure) == pytest.approx(fluid.boiling_lowest, abs=1e-6)
    assert fluid.boiling_temperature(fluid.highest_pressure) == pytest.approx(fluid.boiling_highest, abs=1e-6)


@given(fluids, shares, shares)
def test_higher_pressure_boils_hotter_and_makes_denser_vapour(
    fluid: Fluid, first: float, second: float
) -> None:
    low, high = sorted(
        between(fluid.lowest_pressure, fluid.highest_pressure, share) for share in (first, second)
    )
    if high > low * (1 + 1e-9):
        below, above = fluid.boiling_temperature(low), fluid.boiling_temperature(high)
        assert above > below
        assert fluid.saturated(above)[1] > fluid.saturated(below)[1]


@given(kinds, strengths, st.floats(1e-4, 0.1), st.floats(2e3, 13e5))
def test_more_glycol_boils_hotter(kind: str, strength: float, more: float, pressure: float) -> None:
    stronger = min(strength + more, STRENGTH_HIGHEST)
    if stronger - strength >= 1e-4:
        weak, strong = glycol(kind, strength), glycol(kind, stronger)
        assert strong.boiling_temperature(pressure) > weak.boiling_temperature(pressure)


@given(kinds, boiling)
def test_a_trace_of_glycol_is_water(kind: str, temperature: float) -> None:
    trace, pure = glycol(kind, 1e-7), water()
    assert trace.bubble_pressure(temperature) == pytest.approx(pure.bubble_pressure(temperature), rel=5e-5)
    assert trace.latent_heat(temperature) == pytest.approx(pure.latent_heat(temperature), rel=5e-5)
    assert trace.saturated(temperature)[1] == pytest.approx(pure.saturated(temperature)[1], rel=5e-5)
    if temperature <= trace.highest:
        assert trace.density(temperature) == pytest.approx(pure.density(temperature), rel=5e-5)
        assert trace.heat_capacity(temperature) == pytest.approx(pure.heat_capacity(temperature), rel=5e-5)


@pytest.mark.parametrize("kind", KINDS)
def test_no_glycol_is_water(kind: str) -> None:
    assert glycol(kind, 0.0) is water()
    assert glycol_by_volume(kind, 0.0) is water()
    assert glycol_protecting_to(kind, ZERO + 4) is water()


@given(kinds, strengths, shares)
def test_the_object_of_the_solvers_gives_the_numbers_of_the_laws(
    kind: str, strength: float, share: float
) -> None:
    fluid, data, pure = glycol(kind, strength), glycol_data(kind), water_data()
    liquid = between(fluid.lowest, fluid.highest, share)
    law = mixture.liquid_density(
        liquid, strength, pure.specific_volume, data.specific_volume, data.excess_volume
    )
    assert fluid.density(liquid) == pytest.approx(law, rel=1e-13)
    hot = between(fluid.boiling_lowest, fluid.boiling_highest, share)
    stated = (hot, strength, data.molar_mass, data.margules, data.antoine)
    assert fluid.saturated(hot) == (
        mixture_vapour.bubble_pressure(*stated),
        mixture_vapour.vapour_density(*stated),
    )


@given(kinds, strengths, boiling)
def test_the_vapour_agrees_with_itself(kind: str, strength: float, temperature: float) -> None:
    fluid = glycol(kind, strength)
    vapour = fluid.vapour(temperature)
    molar_mass = glycol_data(kind).molar_mass
    y = vapour.glycol_mole_fraction
    by_mass = y * molar_mass / (y * molar_mass + (1 - y) * water_law.MOLAR_MASS)
    of_glycol = mixture_vapour.glycol_latent_heat(temperature, molar_mass, glycol_data(kind).antoine)
    expected = (1 - by_mass) * water_law.latent_heat(temperature) + by_mass * of_glycol
    assert (vapour.pressure, vapour.density) == fluid.saturated(temperature)
    assert vapour.glycol_mass_fraction == pytest.approx(by_mass, rel=1e-12)
    assert vapour.latent_heat == pytest.approx(expected, rel=1e-12)
    assert fluid.latent_heat(temperature) == vapour.latent_heat
    assert 0 < y < mixture_vapour.mole_fraction(strength, molar_mass)


@pytest.mark.parametrize("kind", KINDS)
def test_vapour_over_a_usual_mixture_is_no_pure_steam(kind: str) -> None:
    low, high = (0.035, 0.09) if kind == "propylene-glycol" else (0.015, 0.09)
    for degrees in (150, 165, 180):
        assert low < glycol(kind, 0.5).vapour(ZERO + degrees).glycol_mass_fraction < high


@pytest.mark.parametrize(
    ("kind", "bar", "degrees"),
    [
        ("propylene-glycol", 3, 138.1),
        ("ethylene-glycol", 3, 139.7),
        ("propylene-glycol", 10, 185.7),
        ("ethylene-glycol", 10, 187.8),
    ],
)
def test_forty_per_cent_boils_where_the_fit_was_left(kind: str, bar: float, degrees: float) -> None:
    assert glycol(kind, 0.4).boiling_temperature(bar * 1e5) - ZERO == pytest.approx(degrees, abs=0.05)


@pytest.mark.parametrize(("bar", "degrees"), [(3, 133.5), (10, 179.9)])
def test_water_boils_where_steam_tables_say(bar: float, degrees: float) -> None:
    assert water().boiling_temperature(bar * 1e5) - ZERO == pytest.approx(degrees, abs=0.05)


@pytest.mark.parametrize(
    ("fluid", "growth"),
    [
        (glycol("propylene-glycol", 0.4), 0.0819),
        (glycol("ethylene-glycol", 0.4), 0.0730),
        (water(), 0.0600),
    ],
    ids=["propylene-glycol", "ethylene-glycol", "water"],
)
def test_expansion_from_10_to_120_degrees_is_that_of_the_fit(fluid: Fluid, growth: float) -> None:
    assert fluid.expansion(ZERO + 10, ZERO + 120) == pytest.approx(growth, abs=6e-5)


@given(kinds, st.floats(225.0, 273.0), st.floats(0.0, 10.0))
def test_protection_is_reached_and_no_stronger_than_needed(
    kind: str, temperature: float, margin: float
) -> None:
    if temperature - margin < 225.0:
        return
    fluid = glycol_protecting_to(kind, temperature, margin)
    assert fluid.freezing_point <= temperature - margin
    weaker = glycol(kind, fluid.mass_fraction - 1e-6)
    assert weaker.freezing_point > temperature - margin


@given(kinds, st.floats(0.01, 0.59), st.floats(0.05, 30.0))
def test_the_liquid_left_by_ice_freezes_at_the_temperature(kind: str, strength: float, below: float) -> None:
    fluid = glycol(kind, strength)
    temperature = max(fluid.freezing_point - below, 225.0)
    if temperature < fluid.freezing_point:
        ice = fluid.ice_fraction(temperature)
        assert 0 < ice < 1
        left = glycol(kind, strength / (1 - ice))
        assert left.freezing_point == pytest.approx(temperature, abs=1e-6)


@given(fluids)
def test_nothing_freezes_at_or_above_the_freezing_point(fluid: Fluid) -> None:
    assert fluid.ice_fraction(fluid.freezing_point) == 0.0
    assert fluid.ice_fraction(fluid.freezing_point + 50) == 0.0


def test_water_below_its_freezing_point_is_ice() -> None:
    assert water().ice_fraction(ZERO - 0.1) == 1.0


@given(kinds, st.floats(0.01, 0.6))
def test_a_strength_by_volume_comes_back(kind: str, share: float) -> None:
    assert glycol_by_volume(kind, share).volume_fraction == pytest.approx(share, abs=1e-12)


@pytest.mark.parametrize(
    ("kind", "by_volume", "by_mass"),
    [
        ("propylene-glycol", 0.2, 0.206),
        ("propylene-glycol", 0.4, 0.40392),
        ("propylene-glycol", 0.5, 0.50098),
        ("ethylene-glycol", 0.2, 0.21979),
        ("ethylene-glycol", 0.4, 0.425),
        ("ethylene-glycol", 0.5, 0.52353),
    ],
)
def test_strengths_by_volume_meet_the_tables_of_inhibited_fluids(
    kind: str, by_volume: float, by_mass: float
) -> None:
    """Source: ASHRAE Fundamentals, tables of inhibited fluids, as coded in the SecCool data of CoolProp."""
    assert glycol_by_volume(kind, by_volume).mass_fraction == pytest.approx(by_mass, abs=0.009)


@pytest.mark.parametrize("kind", KINDS)
def test_sixty_per_cent_by_volume_is_known_and_its_freezing_point_a_bound(kind: str) -> None:
    fluid = glycol_by_volume(kind, 0.6)
    assert fluid.freezing_is_bound
    assert fluid.freezing_point == glycol(kind, 0.6).freezing_point
    assert not glycol(kind, 0.6).freezing_is_bound
    assert fluid.lowest == 233.15


def test_fluids_cross_process_borders() -> None:
    for fluid in (water(), glycol("propylene-glycol", 0.4), own()):
        twin = pickle.loads(pickle.dumps(fluid))  # noqa: S301 - our own bytes
        assert twin.density(300.0) == fluid.density(300.0)
        assert twin.boiling_temperature(2e5) == fluid.boiling_temperature(2e5)


def test_a_fluid_names_itself_for_people() -> None:
    assert glycol("propylene-glycol", 0.4).name == "40 % propylene glycol by mass"
    assert water().name == "water"
