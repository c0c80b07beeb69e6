"""What a question may look like: how little is enough, null, closed objects, and books kept of what was assumed."""

import json
from typing import get_args

import msgspec
import pytest

from loopslack.contract.questions import existing, many
from loopslack.contract.questions.operations import (
    ExpansionQuestion,
    LoopDesignQuestion,
    LoopVolumeQuestion,
    StagnationCheckQuestion,
    VesselSizingQuestion,
)
from loopslack.contract.reading.loop import read_loop
from loopslack.contract.reading.many import Shared
from loopslack.kernel.errors import Refusals
from loopslack.library.defaults import choices, defaults
from questions.wash_house import changed, least, question, wash_house

QUESTIONS = [
    LoopVolumeQuestion,
    ExpansionQuestion,
    VesselSizingQuestion,
    LoopDesignQuestion,
    StagnationCheckQuestion,
    existing.StagnationCourseQuestion,
    existing.VesselAuditQuestion,
    many.LoopDesignBatchQuestion,
    many.StreamHead,
    many.SheetQuestion,
    many.FigureQuestion,
]


def objects(schema):
    for name, one in schema["$defs"].items():
        if one.get("type") == "object":
            yield name, one


def leaves(value):
    if isinstance(value, dict):
        return sum(leaves(member) for member in value.values())
    if isinstance(value, list):
        return sum(leaves(item) for item in value)
    return int(isinstance(value, int | float))


def with_nulls(value, struct):
    """Every optional member that is not stated, stated as null, at every depth."""
    found = dict(value)
    for field in msgspec.structs.fields(struct):
        if field.encode_name not in found:
            found[field.encode_name] = None
            continue
        found[field.encode_name] = _within(found[field.encode_name], field.type)
    return found


def _within(value, annotation):
    if isinstance(value, list):
        return [_within(item, annotation) for item in value]
    if not isinstance(value, dict):
        return value
    structs = [part for part in _structs(annotation) if _fits(value, part)]
    return with_nulls(value, structs[0]) | ({"kind": value["kind"]} if "kind" in value else {})


def _structs(annotation):
    if isinstance(annotation, type) and issubclass(annotation, msgspec.Struct):
        yield annotation
    for part in get_args(annotation):
        yield from _structs(part)


def _fits(value, struct):
    config = struct.__struct_config__
    if config.tag is not None and value.get(config.tag_field) != config.tag:
        return False
    known = {field.encode_name for field in msgspec.structs.fields(struct)} | {config.tag_field}
    return value.keys() <= known


def test_a_first_quote_needs_about_a_dozen_numbers():
    assert leaves(least()) <= 12
    assert read_loop(question(least())).loop.content > 0


@pytest.mark.parametrize("make", [least, wash_house])
def test_null_counts_as_absent_everywhere(make):
    plain, nulls = make(), with_nulls(make(), LoopDesignQuestion)
    assert json.dumps(nulls).count("null") > 25
    assert question(nulls) == question(plain)


@pytest.mark.parametrize("struct", QUESTIONS)
def test_every_object_of_a_question_is_closed_and_described(struct):
    seen = 0
    for name, schema in objects(msgspec.json.schema(struct)):
        assert schema.get("additionalProperties") is False, name
        assert schema["description"], name
        for member, described in schema.get("properties", {}).items():
            if member != "kind":
                assert "description" in json.dumps(described), (name, member)
            assert "default" not in described or described["default"] is None, (name, member)
        seen += 1
    assert seen > 3


@pytest.mark.parametrize("struct", QUESTIONS)
def test_member_names_are_camel_case(struct):
    for name, schema in objects(msgspec.json.schema(struct)):
        for member in schema.get("properties", {}):
            assert member.isalnum(), (name, member)
            assert member[0].islower(), (name, member)


def test_an_unknown_member_is_refused():
    with pytest.raises(msgspec.ValidationError, match="staticHight"):
        question(changed(wash_house(), "/staticHight", 3))


@pytest.mark.parametrize(
    "pointer", ["/site/coldestOutdoorTemperature", "/staticHeight", "/reliefValve", "/fluid"]
)
def test_what_has_no_default_is_required(pointer):
    data = least()
    *path, last = pointer.strip("/").split("/")
    place = data
    for step in path:
        place = place[step]
    del place[last]
    with pytest.raises(msgspec.ValidationError, match=last):
        question(data)


@pytest.mark.parametrize("unit", ["9**9**9**9", "bar", "barG", "psi", "", "K", "\u00b0C"])
def test_the_text_of_a_unit_is_never_interpreted(unit):
    with pytest.raises(msgspec.ValidationError, match="unit"):
        question(changed(wash_house(), "/reliefValve/setPressure", {"value": 6, "unit": unit}))


def test_everything_that_was_not_stated_is_in_the_books():
    found = read_loop(question(least()))
    pointers = [assumed.pointer for assumed in found.assumed]
    assert len(pointers) == len(set(pointers))
    for pointer in [
        "/site/altitude",
        "/collectors/0/content",
        "/collectors/0/coefficients/eta0",
        "/collectors/0/coefficients/a1",
        "/collectors/0/coefficients/a2",
        "/collectors/0/emptyingClass",
        "/pipeRuns/0/segments/0/insulation/thickness",
        "/pipeRuns/0/segments/0/insulation/conductivity",
        "/pipeRuns/0/segments/0/zone",
        "/pipeRuns/0/segments/0/ambient",
        "/pipeRuns/1/steamAccess",
        "/station/content",
        "/station/height",
        "/station/zone",
        "/station/steamCooler",
        "/vesselLine/content",
        "/pump/head",
        "/pump/side",
        "/pump/height",
        "/gauge/height",
        "/vesselZone",
        "/temperatures/fill",
        "/temperatures/hotLiquid",
        "/designSun/irradiance",
        "/reliefValve/openingAllowance",
        "/reliefValve/blowdown",
        "/reliefValve/height",
        "/criteria/reserve",
        "/criteria/topPressure",
        "/criteria/stagnationDoubt",
        "/precharge",
        "/coolingVessel",
        "/doubtPolicy",
        "/highestPoint",
    ]:
        assert pointer in pointers


def test_an_assumption_lies_in_its_range_and_has_a_reason():
    for assumed in read_loop(question(least())).assumed:
        assert assumed.why
        assert assumed.source.key
        if assumed.si is not None:
            assert assumed.low <= assumed.si <= assumed.high, assumed.pointer
        else:
            assert assumed.word, assumed.pointer


def test_what_is_stated_is_not_in_the_books():
    stated, books = wash_house(), [a.pointer for a in read_loop(question(wash_house())).assumed]
    for pointer in books:
        place, steps = stated, pointer.strip("/").split("/")
        for step in steps:
            place = place[int(step)] if isinstance(place, list) else place.get(step)
            if place is None:
                break
        assert place is None, pointer


def test_what_is_assumed_about_steam_makes_the_answer_provisional():
    codes = {(one.code, one.pointer) for one in read_loop(question(least())).provisional}
    assert codes == {
        ("emptying-class-assumed", "/collectors/0/emptyingClass"),
        ("coefficients-assumed", "/collectors/0/coefficients"),
        ("steam-access-unknown", "/pipeRuns/0/steamAccess"),
        ("steam-access-unknown", "/pipeRuns/1/steamAccess"),
        ("rating-unstated", "/collectors/0/ratedPressure"),
        ("rating-unstated", "/station/ratedPressure"),
    }


def test_no_rated_pressure_is_ever_assumed():
    found = read_loop(question(least()))
    assert all(part.rated_pressure is None for part in found.loop.parts)
    assert not [assumed for assumed in found.assumed if "rated" in assumed.pointer.casefold()]


def test_assumed_figures_are_those_of_the_library():
    found = {assumed.pointer: assumed for assumed in read_loop(question(least())).assumed}
    assert found["/temperatures/cutOff"].si == defaults()["pump-cut-off"].si
    assert found["/collectors/0/emptyingClass"].word == choices()["emptying-class"].word == "poor"
    assert found["/collectors/0/content"].si == pytest.approx(2.3e-3)
    assert found["/station/content"].si == pytest.approx(1.5e-3 + 0.25e-3 * 18.4)
    assert found["/pipeRuns/0/segments/0/insulation/thickness"].si == pytest.approx(0.028)
    assert found["/reliefValve/blowdown"].si == pytest.approx(1.2e5)


def test_a_design_of_a_batch_takes_the_defaults_for_what_it_leaves_out():
    data = wash_house()
    shared = {name: data[name] for name in ("site", "fluid", "reliefValve", "staticHeight")}
    own = {name: data[name] for name in data if name not in shared}
    body = {"defaults": shared, "designs": [{"id": "a", **own, "staticHeight": {"value": 9, "unit": "m"}}]}
    batch = msgspec.json.decode(json.dumps(body), type=many.LoopDesignBatchQuestion)
    found = Shared(batch.defaults).completed(batch.designs[0])
    expected = question({**data, "staticHeight": {"value": 9, "unit": "m"}, "include": []})
    assert found == expected


def test_a_design_of_a_batch_that_stays_incomplete_names_what_is_missing():
    batch = msgspec.json.decode(b'{"designs":[{"id":"a"}]}', type=many.LoopDesignBatchQuestion)
    with pytest.raises(Refusals) as refused:
        Shared().completed(batch.designs[0])
    assert [error.pointer for error in refused.value.errors] == [
        "/site",
        "/collectors",
        "/pipeRuns",
        "/fluid",
        "/staticHeight",
        "/reliefValve",
    ]


def test_designs_of_a_batch_have_the_members_of_a_single_design():
    single = {field.encode_name for field in msgspec.structs.fields(LoopDesignQuestion)}
    assert {field.encode_name for field in msgspec.structs.fields(many.LoopDesignDefaults)} == single
    assert {field.encode_name for field in msgspec.structs.fields(many.BatchDesign)} == single | {"id"}
