"""What leaves through the relief valve: mass closes, the valve shuts where it should, the loop that is left is told."""

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import ATMOSPHERE, BAR, group, loop
from loopslack.calc.analysis import Analysis
from loopslack.calc.discharge import closing_pressure, discharge, steam_at_valve
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.scenarios import BASE
from loopslack.calc.stagnation import stagnation
from loopslack.calc.window import Bounds
from loopslack.kernel.errors import CalculationError

GRAVITY = 9.80665


def charged(loop_, litres, fill=1.92):
    analysis = Analysis(loop_)
    gas = gas_of(analysis, Vessel(id="v", nominal_volume=litres * 1e-3), 1)
    return analysis, gas, Bounds(analysis, (), gas).mass(gas.nominal, ATMOSPHERE + fill * BAR)


def test_nothing_leaves_where_the_valve_stays_shut():
    analysis, gas, mass = charged(loop(), 100)
    assert stagnation(analysis, BASE, gas, mass).regime == "steam"
    assert discharge(analysis, gas, mass, BASE) is None


def test_the_reference_loop_with_25_litres_loses_what_a_hand_calculation_says():
    # Class 80, p_close 4.8 barg: the steam of 5.813 bar absolute fills collectors and pipes as it would with a
    # vessel that stands at 4.8 barg; the vessel then holds 25 (1 - p_0 293.15 / (5.813 288.15)) litres.
    analysis, gas, mass = charged(loop(), 25)
    found = discharge(analysis, gas, mass, BASE)
    assert found.closing_pressure == pytest.approx(ATMOSPHERE + 4.8 * BAR)
    held = 25e-3 * (1 - gas.precharge * 293.15 / (found.closing_pressure * 288.15))
    assert found.vessel_liquid == pytest.approx(held, rel=1e-12)
    extent = analysis.case(BASE).balance.at_pressure(found.closing_pressure)
    density = analysis.fluid.density(293.15)
    stays = density * (held - 0.005 * analysis.content) - extent.expelled
    assert found.mass == pytest.approx(mass - stays, rel=1e-12)
    assert found.volume == pytest.approx(found.mass / analysis.fluid.density(393.15), rel=1e-12)
    # In round numbers: some 29 L of steam displace as much liquid and some 3 L of expansion come on top; the vessel
    # takes 11 L of it, so some 21 L leave, and the loop lacks what the vessel held at filling and more.
    assert 0.019 < found.volume < 0.023
    assert found.fill.liquid == pytest.approx(
        0.001626 - found.mass / analysis.fluid.density(288.15), abs=1e-5
    )
    assert found.fill.pressure is None
    assert found.sucks_air
    assert not found.steam
    assert not found.at_least


def test_mass_closes_in_every_discharge_of_random_loops():
    opened = 0
    for seed in range(60):
        loop_ = random_loop(seed)
        try:
            analysis = Analysis(loop_)
            gas = gas_of(analysis, Vessel(id="v", nominal_volume=0.6 * loop_.content), 1)
            mass = Bounds(analysis, (), gas).mass(gas.nominal, gas.precharge + 0.3 * BAR)
            scenarios = analysis.every
        except CalculationError:
            continue
        for scenario in scenarios:
            try:
                found = discharge(analysis, gas, mass, scenario)
            except CalculationError:
                continue
            if found is None:
                continue
            opened += 1
            assert found.mass >= 0
            assert found.left + found.mass == pytest.approx(mass, abs=1e-9 * (abs(mass) + found.mass))
            fill = analysis.states.fill.vessel_density
            assert found.fill.liquid * fill == pytest.approx(found.left, abs=1e-9 * (1 + abs(found.left)))
            assert found.refill * fill == pytest.approx(found.mass, abs=1e-9 * (1 + found.mass))
            assert found.vessel_liquid >= 0
            assert (found.fill.pressure is None) == (not 0 <= found.fill.liquid < gas.nominal)
            assert found.fill.sucks_air or found.fill.pressure is not None or found.fill.liquid >= gas.nominal
    assert opened > 50


def test_after_the_discharge_the_loop_rests_at_the_closing_pressure():
    analysis, gas, mass = charged(loop(), 25)
    found = discharge(analysis, gas, mass, BASE)
    after = stagnation(analysis, BASE, gas, found.left)
    assert after.regime == "steam"
    assert after.pressure == pytest.approx(found.closing_pressure, rel=1e-9)
    assert after.liquid == pytest.approx(found.vessel_liquid, rel=1e-9)


def test_a_smaller_vessel_loses_more_and_a_hotter_case_no_less():
    lost = [discharge(*charged(loop(), litres), BASE).mass for litres in (45, 35, 25, 15)]
    assert lost == sorted(lost)
    analysis, gas, mass = charged(loop(), 25)
    base = discharge(analysis, gas, mass, BASE).mass
    for scenario in analysis.every:
        assert discharge(analysis, gas, mass, scenario).mass >= base * (1 - 1e-9)


def test_a_valve_that_shuts_early_loses_less():
    late = loop()
    early = replace(late, relief=replace(late.relief, closing_pressure=5.3 * BAR))
    assert discharge(*charged(early, 25), BASE).mass < discharge(*charged(late, 25), BASE).mass


def test_the_closing_pressure_is_carried_to_the_vessel_by_the_lighter_or_the_heavier_liquid():
    reference = loop()
    high = replace(reference, relief=replace(reference.relief, height=5.0))
    low = replace(reference, relief=replace(reference.relief, height=-5.0))
    hot, cold = reference.fluid.density(393.15), reference.fluid.density(288.15)
    assert closing_pressure(high)[0] == pytest.approx(ATMOSPHERE + 4.8 * BAR + hot * GRAVITY * 5)
    assert closing_pressure(low)[0] == pytest.approx(ATMOSPHERE + 4.8 * BAR - cold * GRAVITY * 5)


def test_a_valve_whose_blowdown_exceeds_its_stamp_stays_open_to_the_atmosphere():
    reference = loop()
    gaping = replace(
        reference,
        relief=replace(
            reference.relief,
            set_pressure=0.55 * BAR,
            opening_pressure=0.05 * BAR,
            closing_pressure=-0.05 * BAR,
        ),
    )
    pressure, stays_open = closing_pressure(gaping)
    assert stays_open
    assert pressure == pytest.approx(ATMOSPHERE)


def test_a_valve_in_the_steam_space_vents_steam():
    reference = loop()
    extent = Analysis(reference).case(BASE).final
    front = extent.spaces[0].height
    assert 0 < front < 11
    for height, vents in ((front - 0.5, False), (front + 0.5, True), (11.0, True)):
        assert (
            steam_at_valve(replace(reference, relief=replace(reference.relief, height=height)), extent)
            is vents
        )


def test_steam_that_reaches_the_station_vents_and_makes_the_loss_a_lower_bound():
    hot = loop(groups=(group(emptying="poor", steam_power=160.0, worse_steam_power=None),))
    analysis, gas, mass = charged(hot, 25)
    found = discharge(analysis, gas, mass, analysis.combined)
    assert found.steam
    assert found.at_least


def test_a_vessel_that_keeps_enough_stays_under_pressure_and_says_how_low():
    # A large filling: little more than the valve needs to open, so much is left.
    analysis, gas, mass = charged(loop(), 100, fill=4.4)
    found = discharge(analysis, gas, mass, BASE)
    assert found.fill.liquid > 0
    assert found.fill.pressure == pytest.approx(
        gas.precharge * gas.nominal / (gas.nominal - found.fill.liquid), rel=1e-12
    )
    assert not found.sucks_air
    column = analysis.states.cold.column
    assert found.cold.top_pressure == pytest.approx(found.cold.pressure - column)
    assert found.cold.top_pressure > ATMOSPHERE


def test_the_refill_leads_to_the_recommended_filling_where_one_is_named():
    analysis, gas, mass = charged(loop(), 100, fill=4.4)
    recommended = Bounds(analysis, (), gas).mass(gas.nominal, ATMOSPHERE + 2.5 * BAR)
    found = discharge(analysis, gas, mass, BASE, recommended=recommended)
    density = analysis.states.fill.vessel_density
    assert found.refill == pytest.approx(max(0.0, recommended - found.left) / density)
