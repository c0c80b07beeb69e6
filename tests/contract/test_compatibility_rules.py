"""What the checker of promises must see and must not see, on documents small enough to read at a glance."""

import copy
from typing import Any

import pytest

from contract.compatibility import breaks, version_faults
from contract.schema_compatibility import NotUnderstoodError


def document(question: dict[str, Any], answer: dict[str, Any], **operation: Any) -> dict[str, Any]:
    return {
        "openapi": "3.1.0",
        "info": {"title": "t", "version": "1.0.0"},
        "security": [],
        "paths": {
            "/v1/x": {
                "post": {
                    "operationId": "x",
                    "tags": ["a"],
                    "requestBody": {"required": True, "content": {"application/json": {"schema": question}}},
                    "responses": {
                        "200": {"description": "d", "content": {"application/json": {"schema": answer}}}
                    },
                    **operation,
                }
            }
        },
    }


NUMBER = {"type": "number", "format": "double"}
WIDER = [
    pytest.param({"type": "string"}, {"type": ["string", "null"]}, id="null"),
    pytest.param({"type": "integer"}, {"type": "number"}, id="integer to number"),
    pytest.param({"type": "string", "enum": ["a"]}, {"type": "string", "enum": ["a", "b"]}, id="value"),
    pytest.param({"type": "string", "const": "a"}, {"type": "string"}, id="constant dropped"),
    pytest.param({**NUMBER, "maximum": 1}, {**NUMBER, "maximum": 2}, id="maximum"),
    pytest.param({**NUMBER, "minimum": 1}, NUMBER, id="minimum dropped"),
    pytest.param({**NUMBER, "exclusiveMinimum": 0}, {**NUMBER, "minimum": 0}, id="edge included"),
    pytest.param({"type": "string", "maxLength": 4}, {"type": "string", "maxLength": 5}, id="length"),
    pytest.param({"type": "string", "pattern": "^a$"}, {"type": "string"}, id="pattern dropped"),
    pytest.param({**NUMBER, "multipleOf": 4}, {**NUMBER, "multipleOf": 2}, id="step"),
    pytest.param(
        {"type": "array", "items": {"type": "string"}, "maxItems": 3, "uniqueItems": True},
        {"type": "array", "items": {"type": "string"}, "maxItems": 4},
        id="items",
    ),
    pytest.param(
        {"type": "object", "properties": {"a": NUMBER}, "required": ["a"]},
        {"type": "object", "properties": {"a": NUMBER}},
        id="no longer required",
    ),
    pytest.param(
        {"type": "object", "properties": {"a": NUMBER}, "additionalProperties": False},
        {"type": "object", "properties": {"a": NUMBER}},
        id="opened",
    ),
    pytest.param(
        {"type": "object", "additionalProperties": {"type": "string", "maxLength": 2}},
        {"type": "object", "additionalProperties": {"type": "string", "maxLength": 3}},
        id="map",
    ),
    pytest.param(
        {"type": "object", "properties": {"a": NUMBER}, "additionalProperties": False},
        {"type": "object", "properties": {"a": NUMBER, "b": NUMBER}, "additionalProperties": False},
        id="member of a closed object",
    ),
]


@pytest.mark.parametrize(("narrow", "wide"), WIDER)
def test_a_question_may_widen_and_an_answer_may_not(narrow: dict[str, Any], wide: dict[str, Any]) -> None:
    def wire(old: dict[str, Any], new: dict[str, Any]) -> list[str]:
        return [str(finding) for finding in breaks(old, new) if finding.grade == "wire"]

    assert wire(document(narrow, NUMBER), document(wide, NUMBER)) == []
    assert wire(document(wide, NUMBER), document(narrow, NUMBER)) != []
    assert wire(document(NUMBER, narrow), document(NUMBER, wide)) != []


@pytest.mark.parametrize(("narrow", "wide"), [case for case in WIDER if "member of" not in str(case.id)])
def test_an_answer_may_narrow(narrow: dict[str, Any], wide: dict[str, Any]) -> None:
    found = breaks(document(NUMBER, wide), document(NUMBER, narrow))
    assert [finding for finding in found if finding.grade == "wire"] == []


def test_a_schema_both_sent_and_received_is_judged_in_both_directions() -> None:
    old = document({"$ref": "#/components/schemas/S"}, {"$ref": "#/components/schemas/S"})
    old["components"] = {"schemas": {"S": {"type": "string", "enum": ["a", "b"]}}}
    for values in (["a"], ["a", "b", "c"]):
        new = copy.deepcopy(old)
        new["components"]["schemas"]["S"]["enum"] = values
        assert len(breaks(old, new)) == 1


def test_a_schema_that_refers_to_itself_is_compared_once() -> None:
    old = document({"$ref": "#/components/schemas/S"}, NUMBER)
    tree = {"type": "object", "properties": {"branch": {"$ref": "#/components/schemas/S"}, "leaf": NUMBER}}
    old["components"] = {"schemas": {"S": tree}}
    new = copy.deepcopy(old)
    del new["components"]["schemas"]["S"]["properties"]["leaf"]
    assert [finding.what for finding in breaks(old, new)] == ["member removed"]


@pytest.mark.parametrize(
    "keyword", ["not", "allOf", "if", "prefixItems", "patternProperties", "unevaluatedItems"]
)
def test_a_keyword_it_cannot_judge_is_refused_and_not_passed_over(keyword: str) -> None:
    with pytest.raises(NotUnderstoodError, match=keyword):
        breaks(document(NUMBER, NUMBER), document({**NUMBER, keyword: [{}]}, NUMBER))


def test_alternatives_without_a_tag_are_refused() -> None:
    loose = {"oneOf": [{"type": "string"}, NUMBER]}
    with pytest.raises(NotUnderstoodError, match="discriminator"):
        breaks(document(loose, NUMBER), document(loose, NUMBER))


@pytest.mark.parametrize("part", ["callbacks"])
def test_a_part_of_an_operation_it_cannot_judge_is_refused(part: str) -> None:
    with pytest.raises(NotUnderstoodError, match=part):
        breaks(document(NUMBER, NUMBER), document(NUMBER, NUMBER, **{part: {}}))


def test_the_number_must_rise_with_the_change() -> None:
    old = document(NUMBER, NUMBER)
    wording, widened, broken = (
        copy.deepcopy(old),
        document({**NUMBER, "type": ["number", "null"]}, NUMBER),
        {**old},
    )
    wording["paths"]["/v1/x"]["post"]["description"] = "clearer"
    broken["paths"] = {}

    def faults(new: dict[str, Any], version: str) -> list[str]:
        return version_faults(old, {**new, "info": {"title": "t", "version": version}})

    assert faults(old, "1.0.0") == []
    assert faults(wording, "1.0.0")
    assert faults(wording, "1.0.1") == []
    assert faults(widened, "1.0.1")
    assert faults(widened, "1.1.0") == []
    assert faults(broken, "1.1.0")
    assert faults(broken, "2.0.0") == []
    assert faults(old, "0.9.0")
