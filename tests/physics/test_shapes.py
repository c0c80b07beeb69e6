"""What must hold for all loops, not only for those that somebody has worked by hand."""

import math

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from iapws import IAPWS95

from loopslack.kernel.citations import OWN_ASSUMPTION
from loopslack.kernel.equation import papers
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import GAUGE_PRESSURE
from loopslack.kernel.value import Assumed, Value
from loopslack.physics import (
    atmosphere,
    collector,
    collector_area,
    geometry,
    heat_loss,
    mixing,
    precharge,
    relief,
    statics,
    steam,
    vessel,
)

kelvin = st.floats(250.0, 500.0)
litres = st.floats(1e-4, 10.0)
pascals = st.floats(5e4, 2e6)
share = st.floats(0.3, 1.0)
linear = st.floats(0.0, 10.0)
quadratic = st.floats(0.0, 0.05)


@given(st.floats(1e-3, 1.0))
def test_bore_and_content_per_length_are_inverse(bore: float) -> None:
    assert geometry.bore_of_content(geometry.content_per_length(bore)) == pytest.approx(bore, rel=1e-12)


@given(st.floats(-500, 10_900), st.floats(1, 100))
def test_the_air_is_thinner_higher_up(altitude: float, climb: float) -> None:
    assert atmosphere.atmospheric_pressure(altitude + climb) < atmosphere.atmospheric_pressure(altitude)


@pytest.mark.parametrize("altitude", [-501.0, 11_001.0, 50_000.0, math.nan, math.inf])
def test_an_altitude_outside_the_law_is_refused_even_without_papers(altitude: float) -> None:
    with pytest.raises(OutOfRange, match="standard atmosphere"):
        atmosphere.atmospheric_pressure(altitude)


@given(pascals, st.floats(700, 1100), st.floats(-50, 50))
def test_a_column_goes_up_and_comes_down_again(pressure: float, density: float, height: float) -> None:
    there = statics.pressure_at_height(pressure, density, height)
    assert statics.pressure_at_height(there, density, -height) == pytest.approx(pressure, rel=1e-9)
    assert pressure - there == pytest.approx(statics.column_pressure(density, height), rel=1e-6, abs=1e-6)


@given(st.floats(-9e4, 2e6), pascals)
def test_gauge_and_absolute_are_inverse(gauge: float, air: float) -> None:
    absolute = statics.absolute_from_gauge(gauge, air)
    assert statics.gauge_from_absolute(absolute, air) == pytest.approx(gauge, abs=1e-6)


@given(litres, pascals, st.floats(1.01, 20.0), kelvin, kelvin)
def test_liquid_and_pressure_of_a_vessel_are_inverse(
    size: float, precharge_pressure: float, ratio: float, gas: float, set_at: float
) -> None:
    pressure = precharge_pressure * ratio
    held = vessel.liquid_held(size, precharge_pressure, pressure, gas, set_at)
    back = vessel.gas_pressure(size, precharge_pressure, held, gas, set_at)
    assert back == pytest.approx(pressure, rel=1e-9)


@given(litres, pascals, st.floats(0.5, 0.999))
def test_below_its_precharge_the_liquid_is_negative_and_never_clamped(
    size: float, precharge_pressure: float, ratio: float
) -> None:
    held = vessel.liquid_held(size, precharge_pressure, precharge_pressure * ratio, 300.0, 300.0)
    assert held < 0
    assert vessel.gas_pressure(size, precharge_pressure, held, 300.0, 300.0) < precharge_pressure


@given(litres, pascals, st.floats(1.05, 20.0))
def test_a_vessel_by_the_pressure_factor_ends_at_the_final_pressure(
    displaced: float, precharge_pressure: float, ratio: float
) -> None:
    final = precharge_pressure * ratio
    size = vessel.nominal_volume_for(displaced, vessel.pressure_factor(final, precharge_pressure))
    assert vessel.gas_pressure(size, precharge_pressure, displaced, 300.0, 300.0) == pytest.approx(final)


@given(litres, st.floats(1.0, 4.9))
def test_a_small_vessel_keeps_a_fifth_of_itself(expansion: float, factor: float) -> None:
    size = vessel.nominal_volume_small_vessel(expansion, factor)
    assert size == pytest.approx(vessel.nominal_volume_for(expansion + 0.2 * size, factor), rel=1e-9)


def test_the_window_of_en_12828_is_boyle_between_its_ends() -> None:
    size, gas, final, expansion, reserve = 0.08, 2.5e5, 6e5, 0.02, 0.004
    low = vessel.lowest_fill_pressure_en_12828(size, gas, reserve)
    high = vessel.highest_fill_pressure_en_12828(size, gas, final, expansion)
    assert vessel.liquid_held(size, gas, low, 300.0, 300.0) == pytest.approx(reserve)
    held = vessel.liquid_held(size, gas, high, 300.0, 300.0)
    assert vessel.gas_pressure(size, gas, held + expansion, 300.0, 300.0) == pytest.approx(final)


def test_a_reserve_of_three_litres_and_a_fill_of_0_3_bar_above_precharge_are_not_the_same() -> None:
    """Published rules combine the two; by Boyle the reserve is what it is: 72.3 L become 81.3 L (derived)."""
    displaced, gas, fill, final = 0.03962, 2.63125e5, 2.93125e5, 6.41325e5
    printed = vessel.nominal_volume_for(displaced + 0.003, vessel.pressure_factor(final, gas))
    usable = vessel.liquid_held(1.0, gas, final, 300.0, 300.0) - vessel.liquid_held(
        1.0, gas, fill, 300.0, 300.0
    )
    assert printed * 1000 == pytest.approx(72.3, abs=0.05)
    assert displaced / usable * 1000 == pytest.approx(81.3, abs=0.05)


def test_a_gauge_pressure_cannot_stand_in_the_pressure_factor() -> None:
    gauge = Value(5.4e5, GAUGE_PRESSURE, "final pressure", Assumed(OWN_ASSUMPTION))
    with pytest.raises(TypeError, match="gauge pressure"):
        papers(vessel.pressure_factor).derive(final_pressure=gauge, precharge=gauge)


@given(share, st.floats(100, 1300), linear, quadratic, kelvin)
def test_a_collector_gives_nothing_at_its_stagnation_temperature(
    efficiency: float, sun: float, a1: float, a2: float, air: float
) -> None:
    assume(a1 > 0.01 or a2 > 1e-4)
    hot = collector.stagnation_temperature(efficiency, sun, a1, a2, air)
    assert collector.heat_bound(efficiency, sun, a1, a2, hot, air) == pytest.approx(0, abs=1e-6 * sun)
    assert collector.loss_scale(efficiency, sun, a1, a2, hot, air) == pytest.approx(1, rel=1e-9)
    again = collector.stagnation_temperature_at_other_sun(hot, sun, air, a1, a2, sun, air)
    assert again == pytest.approx(hot, rel=1e-12)


@given(share, st.floats(100, 1300), st.floats(0.5, 10), quadratic, st.floats(250, 330), st.floats(0, 200))
def test_a_higher_stagnation_temperature_never_gives_less_heat(
    efficiency: float, sun: float, a1: float, a2: float, air: float, above: float
) -> None:
    own = collector.stagnation_temperature(efficiency, sun, a1, a2, air)
    same = collector.heat_bound_shifted(efficiency, sun, a1, a2, air + above, own, air)
    assert same == pytest.approx(
        collector.heat_bound(efficiency, sun, a1, a2, air + above, air), abs=1e-6 * sun
    )
    hotter = collector.heat_bound_shifted(efficiency, sun, a1, a2, air + above, own + 15, air)
    assert hotter >= same - 1e-9 * sun
    at_shifted = collector.heat_bound_shifted(efficiency, sun, a1, a2, own + 15, own + 15, air)
    assert at_shifted == pytest.approx(0, abs=1e-9 * sun)


@given(share, linear, quadratic, st.floats(0.5, 20), st.floats(0.5, 20), st.floats(-50, 200))
def test_the_heat_of_a_collector_does_not_depend_on_the_area_it_is_stated_for(
    efficiency: float, a1: float, a2: float, stated: float, other: float, above: float
) -> None:
    here = steam.collector_power(
        collector.heat_bound(efficiency, 1000.0, a1, a2, 300.0 + above, 300.0), stated
    )
    there = steam.collector_power(
        collector.heat_bound(
            collector_area.optical_efficiency_on_area(efficiency, stated, other),
            1000.0,
            collector_area.linear_loss_on_area(a1, stated, other),
            collector_area.quadratic_loss_on_area(a2, stated, other),
            300.0 + above,
            300.0,
        ),
        other,
    )
    assert there == pytest.approx(here, rel=1e-9, abs=1e-6)


@given(
    st.floats(0.01, 0.3), st.floats(0, 0.1), st.floats(0.001, 0.1), st.floats(0.01, 0.06), st.floats(8, 25)
)
def test_more_insulation_never_loses_more_beyond_the_critical_radius(
    diameter: float, thickness: float, more: float, conductivity: float, film: float
) -> None:
    assume(diameter + 2 * thickness > 2 * conductivity / film)
    thin = heat_loss.pipe_conductance(diameter, thickness, conductivity, film)
    thick = heat_loss.pipe_conductance(diameter, thickness + more, conductivity, film)
    assert 0 < thick < thin


@given(litres, kelvin, litres, kelvin)
def test_a_mixture_lies_between_its_parts(v1: float, t1: float, v2: float, t2: float) -> None:
    mixed = mixing.mixing_temperature(v1, t1, v2, t2)
    assert min(t1, t2) - 1e-9 <= mixed <= max(t1, t2) + 1e-9


@given(litres, st.floats(0, 10), st.lists(st.tuples(st.floats(0, 2), kelvin), max_size=4), kelvin)
def test_liquid_arrives_in_order_and_heat_is_kept(
    held: float, arriving: float, queue: list[tuple[float, float]], rest: float
) -> None:
    arrival = mixing.mixed_after_arrival(held, 290.0, arriving, queue, rest)
    left, heat = arriving, held * 290.0
    for volume, temperature in (*queue, (math.inf, rest)):
        taken = min(volume, left)
        left -= taken
        heat += taken * temperature
    assert arrival.mixed == pytest.approx(heat / (held + arriving), rel=1e-9)


def test_the_last_to_arrive_is_told_apart_from_the_mixture() -> None:
    queue = [(0.002, 293.15), (0.01, 313.15)]
    few = mixing.mixed_after_arrival(0.008, 288.15, 0.001, queue, 393.15)
    many = mixing.mixed_after_arrival(0.008, 288.15, 0.030, queue, 393.15)
    none = mixing.mixed_after_arrival(0.008, 288.15, 0.0, queue, 393.15)
    drawn = mixing.mixed_after_arrival(0.008, 288.15, -0.002, queue, 393.15)
    assert (few.last, many.last) == (293.15, 393.15)
    assert many.mixed == pytest.approx((8 * 288.15 + 2 * 293.15 + 10 * 313.15 + 18 * 393.15) / 38)
    assert (none.mixed, none.last) == (drawn.mixed, drawn.last) == (288.15, 288.15)


@given(st.floats(1e-6, 10), st.floats(345, 420), st.floats(275, 340))
def test_the_needed_cooling_content_brings_the_mixture_to_the_limit(
    hot: float, temperature: float, cool: float
) -> None:
    needed = mixing.cooling_content(hot, temperature, 343.15, cool)
    assume(needed + hot > 0)
    assert mixing.mixing_temperature(hot, temperature, needed, cool) == pytest.approx(343.15, rel=1e-9)


@given(st.floats(0.6e5, 1e5), st.floats(900, 1100), st.floats(0, 60), st.floats(0, 2e5), kelvin, kelvin)
def test_din_never_precharges_below_the_top_pressure_or_its_floor(
    air: float, density: float, head: float, top: float, set_at: float, cold: float
) -> None:
    plain = precharge.precharge_for_top_pressure(air, density, head, top, set_at, cold)
    din = precharge.precharge_din_4807_2(air, density, head, top, set_at, cold)
    assert din == max(plain, air + 0.7e5)


@given(st.floats(1e5, 1.6e6))
def test_every_allowance_leaves_a_valve_that_opens_between_zero_and_its_stamp(stamp: float) -> None:
    for rule in relief.ALLOWANCES.values():
        assert 0 < relief.opening_pressure(stamp, rule(stamp)) < stamp


@given(st.floats(2.5e5, 1.6e6))
def test_en_12828_and_the_tenth_keep_more_than_the_set_tolerance(stamp: float) -> None:
    tolerance = relief.set_tolerance_iso_4126_1(stamp)
    assert relief.allowance_en_12828(stamp) >= relief.allowance_ten_percent(stamp) > tolerance
    assert relief.blowdown_liquid(stamp) > relief.blowdown_gas(stamp) > tolerance


def test_a_part_below_the_valve_must_bear_the_column_too() -> None:
    assert relief.pressure_under_valve(6e5, 1000.0, 11.0) == pytest.approx(6e5 + 107_873.15)
    assert relief.pressure_under_valve(6e5, 1000.0, -11.0) == pytest.approx(6e5 - 107_873.15)


@pytest.mark.parametrize(("bars", "litres_of_steam"), [(1.01325, 1671), (3.0, 605)])
def test_steam_takes_1700_times_the_room_of_water_at_one_atmosphere_only(
    bars: float, litres_of_steam: float
) -> None:
    """Vapour density by IAPWS-95, a second opinion; 1700 is the figure of Home Power magazine (read)."""
    density = IAPWS95(P=bars / 10, x=1).rho
    ratio = steam.steam_volume_ratio(998.2, density)
    assert ratio == pytest.approx(litres_of_steam, rel=0.003)
    assert (abs(ratio / 1700 - 1) < 0.02) == (bars < 1.1)
