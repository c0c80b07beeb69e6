"""How a full loop becomes a lumped one: what is averaged, what is added, what is refused, and that it is said."""

import pytest
from msgspec.structs import fields, replace

from calc import reference
from calc.course.cases import ATMOSPHERE, BAR, case, charge, course
from loopslack.calc.course.assumptions import RESIDUAL_SHARE
from loopslack.calc.course.lumped import HOT_START, Start
from loopslack.calc.course.mapping import mapped
from loopslack.calc.fluids.making import BoilsLike, glycol, own_fluid, water
from loopslack.calc.model import Relief, Station
from loopslack.contract.questions.existing import StagnationCourseQuestion
from loopslack.kernel.errors import NotApplicable

WATERLIKE = [(273.15 + t, 1050 - 0.6 * t) for t in (-20, 20, 60, 100, 150, 200)]


def ids(found) -> set[str]:
    return {each.id for each in found.assumptions}


def text_of(found, id: str) -> str:
    return next(each.text for each in found.assumptions if each.id == id)


def refused(**changes) -> NotApplicable:
    with pytest.raises(NotApplicable) as error:
        case(loop=reference.loop(**changes))
    assert error.value.code == "course-not-applicable"
    assert error.value.remedy
    member = error.value.pointer.strip("/").split("/")[0]
    assert not member or member in {field.encode_name for field in fields(StagnationCourseQuestion)}
    return error.value


def relief(height: float) -> Relief:
    return replace(reference.loop().relief, height=height)


def test_the_reference_loop_keeps_its_numbers():
    loop = case().loop
    assert loop.aperture == pytest.approx(18.4)
    assert loop.linear_loss == pytest.approx(3.7)
    assert loop.quadratic_loss == pytest.approx(0.014)
    assert loop.pipe.content == pytest.approx((0, 22.58e-3), rel=1e-3)
    assert loop.pipe.conductance[-1] == pytest.approx(46 * 0.2501, rel=1e-3)
    assert loop.pipe.capacity[-1] == pytest.approx(46 * 556, rel=1e-3)
    assert loop.pipe.height == (11.0, 0.0)
    assert loop.vessel.body.conductance == pytest.approx(8.2, abs=0.1)
    assert loop.vessel.body.capacity == pytest.approx(7400, abs=50)
    assert loop.relief.flow_area == pytest.approx(3.3e-5)
    assert loop.emptying.residual_share == pytest.approx(0.45)


@pytest.mark.parametrize("id", ["residue", "wetted-share", "reflux"])
def test_what_decides_the_answer_is_named_an_own_assumption_without_a_source(id):
    found = next(each for each in case().assumptions if each.id == id)
    assert found.source.seen == "own-assumption"
    assert "without a source" in found.text


def test_the_answer_says_that_the_coupled_balance_stays_the_design_case():
    assert "stays the design case" in text_of(case(), "design-case")


def test_every_assumption_has_one_id_and_a_sentence():
    found = case(
        loop=reference.loop(cooling_content=0.01, station=Station(content=0.0064, height=0.0, steam_loss=500))
    )
    assert len(ids(found)) == len(found.assumptions)
    assert all(each.text.endswith(".") for each in found.assumptions)


def halves(**changes):
    return tuple(
        reference.group(name=name, count=4, aperture=9.2, content=6.8e-3, **changes)
        for name in ("east", "west")
    )


def test_two_equal_groups_make_the_same_day_as_one():
    one, two = case(), case(loop=reference.loop(groups=halves()))
    assert "one-collector" in ids(two)
    assert "one-collector" not in ids(one)
    assert course(two.loop).largest["steam_volume"].value == pytest.approx(
        course(one.loop).largest["steam_volume"].value, rel=1e-6
    )


def test_coefficients_are_averaged_by_aperture_and_the_residue_by_content():
    small = reference.group(
        name="a", aperture=4.6, content=3e-3, peak_efficiency=0.7, emptying="good", **stagnating(0.7)
    )
    large = reference.group(name="b", aperture=13.8, content=9e-3, emptying="poor")
    loop = case(loop=reference.loop(groups=(small, large))).loop
    assert loop.peak_efficiency == pytest.approx(0.25 * 0.7 + 0.75 * 0.79)
    assert loop.emptying.residual_share == pytest.approx(
        0.25 * RESIDUAL_SHARE["good"] + 0.75 * RESIDUAL_SHARE["poor"]
    )
    assert loop.collector_content == pytest.approx(12e-3)


def stagnating(efficiency: float) -> dict[str, float]:
    rise = reference.stagnation_rise(1000 * efficiency, 3.7, 0.014)
    return {"stagnation_temperature": 303.15 + rise}


def test_a_hotter_stated_stagnation_temperature_scales_the_losses_and_says_so():
    hotter = reference.group().stagnation_temperature + 20
    found = case(loop=reference.loop(groups=(reference.group(stagnation_temperature=hotter),)))
    loop = found.loop
    rise = hotter - 303.15
    assert loop.linear_loss * rise + loop.quadratic_loss * rise**2 == pytest.approx(790)
    assert loop.linear_loss / loop.quadratic_loss == pytest.approx(3.7 / 0.014)
    assert "stagnation-temperature" in ids(found)
    assert "stagnation-temperature" not in ids(case())


def test_the_emptying_class_is_fair_where_none_is_stated_or_only_a_power_was_measured():
    poor = reference.loop(groups=(reference.group(emptying="poor"),))
    measured = reference.loop(groups=(reference.group(emptying="measured"),))
    assert case(loop=poor).loop.emptying.residual_share == pytest.approx(0.80)
    unstated = case(loop=poor, emptying_stated=False)
    assert unstated.loop.emptying.residual_share == pytest.approx(0.45)
    assert "no class was stated" in text_of(unstated, "emptying-class")
    assert case(loop=measured).loop.emptying.residual_share == pytest.approx(0.45)
    assert "measured steam power" in text_of(case(loop=measured), "emptying-class")


def test_steam_spaces_at_different_heights_are_refused_with_both_heights():
    low, high = halves()
    error = refused(
        groups=(replace(low, height=8.0), replace(high, space=1)),
        branches=(
            reference.run("flow", "flow", start_height=8.0),
            replace(reference.run("other", "flow"), space=1),
        ),
    )
    assert error.facts == {"lowest": 8.0, "highest": 11.0, "allowed": 0.5}


def test_steam_spaces_at_nearly_one_height_count_as_one():
    low, high = halves()
    branches = (
        reference.run("flow", "flow", start_height=10.8),
        replace(reference.run("other", "flow"), space=1),
    )
    found = case(
        loop=reference.loop(groups=(replace(low, height=10.8), replace(high, space=1)), branches=branches)
    )
    assert "one-space" in ids(found)


def test_a_pipe_that_rises_from_the_collectors_is_refused():
    crest = reference.run("flow", "flow").segments[0]
    up = replace(crest, length=2.0, start_height=11.0, end_height=12.0)
    down = replace(crest, length=21.0, start_height=12.0, end_height=0.0)
    branch = replace(reference.run("flow", "flow"), segments=(up, down))
    error = refused(branches=(branch, reference.run("return", "return")))
    assert "rises" in error.message


def test_a_loop_without_a_branch_open_to_steam_is_refused():
    refused(branches=(reference.run("flow", "flow", access="closed"),))


def test_a_relief_valve_in_the_steam_zone_is_refused_and_one_below_is_carried_to_the_vessel():
    refused(relief=relief(11.0))
    above, at, below = (case(loop=reference.loop(relief=relief(h))).loop.relief for h in (3.0, 0.0, -3.0))
    assert at.set_pressure == pytest.approx(6 * BAR + ATMOSPHERE)
    # Hot liquid under a valve above, cold under one below: the lower pressure at the vessel either way.
    fluid = reference.loop().fluid
    assert above.set_pressure - at.set_pressure == pytest.approx(fluid.density(393.15) * 9.80665 * 3)
    assert below.set_pressure - at.set_pressure == pytest.approx(-fluid.density(278.15) * 9.80665 * 3)
    assert above.closing_pressure - at.closing_pressure == pytest.approx(above.set_pressure - at.set_pressure)


@pytest.mark.parametrize(("aperture", "size"), [(40, 15), (90, 20), (190, 25), (340, 32), (590, 40)])
def test_the_valve_grows_with_the_collector_area_unless_its_size_is_stated(aperture, size):
    group = reference.group(aperture=aperture)
    by_area = case(loop=reference.loop(groups=(group,))).loop.relief.flow_area
    assert by_area == pytest.approx(3.3e-5 * (size / 15) ** 2)
    stated = replace(relief(0.0), nominal_size=50)
    assert case(loop=reference.loop(groups=(group,), relief=stated)).loop.relief.flow_area == pytest.approx(
        3.3e-5 * (50 / 15) ** 2
    )


def test_beyond_the_table_the_valve_grows_in_proportion_to_the_area():
    group = reference.group(aperture=1200)
    assert case(loop=reference.loop(groups=(group,))).loop.relief.flow_area == pytest.approx(
        2 * 3.3e-5 * (40 / 15) ** 2
    )


def test_a_closed_branch_is_dead_content_at_the_station_and_an_unstated_one_is_taken_as_open():
    shut = reference.loop(
        branches=(reference.run("flow", "flow"), reference.run("return", "return", access="closed"))
    )
    unknown = reference.loop(
        branches=(reference.run("flow", "flow"), reference.run("return", "return", access="unknown"))
    )
    closed = case(loop=shut).loop
    assert closed.pipe.content[-1] == pytest.approx(11.29e-3, rel=1e-3)
    assert closed.reservoirs[0].content == pytest.approx(6.4e-3 + 11.29e-3, rel=1e-3)
    assert case(loop=unknown).loop.pipe.content == case().loop.pipe.content
    assert "open-branch" in ids(case(loop=unknown))
    assert "open-branch" not in ids(case())


def test_no_content_of_the_loop_is_lost_in_the_mapping():
    loop = reference.loop(
        branches=(
            reference.run("flow", "flow", 31.0),
            reference.run("return", "return", 12.0),
            reference.run("spare", "return", 7.0, access="closed"),
        ),
        line_content=0.7e-3,
        cooling_content=9e-3,
    )
    lumped = case(loop=loop).loop
    content = (
        lumped.collector_content + lumped.pipe.content[-1] + sum(part.content for part in lumped.reservoirs)
    )
    assert content == pytest.approx(loop.content, rel=1e-12)


def test_branches_of_different_length_fill_to_one_elevation_and_reach_is_that_of_the_longest():
    loop = reference.loop(
        branches=(reference.run("flow", "flow", 30.0), reference.run("return", "return", 15.0))
    )
    found = case(loop=loop)
    pipe = found.loop.pipe
    assert pipe.distance[-1] == pytest.approx(30.0)
    assert pipe.reach[-1] == pytest.approx(30.0)
    assert pipe.content[-1] == pytest.approx(loop.pipe_content)
    assert "uneven-branches" in ids(found)


def test_a_height_profile_decides_the_column_under_the_front():
    segment = reference.run("flow", "flow").segments[0]
    # Level for half its length, then straight down.
    level = replace(segment, length=11.5, end_height=11.0)
    steep = replace(segment, length=11.5, start_height=11.0)
    profile = tuple(replace(reference.run(n, n), segments=(level, steep)) for n in ("flow", "return"))
    found = case(loop=reference.loop(branches=profile)).loop
    assert found.pipe.height[0] == found.pipe.height[1] == 11.0
    assert found.pipe.height[-1] == 0.0
    straight = course(case().loop)
    # With steam in a level pipe the column does not shorten, so the steam stays cooler and takes more room.
    later = course(found)
    assert later.largest["reach"].value > straight.largest["reach"].value


def test_a_cooling_vessel_is_a_body_of_its_own_that_keeps_the_membrane_cool():
    without, with_one = case(loop=reference.loop()), case(loop=reference.loop(cooling_content=0.02))
    assert len(without.loop.reservoirs) == 1
    assert len(with_one.loop.reservoirs) == 2
    assert "cooling-vessel" in ids(with_one)
    hot = Start(time=43200.0, collectors=363.15, pipes=353.15, station=348.15, vessel=293.15)
    temperatures = [
        course(replace(found.loop, start=replace(hot, station=None if k else 348.15)))
        .largest["vessel_temperature"]
        .value
        for k, found in enumerate((without, with_one))
    ]
    assert temperatures[1] < temperatures[0]


def test_parallel_vessels_count_as_one_with_the_surface_of_all():
    one, three = case(), case(vessels=3)
    ratio = three.loop.vessel.body.conductance / one.loop.vessel.body.conductance
    assert ratio == pytest.approx(3 ** (1 / 3))
    assert three.loop.vessel.nominal_volume == one.loop.vessel.nominal_volume
    assert "one-vessel" in ids(three)


def test_the_gas_stays_at_the_room_or_follows_the_liquid():
    loop = reference.loop()
    assert mapped(loop, charge(room=293.15)).loop.vessel.gas_temperature == 293.15
    follows = case(gas_follows=True)
    assert follows.loop.vessel.gas_temperature is None
    assert "temperature of its liquid" in text_of(follows, "gas")


def test_water_and_an_own_fluid_by_table_boil_at_the_strength_of_the_filling():
    boiling = [(273.15 + t, p) for t, p in ((100, 0.95e5), (120, 1.9e5), (140, 3.5e5), (180, 9.7e5))]
    capacity = [(273.15, 3700.0), (373.15, 3900.0), (423.15, 4000.0)]
    fluid = own_fluid(WATERLIKE, 253.15, boiling, heat_capacity=capacity)
    found = case(loop=reference.loop(fluid=fluid))
    assert "nothing is known of another strength" in text_of(found, "residue-strength")
    curve = course(found.loop)
    assert curve.largest["steam_volume"].value > 5e-3
    assert max(curve.residue_strength) == 0.0
    plain = course(case(loop=reference.loop(fluid=water())).loop)
    assert "residue-strength-extrapolated" not in plain.flags


def test_an_own_fluid_that_boils_like_a_glycol_gets_its_residue_stronger():
    capacity = [(273.15, 3600.0), (373.15, 3800.0), (423.15, 3900.0)]
    like = BoilsLike(kind="propylene-glycol", mass_fraction=0.43)
    densities = [
        (t, glycol("propylene-glycol", 0.43).density(t))
        for t in (253.15, 293.15, 333.15, 373.15, 423.15, 473.15)
    ]
    fluid = own_fluid(densities, 253.15, like, heat_capacity=capacity)
    found = case(loop=reference.loop(fluid=fluid))
    assert "boils at its own strength" in text_of(found, "residue-strength")
    curve, known = course(found.loop), course(case().loop)
    assert curve.largest["residue_strength"].value == pytest.approx(
        known.largest["residue_strength"].value, abs=0.02
    )
    assert curve.largest["steam_volume"].value == pytest.approx(known.largest["steam_volume"].value, rel=0.02)


def test_an_own_fluid_without_heat_capacity_is_refused():
    fluid = own_fluid(WATERLIKE, 253.15, BoilsLike(kind="propylene-glycol", mass_fraction=0.43))
    assert "heat capacity" in refused(fluid=fluid).message


def test_the_start_is_said_in_words():
    assert "temperature of its surroundings" in text_of(case(), "start")
    hot = text_of(case(start=HOT_START), "start")
    assert "collectors at 90 degC" in hot
    assert "vessel at 30 degC" in hot
