"""Refusals name the number in the caller's unit, the rule, the place and the remedy, and come all at once."""

import msgspec
import pytest

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.questions.vessels import FromStock, GivenVessel
from loopslack.contract.reading.loop import read_loop
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.vessels import read_choice
from loopslack.contract.refusals import refusal_of
from loopslack.kernel.errors import CalculationError, NotApplicable, Refusals
from questions.wash_house import changed, question, wash_house


def refusals(data):
    """What the reading of a question refuses."""
    with pytest.raises(CalculationError) as raised:
        read_loop(question(data))
    error = raised.value
    return list(error.errors) if isinstance(error, Refusals) else [error]


def quantity(value, unit):
    return {"value": value, "unit": unit}


@pytest.mark.parametrize(
    ("pointer", "value", "unit", "words"),
    [
        ("/reliefValve/setPressure", 300, "psig", ["300 psig", "232.1 psig"]),
        ("/reliefValve/setPressure", 20, "bara", ["20 bara", "17.01 bara"]),
        ("/staticHeight", 1000, "ft", ["1000 ft", "492.1 ft"]),
        ("/site/coldestOutdoorTemperature", -100, "degF", ["-100 degF", "from -76 to 95 degF"]),
        ("/collectors/0/area", 0, "m2", ["0 m2", "0.1 to 100 m2"]),
        ("/collectors/0/coefficients/a1", -1, "W/m2K", ["-1 W/m2K", "0 to 30 W/m2K"]),
        ("/pipeRuns/1/segments/0/length", -3, "m", ["-3 m", "0.01"]),
        ("/temperatures/cutOff", 500, "degC", ["500 degC", "40 to 180 degC"]),
        ("/criteria/fluidAllowance", 50, "percent", ["50 percent", "5 percent"]),
    ],
)
def test_a_number_out_of_range_is_refused_in_the_callers_unit(pointer, value, unit, words):
    (error,) = refusals(changed(wash_house(), pointer, quantity(value, unit)))
    assert (error.code, error.pointer) == ("out-of-range", pointer)
    for word in words:
        assert word in error.message
    assert error.remedy
    assert error.facts["value"] == value


@pytest.mark.parametrize(
    ("pointer", "value", "unit"),
    [
        ("/reliefValve/setPressure", 16, "barg"),
        ("/site/coldestOutdoorTemperature", -76, "degF"),
        ("/staticHeight", 150 / 0.3048, "ft"),
        ("/temperatures/hotLiquid", 356, "degF"),
    ],
)
def test_the_end_of_a_range_is_permitted_in_every_unit(pointer, value, unit):
    data = changed(wash_house(), pointer, quantity(value, unit))
    if pointer == "/reliefValve/setPressure":
        read_loop(question(data))
    else:
        reader = Reader()
        read_loop(question(data), reader)
        assert not [error for error in reader.refused if error.code == "out-of-range"]


def test_all_faults_come_at_once():
    data = changed(wash_house(), "/reliefValve/setPressure", quantity(30, "barg"))
    data = changed(data, "/collectors/0/area", quantity(-2, "m2"))
    data = changed(data, "/pipeRuns/0/segments/0/tube/size", "28x2")
    data = changed(data, "/highestPoint", quantity(3, "m"))
    pointers = [error.pointer for error in refusals(data)]
    assert sorted(pointers) == [
        "/collectors/0/area",
        "/highestPoint",
        "/pipeRuns/0/segments/0/tube/size",
        "/reliefValve/setPressure",
    ]


def test_an_unknown_tube_brings_the_nearest_names():
    (error,) = refusals(changed(wash_house(), "/pipeRuns/0/segments/0/tube/standard", "en-1507"))
    assert error.pointer == "/pipeRuns/0/segments/0/tube/standard"
    assert "en-1057" in error.remedy
    (error,) = refusals(changed(wash_house(), "/pipeRuns/0/segments/0/tube/size", "28x2.5"))
    assert error.pointer == "/pipeRuns/0/segments/0/tube/size"
    assert "28x1.5" in error.remedy


def test_plastic_pipe_is_refused_in_a_loop_that_gets_hotter():
    tube = {"kind": "standard", "standard": "cross-linked-polyethylene", "size": "32x4.4"}
    (error,) = refusals(changed(wash_house(), "/pipeRuns/0/segments/0/tube", tube))
    assert error.code == "not-applicable"
    assert "95 degC" in error.message
    assert "metal" in error.remedy


CONTRADICTIONS = [
    ("/acceptWithoutBoiling", True, "/acceptWithoutBoiling", "measured"),
    ("/collectors/0/measuredSteamPower", quantity(60, "W/m2"), "/collectors/0/emptyingClass", "both"),
    ("/collectors/0/apertureArea", quantity(2.5, "m2"), "/collectors/0/apertureArea", "twice"),
    ("/collectors/0/grossArea", quantity(2.0, "m2"), "/collectors/0/grossArea", "smaller"),
    ("/collectors/0/height", quantity(5, "m"), "/staticHeight", "none of the collectors"),
    ("/highestPoint", quantity(9, "m"), "/highestPoint", "11 m"),
    ("/temperatures/returnPipe", quantity(95, "degC"), "/temperatures/returnPipe", "hotter"),
    ("/temperatures/cutOff", quantity(60, "degC"), "/temperatures/cutOff", "below the flow"),
    (
        "/reliefValve/openingAllowance",
        {"kind": "stated", "value": quantity(0.05, "bar")},
        "/reliefValve/openingAllowance/value",
        "0.18 bar",
    ),
    ("/reliefValve/setPressure", quantity(0.5, "barg"), "/reliefValve/setPressure", "without any pressure"),
    ("/pipeRuns/0/steamSpace", "loft", "/pipeRuns/0/steamSpace", "loft"),
    (
        "/pipeRuns/0/segments/0/tube",
        {"kind": "bore", "bore": quantity(25, "mm"), "outerDiameter": quantity(24, "mm")},
        "/pipeRuns/0/segments/0/tube/outerDiameter",
        "no wall",
    ),
]


@pytest.mark.parametrize(("pointer", "value", "at", "word"), CONTRADICTIONS)
def test_numbers_that_contradict_each_other_are_refused(pointer, value, at, word):
    found = {error.pointer: error for error in refusals(changed(wash_house(), pointer, value))}
    error = found[at]
    assert error.code == "contradiction"
    assert word in error.message
    assert error.remedy


def test_a_loss_free_collector_is_refused():
    data = changed(wash_house(), "/collectors/0/coefficients/a1", quantity(0, "W/m2K"))
    data = changed(data, "/collectors/0/coefficients/a2", quantity(0, "W/m2K2"))
    (error,) = refusals(data)
    assert error.pointer == "/collectors/0/coefficients/a1"


def test_an_area_is_never_converted_without_the_other_one():
    (error,) = refusals(changed(wash_house(), "/collectors/0/coefficients/basis", "gross"))
    assert (error.code, error.pointer) == ("missing", "/collectors/0/grossArea")
    (error,) = refusals(changed(wash_house(), "/collectors/0/areaBasis", "gross"))
    assert (error.code, error.pointer) == ("missing", "/collectors/0/apertureArea")


def test_coefficients_on_the_wrong_area_show_as_more_than_the_sun():
    data = changed(wash_house(), "/collectors/0/coefficients/basis", "gross")
    data = changed(data, "/collectors/0/grossArea", quantity(3.2, "m2"))
    (error,) = refusals(data)
    assert error.pointer == "/collectors/0/coefficients/eta0"


def test_a_fluid_that_is_ice_when_filling_is_refused():
    data = changed(wash_house(), "/fluid", {"kind": "water"})
    data = changed(data, "/temperatures/fill", quantity(-5, "degC"))
    assert "/temperatures/fill" in [error.pointer for error in refusals(data)]


def test_protection_beyond_a_glycol_is_refused_at_the_fluid():
    stated = {"kind": "protect-to", "temperature": quantity(-59, "degC")}
    (error,) = refusals(changed(wash_house(), "/fluid/concentration", stated))
    assert error.pointer.startswith("/fluid")
    assert error.remedy


def test_steam_spaces_are_named_everywhere_or_nowhere():
    data = changed(wash_house(), "/collectors/0/steamSpace", "east")
    assert [error.pointer for error in refusals(data)] == ["/pipeRuns/0/steamSpace", "/pipeRuns/1/steamSpace"]


def test_a_run_must_end_where_the_station_stands():
    data = changed(wash_house(), "/station/height", quantity(1, "m"))
    data = changed(data, "/pipeRuns/0/segments/0/endHeight", quantity(3, "m"))
    assert [error.pointer for error in refusals(data)] == ["/pipeRuns/0/segments/0/endHeight"]


def stock(*items):
    return msgspec.convert({"kind": "stock", "items": list(items)}, FromStock)


def item(name, **more):
    return {"id": name, "nominalVolume": quantity(80, "L"), "ratedPressure": quantity(10, "barg"), **more}


def test_a_stock_list_is_read_in_si():
    reader = Reader(90_000.0)
    listed = item(
        "a",
        acceptanceVolume=quantity(54, "L"),
        deliveredPrecharge=quantity(1.5, "barg"),
        prechargeAdjustable=False,
        membraneLimit=quantity(70, "degC"),
        price={"amount": 210, "currency": "EUR"},
    )
    (vessel,) = read_choice(reader, stock(listed)).vessels
    assert not reader.refused
    assert (vessel.id, vessel.nominal_volume, vessel.acceptance_volume) == ("a", 0.08, 0.054)
    assert (vessel.rated_pressure, vessel.delivered_precharge) == (pytest.approx(1e6), pytest.approx(1.5e5))
    assert (vessel.precharge_adjustable, vessel.price, vessel.currency) == (False, 210.0, "EUR")
    assert vessel.membrane_limit == pytest.approx(343.15)


def test_a_precharge_as_delivered_counts_from_sea_level():
    reader = Reader(90_000.0)
    (vessel,) = read_choice(reader, stock(item("a", deliveredPrecharge=quantity(2.51325, "bara")))).vessels
    assert vessel.delivered_precharge == pytest.approx(1.5e5)


@pytest.mark.parametrize(
    ("items", "at"),
    [
        ([item("a"), item("b"), item("a")], "/vessel/items/2/id"),
        ([item("a", acceptanceVolume=quantity(90, "L"))], "/vessel/items/0/acceptanceVolume"),
        ([item("a", deliveredPrecharge=quantity(10, "barg"))], "/vessel/items/0/deliveredPrecharge"),
        ([item("a"), item("b", ratedPressure=quantity(0.1, "barg"))], "/vessel/items/1/ratedPressure"),
    ],
)
def test_a_stock_list_that_cannot_be_true_is_refused(items, at):
    reader = Reader()
    read_choice(reader, stock(*items))
    assert [error.pointer for error in reader.refused] == [at]


def test_a_given_vessel_without_rating_is_provisional():
    reader = Reader()
    given = msgspec.convert(
        {"kind": "given", "nominalVolume": quantity(80, "L"), "fillPressure": quantity(1.9, "barg")},
        GivenVessel,
    )
    choice = read_choice(reader, given)
    assert choice.fill_pressure == pytest.approx(1.9e5 + 101325)
    assert [one.pointer for one in reader.provisional] == ["/vessel/ratedPressure"]


def test_an_open_or_drain_back_loop_is_refused_as_other_physics() -> None:
    with pytest.raises(NotApplicable) as refusal:
        read_loop(question(changed(wash_house(), "/construction", {"openOrDrainBack": True})))
    assert refusal.value.code == "other-physics"
    assert refusal.value.pointer == "/construction/openOrDrainBack"


def own(density=None, boiling=None, **more):
    """A fluid by tables that covers what the loop reaches."""
    densities = {-25: 1060, 20: 1036, 60: 1010, 120: 960, 180: 900} if density is None else density
    pressures = {80: 0.4, 100: 0.95, 140: 3.3, 170: 7.3, 200: 14.3} if boiling is None else boiling
    return {
        "kind": "own",
        "name": "ready mix",
        "points": [
            {"temperature": quantity(at, "degC"), "density": quantity(dense, "kg/m3")}
            for at, dense in densities.items()
        ],
        "freezingPoint": quantity(-25, "degC"),
        "boiling": {
            "kind": "table",
            "points": [
                {"temperature": quantity(at, "degC"), "pressure": quantity(high, "bara")}
                for at, high in pressures.items()
            ],
        },
        **more,
    }


@pytest.mark.parametrize(
    ("fluid", "at"),
    [
        (own({-25: 1060, 20: 1036, 60: 1010}), "/fluid/points"),
        (own({60: 1010, 120: 960, 180: 900}), "/fluid/points"),
        (own({-25: 1060, 20: 1036, 60: 1010, 120: 1020, 180: 900}), "/fluid/points/3/density"),
        (own(boiling={140: 3.3, 170: 7.3, 200: 14.3}), "/fluid/boiling/points"),
        (own(boiling={80: 0.4, 100: 0.95, 140: 9, 200: 14.3}), "/fluid/boiling/points/2"),
        (own(boiling={1: 0.00657, 100: 0.95, 140: 3.3, 200: 14.3}), "/fluid/boiling/points/0"),
        (own({-30: 1070, -20: 1060, 4: 1040}, freezingPoint=quantity(5, "degC")), "/fluid/freezingPoint"),
        (
            own(
                heatCapacity=[
                    {"temperature": quantity(at, "degC"), "heatCapacity": quantity(3.8, "kJ/kgK")}
                    for at in (20, 60, 60)
                ]
            ),
            "/fluid/heatCapacity/2/temperature",
        ),
    ],
)
def test_a_table_of_an_own_fluid_that_will_not_do_is_pointed_at(fluid, at):
    with pytest.raises(CalculationError) as raised:
        design_loop(question(changed(wash_house(), "/fluid", fluid)))
    assert raised.value.pointer == at
    assert raised.value.remedy


def test_a_member_is_invalid_by_itself_and_a_question_unanswerable_by_the_range_of_a_law():
    short = changed(wash_house(), "/fluid", own({-25: 1060, 20: 1036, 60: 1010}))
    far = changed(wash_house(), "/staticHeight", quantity(1e6, "m"))
    for data, slug in ((short, "unanswerable-question"), (far, "invalid-field")):
        with pytest.raises(CalculationError) as raised:
            design_loop(question(data))
        assert refusal_of(raised.value).kind.slug == slug


def test_a_tolerance_that_leaves_nothing_of_a_pipe_is_refused():
    whole = quantity(100, "percent")
    data = {**wash_house(), "tolerances": {"pipeLength": whole, "insulationConductivity": whole}}
    with pytest.raises(Refusals) as raised:
        design_loop(question(data))
    assert [error.pointer for error in raised.value.errors] == [
        "/tolerances/pipeLength",
        "/tolerances/insulationConductivity",
    ]
    almost = {"tolerances": {"pipeLength": quantity(99, "percent")}}
    assert design_loop(question({**wash_house(), **almost})).result.band is not None
