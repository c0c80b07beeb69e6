"""Glycol mixtures as laws: consistency with thermodynamics and with a second opinion on a grid."""

from itertools import pairwise
from math import exp, log

import pytest
from CoolProp.CoolProp import PropsSI
from hypothesis import given
from hypothesis import strategies as st

from loopslack.kernel.equation import EQUATIONS, papers
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import MASS_FRACTION, TEMPERATURE
from loopslack.kernel.value import Given, Value
from loopslack.library.fluids import GlycolData, glycol_data, water_data
from loopslack.physics import mixture, mixture_vapour, water

ZERO = 273.15
KINDS = ("propylene-glycol", "ethylene-glycol")
SECOND = {"propylene-glycol": "INCOMP::MPG", "ethylene-glycol": "INCOMP::MEG"}
STRENGTHS = (0.1, 0.2, 0.3, 0.4, 0.5, 0.6)
kinds = st.sampled_from(KINDS)
strengths = st.floats(0.001, 0.63)
boiling = st.floats(278.2, 485.1)


def melinder(kind: str, quantity: str, temperature: float, strength: float) -> float:
    return PropsSI(quantity, "T", temperature, "P", 3e5, f"{SECOND[kind]}[{strength}]")


def freezing(data: GlycolData, strength: float) -> float:
    curves = (data.freezing_pure, data.freezing_inhibited)
    return max(mixture.freezing_point(strength, curve) for curve in curves)


def grid(kind: str) -> list[tuple[float, float]]:
    """Temperature and strength wherever both models know a liquid."""
    return [
        (ZERO + degrees, strength)
        for strength in STRENGTHS
        for degrees in range(-40, 101, 10)
        if ZERO + degrees > freezing(glycol_data(kind), strength) + 0.1
    ]


def density(kind: str, temperature: float, strength: float) -> float:
    data = glycol_data(kind)
    return mixture.liquid_density(
        temperature, strength, water_data().specific_volume, data.specific_volume, data.excess_volume
    )


def bubble(kind: str, temperature: float, strength: float) -> float:
    data = glycol_data(kind)
    return mixture_vapour.bubble_pressure(temperature, strength, data.molar_mass, data.margules, data.antoine)


@pytest.mark.parametrize("kind", KINDS)
def test_density_meets_the_second_opinion(kind: str) -> None:
    for temperature, strength in grid(kind):
        within = 2.5e-3 if temperature < ZERO else 2.0e-3
        other = melinder(kind, "D", temperature, strength)
        assert density(kind, temperature, strength) == pytest.approx(other, rel=within), (
            temperature,
            strength,
        )


@pytest.mark.parametrize("kind", KINDS)
def test_heat_capacity_meets_the_second_opinion(kind: str) -> None:
    data = glycol_data(kind)
    for temperature, strength in grid(kind):
        within = 0.05 if temperature < ZERO else 0.02
        own = mixture.heat_capacity(temperature, strength, water_data().heat_capacity, data.heat_capacity)
        other = melinder(kind, "C", temperature, strength)
        assert own == pytest.approx(other, rel=within), (temperature, strength)


@pytest.mark.parametrize("kind", KINDS)
def test_viscosity_meets_the_second_opinion(kind: str) -> None:
    data = glycol_data(kind)
    for temperature, strength in grid(kind):
        own = mixture.viscosity(temperature, strength, water_data().viscosity, data.viscosity)
        other = melinder(kind, "V", temperature, strength)
        assert own == pytest.approx(other, rel=0.14), (temperature, strength)


@pytest.mark.parametrize("kind", KINDS)
def test_the_pure_freezing_curve_meets_the_second_opinion(kind: str) -> None:
    for strength in (0.15, 0.25, 0.35, 0.45, 0.55):
        other = PropsSI("T_freeze", "T", 300, "P", 1e5, f"{SECOND[kind]}[{strength}]")
        own = mixture.freezing_point(strength, glycol_data(kind).freezing_pure)
        assert own == pytest.approx(other, abs=0.1)


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("curve", ["freezing_pure", "freezing_inhibited"])
def test_more_glycol_always_freezes_lower(kind: str, curve: str) -> None:
    points = [mixture.freezing_point(w / 1000, getattr(glycol_data(kind), curve)) for w in range(601)]
    assert points[0] == ZERO
    assert all(after < before for before, after in pairwise(points))


@pytest.mark.parametrize(("kind", "apart"), [("propylene-glycol", 1.45), ("ethylene-glycol", 2.6)])
def test_the_two_freezing_curves_differ_by_what_is_published(kind: str, apart: float) -> None:
    data = glycol_data(kind)
    gaps = [
        abs(
            mixture.freezing_point(w / 100, data.freezing_pure)
            - mixture.freezing_point(w / 100, data.freezing_inhibited)
        )
        for w in range(61)
    ]
    assert apart - 0.1 < max(gaps) < apart


@given(kinds, st.floats(233.15, 473.15), st.floats(0.0, 0.63))
def test_the_collapsed_polynomial_is_the_law(kind: str, temperature: float, w: float) -> None:
    data, x, u = glycol_data(kind), (temperature - 363.15) / 110, 1 - 2 * w
    c = data.excess_volume
    water_end = sum(a * x**n for n, a in enumerate(water_data().specific_volume))
    glycol_end = sum(a * x**n for n, a in enumerate(data.specific_volume))
    excess = c[0] + c[1] * x + c[2] * x**2 + c[3] * x**3 + u * (c[4] + c[5] * x) + u**2 * (c[6] + c[7] * x)
    volume = (1 - w) * water_end + w * glycol_end + w * (1 - w) * excess
    assert density(kind, temperature, w) == pytest.approx(1000 / volume, rel=1e-12)


@given(kinds, boiling, strengths)
def test_the_bubble_pressure_solves_its_law(kind: str, temperature: float, strength: float) -> None:
    data = glycol_data(kind)
    x2 = mixture_vapour.mole_fraction(strength, data.molar_mass)
    x1 = 1 - x2
    a, b = data.margules
    first = x1 * exp(x2**2 * (a + b * (4 * x1 - 1)))
    second = x2 * exp(x1**2 * (a + b * (1 - 4 * x2)))
    steam = water.saturation_pressure(temperature)
    virial = water.second_virial(temperature) / (water.GAS_CONSTANT * temperature)
    pressure = bubble(kind, temperature, strength)
    glycol = second * mixture_vapour.glycol_pressure(temperature, data.antoine)
    right = first * steam * exp(virial * (steam - pressure)) + glycol
    assert pressure == pytest.approx(right, rel=1e-8)


@given(kinds, st.floats(0.05, 0.62))
def test_the_activities_obey_gibbs_and_duhem(kind: str, strength: float) -> None:
    """``x1 d(ln a1) + x2 d(ln a2) = 0`` at constant temperature: what the two activities owe each other."""
    data, step = glycol_data(kind), 1e-5
    low = mixture_vapour.activities(strength - step, data.molar_mass, data.margules)
    high = mixture_vapour.activities(strength + step, data.molar_mass, data.margules)
    x2 = mixture_vapour.mole_fraction(strength, data.molar_mass)
    first, second = (1 - x2) * log(high[0] / low[0]), x2 * log(high[1] / low[1])
    assert first + second == pytest.approx(0.0, abs=1e-4 * abs(first))


@given(kinds, boiling, strengths)
def test_the_slope_is_that_of_the_bubble_pressure(kind: str, temperature: float, strength: float) -> None:
    data, step = glycol_data(kind), 0.01
    a, b, c = data.antoine
    activity = mixture_vapour.activities(strength, data.molar_mass, data.margules)
    pressure, slope = mixture_vapour.bubble_slope(temperature, activity, (a, b, c))
    rise = bubble(kind, temperature + step, strength) - bubble(kind, temperature - step, strength)
    assert pressure == bubble(kind, temperature, strength)
    assert slope == pytest.approx(rise / (2 * step), rel=1e-5)


@given(kinds, boiling)
def test_the_latent_heat_of_glycol_follows_from_its_vapour_pressure(kind: str, temperature: float) -> None:
    """Clausius and Clapeyron: ``h = R T^2 d(ln p)/dT / M``."""
    data, step = glycol_data(kind), 0.01
    above = mixture_vapour.glycol_pressure(temperature + step, data.antoine)
    below = mixture_vapour.glycol_pressure(temperature - step, data.antoine)
    expected = water.GAS_CONSTANT * temperature**2 * log(above / below) / (2 * step) / data.molar_mass
    own = mixture_vapour.glycol_latent_heat(temperature, data.molar_mass, data.antoine)
    assert own == pytest.approx(expected, rel=1e-5)


@pytest.mark.parametrize(
    ("kind", "density_at_20"), [("propylene-glycol", 1036.33), ("ethylene-glycol", 1113.35)]
)
def test_the_pure_glycol_at_20_degrees_has_the_density_that_volume_strengths_use(
    kind: str, density_at_20: float
) -> None:
    assert density(kind, ZERO + 20, 1.0) == pytest.approx(density_at_20, abs=0.005)


@given(kinds, st.floats(0.0, 1.0))
def test_volume_and_mass_fraction_are_inverse(kind: str, share: float) -> None:
    glycol, pure = density(kind, ZERO + 20, 1.0), water_data().density_at_20
    strength = mixture.mass_fraction_of(share, glycol, pure)
    assert mixture.volume_fraction_of(strength, glycol, pure) == pytest.approx(share, abs=1e-12)
    assert strength >= share


def test_volumes_measured_apart_add_up_by_mass() -> None:
    """Three litres of a glycol of 1.1 kg/L with seven litres of water of 1 kg/L: 3.3 kg in 10.3 kg."""
    assert mixture.mass_fraction_of(0.3, 1100.0, 1000.0) == pytest.approx(3.3 / 10.3, rel=1e-12)


@given(st.floats(0.01, 0.5), st.floats(0.5, 0.6))
def test_the_lever_rule_keeps_all_glycol_in_the_liquid(strength: float, left: float) -> None:
    ice = mixture.ice_share(strength, left)
    assert (1 - ice) * left == pytest.approx(strength, rel=1e-12)


def test_half_the_molecules_of_a_vapour_are_most_of_its_mass() -> None:
    molar_mass = glycol_data("propylene-glycol").molar_mass
    expected = molar_mass / (molar_mass + water.MOLAR_MASS)
    assert mixture_vapour.mass_fraction_of_vapour(0.5, molar_mass) == pytest.approx(expected, rel=1e-12)


def test_a_derivation_outside_the_published_range_is_refused() -> None:
    data = glycol_data("propylene-glycol")
    coefficients = {
        "water_volume": water_data().specific_volume,
        "glycol_volume": data.specific_volume,
        "excess": data.excess_volume,
    }
    law = papers(mixture.liquid_density)
    strength = Value(0.4, MASS_FRACTION, "strength", Given())
    inside = Value(300.0, TEMPERATURE, "temperature", Given())
    outside = Value(480.0, TEMPERATURE, "temperature", Given())
    derived = law.derive("density", coefficients, temperature=inside, mass_fraction=strength)
    assert derived.si == density("propylene-glycol", 300.0, 0.4)
    with pytest.raises(OutOfRange):
        law.derive("density", coefficients, temperature=outside, mass_fraction=strength)


@pytest.mark.parametrize(
    ("equation", "argument", "low", "high"),
    [
        ("water-saturation-pressure", "temperature", 273.15, 488.15),
        ("water-liquid-density", "temperature", 273.15, 488.15),
        ("water-vapour-density", "temperature", 273.15, 488.15),
        ("water-latent-heat", "temperature", 273.15, 488.15),
        ("mixture-density", "temperature", 233.15, 473.15),
        ("mixture-density", "mass_fraction", 0.0, 0.63),
        ("mixture-heat-capacity", "temperature", 233.15, 473.15),
        ("mixture-viscosity", "temperature", 233.15, 398.15),
        ("mixture-bubble-pressure", "temperature", 278.15, 485.15),
        ("mixture-bubble-pressure", "mass_fraction", 0.0, 0.63),
        ("mixture-vapour-density", "temperature", 278.15, 485.15),
        ("glycol-vapour-pressure", "temperature", 278.15, 485.15),
        ("glycol-latent-heat", "temperature", 278.15, 485.15),
        ("freezing-point", "mass_fraction", 0.0, 0.60),
    ],
)
def test_the_papers_state_the_range(equation: str, argument: str, low: float, high: float) -> None:
    stated = EQUATIONS[equation].valid[argument]
    assert (stated.low, stated.high) == (low, high)
