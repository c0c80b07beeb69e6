"""The collectors by themselves, over liquid that boils about as warm as the air: a tall loop, its top under vacuum."""

import pytest
from msgspec.structs import replace

from calc.course.cases import lumped
from loopslack.calc.course.collector import Collector
from loopslack.calc.course.lumped import Start
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State

DAWN = Start()  # all as warm as what is around it
AIR, LATENT = 300.0, 2.44e6  # K, J/kg
PRESSURE = 3.5e3  # Pa


def collector(linear: float, quadratic: float, irradiance: float) -> Collector:
    loop = lumped(concentrates=False)  # so that the liquid boils as warm as its steam
    plant = Plant(replace(loop, linear_loss=linear, quadratic_loss=quadratic, start=DAWN), 20)
    return Collector(plant, State(plant, 0.0, AIR), 10.0, irradiance, AIR)


def absorber(found: Collector, share: float, boiling: float) -> float:
    """Temperature (K) over collectors of which a share holds liquid that boils at so many kelvin."""
    found.boil(share * found.plant.full, boiling, PRESSURE, LATENT, boiling)
    return found.absorber


@pytest.mark.parametrize("linear", [0.0, 3.7])
@pytest.mark.parametrize("share", [0.3, 1.0])
def test_boiling_just_below_the_air_is_as_boiling_just_above_it(linear: float, share: float) -> None:
    """The quadratic term is the whole loss of a collector without a linear one, on either side of the air."""
    found = collector(linear, 0.014, irradiance=900.0)
    below, at, above = (absorber(found, share, AIR + rise) for rise in (-1e-6, 0.0, 1e-6))
    assert below == pytest.approx(at, abs=1e-5)
    assert above == pytest.approx(at, abs=1e-5)


@pytest.mark.parametrize("rise", [-40.0, -5.0])
def test_the_loss_between_liquid_colder_than_the_air_and_stagnation_is_that_of_the_curve(rise: float) -> None:
    """The loss is ``a1 d + a2 d|d|``: below the air the collector gains what it would lose above."""
    found = collector(3.7, 0.014, irradiance=900.0)
    top = found.stagnation_rise
    lost, gained = 3.7 * top + 0.014 * top**2, 3.7 * -rise + 0.014 * rise**2
    assert found._loss_from(rise) == pytest.approx((lost + gained) / (top - rise), rel=1e-12)


@pytest.mark.parametrize("share", [0.3, 1.0])
def test_without_sun_and_without_loss_the_absorber_stays_as_warm_as_air_and_liquid(share: float) -> None:
    """No loss is left to divide by."""
    assert absorber(collector(0.0, 0.014, irradiance=0.0), share, AIR) == pytest.approx(AIR, abs=1e-9)
