"""Errors that teaching material prints: the right figure, how far off the wrong one is, and that it is not taken."""

import pytest

from calc.reference import BAR, ZERO
from calc.sizing.printed import printed_analysis, printed_loop
from loopslack.calc.fluids.making import glycol, glycol_by_volume, water
from loopslack.calc.sizing.rules.register import run
from loopslack.kernel.equation import EQUATIONS
from loopslack.kernel.kinds import ABSOLUTE_PRESSURE, GAUGE_PRESSURE
from loopslack.kernel.value import Given, Value

PSI = 6894.757293


def test_gauge_pressures_in_the_pressure_factor_make_the_vessel_a_sixth_too_small_and_are_refused() -> None:
    (result,) = run("en-12977", printed_analysis(), check=False)
    final, start = result.final_pressure - 101325, result.start_pressure - 101325
    assert final / (final - start) == pytest.approx(result.factor * 0.842, rel=0.001)
    gauge = {name: Value(1e5, GAUGE_PRESSURE, name, Given()) for name in ("final_pressure", "precharge")}
    law = EQUATIONS["pressure-factor"]
    with pytest.raises(TypeError, match="given as a gauge pressure"):
        law.derive(**gauge)
    absolute = {name: Value(2e5, ABSOLUTE_PRESSURE, name, Given()) for name in gauge}
    with pytest.raises(TypeError, match="precharge is given as a gauge pressure"):
        law.derive(**(absolute | {"precharge": gauge["precharge"]}))


def test_a_boiling_pressure_printed_as_gauge_is_an_absolute_one() -> None:
    """40 % propylene glycol at 350 degF: 118 psi, PM Engineer, April 2009 (read)."""
    bubble = glycol_by_volume("propylene-glycol", 0.40).bubble_pressure(ZERO + (350 - 32) / 1.8) / PSI
    assert bubble == pytest.approx(118, rel=0.015)
    assert abs(bubble - (118 + 14.7)) > 13


@pytest.mark.parametrize("strength", [0.43, 0.46, 0.50])
def test_glycol_does_not_expand_like_water(strength: float) -> None:
    """From 10 to 140 degC, propylene glycol of an unstated common strength: 7.0 % printed, 10.8 % right."""
    cold, hot = ZERO + 10, ZERO + 140
    mixture = glycol("propylene-glycol", strength).expansion(cold, hot)
    assert mixture == pytest.approx(0.108, rel=0.025)
    assert water().expansion(cold, hot) == pytest.approx(0.0794, abs=0.0005)
    assert mixture > 1.5 * 0.070


def test_the_expansion_of_the_other_glycol_is_too_small() -> None:
    cold, hot = ZERO + 10, ZERO + 120
    propylene = glycol("propylene-glycol", 0.45).expansion(cold, hot)
    ethylene = glycol("ethylene-glycol", 0.45).expansion(cold, hot)
    assert ethylene < 0.9 * propylene


def test_steam_does_not_take_1700_times_its_liquid_at_the_pressure_of_a_loop() -> None:
    """605 litres of steam per litre of cold water at 3 bar absolute, 1700 at one atmosphere only."""
    cold = water().density(ZERO + 15)

    def ratio(pressure: float) -> float:
        temperature = water().boiling_temperature(pressure)
        return cold / water().saturated(temperature)[1]

    assert ratio(3 * BAR) == pytest.approx(605, rel=0.005)
    assert ratio(101325.0) == pytest.approx(1700, rel=0.02)


def test_three_litres_of_reserve_contradict_a_fill_pressure_above_the_precharge() -> None:
    """The liquid at filling follows from Boyle's law: 72.3 L become 81.3 L on the reference loop."""
    choices = run("steam-range", printed_analysis(), check=False)[0].answer.choices
    fill = choices.precharge + 0.3 * BAR
    consistent = choices._replace(reserve=0.0, fill=fill)
    assert round(choices.nominal_volume() * 1000, 1) == 72.3
    assert round(consistent.nominal_volume() * 1000, 1) == 81.3
    assert consistent.nominal_volume() * (1 - choices.precharge / fill) > 2.5 * choices.reserve


def test_the_liquid_of_the_steam_zone_is_counted_twice_by_the_steam_range() -> None:
    """Pushed out and expanding as well: 6.7 to 6.9 % too much on the reference loop."""
    choices = run("steam-range", printed_analysis(), check=False)[0].answer.choices
    loop = printed_loop()
    # As volume at the filling temperature, at which the vessel receives it.
    share = 1 - loop.fluid.density(ZERO + 120) / loop.fluid.density(ZERO + 15)
    steam = choices.vaporised + choices.pipe_steam
    twice = choices._replace(expansion=share * loop.content)
    once = choices._replace(expansion=share * (loop.content - steam))
    assert 0.067 < twice.nominal_volume() / once.nominal_volume() - 1 < 0.069
