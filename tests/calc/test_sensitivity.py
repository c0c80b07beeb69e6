"""Which inputs move the recommended volume, and that each is moved the way a caller would state it."""

from math import inf

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import (
    ATMOSPHERE,
    CRITERIA,
    TEMPERATURES,
    ZERO,
    conductance,
    group,
    loop,
    run,
    stagnation_rise,
)
from loopslack.calc.analysis import Analysis
from loopslack.calc.fluids.making import water
from loopslack.calc.levers.lever import Lever
from loopslack.calc.model import Loop, Precharge
from loopslack.calc.scenarios import BASE
from loopslack.calc.sensitivity import Asked, Effect, levers, recommended_volume, sensitivity
from loopslack.calc.sizing.volumes import size
from loopslack.kernel import kinds
from loopslack.library.defaults import default
from loopslack.physics.atmosphere import atmospheric_pressure


@pytest.fixture(scope="module")
def effects() -> tuple[Effect, ...]:
    return sensitivity(loop())


@pytest.fixture(scope="module")
def by_id(effects) -> dict[str, Effect]:
    return {effect.lever.id: effect for effect in effects}


def lever(id: str, plan: Loop | None = None) -> Lever:
    return next(found for found in levers(plan or loop()) if found.id == id)


def litres(plan: Loop) -> float | None:
    analysis = Analysis(plan)
    sized = size(analysis, analysis.singles, "size", plan.criteria.membrane_limit)
    return None if sized is None else sized.smallest


def test_inputs_that_decide_stand_first_and_the_others_fall(effects) -> None:
    changes = [effect.change for effect in effects]
    assert changes == sorted(changes, reverse=True)
    assert changes[0] == inf
    assert effects[0].decides
    assert not effects[-1].decides
    assert all(effect.present == litres(loop()) for effect in effects)


def test_every_end_is_the_volume_of_the_loop_stated_that_way(by_id) -> None:
    """The same loop written out by hand, not through the lever."""
    stated = {
        ("vessel-room", "low"): loop(temperatures=replace(TEMPERATURES, vessel_room=ZERO + 5)),
        ("pump-cut-off", "high"): loop(temperatures=replace(TEMPERATURES, cut_off=ZERO + 130)),
        ("minimum-top-pressure", "high"): loop(criteria=replace(CRITERIA, top_pressure=1.5e5)),
        ("fill-window-width", "low"): loop(criteria=replace(CRITERIA, window_width=0.2e5)),
        ("collector-content-flat-plate", "low"): loop(groups=(group(content=18.4 * 0.4e-3),)),
        ("collector-content-flat-plate", "high"): loop(groups=(group(content=18.4 * 1.0e-3),)),
        ("linear-loss-flat-plate", "high"): loop(
            groups=(
                group(linear_loss=4.5, stagnation_temperature=ZERO + 30 + stagnation_rise(790, 4.5, 0.014)),
            )
        ),
        ("design-irradiance", "low"): loop(
            sun=replace(loop().sun, irradiance=900.0),
            groups=(group(stagnation_temperature=ZERO + 30 + stagnation_rise(711, 3.7, 0.014)),),
        ),
        ("design-ambient", "low"): loop(
            sun=replace(loop().sun, ambient=ZERO + 20),
            groups=(group(stagnation_temperature=ZERO + 20 + stagnation_rise(790, 3.7, 0.014)),),
        ),
        ("steam-power-flat-plate", "low"): loop(groups=(group(steam_power=50.0),)),
        ("pipe-length", "high"): loop(branches=(run("flow", "flow", 27.6), run("return", "return", 27.6))),
        ("pipe-ambient", "low"): loop(
            branches=(run("flow", "flow", ambient=ZERO), run("return", "return", ambient=ZERO))
        ),
        ("insulation-conductivity", "high"): loop(
            branches=tuple(
                run(name, name, conductivity=0.05, conductance=conductance(0.028, 0.02, 0.05))
                for name in ("flow", "return")
            )
        ),
        ("insulation-thickness-per-diameter", "low"): loop(
            branches=tuple(
                run(name, name, insulation=0.014, conductance=conductance(0.028, 0.014))
                for name in ("flow", "return")
            )
        ),
        ("station-content", "high"): loop(station=replace(loop().station, content=(10 + 0.5 * 18.4) * 1e-3)),
        ("relief-height", "high"): loop(relief=replace(loop().relief, height=2.0)),
        ("altitude", "high"): loop(atmosphere=atmospheric_pressure(1000.0), altitude=1000.0),
        ("static-height", "high"): loop(
            groups=(group(height=12.0),),
            branches=tuple(run(name, name, start_height=12.0) for name in ("flow", "return")),
            top=12.0,
        ),
    }
    for (id, end), plan in stated.items():
        moved = by_id[id].at_low if end == "low" else by_id[id].at_high
        volume = litres(plan)
        assert volume is not None
        assert moved.nominal_volume == pytest.approx(volume, rel=1e-9), id


def test_the_ranges_are_those_of_the_defaults_or_say_that_they_are_assumed() -> None:
    for found in levers(loop()):
        assert found.low < found.high
        assert found.low <= found.value <= found.high
        if found.id in {"pipe-length", "static-height"}:
            assert found.basis == "own-assumption"
        elif found.id == "collector-content-flat-plate":
            row = default(found.id)
            assert found.kind is kinds.VOLUME
            assert (found.low, found.high) == pytest.approx((row.low * 18.4, row.high * 18.4), rel=1e-12)
        elif found.id not in {"station-content", "steam-power-flat-plate"}:
            row = default(found.id)
            assert found.basis == "default"
            assert found.kind == row.kind
            assert {found.low, found.high} <= {row.low, row.high, found.value, loop().fluid.lowest}


def test_steam_power_is_moved_over_the_range_of_the_stated_class() -> None:
    fair = default("steam-power-flat-plate-fair")
    found = lever("steam-power-flat-plate")
    assert (found.low, found.high) == (fair.low, fair.high) == (50, 120)
    measured = loop(groups=(group(emptying="measured", steam_power=60.0, worse_steam_power=75.0),))
    found = lever("steam-power-flat-plate", measured)
    assert (found.low, found.high) == (60.0, 90.0)
    assert found.moved(measured, 90.0).groups[0].worse_steam_power == 90.0


def test_moving_an_input_to_where_it_is_changes_nothing() -> None:
    present = litres(loop())
    for found in levers(loop()):
        assert litres(found.moved(loop(), found.value)) == pytest.approx(present, rel=1e-9), found.id


def test_the_fill_temperature_does_not_go_below_freezing() -> None:
    weak = loop(fluid=water())
    found = lever("fill-temperature", weak)
    assert found.low == weak.fluid.lowest
    assert found.high == ZERO + 40


def test_a_measured_stagnation_temperature_stays_when_other_coefficients_would_lower_it() -> None:
    measured = loop(groups=(group(measured_stagnation=True),))
    found = lever("linear-loss-flat-plate", measured)
    kept = measured.groups[0].stagnation_temperature
    assert found.moved(measured, 4.5).groups[0].stagnation_temperature == kept
    assert found.moved(measured, 3.0).groups[0].stagnation_temperature > kept


def test_a_stated_precharge_keeps_its_gauge_reading_at_another_altitude() -> None:
    stated = loop(precharge=Precharge(kind="stated", pressure=2.6e5, temperature=ZERO + 15))
    moved = lever("altitude", stated).moved(stated, 1000.0)
    assert moved.precharge.pressure - moved.atmosphere == pytest.approx(2.6e5 - ATMOSPHERE)


def test_only_the_groups_of_a_type_move() -> None:
    tube = group(
        name="tubes",
        build="evacuated-tube-direct",
        peak_efficiency=0.7,
        linear_loss=1.2,
        quadratic_loss=0.006,
    )
    mixed = loop(groups=(group(), tube))
    moved = lever("linear-loss-evacuated-tube-direct", mixed).moved(mixed, 0.8)
    assert moved.groups[0] == mixed.groups[0]
    assert moved.groups[1].linear_loss == 0.8
    assert moved.groups[1].stagnation_temperature > tube.stagnation_temperature


def test_an_input_that_leaves_the_fluids_range_says_why_instead_of_a_volume() -> None:
    found = replace(lever("stagnation-liquid"), high=ZERO + 250)
    (effect,) = sensitivity(loop(), moving=(found,))
    assert effect.at_high.nominal_volume is None
    assert "250 degC" in effect.at_high.reason
    assert effect.decides


def test_the_volume_asked_for_follows_the_policy() -> None:
    plain = recommended_volume(loop(), Asked(policy="none"), 0.0).nominal_volume
    analysis = Analysis(loop())
    base = size(analysis, (BASE,), "size", CRITERIA.membrane_limit)
    assert base is not None
    assert plain == base.smallest < litres(loop())


def test_a_caller_may_narrow_a_range() -> None:
    whole, narrow = lever("pump-cut-off"), replace(lever("pump-cut-off"), low=ZERO + 119, high=ZERO + 121)
    assert sensitivity(loop(), moving=(narrow,))[0].change < sensitivity(loop(), moving=(whole,))[0].change


@pytest.mark.parametrize("seed", range(0, 60, 3))
def test_every_input_of_a_random_loop_can_be_moved(seed: int) -> None:
    plan = random_loop(seed)
    for found in levers(plan):
        for number in (found.low, found.high):
            moved = recommended_volume(found.moved(plan, number), Asked(), number)
            assert moved.nominal_volume is None or 0 < moved.nominal_volume < 1e4
            assert "nan" not in moved.reason
