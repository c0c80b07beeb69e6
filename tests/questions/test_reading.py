"""The wash house and its relatives, read into SI."""

from math import pi

import msgspec
import pytest

from loopslack.contract import quantity as q
from loopslack.contract.questions.fields import _KIND_OF_STRUCT  # the one table of kinds by struct
from loopslack.contract.reading.loop import read_loop
from loopslack.contract.reading.reader import Reader
from loopslack.kernel.units import from_si, to_si
from loopslack.physics.atmosphere import atmospheric_pressure
from questions.wash_house import changed, least, question, wash_house

US_UNIT = {
    "m": "ft",
    "mm": "in",
    "m2": "ft2",
    "L": "gal_us",
    "barg": "psig",
    "bar": "psi",
    "mH2O": "ftH2O",
    "degC": "degF",
    "W/m2": "BTU/h/ft2",
    "W/m2K": "BTU/h/ft2/degF",
    "W/m2K2": "BTU/h/ft2/degF2",
    "W/mK": "BTU.in/h/ft2/degF",
    "W": "BTU/h",
    "K": "delta_degF",
    "L/m": "gal_us/ft",
}
KIND_OF_UNIT = {
    unit: kind for kind in _KIND_OF_STRUCT.values() for unit in kind.units if unit not in {"K", "W/mK"}
}
KIND_OF_UNIT["K"] = _KIND_OF_STRUCT[q.TemperatureDifference]
KIND_OF_UNIT["W/mK"] = _KIND_OF_STRUCT[q.Conductivity]


def in_us_units(value):
    """The same question with every quantity in the other system, at full precision."""
    if isinstance(value, list):
        return [in_us_units(item) for item in value]
    if not isinstance(value, dict):
        return value
    if value.keys() == {"value", "unit"} and value["unit"] in US_UNIT:
        kind, unit = KIND_OF_UNIT[value["unit"]], US_UNIT[value["unit"]]
        return {"value": from_si(to_si(value["value"], value["unit"], kind), unit, kind), "unit": unit}
    return {name: in_us_units(member) for name, member in value.items()}


def numbers(value, place=""):
    """Every number of a structure of structs, with its place."""
    if isinstance(value, float):
        yield place, value
    elif isinstance(value, msgspec.Struct):
        for name in value.__struct_fields__:
            yield from numbers(getattr(value, name), f"{place}.{name}")
    elif isinstance(value, tuple):
        for k, item in enumerate(value):
            yield from numbers(item, f"{place}[{k}]")


def full():
    """Every optional quantity stated."""
    data = wash_house()
    for pointer, value, unit in [
        ("/collectors/0/grossArea", 2.5, "m2"),
        ("/collectors/0/height", 11, "m"),
        ("/highestPoint", 12, "m"),
        ("/reliefValve/blowdown", 1.2, "bar"),
        ("/station/highestTemperature", 130, "degC"),
        ("/station/steamCooler", 500, "W"),
        ("/temperatures/fill", 12, "degC"),
        ("/temperatures/indoorCold", 4, "degC"),
        ("/temperatures/vesselRoom", 22, "degC"),
        ("/temperatures/flowPipe", 75, "degC"),
        ("/temperatures/returnPipe", 45, "degC"),
        ("/temperatures/cutOff", 118, "degC"),
        ("/temperatures/hotLiquid", 121, "degC"),
        ("/designSun/irradiance", 1050, "W/m2"),
        ("/designSun/ambient", 33, "degC"),
        ("/criteria/reserve", 4, "L"),
        ("/criteria/topPressure", 0.7, "barg"),
        ("/criteria/windowWidth", 0.4, "bar"),
        ("/criteria/fillAbovePrecharge", 0.35, "bar"),
        ("/criteria/windowEdgeDistance", 0.12, "bar"),
        ("/criteria/boilingMargin", 0.25, "bar"),
        ("/criteria/membraneLimit", 75, "degC"),
        ("/criteria/freezeMargin", 6, "K"),
        ("/criteria/degradationLimit", 170, "degC"),
        ("/criteria/stagnationDoubt", 12, "K"),
        ("/pipeRuns/0/segments/0/endHeight", 0, "m"),
    ]:
        data = changed(data, pointer, {"value": value, "unit": unit})
    measured = {
        "temperature": {"value": 175, "unit": "degC"},
        "irradiance": {"value": 980, "unit": "W/m2"},
        "ambient": {"value": 25, "unit": "degC"},
    }
    data = changed(data, "/collectors/0/measuredStagnation", measured)
    data = changed(
        data,
        "/precharge",
        {
            "kind": "stated",
            "pressure": {"value": 1.6, "unit": "barg"},
            "temperature": {"value": 15, "unit": "degC"},
        },
    )
    data = changed(data, "/site/altitude", {"value": 800, "unit": "m"})
    part = {
        "name": "filling tap",
        "height": {"value": 2, "unit": "m"},
        "ratedPressure": {"value": 16, "unit": "barg"},
        "highestTemperature": {"value": 150, "unit": "degC"},
    }
    data["parts"] = [part]
    return data


@pytest.mark.parametrize("make", [wash_house, least, full])
def test_metric_and_us_units_give_the_same_loop(make):
    metric, us = read_loop(question(make())), read_loop(question(in_us_units(make())))
    here, there = list(numbers(metric.loop)), list(numbers(us.loop))
    assert len(here) == len(there) > 40
    for (place, number), (_, other) in zip(here, there, strict=True):
        assert other == pytest.approx(number, rel=1e-12, abs=1e-12), place
    assert metric.loop.fluid.mass_fraction == us.loop.fluid.mass_fraction


def test_the_other_system_really_differs():
    text = str(in_us_units(full()))
    for unit in ("'m'", "'L'", "'barg'", "'degC'", "'bar'", "'W/m2'"):
        assert unit not in text


def test_the_wash_house_has_the_contents_and_temperatures_of_a_hand_calculation():
    loop = read_loop(question(wash_house())).loop
    assert loop.aperture == pytest.approx(8 * 2.3)
    assert loop.collector_content == pytest.approx(8 * 1.7e-3)
    assert loop.pipe_content == pytest.approx(2 * 23 * pi / 4 * 0.025**2)
    assert loop.content == pytest.approx(13.6e-3 + 22.58e-3 + 6.4e-3 + 0.5e-3, rel=1e-4)
    # 0.79 * 1000 = 3.7 d + 0.014 d^2 gives d = 139.68 K above 30 degC.
    assert loop.groups[0].stagnation_temperature - 273.15 == pytest.approx(169.7, abs=0.05)
    assert loop.relief.opening_pressure == pytest.approx(5.4e5)
    assert loop.relief.closing_pressure == pytest.approx(4.8e5)
    assert loop.relief.nominal_size == 15
    assert loop.fluid.mass_fraction == pytest.approx(0.429, abs=5e-4)
    assert loop.top == 11.0
    # A 28 mm tube in 20 mm of 0.040 W/mK: ln(68/28)/0.08 + 1/(10*0.068) = 12.56 mK/W, pi/12.56 = 0.2501.
    assert loop.branches[0].segments[0].conductance == pytest.approx(0.2501, abs=5e-5)


def test_the_wash_house_leaves_nothing_provisional():
    assert read_loop(question(wash_house())).provisional == ()


def test_a_gauge_pressure_counts_from_the_atmosphere_of_the_site():
    high = changed(wash_house(), "/site/altitude", {"value": 2000, "unit": "m"})
    gauge = read_loop(question(high)).loop
    atmosphere = atmospheric_pressure(2000.0)
    absolute = changed(high, "/reliefValve/setPressure", {"value": 6 + atmosphere / 1e5, "unit": "bara"})
    assert gauge.atmosphere == atmosphere < 80_000
    assert read_loop(question(absolute)).loop.relief.set_pressure == pytest.approx(6e5)
    assert gauge.relief.set_pressure == pytest.approx(6e5)


def test_a_stated_precharge_is_read_as_absolute():
    loop = read_loop(question(full())).loop
    assert loop.precharge.kind == "stated"
    assert loop.precharge.pressure == pytest.approx(1.6e5 + loop.atmosphere)
    assert loop.precharge.temperature == pytest.approx(288.15)


def test_coefficients_change_basis_with_the_areas():
    data = changed(wash_house(), "/collectors/0/grossArea", {"value": 2.53, "unit": "m2"})
    data = changed(data, "/collectors/0/coefficients/basis", "gross")
    group = read_loop(question(data)).loop.groups[0]
    assert group.peak_efficiency == pytest.approx(0.79 * 1.1)
    assert group.linear_loss == pytest.approx(3.7 * 1.1)
    assert group.quadratic_loss == pytest.approx(0.014 * 1.1)
    # All three scale alike, so the stagnation temperature stays.
    assert group.stagnation_temperature - 273.15 == pytest.approx(169.685, abs=1e-3)


def test_an_area_on_another_basis_is_turned_into_aperture_by_the_stated_one():
    data = changed(wash_house(), "/collectors/0/area", {"value": 2.53, "unit": "m2"})
    data = changed(data, "/collectors/0/areaBasis", "gross")
    data = changed(data, "/collectors/0/apertureArea", {"value": 2.3, "unit": "m2"})
    assert read_loop(question(data)).loop.aperture == pytest.approx(18.4)


def test_a_measured_stagnation_temperature_is_carried_to_the_design_sun():
    measured = {
        "temperature": {"value": 190, "unit": "degC"},
        "irradiance": {"value": 1000, "unit": "W/m2"},
        "ambient": {"value": 30, "unit": "degC"},
    }
    same = read_loop(question(changed(wash_house(), "/collectors/0/measuredStagnation", measured)))
    assert same.loop.groups[0].stagnation_temperature == pytest.approx(463.15)
    assert same.loop.groups[0].measured_stagnation
    measured["irradiance"]["value"] = 900
    more = read_loop(question(changed(wash_house(), "/collectors/0/measuredStagnation", measured)))
    assert more.loop.groups[0].stagnation_temperature > 463.15
    carried = [a for a in more.assumed if a.pointer == "/collectors/0/measuredStagnation/temperature"]
    assert carried[0].si == more.loop.groups[0].stagnation_temperature


def test_the_higher_of_measured_and_computed_stagnation_counts():
    measured = {
        "temperature": {"value": 140, "unit": "degC"},
        "irradiance": {"value": 1000, "unit": "W/m2"},
        "ambient": {"value": 30, "unit": "degC"},
    }
    found = read_loop(question(changed(wash_house(), "/collectors/0/measuredStagnation", measured)))
    assert found.loop.groups[0].stagnation_temperature - 273.15 == pytest.approx(169.685, abs=1e-3)


def test_a_measured_steam_power_has_a_worse_one_a_quarter_up():
    data = wash_house()
    del data["collectors"][0]["emptyingClass"]
    data = changed(data, "/collectors/0/measuredSteamPower", {"value": 60, "unit": "W/m2"})
    group = read_loop(question(data)).loop.groups[0]
    assert (group.emptying, group.steam_power, group.worse_steam_power) == ("measured", 60.0, 75.0)


@pytest.mark.parametrize(
    ("stated", "power", "worse"), [("good", 50.0, 80.0), ("fair", 80.0, 120.0), ("poor", 120.0, None)]
)
def test_an_emptying_class_has_its_steam_power_and_the_next_worse(stated, power, worse):
    group = read_loop(question(changed(wash_house(), "/collectors/0/emptyingClass", stated))).loop.groups[0]
    assert (group.steam_power, group.worse_steam_power) == (power, worse)


def test_heights_fall_evenly_between_those_that_are_stated():
    data = wash_house()
    stretch = data["pipeRuns"][0]["segments"][0]
    stretches = [{**stretch, "length": {"value": length, "unit": "m"}} for length in (5, 10, 5, 20)]
    stretches[1] = {**stretches[1], "endHeight": {"value": 8, "unit": "m"}}
    data["pipeRuns"][0]["segments"] = stretches
    ends = [segment.end_height for segment in read_loop(question(data)).loop.branches[0].segments]
    assert ends == pytest.approx([10.0, 8.0, 6.4, 0.0])


def test_a_crest_becomes_the_highest_point():
    data = wash_house()
    stretch = data["pipeRuns"][0]["segments"][0]
    data["pipeRuns"][0]["segments"] = [{**stretch, "endHeight": {"value": 13, "unit": "m"}}, stretch]
    assert read_loop(question(data)).loop.top == 13.0


def test_weathered_insulation_loses_more_by_its_factor():
    stated = {
        "kind": "weathered",
        "thickness": {"value": 20, "unit": "mm"},
        "conductivity": {"value": 0.04, "unit": "W/mK"},
        "lossFactor": 1.5,
    }
    loop = read_loop(question(changed(wash_house(), "/pipeRuns/0/segments/0/insulation", stated))).loop
    new, old = loop.branches[1].segments[0], loop.branches[0].segments[0]
    assert old.conductance == pytest.approx(1.5 * new.conductance)


def test_bare_pipe_loses_by_its_surface_alone():
    loop = read_loop(
        question(changed(wash_house(), "/pipeRuns/0/segments/0/insulation", {"kind": "none"}))
    ).loop
    assert loop.branches[0].segments[0].conductance == pytest.approx(pi * 0.028 * 10)


def test_a_tube_may_be_given_by_bore_or_content():
    bore = {"kind": "bore", "bore": {"value": 25, "unit": "mm"}, "outerDiameter": {"value": 28, "unit": "mm"}}
    content = {"kind": "content", "contentPerLength": {"value": pi / 4 * 0.625, "unit": "L/m"}}
    data = changed(wash_house(), "/pipeRuns/0/segments/0/tube", bore)
    data = changed(data, "/pipeRuns/1/segments/0/tube", content)
    first, second = (branch.segments[0] for branch in read_loop(question(data)).loop.branches)
    assert first.area == pytest.approx(pi / 4 * 0.025**2)
    assert first.outer_diameter == pytest.approx(0.028)
    assert second.area == pytest.approx(first.area)
    assert second.outer_diameter == pytest.approx(0.027)


def test_steam_spaces_are_told_apart_by_their_names():
    data = wash_house()
    group, runs = data["collectors"][0], data["pipeRuns"]
    data["collectors"] = [{**group, "steamSpace": "east"}, {**group, "steamSpace": "west"}]
    data["pipeRuns"] = [{**runs[0], "steamSpace": "west"}, {**runs[1], "steamSpace": "east"}]
    loop = read_loop(question(data)).loop
    assert [group.space for group in loop.groups] == [0, 1]
    assert [branch.space for branch in loop.branches] == [1, 0]


def test_a_vessel_outdoors_gets_as_cold_as_the_site():
    loop = read_loop(question(changed(wash_house(), "/vesselZone", "outdoor"))).loop
    assert loop.vessel_outdoor
    assert loop.temperatures.vessel_cold == loop.temperatures.site_minimum == pytest.approx(257.15)


def test_protection_to_a_temperature_finds_the_mixture():
    stated = {"kind": "protect-to", "temperature": {"value": -25, "unit": "degC"}}
    fluid = read_loop(question(changed(wash_house(), "/fluid/concentration", stated))).loop.fluid
    assert fluid.freezing_point <= 248.15 + 1e-9
    assert 0.38 < fluid.mass_fraction < 0.5


def test_an_own_fluid_is_read_from_its_tables():
    density = [(-30, 1065), (20, 1040), (80, 1000), (120, 968), (180, 905)]
    boiling = [(90, 0.6), (120, 1.75), (160, 5.6), (190, 11.3)]
    stated = {
        "kind": "own",
        "name": "shed mix",
        "points": [
            {"temperature": {"value": t, "unit": "degC"}, "density": {"value": rho, "unit": "kg/m3"}}
            for t, rho in density
        ],
        "freezingPoint": {"value": -28, "unit": "degC"},
        "boiling": {
            "kind": "table",
            "points": [
                {"temperature": {"value": t, "unit": "degC"}, "pressure": {"value": p, "unit": "bara"}}
                for t, p in boiling
            ],
        },
    }
    fluid = read_loop(question(changed(wash_house(), "/fluid", stated))).loop.fluid
    assert fluid.name == "shed mix"
    assert fluid.density(293.15) == pytest.approx(1040)
    assert fluid.bubble_pressure(433.15) == pytest.approx(5.6e5)
    like = {
        "kind": "like",
        "glycol": "propylene-glycol",
        "share": {"value": 40, "unit": "mass-percent"},
    }
    fluid = read_loop(question(changed(wash_house(), "/fluid", {**stated, "boiling": like}))).loop.fluid
    # 40 % by mass boils at 138.1 degC under 3 bar absolute.
    assert fluid.bubble_pressure(273.15 + 138.1) == pytest.approx(3e5, rel=5e-3)


def places_of_quantities(value, place=""):
    """Pointers of all quantities of a question."""
    if isinstance(value, list):
        for k, item in enumerate(value):
            yield from places_of_quantities(item, f"{place}/{k}")
    elif isinstance(value, dict):
        if value.keys() == {"value", "unit"}:
            yield place
        else:
            for name, member in value.items():
                yield from places_of_quantities(member, f"{place}/{name}")


WITHOUT_EFFECT = {
    "/collectors/0/grossArea": "counts only where coefficients refer to the gross area",
    "/staticHeight": "counts only for groups that state no height of their own",
    "/vessel/ratedPressure": "belongs to the vessels, which are read apart",
}


@pytest.mark.parametrize("pointer", list(places_of_quantities(full())))
def test_every_stated_quantity_reaches_the_loop(pointer):
    data = full()
    place = data
    *path, last = pointer.strip("/").split("/")
    for step in path:
        place = place[int(step)] if isinstance(place, list) else place[step]
    stated = place[int(last)] if isinstance(place, list) else place[last]
    # A hundredth more, or a little where nothing is stated.
    moved = {**stated, "value": stated["value"] * 1.01 or 0.01}
    before, reader = read_loop(question(data)), Reader()
    after = read_loop(question(changed(data, pointer, moved)), reader)
    assert not [error for error in reader.refused if error.code == "out-of-range"]
    same = list(numbers(before.loop)) == list(numbers(after.loop))
    same = same and before.loop.fluid.mass_fraction == after.loop.fluid.mass_fraction
    assert same == (pointer in WITHOUT_EFFECT)


WORDS = {
    "/collectors/0/type": ("evacuated-tube-direct", lambda loop: loop.groups[0].steam_power),
    "/collectors/0/count": (9, lambda loop: loop.aperture),
    "/collectors/0/emptyingClass": ("poor", lambda loop: loop.groups[0].emptying),
    "/collectors/0/coefficients/eta0": (0.8, lambda loop: loop.groups[0].peak_efficiency),
    "/collectors/0/id": ("shed roof", lambda loop: loop.groups[0].name),
    "/pipeRuns/0/id": ("hot line", lambda loop: loop.branches[0].name),
    "/pipeRuns/0/role": ("return", lambda loop: loop.branches[0].role),
    "/pipeRuns/0/steamAccess": ("closed", lambda loop: loop.branches[0].access),
    "/pipeRuns/0/segments/0/zone": ("outdoor", lambda loop: loop.branches[0].segments[0].outdoor),
    "/pipeRuns/0/segments/0/softSolder": (True, lambda loop: loop.branches[0].segments[0].soft_solder),
    "/pipeRuns/0/segments/0/tube/size": ("22x1", lambda loop: loop.branches[0].segments[0].area),
    "/reliefValve/openingAllowance": (
        {"kind": "rule", "rule": "five-psi"},
        lambda loop: loop.relief.opening_pressure,
    ),
    "/reliefValve/nominalSize": ("DN20", lambda loop: loop.relief.nominal_size),
    "/station/zone": ("outdoor", lambda loop: loop.station.outdoor),
    "/pump/side": ("discharge", lambda loop: loop.pump_side),
    "/vesselZone": ("outdoor", lambda loop: loop.temperatures.vessel_cold),
    "/precharge": ({"kind": "optimised"}, lambda loop: loop.precharge.kind),
    "/fluid": ({"kind": "water"}, lambda loop: loop.fluid.kind),
}


@pytest.mark.parametrize("pointer", WORDS)
def test_every_word_reaches_the_loop(pointer):
    value, seen = WORDS[pointer]
    before = read_loop(question(full())).loop
    reader = Reader()
    after = read_loop(question(changed(full(), pointer, value)), reader).loop
    assert seen(before) != seen(after)


def test_policy_acceptance_extras_and_units_are_read():
    data = full() | {
        "doubtPolicy": "combined",
        "acceptWithoutBoiling": True,
        "include": ["rules"],
        "units": "us",
    }
    found = read_loop(question(data))
    assert (found.policy, found.accept_without_boiling, found.include, found.system) == (
        "combined",
        True,
        frozenset({"rules"}),
        "us",
    )
    plain = read_loop(question(full()))
    assert (plain.policy, plain.accept_without_boiling, plain.include) == ("single", False, None)


def test_the_static_height_is_that_of_groups_without_their_own():
    data = changed(wash_house(), "/staticHeight", {"value": 12.5, "unit": "m"})
    loop = read_loop(question(data)).loop
    assert loop.groups[0].height == loop.branches[1].segments[0].start_height == loop.top == 12.5
