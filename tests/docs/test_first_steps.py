"""The first page and the form: a question the service really answers, and the answer it really gives."""

import json
import re
from pathlib import Path

import pytest
from litestar.testing import TestClient

from docs.pages import elements, named, one, text
from loopslack.api.docs.clients import CLIENTS
from loopslack.api.docs.contract import Described, contract
from loopslack.api.docs.start import FIRST_QUESTION, first_answer, first_question
from loopslack.api.docs.words import shown
from loopslack.app import create_app
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.settings import settings_from

ROOT = Path(__file__).parents[2]
SETTINGS = settings_from({"LOOPSLACK_SHED_LAG_SECONDS": "10", "LOOPSLACK_ACCESS_LOG": "false"})


@pytest.fixture(scope="module")
def client():
    with TestClient(create_app(SETTINGS)) as made:
        yield made


def block(name: str):
    (found,) = (element for element in elements("/docs/try") if element.attributes.get("id") == name)
    return json.loads(found.text)


def test_the_first_question_is_answered_as_the_first_page_says(client: TestClient) -> None:
    shown_question = json.loads(next(named("/docs", "pre")).text)
    assert shown_question == first_question()
    answer = client.post("/v1/loop-design", json=shown_question)
    assert answer.status_code == 200
    result, said = answer.json()["result"], text("/docs")
    assert result["verdict"] == first_answer().result.verdict == "holds"
    for quantity in (
        result["chosenVessel"]["nominalVolume"],
        result["chosenVessel"]["coolingVessel"]["content"],
        result["settings"]["precharge"],
        result["settings"]["fillPressure"],
        result["stagnation"][-1]["vesselPressure"],
    ):
        assert shown(quantity["value"], quantity["unit"]) in said
    assert f"{result['verdict']} {result['basis']}" in said
    assert f"lists {len(answer.json()['assumptions'])} assumptions" in said
    assert f"{len(result['toConfirm'])} things to confirm" in said


def test_the_first_question_states_no_more_than_it_must() -> None:
    required = set(contract().schemas["LoopDesignQuestion"]["required"])
    assert set(first_question()) == required
    numbers = json.dumps(first_question()).count('"value"') + 1
    assert numbers <= 12
    assert len(LoopDesignQuestion.__struct_fields__) > len(required)


def test_the_form_starts_with_the_first_question_and_offers_the_examples_of_the_contract() -> None:
    assert json.loads(one("/docs/try", "textarea").text) == first_question()
    examples = block("examples")
    offered = {option.attributes["value"] for option in named("/docs/try", "option")}
    assert set(examples) <= offered
    asked = contract().operation("designLoop").question()
    assert asked is not None
    assert set(contract().examples(asked[1])) < set(examples)


def test_every_example_of_the_form_is_answered_and_the_faulty_one_refused(client: TestClient) -> None:
    for name, question in block("examples").items():
        answer = client.post("/v1/loop-design", json=question)
        assert answer.status_code == (422 if name == "refused" else 200), name
        if name == "refused":
            pointers = {fault["pointer"] for fault in answer.json()["errors"]}
            assert {"/collectors/0/count", "/staticHeight/unit", "/reliefValve/setPresure"} <= pointers


def test_every_field_of_the_form_writes_a_member_of_the_question() -> None:
    question = first_question()
    written = 0
    for control in named("/docs/try", "input", "select"):
        for pointer in control.attributes.get("data-at", "").split():
            holder = question
            for step in pointer.split("/")[1:-1]:
                holder = holder[int(step)] if isinstance(holder, list) else holder[step]
            assert isinstance(holder, dict), pointer
            if pointer != "/units":
                assert pointer.rsplit("/", 1)[-1] in holder, pointer
            written += 1
    assert written >= 11


def test_the_form_knows_every_word_it_must_say(client: TestClient) -> None:
    vocabulary = block("vocabulary")
    for question in block("examples").values():
        answer = client.post("/v1/loop-design", json=question)
        if answer.status_code != 200:
            continue
        result = answer.json()["result"]
        assert result["verdict"] in vocabulary["words"]["Verdict"]
        assert result["verdict"] in vocabulary["hints"]
        assert result["basis"] in vocabulary["words"]["Basis"]
        assert {check["scenario"] for check in result["checks"]} <= set(vocabulary["states"])
        assert {state["regime"] for state in result["stagnation"]} <= set(
            vocabulary["words"]["StagnationRegime"]
        )


@pytest.mark.parametrize(
    "operation", [each for each in contract().operations if each.question()], ids=lambda each: each.id
)
def test_the_file_that_a_command_sends_can_be_had_and_is_answered(
    client: TestClient, operation: Described
) -> None:
    where = f"/docs/questions/{operation.id}/"
    (path,) = {
        link.attributes["href"]
        for link in named(operation.where, "a")
        if link.attributes["href"].startswith(where)
    }
    (command,) = (block.text for block in named(operation.where, "pre") if block.text.startswith("SERVICE="))
    assert f"--data-binary @{path.removeprefix(where)}" in command
    media_type = re.search("Content-Type: ([^']+)", command)[1]
    sent = client.get(path).content
    answer = client.post(operation.path, content=sent, headers={"Content-Type": media_type})
    assert answer.status_code == 200, answer.text


def test_the_first_question_can_be_had_as_a_file(client: TestClient) -> None:
    assert client.get(FIRST_QUESTION).json() == first_question()


@pytest.mark.parametrize("key", CLIENTS)
def test_a_client_is_shown_with_the_first_call_and_settings_of_the_repository(key: str) -> None:
    blocks = [block.text for block in named("/docs/clients", "pre")]
    language, settings, first_call = CLIENTS[key]
    assert language in text("/docs/clients")
    for path in (settings, first_call):
        assert (ROOT / path).read_text(encoding="utf-8").rstrip("\n") in blocks
        assert path in text("/docs/clients")
