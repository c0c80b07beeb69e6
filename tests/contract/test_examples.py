"""Every example was really asked: its answer is what the service says today, byte for number."""

import json

import jsonschema
import pytest

from contract.asked_examples import EXAMPLES, asked
from loopslack.api.document.examples import ExampleBook
from loopslack.api.v1 import OPERATIONS

ANSWERS = {(entry.operation, entry.name): (entry, status, answer) for entry, status, answer in asked()}
BOOK = ExampleBook(EXAMPLES)
DOCUMENT = json.loads((EXAMPLES.parent / "v1.json").read_bytes())


@pytest.mark.parametrize("key", ANSWERS, ids=" ".join)
def test_an_example_is_answered_as_documented(key: tuple[str, str]) -> None:
    entry, status, answer = ANSWERS[key]
    assert status == entry.status
    if not isinstance(answer, bytes):
        assert BOOK.answer(entry) == answer


@pytest.mark.parametrize("operation", OPERATIONS, ids=lambda operation: operation.operation_id)
def test_every_operation_has_an_example(operation: object) -> None:
    assert BOOK.of(operation.operation_id, 200)


def test_every_example_belongs_to_an_operation_and_every_file_to_an_example() -> None:
    operations = {operation.operation_id for operation in OPERATIONS}
    assert [entry for entry in BOOK.entries if entry.operation not in operations] == []
    known = {
        f"{entry.operation}/{entry.name}.{part}.{form}"
        for entry in BOOK.entries
        for part in ("question", "answer")
        for form in ("json", "ndjson")
    }
    files = {str(path.relative_to(EXAMPLES)) for path in EXAMPLES.glob("*/*json")}
    assert files <= known


@pytest.mark.parametrize("name", sorted(DOCUMENT["components"]["schemas"]))
def test_every_schema_has_an_example_that_fits_it(name: str) -> None:
    schema = DOCUMENT["components"]["schemas"][name]
    checker = jsonschema.Draft202012Validator({"$ref": f"#/components/schemas/{name}", **DOCUMENT})
    assert schema["examples"]
    for example in schema["examples"]:
        checker.validate(example)


def test_the_order_list_names_the_chosen_vessel_with_its_cooling_vessel_and_no_other() -> None:
    results = [
        json.loads(path.read_bytes())["result"]
        for path in (EXAMPLES / "designLoop").glob("*.answer.json")
        if b'"result"' in path.read_bytes()
    ]
    ordered = [result["order"].get("expansionVessel") for result in results]
    assert ordered == [result.get("chosenVessel") for result in results]
    assert {vessel is not None and "coolingVessel" in vessel for vessel in ordered} == {True, False}
    assert None in ordered
