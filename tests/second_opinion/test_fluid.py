"""The second fluid model against figures it was not fitted to."""

from __future__ import annotations

import itertools

import pytest
from iapws import IAPWS97

from .case import celsius
from .fluid import fluid, glycol_vapour_pressure

ASHRAE = (
    "ASHRAE Fundamentals, secondary coolant tables (inhibited glycol), through the SecCool data of CoolProp"
)


@pytest.mark.parametrize("degrees", [5.0, 60.0, 120.0, 160.0, 200.0])
def test_water_meets_the_industrial_formulation(degrees: float) -> None:
    water = fluid("water", 0.0)
    liquid, steam = IAPWS97(T=celsius(degrees), x=0), IAPWS97(T=celsius(degrees), x=1)
    assert water.density(celsius(degrees)) == pytest.approx(liquid.rho, rel=2e-4)
    assert water.bubble_pressure(celsius(degrees)) == pytest.approx(liquid.P * 1e6, rel=5e-4)
    assert water.steam_density(celsius(degrees)) == pytest.approx(steam.rho, rel=2e-3)


@pytest.mark.parametrize(
    ("kind", "fraction", "degrees", "ratio"),
    [
        ("PG", 0.206, 125.0, 0.93241),
        ("PG", 0.306, 125.0, 0.92713),
        ("PG", 0.50098, 100.0, 0.94259),
        ("EG", 0.21979, 125.0, 0.93869),
        ("EG", 0.425, 125.0, 0.9346),
    ],
)
def test_hot_density_falls_as_in_the_inhibited_glycol_tables(
    kind: str, fraction: float, degrees: float, ratio: float
) -> None:
    """Source: see ASHRAE above. Inhibited fluids expand up to 0.4 % of volume otherwise than pure ones."""
    liquid = fluid(kind, fraction)
    assert liquid.density(celsius(degrees)) / liquid.density(celsius(20.0)) == pytest.approx(ratio, abs=0.005)


@pytest.mark.parametrize(
    ("kind", "fraction", "degrees", "density"),
    [("PG", 0.5847, 151.4, 930.2), ("EG", 0.5345, 101.7, 1013.0), ("EG", 0.5345, 158.4, 964.9)],
)
def test_hot_density_meets_the_measured_points(
    kind: str, fraction: float, degrees: float, density: float
) -> None:
    """Source: Sun and Teja, J. Chem. Eng. Data 2004, 49, 1311; 2003, 48, 198. Level, not slope alone."""
    assert fluid(kind, fraction).density(celsius(degrees)) == pytest.approx(density, abs=2.0)


@pytest.mark.parametrize("kind", ["PG", "EG"])
@pytest.mark.parametrize("fraction", [0.15, 0.3, 0.43, 0.58])
def test_density_is_continuous_where_the_two_models_meet_and_falls_throughout(
    kind: str, fraction: float
) -> None:
    liquid = fluid(kind, fraction)
    assert liquid.density(celsius(99.999)) == pytest.approx(liquid.density(celsius(100.001)), rel=1e-5)
    densities = [liquid.density(celsius(20.0 + 4.0 * step)) for step in range(46)]
    assert all(later < earlier for earlier, later in itertools.pairwise(densities))


@pytest.mark.parametrize(
    ("kind", "fraction", "pressure", "degrees", "within"),
    [
        ("EG", 0.46739, 101300.0, 106.32, 1.0),  # J. Chem. Eng. Data, doi 10.1021/je2008704
        ("EG", 0.27683, 101300.0, 102.9, 1.0),  # same
        ("PG", 0.4, 100700.0, 103.9, 1.5),  # ASHRAE table, rounded to 1 degF
        ("PG", 0.5, 100700.0, 105.6, 1.5),  # same
        ("PG", 0.4, 118 * 6894.757, 176.67, 1.5),  # PM Engineer, April 2009
    ],
)
def test_boiling_temperatures_are_met(
    kind: str, fraction: float, pressure: float, degrees: float, within: float
) -> None:
    assert fluid(kind, fraction).boiling_temperature(pressure) == pytest.approx(celsius(degrees), abs=within)


def test_pure_glycols_boil_near_their_normal_boiling_points() -> None:
    """188 and 197 degC at one atmosphere: from memory."""
    assert glycol_vapour_pressure("PG", celsius(188.0)) == pytest.approx(101325.0, rel=0.02)
    assert glycol_vapour_pressure("EG", celsius(197.3)) == pytest.approx(101325.0, rel=0.02)


@pytest.mark.parametrize("kind", ["water", "PG", "EG"])
def test_bubble_pressure_and_boiling_temperature_invert_each_other(kind: str) -> None:
    liquid = fluid(kind, 0.4)
    for degrees in (5.0, 99.99, 131.7, 169.9, 212.0):
        pressure = liquid.bubble_pressure(celsius(degrees))
        assert liquid.boiling_temperature(pressure) == pytest.approx(celsius(degrees), abs=1e-9)


def test_freezing_points_follow_the_published_curve() -> None:
    """Source: Melinder 2010; printed here to 0.01 K as its coefficients give it."""
    assert fluid("PG", 0.4).freezing_point == pytest.approx(celsius(-20.57), abs=0.05)
    assert fluid("EG", 0.3).freezing_point == pytest.approx(celsius(-14.58), abs=0.05)
