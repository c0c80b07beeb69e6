"""No number of the fluid objects may change unnoticed: each is nudged by a thousandth, and a check must break."""

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

import loopslack.calc.fluids
from loopslack.calc.fluids.base import BOILING_HIGHEST, BOILING_LOWEST
from loopslack.calc.fluids.making import Fluid, glycol, water
from loopslack.kernel.errors import CalculationError, OutOfRange
from published.nudge import nudged, numbers

FLUIDS = Path(loopslack.calc.fluids.__file__).parent
ZERO = 273.15
KIND = "propylene-glycol"
POINTS = [(ZERO - 20, 1050.0), (ZERO + 40, 1020.0), (ZERO + 160, 918.0)]
BUBBLES = [(ZERO + 80, 0.42e5), (ZERO + 120, 1.8e5), (ZERO + 160, 5.7e5)]

Names = dict[str, Any]

UNNOTICED = {
    "boiling": {
        "0.5 in `middle = 0.5 * (1.0 / BOILING_LOWEST + 1.0 / BOILING_HIGHEST)`": "moves the points of the start",
        "1.0 in `middle = 0.5 * (1.0 / BOILING_LOWEST + 1.0 / BOILING_HIGHEST)`": "moves the points of the start",
        "0.5 in `half = 0.5 * (1.0 / BOILING_LOWEST - 1.0 / BOILING_HIGHEST)`": "moves the points of the start",
        "1.0 in `half = 0.5 * (1.0 / BOILING_LOWEST - 1.0 / BOILING_HIGHEST)`": "moves the points of the start",
        **dict.fromkeys(
            (
                f"{number} in `inverses = [middle + half * cos(pi * (2 * point + 1) / (2 * _POINTS)) "
                "for point in range(_POINTS)]`"
                for number in (2, 1)
            ),
            "moves the points of the start",
        ),
    },
}


def refuses(ask: Callable[[], object], words: str = "") -> bool:
    try:
        ask()
    except CalculationError as error:
        return words in error.message
    return False


def ends(ask: Callable[[float], float], low: float, high: float) -> bool:
    """Whether both ends of a range, and a rounding error past them, are answered, and no more."""
    inside = all(ask(at) > 0 for at in (low, high, low - 9e-10, high + 9e-10))
    return inside and all(refuses(lambda at=at: ask(at)) for at in (low - 1.0005e-9, high + 1.0005e-9))


def base(names: Names) -> Iterator[bool]:
    yield (names["BOILING_LOWEST"], names["BOILING_HIGHEST"]) == (278.15, 485.15)
    yield (names["ZERO_CELSIUS"], names["ROUNDING"]) == (273.15, 1e-9)
    cold = glycol(KIND, 0.4)
    yield names["Fluid"].expansion(cold, 283.15, 393.15) == cold.expansion(283.15, 393.15)
    yield refuses(lambda: names["Fluid"].refuse_pressure(cold, 123456.0), "1.23456 bar")
    limits = f"{cold.lowest_pressure / 1e5:.6g} to {cold.highest_pressure / 1e5:.6g} bar"
    yield refuses(lambda: names["Fluid"].refuse_pressure(cold, 1.0), limits)


def boils_true(fluid: Fluid) -> bool:
    pressures = (fluid.lowest_pressure, 1e5, 2e5, 4e5, fluid.highest_pressure)
    back = [fluid.bubble_pressure(fluid.boiling_temperature(pressure)) for pressure in pressures]
    return back == pytest.approx(pressures, rel=1e-9)


def boiling(names: Names) -> Iterator[bool]:
    start = names["start_of"](water().bubble_pressure)
    for share in range(101):
        at = BOILING_LOWEST + share / 100 * (BOILING_HIGHEST - BOILING_LOWEST)
        yield abs(names["start_at"](start, water().bubble_pressure(at)) - at) < 3e-3
    yield names["inside"](BOILING_LOWEST - 1) == BOILING_LOWEST
    yield names["inside"](BOILING_HIGHEST + 1) == BOILING_HIGHEST


def of_water(names: Names) -> Iterator[bool]:
    fluid, other = names["Water"](), water()
    yield ends(fluid.density, 273.15, 488.15)
    yield ends(fluid.heat_capacity, 273.15, 473.15)
    yield ends(fluid.viscosity, 273.15, 398.15)
    yield ends(fluid.bubble_pressure, 278.15, 485.15)
    yield boils_true(fluid)
    yield fluid.heat_capacity(350.0) == pytest.approx(4194.0, rel=2e-3)
    yield fluid.heat_capacity(350.0) == other.heat_capacity(350.0)
    yield fluid.viscosity(350.0) == other.viscosity(350.0)
    yield fluid.vapour(400.0) == other.vapour(400.0)
    vapour = fluid.vapour(400.0)
    yield vapour.glycol_mole_fraction == vapour.glycol_mass_fraction == 0.0
    yield (fluid.mass_fraction, fluid.volume_fraction, fluid.glycol_activity) == (0.0, 0.0, 0.0)
    yield fluid.water_activity == 1.0
    yield (fluid.ice_fraction(273.15), fluid.ice_fraction(273.0)) == (0.0, 1.0)


def of_glycol(names: Names) -> Iterator[bool]:
    make = names["Glycol"]
    yield refuses(lambda: make(KIND, 0.6301), "63.01 % by mass")
    yield refuses(lambda: make(KIND, 0.6301), "up to 63 %")
    yield refuses(lambda: make(KIND, 0.0))
    try:
        make(KIND, 0.7)
    except OutOfRange as error:
        yield (error.facts["low"], error.facts["high"]) == (0.0, 0.63)
    yield make(KIND, 1e-4).name == "0.01 % propylene glycol by mass"
    yield make(KIND, 0.63).freezing_is_bound
    fluid, other = make(KIND, 0.6), glycol(KIND, 0.6)
    yield not fluid.freezing_is_bound
    yield make(KIND, 0.6003).freezing_is_bound
    yield ends(fluid.density, 233.15, 473.15)
    yield ends(fluid.heat_capacity, 233.15, 473.15)
    yield ends(fluid.viscosity, 233.15, 398.15)
    yield ends(fluid.bubble_pressure, 278.15, 485.15)
    yield boils_true(fluid)
    yield fluid.density(300.0) == pytest.approx(1038.4, rel=1e-3)
    for at in (240.0, 300.0, 440.0):
        yield fluid.density(at) == other.density(at)
        yield fluid.heat_capacity(at) == other.heat_capacity(at)
    yield fluid.vapour(400.0) == other.vapour(400.0)
    # From the laws, by hand: (1 - w) h_water + w h_glycol.
    vapour = fluid.vapour(400.0)
    of_water = water().latent_heat(400.0)
    of_pure = 8.314462618 * 4457.579753 * (400.0 / (400.0 - 80.07430464)) ** 2 / 0.07609442
    w = vapour.glycol_mass_fraction
    yield vapour.latent_heat == pytest.approx((1 - w) * of_water + w * of_pure, rel=1e-9)
    yield names["pure_density_at_20"](KIND) == pytest.approx(1036.33, abs=0.005)
    weak = make(KIND, 0.3)
    yield weak.ice_fraction(weak.freezing_point - 1e-10) == 0.0
    at = weak.freezing_point - 5
    left = names["strength_freezing_at"](KIND, at)
    yield weak.ice_fraction(at) == pytest.approx(1 - 0.3 / left, rel=1e-12)
    yield names["warmer_freezing_point"](KIND, left) == pytest.approx(at, abs=1e-8)
    coldest = names["warmer_freezing_point"](KIND, 0.6)
    yield weak.ice_fraction(coldest) == pytest.approx(0.5, abs=1e-9)
    yield refuses(lambda: weak.ice_fraction(coldest - 1e-3))
    yield names["strength_freezing_at"](KIND, 273.15 - 1e-3) < 1e-4


def of_own(names: Names) -> Iterator[bool]:
    def make(points: object = POINTS, freezing: float = ZERO - 18, boiling: object = BUBBLES) -> Fluid:
        thin_liquid = [(280.0, 9e-4), (320.0, 5e-4), (360.0, 3e-4)]
        heat = [(280.0, 3600.0), (320.0, 3700.0), (360.0, 3800.0)]
        return names["OwnFluid"](points, freezing, boiling, heat_capacity=heat, viscosity=thin_liquid)

    def accepts(**changes: object) -> bool:
        return not refuses(lambda: make(**changes))

    def of_water(share: float) -> list[tuple[float, float]]:
        return [(at, share * water().bubble_pressure(at)) for at in (ZERO + 80, ZERO + 120, ZERO + 160)]

    fluid = make()
    yield ends(fluid.density, ZERO - 18, ZERO + 160)
    yield ends(fluid.bubble_pressure, ZERO + 80, ZERO + 160)
    yield ends(fluid.heat_capacity, 280.0, 360.0)
    yield ends(fluid.viscosity, 280.0, 360.0)
    yield fluid.boiling_temperature(1.8e5) == pytest.approx(ZERO + 120, abs=1e-9)
    yield boils_true(fluid)
    pressure, density = make(boiling=of_water(1.0)).saturated(ZERO + 120)
    yield (pressure, density) == pytest.approx(water().saturated(ZERO + 120), rel=1e-9)
    vapour = fluid.vapour(400.0)
    yield vapour.glycol_mole_fraction == vapour.glycol_mass_fraction == 0.0
    yield (fluid.mass_fraction, fluid.volume_fraction, fluid.glycol_activity) == (0.0, 0.0, 0.0)
    yield fluid.water_activity == 1.0
    yield fluid.ice_fraction(fluid.freezing_point) == 0.0
    yield all(accepts(boiling=of_water(share)) for share in (0.5001, 1.0199))
    yield not any(accepts(boiling=of_water(share)) for share in (0.4999, 1.0201))
    pure = water().bubble_pressure(ZERO + 80) / 1e5
    yield refuses(lambda: make(boiling=of_water(0.4)), f"boil at {0.4 * pure:.4g} bar absolute")
    yield refuses(lambda: make(boiling=of_water(0.4)), f"water at {pure:.4g} bar")
    thin, thick = [(at, rho) for at, rho in POINTS[:2]], [(at, rho) for at, rho in POINTS[1:]]
    yield accepts(points=[*thin, (ZERO + 160, 500.4)])
    yield not accepts(points=[*thin, (ZERO + 160, 499.9)])
    yield accepts(points=[(ZERO - 20, 1999.9), *thick])
    yield not accepts(points=[(ZERO - 20, 2000.5), *thick])
    yield accepts(points=[(ZERO, 1000.8), (ZERO + 9.99, 1000.9), (ZERO + 60, 984.0)])
    yield not accepts(points=[(ZERO, 1000.8), (ZERO + 10.01, 1000.9), (ZERO + 60, 984.0)])
    yield not accepts(points=[*POINTS, (ZERO + 40.009995, 1019.9)])
    yield accepts(points=[*POINTS, (ZERO + 40.010005, 1019.9)])
    yield not accepts(points=POINTS[:2])
    yield not accepts(points=[(ZERO, 1000.0), (ZERO + 60, 984.0), (ZERO + 90, 0.0)])
    yield not accepts(boiling=[(0.0005, 1.0), *BUBBLES])
    edge = [(485.15 + 5e-10, 18e5), *BUBBLES]
    yield accepts(boiling=edge)


def front(names: Names) -> Iterator[bool]:
    yield names["glycol"](KIND, 0.0) is names["water"]()
    yield names["glycol"](KIND, 0.001).mass_fraction == 0.001
    yield refuses(lambda: names["glycol_by_volume"](KIND, 1.0004), "100.04 % by volume")
    yield refuses(lambda: names["glycol_by_volume"](KIND, 1.0), "% by mass")
    yield refuses(lambda: names["glycol_by_volume"](KIND, -1e-4), "by volume")
    yield names["glycol_by_volume"](KIND, 0.0) is names["water"]()
    protect = names["strength_protecting_to"]
    yield protect(KIND, 250.0) == protect(KIND, 252.0, 2.0)
    yield protect(KIND, 250.0) == protect(KIND, 250.0, 0.0)
    yield protect(KIND, 273.15) == 0.0
    yield protect(KIND, 280.0) == 0.0
    yield protect(KIND, 273.149) > 0.0
    yield protect(KIND, glycol(KIND, 0.6).freezing_point - 9e-10) <= 0.6
    yield names["glycol_protecting_to"](KIND, 250.0) is names["glycol_protecting_to"](KIND, 252.0, 2.0)
    with pytest.raises(OutOfRange) as caught:
        protect(KIND, 200.0)
    yield caught.value.facts["high"] == 273.15
    try:
        names["glycol_by_volume"](KIND, 2.0)
    except OutOfRange as error:
        yield (error.facts["low"], error.facts["high"]) == (0.0, 1.0)


CHECKS: dict[str, Callable[[Names], Iterator[bool]]] = {
    "base": base,
    "boiling": boiling,
    "water": of_water,
    "glycol": of_glycol,
    "own": of_own,
    "making": front,
}


def holds(tree: object, module: str) -> bool:
    names: Names = {"__name__": f"nudged_{module}"}
    exec(compile(tree, f"{module}.py", "exec"), names)  # noqa: S102 - our own text
    return all(CHECKS[module](names))


@pytest.mark.parametrize("module", CHECKS)
def test_nothing_is_noticed_without_a_nudge(module: str) -> None:
    assert holds((FLUIDS / f"{module}.py").read_text(encoding="utf-8"), module)


@pytest.mark.parametrize(
    ("module", "n"), [(module, n) for module in CHECKS for n in numbers(FLUIDS / f"{module}.py")]
)
def test_a_nudged_number_is_noticed(module: str, n: int) -> None:
    tree, place = nudged(FLUIDS / f"{module}.py", n)
    try:
        unnoticed = holds(tree, module)
    except (CalculationError, TypeError, ValueError, ZeroDivisionError, IndexError):
        unnoticed = False
    assert unnoticed == (place in UNNOTICED.get(module, {})), place


def test_the_list_of_what_may_change_names_only_numbers_that_exist() -> None:
    for module, places in UNNOTICED.items():
        text = (FLUIDS / f"{module}.py").read_text(encoding="utf-8")
        for place, reason in places.items():
            assert place.split("`")[1] in text
            assert reason
