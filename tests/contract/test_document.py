"""The committed document is what the code says, what the service sends, and all of what it answers."""

import copy
import json
import re
from pathlib import Path
from typing import Any

import jsonschema
import pytest
import yaml
from litestar.testing import TestClient
from openapi_spec_validator import validate

from contract.asked_examples import SETTINGS
from loopslack.api.document.assemble import UNIONS, VALUES, assembled, written
from loopslack.api.document.examples import ExampleBook
from loopslack.api.document.overview import TAGS
from loopslack.api.v1 import OPERATIONS
from loopslack.app import create_app
from loopslack.contract.problems import PROBLEM_TYPES

OPENAPI = Path(__file__).parents[2] / "openapi"
DOCUMENT: dict[str, Any] = json.loads((OPENAPI / "v1.json").read_bytes())
SCHEMAS: dict[str, Any] = DOCUMENT["components"]["schemas"]
ASKED = [(item[method], method) for item in DOCUMENT["paths"].values() for method in item]
BOOK = ExampleBook(OPENAPI / "examples")


@pytest.fixture(scope="module")
def client() -> Any:
    with TestClient(create_app(SETTINGS), raise_server_exceptions=False) as made:
        yield made


@pytest.mark.parametrize("name", ["v1.json", "v1.yaml"])
def test_the_committed_document_is_what_the_code_says(name: str) -> None:
    said = written(assembled(OPERATIONS, OPENAPI / "examples"))[name]
    assert (OPENAPI / name).read_bytes() == said, "rewrite it: python -m loopslack.api.document"


@pytest.mark.parametrize(("name", "media_type"), [("json", "application/json"), ("yaml", "application/yaml")])
def test_the_served_document_is_the_committed_one(client: Any, name: str, media_type: str) -> None:
    reply = client.get(f"/v1/openapi.{name}")
    assert reply.status_code == 200
    assert reply.content == (OPENAPI / f"v1.{name}").read_bytes()
    assert reply.headers["content-type"].partition(";")[0] == media_type
    tag = reply.headers["etag"]
    assert re.fullmatch(r'"[^"]+"', tag), "a strong tag"
    again = client.get(f"/v1/openapi.{name}", headers={"If-None-Match": tag})
    assert (again.status_code, again.content) == (304, b"")


def test_both_forms_say_the_same() -> None:
    assert yaml.load((OPENAPI / "v1.yaml").read_bytes(), yaml.CSafeLoader) == DOCUMENT


def test_it_is_openapi() -> None:
    validate(DOCUMENT)


def test_every_name_of_the_vocabulary_is_used() -> None:
    assert sorted({entry.name for entry in (*VALUES, *UNIONS)} - set(SCHEMAS)) == []


def schemas_within(node: Any, place: str) -> Any:
    """Every schema of a component, with its place."""
    yield node, place
    for name, member in node.get("properties", {}).items():
        yield from schemas_within(member, f"{place}.{name}")
    for keyword in ("items", "additionalProperties"):
        if isinstance(node.get(keyword), dict):
            yield from schemas_within(node[keyword], f"{place}.{keyword}")


EVERY = [pair for name, schema in SCHEMAS.items() for pair in schemas_within(schema, name)]
INNER = [(node, place) for node, place in EVERY if "." in place]


def test_no_construct_that_generators_read_differently() -> None:
    never = {
        "allOf",
        "anyOf",
        "not",
        "if",
        "prefixItems",
        "patternProperties",
        "nullable",
        "default",
        "$defs",
    }
    assert [place for node, place in EVERY if never & set(node)] == []
    assert [place for node, place in EVERY if node.get("additionalProperties") is True] == []
    assert [place for node, place in INNER if {"oneOf", "enum", "properties"} & set(node)] == []
    listed = [(node, place) for node, place in EVERY if isinstance(node.get("type"), list)]
    assert [place for node, place in listed if len(node["type"]) != 2 or node["type"][1] != "null"] == []
    assert [place for node, place in EVERY if "const" in node and node.get("type") != "string"] == []
    numbers = [(node, place) for node, place in EVERY if "number" in (node.get("type") or "")]
    assert [place for node, place in numbers if node.get("format") != "double"] == []


def test_words_are_plain_ascii_with_a_constant_and_a_meaning_each() -> None:
    for name, schema in SCHEMAS.items():
        if "enum" in schema:
            constants, meanings = schema["x-enum-varnames"], schema["x-enum-descriptions"]
            assert len(schema["enum"]) == len(set(constants)) == len(meanings), name
            assert all(word.isascii() for word in schema["enum"]), name
            assert all(re.fullmatch("[A-Z][A-Z0-9_]*", constant) for constant in constants), name


def test_every_member_has_an_example_of_its_own_or_of_its_schema() -> None:
    bare = [
        f"{name}.{member}"
        for name, schema in SCHEMAS.items()
        for member, node in schema.get("properties", {}).items()
        if not (node.get("examples") or "const" in node or "$ref" in node or "$ref" in node.get("items", {}))
    ]
    assert bare == []


def test_members_are_written_in_camel_case_and_described() -> None:
    for node, place in INNER:
        if not place.endswith((".items", ".additionalProperties")):
            assert re.fullmatch(r"[a-z][A-Za-z0-9]*", place.rsplit(".", 1)[-1]), place
            assert node["description"].endswith((".", "`")), place


def reached(node: Any, seen: set[str]) -> set[str]:
    """Names of all schemas that something refers to, directly or not."""
    if isinstance(node, dict):
        target = node.get("$ref", "")
        if target.startswith("#/components/") and target not in seen:
            seen.add(target)
            _, _, kind, name = target.split("/")
            reached(DOCUMENT["components"][kind][name], seen)
        for value in node.values():
            reached(value, seen)
    elif isinstance(node, list):
        for value in node:
            reached(value, seen)
    return seen


def of_questions() -> list[str]:
    seen: set[str] = set()
    for operation, _ in ASKED:
        reached(operation.get("requestBody", {}), seen)
    return sorted(target.rsplit("/", 1)[-1] for target in seen if "/schemas/" in target)


@pytest.mark.parametrize("name", [name for name in of_questions() if "properties" in SCHEMAS[name]])
def test_questions_are_closed_and_bounded(name: str) -> None:
    schema = SCHEMAS[name]
    assert schema["additionalProperties"] is False
    for member, node in schema["properties"].items():
        types = node.get("type", [])
        if "array" in types:
            assert "maxItems" in node, member
        if "string" in types and "const" not in node:
            assert {"maxLength", "pattern"} & set(node), member


@pytest.mark.parametrize(("operation", "method"), ASKED, ids=lambda value: str(value)[:60])
def test_every_operation_is_described_for_people_and_programs(operation: dict[str, Any], method: str) -> None:
    assert re.fullmatch(r"[a-z]+[A-Z][A-Za-z]*", operation["operationId"])
    assert len(operation["summary"]) <= 60
    assert len(operation["description"]) > 20
    assert len(operation["tags"]) == 1
    for status, response in operation["responses"].items():
        target = response
        if "$ref" in response:
            target = DOCUMENT["components"]["responses"][response["$ref"].rsplit("/", 1)[-1]]
        assert "X-Request-Id" in target["headers"], status
        if status >= "400" and status != "503":
            kinds = {uri for uri in PROBLEM_TYPES if f"/docs/problems/{uri}" in target["description"]}
            assert kinds, status
            assert all(PROBLEM_TYPES[kind].status == int(status) for kind in kinds)
    if method == "post":
        for content in operation["requestBody"]["content"].values():
            assert content["examples"]


def closed(document: dict[str, Any]) -> dict[str, Any]:
    """The document with every object closed, so that a member it does not name shows."""
    strict = copy.deepcopy(document)
    for schema in strict["components"]["schemas"].values():
        if "properties" in schema:
            schema["additionalProperties"] = False
    return strict


STRICT = closed(DOCUMENT)


@pytest.mark.parametrize(
    "entry",
    [entry for entry in BOOK.entries if BOOK.answer(entry) is not None],
    ids=lambda entry: f"{entry.operation} {entry.name}",
)
def test_an_answer_has_no_member_that_the_document_does_not_name(entry: Any) -> None:
    answer = BOOK.answer(entry)
    operation = next(found for found, _ in ASKED if found["operationId"] == entry.operation)
    response = operation["responses"][str(entry.status)]
    if "$ref" in response:
        response = DOCUMENT["components"]["responses"][response["$ref"].rsplit("/", 1)[-1]]
    schema = next(iter(response["content"].values()))["schema"]
    jsonschema.Draft202012Validator({**schema, "components": STRICT["components"]}).validate(answer)


@pytest.mark.parametrize("language", ["kotlin", "python", "swift"])
def test_generated_clients_hold_every_tag_but_the_streams_and_the_upkeep(language: str) -> None:
    settings = yaml.safe_load((OPENAPI / "generators" / f"{language}.yaml").read_text(encoding="utf-8"))
    kept = settings["openapiNormalizer"]["FILTER"].removeprefix("tag:").split("|")
    assert sorted(kept) == sorted(set(TAGS) - {"Bulk", "Service"})
