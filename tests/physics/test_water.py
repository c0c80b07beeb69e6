"""Water and steam: the printed law, second opinions, and what must follow from the laws."""

from decimal import Decimal, localcontext

import pytest
from CoolProp.CoolProp import PropsSI
from hypothesis import given
from hypothesis import strategies as st
from iapws import IAPWS97

from loopslack.library.fluids import water_data
from loopslack.physics import mixture, water

GRID = [273.16, *(273.15 + degrees for degrees in range(5, 216, 15)), 485.15]
ZERO = Decimal("273.15")

# IAPWS SR1-86(1992) as printed: coefficient and exponent of 1 - T/T_c.
PRESSURE = [
    ("-7.85951783", "1"),
    ("1.84408259", "1.5"),
    ("-11.7866497", "3"),
    ("22.6807411", "3.5"),
    ("-15.9618719", "4"),
    ("1.80122502", "7.5"),
]
LIQUID = [
    ("1.99274064", 1),
    ("1.09965342", 2),
    ("-0.510839303", 5),
    ("-1.75493479", 16),
    ("-45.5170352", 43),
    ("-674694.45", 110),
]
STEAM = [
    ("-2.03150240", 2),
    ("-2.68302940", 4),
    ("-5.38626492", 8),
    ("-17.2991605", 18),
    ("-44.7586581", 37),
    ("-63.9201063", 71),
]


def printed_pressure(temperature: float) -> float:
    with localcontext() as context:
        context.prec = 40
        at, critical = Decimal(temperature), Decimal("647.096")
        s = 1 - at / critical
        total = sum(Decimal(factor) * s ** Decimal(power) for factor, power in PRESSURE)
        return float(Decimal("22.064e6") * (critical / at * total).exp())


def printed_liquid(temperature: float) -> float:
    with localcontext() as context:
        context.prec = 40
        s = 1 - Decimal(temperature) / Decimal("647.096")
        return float(322 * (1 + sum(Decimal(factor) * s ** (Decimal(power) / 3) for factor, power in LIQUID)))


def printed_steam(temperature: float) -> float:
    with localcontext() as context:
        context.prec = 40
        s = 1 - Decimal(temperature) / Decimal("647.096")
        return float(322 * sum(Decimal(factor) * s ** (Decimal(power) / 6) for factor, power in STEAM).exp())


@pytest.mark.parametrize("temperature", GRID)
def test_the_code_is_the_printed_law(temperature: float) -> None:
    assert water.saturation_pressure(temperature) == pytest.approx(printed_pressure(temperature), rel=1e-13)
    assert water.liquid_density(temperature) == pytest.approx(printed_liquid(temperature), rel=1e-13)
    assert water.vapour_density(temperature) == pytest.approx(printed_steam(temperature), rel=1e-12)


@pytest.mark.parametrize("temperature", GRID)
def test_the_scientific_formulation_agrees_within_the_published_uncertainty(temperature: float) -> None:
    def of(quantity: str, quality: int) -> float:
        return PropsSI(quantity, "T", temperature, "Q", quality, "HEOS::Water")

    assert water.saturation_pressure(temperature) == pytest.approx(of("P", 0), rel=2e-4)
    assert water.liquid_density(temperature) == pytest.approx(of("D", 0), rel=2e-4)
    assert water.vapour_density(temperature) == pytest.approx(of("D", 1), rel=2.5e-4)
    assert water.latent_heat(temperature) == pytest.approx(of("H", 1) - of("H", 0), rel=2.5e-4)


@pytest.mark.parametrize("temperature", GRID)
def test_the_industrial_formulation_agrees_within_its_own_uncertainty(temperature: float) -> None:
    liquid, steam = IAPWS97(T=temperature, x=0), IAPWS97(T=temperature, x=1)
    assert water.saturation_pressure(temperature) == pytest.approx(liquid.P * 1e6, rel=5e-4)
    assert water.liquid_density(temperature) == pytest.approx(liquid.rho, rel=2e-4)
    assert water.vapour_density(temperature) == pytest.approx(steam.rho, rel=1e-3)
    assert water.latent_heat(temperature) == pytest.approx((steam.h - liquid.h) * 1e3, rel=1e-3)


@given(st.floats(273.2, 485.0))
def test_the_slope_is_that_of_the_pressure(temperature: float) -> None:
    step = 0.01
    rise = water.saturation_pressure(temperature + step) - water.saturation_pressure(temperature - step)
    assert water.saturation_slope(temperature) == pytest.approx(rise / (2 * step), rel=1e-6)


@given(st.floats(273.15, 484.0), st.floats(0.01, 1.0))
def test_pressure_and_steam_density_rise_and_latent_heat_falls_with_temperature(
    temperature: float, step: float
) -> None:
    assert water.saturation_pressure(temperature + step) > water.saturation_pressure(temperature)
    assert water.vapour_density(temperature + step) > water.vapour_density(temperature)
    assert water.latent_heat(temperature + step) < water.latent_heat(temperature)


@pytest.mark.parametrize("temperature", GRID)
def test_the_effective_virial_coefficient_gives_back_the_steam_density(temperature: float) -> None:
    pressure = water.saturation_pressure(temperature)
    ideal = pressure * water.MOLAR_MASS / (water.GAS_CONSTANT * temperature)
    factor = 1 + water.second_virial(temperature) * pressure / (water.GAS_CONSTANT * temperature)
    assert ideal / factor == pytest.approx(water.vapour_density(temperature), rel=1e-12)


@pytest.mark.parametrize("temperature", [373.15, 423.15, 473.15])
def test_the_effective_virial_coefficient_is_that_of_the_scientific_formulation(temperature: float) -> None:
    """Two hundredths of a per cent of density are a good per cent of the coefficient, hence the tolerance."""
    factor = PropsSI("Z", "T", temperature, "Q", 1, "HEOS::Water")
    pressure = PropsSI("P", "T", temperature, "Q", 1, "HEOS::Water")
    expected = (factor - 1) * water.GAS_CONSTANT * temperature / pressure
    assert water.second_virial(temperature) == pytest.approx(expected, rel=0.02)


def test_the_hundredth_of_a_kelvin_below_the_triple_point_changes_nothing_that_matters() -> None:
    assert water.liquid_density(273.15) == pytest.approx(water.liquid_density(273.16), rel=1e-6)


@pytest.mark.parametrize("degrees", [0.01, 20, 60, 100, 150, 200])
def test_the_water_end_of_a_mixture_is_water(degrees: float) -> None:
    """Volume within 0.005 %, heat capacity within 0.5 %, as the tables say."""
    data, temperature = water_data(), 273.15 + degrees
    pressure = 1e5 if degrees < 100 else PropsSI("P", "T", temperature, "Q", 0, "HEOS::Water") + 1e3
    volume = mixture.polynomial(data.specific_volume, (temperature - mixture.MIDDLE) / mixture.HALF_SPAN)
    assert 1000 / volume == pytest.approx(water.liquid_density(temperature), rel=5.5e-5)
    heat = mixture.polynomial(data.heat_capacity, (temperature - mixture.MIDDLE) / mixture.HALF_SPAN)
    other = PropsSI("C", "T", temperature, "P", pressure, "HEOS::Water")
    assert 1000 * heat == pytest.approx(other, rel=5e-3)


@pytest.mark.parametrize("degrees", [0.01, 20, 60, 100, 125])
def test_the_viscosity_of_water_meets_the_international_formulation(degrees: float) -> None:
    temperature = 273.15 + degrees
    other = PropsSI("V", "T", temperature, "P", 3e5, "HEOS::Water")
    zero = (0.0,) * 9
    assert mixture.viscosity(temperature, 0.0, water_data().viscosity, zero) == pytest.approx(other, rel=0.02)
