"""The reference is the contract: every operation, schema, member, word, example and problem of the document."""

import json
from importlib.resources import files

import pytest

from docs.pages import HTML, PAGES, anchors, named, row, text
from loopslack.api.docs.contract import GROUPS, Described, contract
from loopslack.api.docs.markup import json_text
from loopslack.api.docs.prose import phrase
from loopslack.api.operations import problems_of
from loopslack.api.v1 import OPERATIONS
from loopslack.contract.problems import FIELD_CODES, PROBLEM_TYPES

CONTRACT = contract()
REGISTERED = {operation.operation_id: operation for operation in OPERATIONS}


def plain(markdown: str) -> str:
    """What a description says when its marks are gone."""
    shown = phrase(" ".join(markdown.split()))
    bare = shown.replace("<code>", "").replace("</code>", "").replace("<em>", "").replace("</em>", "")
    return bare.replace("&amp;", "&").replace("&lt;", "<").replace("&gt;", ">")


def test_the_pages_are_made_from_the_document_that_is_served() -> None:
    served = (files("loopslack.api") / "document" / "v1.json").read_bytes()
    assert json.loads(served) == CONTRACT.document


@pytest.mark.parametrize("operation", CONTRACT.operations, ids=lambda operation: operation.id)
def test_an_operation_has_its_page(operation: Described) -> None:
    said = text(operation.where)
    assert f"{operation.method}{operation.path}" in said.replace(" ", "")
    assert operation.written["summary"] in said
    assert plain(operation.written["description"].split("\n\n")[0]) in said
    for status in operation.written["responses"]:
        assert any(head.text == status for head in named(operation.where, "th"))
    assert operation.id in text("/docs/operations")
    registered = REGISTERED.get(operation.id)
    if registered is not None:
        linked = {link.attributes["href"] for link in named(operation.where, "a")}
        assert {kind.uri for kind in problems_of(registered)} <= linked


@pytest.mark.parametrize("operation", CONTRACT.operations, ids=lambda operation: operation.id)
def test_an_operation_shows_its_examples(operation: Described) -> None:
    blocks = [block.text for block in named(operation.where, "pre")]
    for message in (operation.question(), operation.answer()):
        for example in CONTRACT.examples(message[1]).values() if message else ():
            value = example["value"]
            shown = value if isinstance(value, str) else json_text(value)
            start = "\n".join(shown.rstrip().splitlines()[:400])
            assert start in blocks, example["summary"]


def test_every_registered_operation_is_described() -> None:
    assert set(REGISTERED) <= {operation.id for operation in CONTRACT.operations}


@pytest.mark.parametrize("name", sorted(CONTRACT.schemas))
def test_a_schema_is_described_with_every_member_and_word(name: str) -> None:
    schema = CONTRACT.schemas[name]
    where = CONTRACT.where(name).partition("#")[0]
    assert name in anchors(where)
    for member in schema.get("properties", {}):
        assert f"{name}.{member}" in anchors(where)
    for word, meaning in zip(schema.get("enum", ()), schema.get("x-enum-descriptions", ()), strict=True):
        assert meaning in row(where, f"{name}.{word}")
    said = text(where)
    assert plain(schema["description"].split("\n\n")[0]) in said
    for member in schema.get("properties", {}).values():
        if "description" in member:
            assert plain(member["description"]) in said


def test_required_members_and_limits_are_told() -> None:
    where = "/docs/schemas/questions"
    assert "required" in row(where, "CollectorGroup.count")
    assert "optional" in row(where, "CollectorGroup.content")
    assert "at least 1, at most 10000." in text(where)
    assert "Volume" in row(where, "CollectorGroup.content")
    assert "No other members are taken." in text(where)
    assert 'always "by-volume"' in row(where, "ByVolume.kind")


def test_every_schema_stands_on_the_page_of_its_kind() -> None:
    assert CONTRACT.group("LoopDesignQuestion") == "questions"
    assert CONTRACT.group("LoopDesignAnswer") == "answers"
    assert CONTRACT.group("Pressure") == "quantities"
    assert CONTRACT.group("PressureUnit") == "words"
    assert all(f"/docs/schemas/{group}" in HTML for group in GROUPS)


@pytest.mark.parametrize("slug", PROBLEM_TYPES)
def test_the_type_of_a_problem_is_the_address_of_its_page(slug: str) -> None:
    kind = PROBLEM_TYPES[slug]
    assert kind.uri in PAGES
    said = text(kind.uri)
    for part in (kind.title, str(kind.status), plain(kind.meaning), plain(kind.remedy)):
        assert part in said
        assert part in row("/docs/problems", slug)
    giving = [operation.id for operation in CONTRACT.operations if kind in problems_of_described(operation)]
    assert all(operation in said for operation in giving)


def problems_of_described(operation: Described) -> set[object]:
    """The problems that the register says an operation gives, for those that stand in it."""
    registered = REGISTERED.get(operation.id)
    return set(problems_of(registered)) if registered else set()


def test_every_code_of_a_faulty_member_is_explained() -> None:
    for code, meaning in FIELD_CODES.items():
        assert plain(meaning) in row("/docs/problems", f"code.{code}")
