"""Round trips: whatever is done to a filled loop, an audit of its gauge says what was done."""

from itertools import product

import pytest
from msgspec.structs import replace

from calc import reference
from calc.loops import random_loop
from calc.reference import ATMOSPHERE, BAR, ZERO
from loopslack.calc.analysis import Analysis
from loopslack.calc.audit.gauge import column, liquid_of, pressure_of
from loopslack.calc.audit.states import WORSE
from loopslack.calc.audit.whole import READING, Audit, Found, Point, Record, audit
from loopslack.calc.existing import check
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.window import Gas
from loopslack.kernel.errors import CalculationError

LITRE = 1e-3
FIFTEEN, EIGHTEEN = ZERO + 15, ZERO + 18
LOOP = reference.loop(gauge_height=1.2)
VESSEL = Vessel(id="given", nominal_volume=0.14, rated_pressure=10 * BAR)
GAS = Gas(0.14, 1.8 * BAR + ATMOSPHERE, FIFTEEN)
FILL = 2.2 * BAR + ATMOSPHERE
"""Fill pressure at the vessel, absolute, at 15 degC."""


def filled_mass(loop: Loop, gas: Gas, fill: float) -> float:
    """Mass behind a fill pressure at the vessel at the fill temperature, by Boyle's law written out."""
    liquid = gas.nominal * (1 - gas.precharge / fill * loop.temperatures.fill / gas.temperature)
    return liquid * loop.fluid.density(loop.temperatures.fill)


def shown_by_gauge(loop: Loop, gas: Gas, mass: float, temperature: float) -> float:
    """What the gauge shows, absolute, of a vessel with a gas and a filling."""
    analysis = Analysis(loop)
    pressure = pressure_of(analysis, gas, mass, temperature)
    assert pressure is not None
    return pressure - column(analysis, temperature)


def record(loop: Loop, gas: Gas, fill: float) -> Record:
    below = column(Analysis(loop), loop.temperatures.fill)
    return Record(gas.precharge, fill - below, loop.temperatures.fill)


def audited(
    gas: Gas = GAS,
    mass: float | None = None,
    *,
    loop: Loop = LOOP,
    temperature: float = EIGHTEEN,
    measured: Gas | None = None,
    recorded: bool = True,
    vessel: Vessel = VESSEL,
    pieces: int = 1,
) -> Audit:
    """Audit a vessel that was filled by the record and now stands with this gas and this mass."""
    if mass is None:
        mass = filled_mass(loop, GAS, FILL)
    found = Found(
        Point(shown_by_gauge(loop, gas, mass, temperature), temperature),
        None if measured is None else Point(measured.precharge, measured.temperature),
        record(loop, GAS, FILL) if recorded else None,
    )
    return audit(loop, vessel, pieces, "single", found)


MASS = filled_mass(LOOP, GAS, FILL)
DENSITY = LOOP.fluid.density(FIFTEEN)


@pytest.mark.parametrize("celsius", [-15, 3, 15, 18, 35, 60])
def test_a_loop_filled_as_recorded_reads_as_recorded_at_any_temperature(celsius: float) -> None:
    found = audited(temperature=ZERO + celsius)
    assert found.explains == "neither"
    assert found.certainty == "likely"
    assert found.difference == pytest.approx(0.0, abs=1e-5)
    assert found.shown.missing == pytest.approx(0.0, abs=1e-12)
    assert found.shown.lost == 0.0
    assert found.shown.held.mass == pytest.approx(MASS, rel=1e-11)
    assert (
        found.verdict
        == check(
            replace(
                LOOP,
                precharge=replace(LOOP.precharge, kind="stated", pressure=GAS.precharge, temperature=FIFTEEN),
            ),
            VESSEL,
            1,
            "single",
            mass=MASS,
        ).judgement.verdict
    )


@pytest.mark.parametrize(("litres", "celsius"), product([0.5, 3, 8, -1, -6], [5, 15, 18, 40]))
def test_litres_that_were_drained_or_added_are_found_missing_or_too_much(
    litres: float, celsius: float
) -> None:
    found = audited(mass=MASS - litres * LITRE * DENSITY, temperature=ZERO + celsius)
    liquid = found.explanations[0]
    assert liquid.cause == "liquid"
    assert liquid.state is not None
    assert liquid.state.missing == pytest.approx(litres * LITRE, rel=1e-6, abs=1e-12)
    assert liquid.state.lost == 0.0
    assert not liquid.at_least


@pytest.mark.parametrize(("bar", "celsius"), product([0.15, 0.4, 0.9, -0.3], [5, 15, 18, 40]))
def test_precharge_that_was_lost_is_found_lost(bar: float, celsius: float) -> None:
    found = audited(replace(GAS, precharge=GAS.precharge - bar * BAR), temperature=ZERO + celsius)
    gas = found.explanations[1]
    assert gas.cause == "precharge"
    assert gas.state is not None
    assert gas.state.lost == pytest.approx(bar * BAR, rel=1e-6)
    assert gas.state.missing == 0.0


@pytest.mark.parametrize(
    ("litres", "bar", "explains"),
    [
        (0, 0, "neither"),
        (6, 0, "liquid"),
        (-6, 0, "liquid"),
        (0, 0.5, "precharge"),
        (0, -0.3, "precharge"),
        (5, 0.4, "both"),
        (-4, 0.4, "both"),
    ],
)
def test_a_measured_precharge_decides_and_both_numbers_come_back(
    litres: float, bar: float, explains: str
) -> None:
    now = replace(GAS, precharge=GAS.precharge - bar * BAR)
    # Measured at another temperature than it was set at.
    measured = replace(now, precharge=now.precharge * (ZERO + 22) / FIFTEEN, temperature=ZERO + 22)
    found = audited(now, MASS - litres * LITRE * DENSITY, measured=measured)
    assert (found.explains, found.certainty) == (explains, "shown")
    assert found.shown.missing == pytest.approx(litres * LITRE, rel=1e-6, abs=1e-11)
    assert found.shown.lost == pytest.approx(bar * BAR, rel=1e-6, abs=1e-4)
    assert found.verdict == found.shown.judgement.verdict


def test_a_low_reading_alone_decides_nothing_and_the_worse_explanation_counts() -> None:
    found = audited(mass=MASS - 6 * LITRE * DENSITY)
    assert (found.explains, found.certainty) == ("open", "open")
    verdicts = [way.state.judgement.verdict for way in found.explanations if way.state]
    assert len(verdicts) == 2
    assert WORSE[found.verdict] == max(WORSE[verdict] for verdict in verdicts)
    assert found.target.add is None


def test_a_high_reading_is_liquid_rather_than_gas_but_the_worse_explanation_counts() -> None:
    found = audited(mass=MASS + 6 * LITRE * DENSITY)
    assert (found.explains, found.certainty) == ("liquid", "likely")
    verdicts = [way.state.judgement.verdict for way in found.explanations if way.state]
    assert WORSE[found.verdict] == max(WORSE[verdict] for verdict in verdicts)


def test_what_a_gauge_cannot_tell_needs_no_explanation() -> None:
    gas = replace(GAS, precharge=GAS.precharge - 0.7 * READING)
    found = audited(gas)
    assert -READING < found.difference < 0
    assert found.explains == "neither"


def test_a_reading_below_the_precharge_means_an_empty_vessel_or_lost_gas() -> None:
    lost = replace(GAS, precharge=GAS.precharge - 0.8 * BAR)
    found = audited(lost)
    liquid, gas = found.explanations
    assert liquid.at_least
    assert liquid.state.held.empty
    # Full at 15 degC, empty at 18: the loop itself holds a little less mass when warmer.
    assert liquid.state.missing == pytest.approx(MASS / DENSITY - liquid.state.held.mass / DENSITY)
    assert gas.state.lost == pytest.approx(0.8 * BAR, rel=1e-9)
    assert found.verdict == "does-not-hold"


def test_without_a_record_the_recommended_filling_stands_in_and_nothing_is_certain() -> None:
    found = audited(recorded=False)
    assert (found.reference, found.set_by, found.certainty) == ("recommended", "by-rule", "open")
    delivered = replace(VESSEL, delivered_precharge=1.5 * BAR)
    assert audited(recorded=False, vessel=delivered).set_by == "as-delivered"


def test_the_worked_example() -> None:
    """100 L, precharge 1.5 bar, filled to 2.0 bar, reads 1.8 bar, all at 15 degC at sea level, gauge at the vessel.

    By hand, absolute: filled 100 (1 - 2.51325/3.01325) = 16.5934 L; now 100 (1 - 2.51325/2.81325) = 10.6638 L, so
    5.9296 L are missing. Or the gas has 100 - 16.5934 = 83.4066 L at 2.81325 bar, which is 2.346436 bar in 100 L:
    0.166814 bar lost. Up to 2.0 bar the first takes 5.9296 L, the second 100 (1 - 2.346436/3.01325) - 16.5934 =
    5.5360 L.
    """
    loop = reference.loop()
    found = audit(
        loop,
        replace(VESSEL, nominal_volume=0.1),
        1,
        "single",
        Found(
            Point(1.8 * BAR + ATMOSPHERE, FIFTEEN),
            record=Record(1.5 * BAR + ATMOSPHERE, 2.0 * BAR + ATMOSPHERE, FIFTEEN),
        ),
    )
    liquid, gas = found.explanations
    assert found.difference == pytest.approx(-0.2 * BAR)
    assert liquid.state.held.liquid / LITRE == pytest.approx(10.6638, abs=5e-5)
    assert liquid.state.missing / LITRE == pytest.approx(5.9296, abs=1e-4)
    assert liquid.refill / LITRE == pytest.approx(5.9296, abs=1e-4)
    assert gas.state.lost / BAR == pytest.approx(0.166814, abs=2e-6)
    assert gas.state.held.liquid / LITRE == pytest.approx(16.5934, abs=5e-5)
    assert gas.refill / LITRE == pytest.approx(5.5360, abs=1e-4)
    assert gas.isolated / BAR == pytest.approx(2.346436, abs=2e-6)


def test_refilling_as_each_explanation_says_brings_the_gauge_back() -> None:
    found = audited(mass=MASS - 6 * LITRE * DENSITY)
    analysis = Analysis(LOOP)
    here = LOOP.fluid.density(EIGHTEEN)
    for way in found.explanations:
        refilled = way.state.held.mass + way.refill * here
        assert shown_by_gauge(LOOP, way.state.gas, refilled, EIGHTEEN) == pytest.approx(
            found.expected, rel=1e-9
        )
    assert found.expected == pytest.approx(shown_by_gauge(LOOP, GAS, MASS, EIGHTEEN))
    assert liquid_of(analysis, MASS, FIFTEEN) == pytest.approx(MASS / DENSITY)


def test_what_to_set_instead_holds_and_adding_what_it_says_gets_there() -> None:
    found = audited(mass=MASS - 6 * LITRE * DENSITY, measured=GAS)
    target = found.target
    assert found.verdict == "does-not-hold"
    assert target.holds
    assert target.add is not None
    assert target.keeps_precharge
    topped = found.shown.held.mass + target.add * LOOP.fluid.density(EIGHTEEN)
    assert topped == pytest.approx(target.mass, rel=1e-9)
    assert shown_by_gauge(LOOP, target.gas, topped, EIGHTEEN) == pytest.approx(target.pressure, rel=1e-9)
    again = audited(target.gas, topped, measured=target.gas)
    assert again.verdict == "holds"
    assert again.position == "inside"


def test_a_vessel_too_small_is_told_by_how_much() -> None:
    small = replace(VESSEL, nominal_volume=0.03)
    gas = replace(GAS, nominal=0.03)
    found = audit(
        LOOP,
        small,
        1,
        "single",
        Found(
            Point(shown_by_gauge(LOOP, gas, filled_mass(LOOP, gas, FILL), EIGHTEEN), EIGHTEEN),
            Point(GAS.precharge, FIFTEEN),
        ),
    )
    assert found.verdict == "does-not-hold"
    assert not found.target.holds
    smallest = found.target.smallest
    assert smallest is not None
    assert smallest > 0.03
    assert (
        check(LOOP, replace(VESSEL, nominal_volume=smallest * (1 + 1e-9)), 1, "single").judgement.verdict
        == "holds"
    )


def test_two_equal_vessels_are_one_of_twice_the_size() -> None:
    halves = replace(VESSEL, nominal_volume=0.07)
    one, two = audited(), audited(vessel=halves, pieces=2)
    assert two.verdict == one.verdict
    assert two.shown.held == one.shown.held
    assert two.target.mass == pytest.approx(one.target.mass)


def test_a_precharge_that_cannot_be_changed_is_not_asked_to_change() -> None:
    fixed = replace(VESSEL, precharge_adjustable=False, delivered_precharge=1.8 * BAR)
    found = audited(measured=GAS, vessel=fixed)
    assert found.target.keeps_precharge
    assert found.target.gas == GAS


@pytest.mark.parametrize("seed", range(40))
def test_random_loops_come_back_from_their_gauges(seed: int) -> None:
    """Drain or charge a random vessel at random, and both numbers come back from gauge and measurement."""
    loop = random_loop(seed)
    nominal = (0.025, 0.08, 0.3, 1.2)[seed % 4]
    vessel = Vessel(id="given", nominal_volume=nominal, rated_pressure=10 * BAR)
    precharge = loop.atmosphere + max(0.1 * BAR * loop.top, 0.0) + 0.8 * BAR
    set_up = Gas(nominal, precharge, loop.temperatures.fill)
    fill = precharge + 0.6 * BAR
    mass = filled_mass(loop, set_up, fill)
    temperature = max(loop.temperatures.fill, loop.fluid.freezing_point + 1.0) + seed % 9
    drained = (seed % 5 - 2) * 0.05 * mass
    now = replace(set_up, precharge=precharge * (1 - 0.03 * (seed % 3)))
    analysis = Analysis(loop)
    pressure = pressure_of(analysis, now, mass - drained, temperature)
    if pressure is None:
        return
    gauge = Point(pressure - column(analysis, temperature), temperature)
    try:
        found = audit(
            loop,
            vessel,
            1,
            "single",
            Found(gauge, Point(now.precharge, now.temperature), record(loop, set_up, fill)),
        )
    except CalculationError:
        return
    density = loop.fluid.density(loop.temperatures.fill)
    assert found.shown.missing == pytest.approx(drained / density, rel=1e-6, abs=1e-10)
    assert found.shown.lost == pytest.approx(precharge - now.precharge, rel=1e-6, abs=1e-4)
    assert found.verdict == found.shown.judgement.verdict
    if found.target.holds:
        assert found.target.judgement.verdict == "holds"
        assert found.target.smallest is None
