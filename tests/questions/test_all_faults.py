"""One answer tells every fault that can be found: of types, of ranges and of members that contradict each other."""

import json

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from loopslack.contract.problems import MOST_COUNTED, MOST_FAULTS
from loopslack.contract.questions.many import SheetQuestion
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.reading.again import TURNS
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.register import READINGS
from loopslack.contract.refusals import Refused, refusal_of
from loopslack.contract.strict.decoding import decode
from loopslack.contract.strict.drafts import stand_in
from loopslack.contract.strict.faults import shape_of
from loopslack.kernel.errors import CalculationError
from questions.questions_of_each_kind import SOUND, faults_for, quantity
from questions.wash_house import changed, wash_house


def refused(question, kind=LoopDesignQuestion):
    """What is told of a question that is decoded and read; None if nothing."""
    try:
        READINGS[kind](decode(json.dumps(question).encode(), kind))
    except Refused as found:
        return found
    except CalculationError as error:
        return refusal_of(error)
    return None


def told(question, kind=LoopDesignQuestion):
    found = refused(question, kind)
    return [] if found is None else [(fault.pointer, fault.code) for fault in found.faults]


def planted(question, faults):
    for fault in faults:
        question = fault.planted(question)
    return question


@pytest.mark.parametrize("kind", SOUND, ids=lambda kind: kind.__name__)
def test_a_sound_question_has_no_fault_and_each_planted_alone_is_told_alone(kind):
    assert told(SOUND[kind], kind) == []
    found = {fault.at: told(fault.planted(SOUND[kind]), kind) for fault in faults_for(kind)}
    assert found == {fault.at: [(fault.pointer, fault.code)] for fault in faults_for(kind)}


@pytest.mark.parametrize("kind", SOUND, ids=lambda kind: kind.__name__)
@settings(max_examples=40, deadline=None, derandomize=True)
@given(data=st.data())
def test_any_faults_planted_together_are_all_told_and_nothing_else(kind, data):
    catalogue = faults_for(kind)
    chosen = data.draw(st.sets(st.integers(0, len(catalogue) - 1), min_size=2))
    faults = [catalogue[place] for place in sorted(chosen)]
    expected = sorted((fault.pointer, fault.code) for fault in faults)
    assert sorted(told(planted(SOUND[kind], faults), kind)) == expected


@pytest.mark.parametrize("kind", SOUND, ids=lambda kind: kind.__name__)
def test_all_of_them_at_once(kind):
    faults = faults_for(kind)
    found = told(planted(SOUND[kind], faults), kind)
    assert sorted(found) == sorted((fault.pointer, fault.code) for fault in faults)


def test_what_is_told_keeps_the_order_of_the_body_and_tells_what_is_missing_after_it():
    question = planted(wash_house(), faults_for(LoopDesignQuestion))
    question = {name: question[name] for name in sorted(question, reverse=True)}
    del question["site"]
    places = [fault.pointer.split("/")[1] for fault in refused(question).faults]
    stated = [place for place in places if place != "site"]
    assert stated == sorted(stated, reverse=True)
    assert places[-1] == "site"


@pytest.mark.parametrize(
    ("changes", "expected"),
    [
        # a cut-off of unknown height says nothing of the flow
        (
            {
                "/temperatures/flowPipe": quantity(130, "degC"),
                "/temperatures/cutOff": quantity(150, "celsius"),
            },
            {"/temperatures/cutOff/unit"},
        ),
        # the name that is not known may have been meant for the member that is absent
        (
            {
                "/temperatures": {
                    "flowPipe": quantity(130, "degC"),
                    "hotLiquid": quantity(120, "degC"),
                    "cutOf": quantity(150, "degC"),
                }
            },
            {"/temperatures/cutOf"},
        ),
        # a number out of its range is not taken for the nearest permitted one
        ({"/temperatures/flowPipe": quantity(1e6, "degC")}, {"/temperatures/flowPipe"}),
        ({"/staticHeight": quantity(1e6, "m")}, {"/staticHeight"}),
        # nobody knows at which temperature a fluid of no known strength freezes
        (
            {
                "/fluid/concentration/share": quantity(420, "volume-percent"),
                "/temperatures/fill": quantity(-5, "degC"),
            },
            {"/fluid/concentration/share"},
        ),
        # what an absolute pressure is on the gauge depends on the altitude
        (
            {"/site/altitude": "high", "/reliefValve/setPressure": quantity(1.52, "bara")},
            {"/site/altitude"},
        ),
        # the collectors may well belong to the space that the run names
        ({"/collectors/0/steamSpace": 7, "/pipeRuns/0/steamSpace": "south"}, {"/collectors/0/steamSpace"}),
        (
            {"/collectors/0/areaBasis": "net", "/collectors/0/coefficients/basis": "gross"},
            {"/collectors/0/areaBasis"},
        ),
        (
            {"/acceptWithoutBoiling": True, "/collectors/0/measuredStagnation": {"temperature": 180}},
            {
                "/collectors/0/measuredStagnation/temperature",
                "/collectors/0/measuredStagnation/irradiance",
                "/collectors/0/measuredStagnation/ambient",
            },
        ),
        (
            {
                "/reliefValve/setPressure": 6,
                "/reliefValve/openingAllowance": {"kind": "stated", "value": quantity(0.05, "bar")},
            },
            {"/reliefValve/setPressure"},
        ),
        (
            {"/pipeRuns/0/segments/0/tube/size": 28, "/parts": [{"name": "a", "height": quantity(1, "m")}]},
            {"/pipeRuns/0/segments/0/tube/size"},
        ),
        ({"/collectors": []}, {"/collectors"}),
        ({"/pipeRuns": "as usual"}, {"/pipeRuns"}),
    ],
)
def test_what_rests_on_a_faulty_member_is_not_told(changes, expected):
    question = wash_house()
    for pointer, value in changes.items():
        question = changed(question, pointer, value)
    assert {pointer for pointer, _ in told(question)} == expected


def test_a_fault_that_holds_whatever_the_faulty_member_was_meant_to_be_is_told():
    question = changed(wash_house(), "/reliefValve/setPressure/unit", "bar")
    question = changed(question, "/temperatures/returnPipe", quantity(95, "degC"))
    question = changed(question, "/site/altitude", quantity(1e6, "m"))
    assert told(question) == [
        ("/site/altitude", "out-of-range"),
        ("/reliefValve/setPressure/unit", "not-a-member"),
        ("/temperatures/returnPipe", "contradiction"),
    ]


def test_so_many_faults_as_are_counted_end_the_search():
    segment = {"length": quantity(-1, "m"), "tube": 7}
    run = {"role": "flow", "segments": [segment] * 50}
    found = refused({**wash_house(), "pipeRuns": [run] * 50})
    assert len(found.faults) == MOST_FAULTS
    assert found.further == MOST_COUNTED - MOST_FAULTS
    assert [fault.pointer for fault in found.faults[:2]] == [
        "/pipeRuns/0/segments/0/tube",
        "/pipeRuns/0/segments/1/tube",
    ]


@pytest.mark.parametrize("kind", READINGS, ids=lambda kind: kind.__name__)
def test_what_stands_in_can_be_read_and_is_out_of_no_range(kind):
    question = stand_in(shape_of(kind), "")
    for turn in range(TURNS):
        reader = Reader(turn=turn)
        READINGS[kind](question(turn), reader)
        assert not [error.message for error in reader.refused if "it must lie from" in error.message]


@pytest.mark.parametrize("kind", SOUND, ids=lambda kind: kind.__name__)
def test_a_question_with_any_one_member_gone_wrong_is_still_read(kind):
    for pointer in places_in(SOUND[kind], ""):
        for value in (None, [], {}, "none of these", -1e9, {"kind": "other"}):
            found = told(changed(SOUND[kind], pointer, value), kind)
            assert all(at.startswith("/") for at, _ in found), (pointer, value, found)


def places_in(value, pointer):
    """The pointers of all members."""
    inner = value.items() if isinstance(value, dict) else enumerate(value) if isinstance(value, list) else ()
    for step, member in inner:
        yield f"{pointer}/{step}"
        yield from places_in(member, f"{pointer}/{step}")


def test_the_order_is_that_of_the_body_also_where_only_reading_finds_the_faults():
    far = quantity(1e6, "m")
    one, other = ({**wash_house(), "staticHeight": far, "highestPoint": far} for _ in range(2))
    del one["staticHeight"]
    one["staticHeight"] = far
    for question in (one, other):
        body = json.dumps(question).encode()
        found = refused(question).in_order_of(body)
        stated = [name for name in question if name in ("staticHeight", "highestPoint")]
        assert [fault.pointer for fault in found.faults] == [f"/{name}" for name in stated]


@pytest.mark.parametrize("more", [{}, {"frob": 1}], ids=["of ranges alone", "of types as well"])
def test_a_long_list_of_numbers_out_of_range_is_counted_no_further_than_told(more):
    vessel = {
        "nominalVolume": quantity(-80, "L"),
        "acceptanceVolume": quantity(54, "L"),
        "ratedPressure": quantity(10, "barg"),
    }
    items = [{"id": f"EV-{place}", **vessel} for place in range(5000)]
    found = refused({**wash_house(), "vessel": {"kind": "stock", "items": items}, **more})
    assert len(found.faults) == MOST_FAULTS
    assert len(found.faults) + found.further == MOST_COUNTED
    assert found.detail.startswith("1000 fields of the question are faulty, and there may be more.")
    assert {fault.code for fault in found.faults} <= {"out-of-range", "unknown-field"}


def faults_by_place(question, kind=LoopDesignQuestion):
    return {fault.pointer: fault for fault in refused(question, kind).faults}


@pytest.mark.parametrize(
    "fault",
    [
        ("/fluid/concentration/share", quantity(0.45, "volume-percent")),
        ("/pipeRuns/0/segments/0/tube/size", "28x2"),
        ("/pipeRuns/0/segments/0/tube/standard", "copper"),
    ],
)
def test_a_faulty_member_makes_it_a_refusal_of_fields_also_beside_a_contradiction(fault):
    contradicting = changed(wash_house(), "/temperatures/returnPipe", quantity(95, "degC"))
    assert refused(contradicting).kind.slug == "unanswerable-question"
    assert refused(changed(wash_house(), *fault)).kind.slug == "invalid-field"
    both = refused(changed(contradicting, *fault))
    assert both.kind.slug == "invalid-field"
    assert {fault[0], "/temperatures/returnPipe"} == {one.pointer for one in both.faults}


@pytest.mark.parametrize(
    ("at", "value", "words", "not_said"),
    [
        ("/staticHeight", None, ["It must be stated"], ["Leave"]),
        ("/staticHeight", 10, ["together with its unit"], []),
        ("/site", 10, ["is expected"], ["unit"]),
        ("/pipeRuns/0/segments/0/tube/size", "22x1.4", ["Did you mean 22x1 or 22x0.9?"], ["42x"]),
        ("/pipeRuns/0/segments/0/length", quantity(-1, "m"), ["from 0.01 to 10000 m"], ["e+", "would do"]),
        ("/fluid/concentration/share", quantity(0.45, "volume-percent"), ["45", "fraction"], []),
        ("/temperatures/cutOff/unit", "C", ['Did you mean "degC"?'], []),
        ("/temperatures/cutOff/unit", "F", ['Did you mean "degF"?'], []),
        ("/reliefValve/setPressure/unit", "bar", ['"barg" or "bara"', "from vacuum"], []),
        ("/collectors/0/emptyingClass", "fairly-good", ['"fair": Some liquid stays behind'], []),
    ],
)
def test_a_message_gives_the_remedy_that_is_one(at, value, words, not_said):
    message = faults_by_place(changed(wash_house(), at, value))[at].message
    assert [word for word in words if word not in message] == []
    assert [word for word in not_said if word in message] == []


def test_the_numbers_and_words_behind_a_message_are_told_for_translation():
    eta0 = "/collectors/0/coefficients/eta0"
    assert faults_by_place(changed(wash_house(), eta0, 79))[eta0].parameters == {
        "value": 79,
        "low": 0.05,
        "high": 1,
    }
    size = "/pipeRuns/0/segments/0/tube/size"
    known = faults_by_place(changed(wash_house(), size, "22x1.4"))[size].words["known"]
    assert "22x0.9, 22x1, " in known
    date = faults_by_place({"design": wash_house(), "date": "31.5.2026"}, SheetQuestion)["/date"]
    assert '"2026-12-01"' in date.message
    assert "^" not in date.message
