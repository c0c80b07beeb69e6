"""Discharges and the robust cooler, told in the caller's units."""

from typing import get_args

import msgspec
import pytest

from calc.reference import ATMOSPHERE, BAR, loop
from calc.remedies.thousand import SERIES
from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Request, design
from loopslack.calc.discharge import discharge
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.remedies.measure import RemedyCode
from loopslack.calc.remedies.robust import cooler_for_robust
from loopslack.calc.scenarios import BASE
from loopslack.calc.window import Bounds
from loopslack.contract.writing.discharge import discharges
from loopslack.contract.writing.quantities import METRIC, US
from loopslack.contract.writing.remedies import robust_cooler
from loopslack.contract.writing.remedy_words import CAUTIONS, SENTENCES
from loopslack.kernel.work import finished


def _charged(litres, fill=1.92):
    analysis = Analysis(loop())
    gas = gas_of(analysis, Vessel(id="v", nominal_volume=litres * 1e-3), 1)
    return analysis, gas, Bounds(analysis, (), gas).mass(gas.nominal, ATMOSPHERE + fill * BAR)


def test_every_way_to_put_a_measure_has_its_sentence_and_its_cautions():
    codes = set(get_args(RemedyCode))
    own = {"open-run-unknown", "stronger-glycol-protecting"}
    assert set(SENTENCES) == codes | own
    assert set(CAUTIONS) == codes | {"open-run-unknown"}


def test_discharges_are_told_for_every_case_in_which_the_valve_opens_and_no_other():
    analysis, gas, mass = _charged(60)
    told = discharges(analysis, gas, mass, METRIC)
    opening = [s.id for s in analysis.every if discharge(analysis, gas, mass, s) is not None]
    assert [one.scenario for one in told] == opening
    assert "base" not in opening
    assert "hotter-stagnation" in opening
    assert discharges(*_charged(200), METRIC) == []


def test_a_discharge_is_told_with_its_numbers():
    analysis, gas, mass = _charged(25)
    found = discharge(analysis, gas, mass, BASE)
    told = discharges(analysis, gas, mass, METRIC)[0]
    assert told.volume.value == pytest.approx(1000 * found.volume, rel=1e-5)
    assert told.closing_pressure.value == pytest.approx(4.8)
    assert told.closing_pressure.unit == "barg"
    assert told.draws_air
    assert [state.id for state in told.afterwards] == ["fill", "cold"]
    assert told.afterwards[0].vessel_liquid.value < 0
    assert "vesselPressure" not in msgspec.to_builtins(told.afterwards[0])
    assert f"{1000 * found.volume:.4g} L" in told.sentence
    assert "sucks air" in told.sentence
    american = discharges(analysis, gas, mass, US)[0]
    assert american.volume.unit == "gal_us"
    assert american.volume.value == pytest.approx(told.volume.value / 3.785411784, rel=1e-5)


def test_steam_at_the_station_is_told_as_a_lower_bound():
    told = {one.scenario: one for one in discharges(*_charged(25), METRIC)}
    assert told["all-doubts"].at_least
    assert told["all-doubts"].vents_steam
    assert "at least" in told["all-doubts"].sentence
    assert told["base"].at_least is None
    assert "at least" not in told["base"].sentence


def test_the_robust_cooler_is_told_with_what_it_must_take():
    found = finished(cooler_for_robust(design(loop(), Request(SERIES, 1, "size", "single"))))
    told = robust_cooler(found, METRIC)
    assert told.unspent_power.value == pytest.approx(471.65, abs=1)
    assert told.power.value == pytest.approx(found.power)
    for number in (told.power.value, told.unspent_power.value, told.nominal_volume.value):
        assert f"{number:.4g}" in told.sentence
