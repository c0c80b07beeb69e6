"""Problem documents: their shape, what a fault of the service tells, what a calculation's own refusal becomes."""

import json
import logging
import uuid

import pytest

from api.small_service import GOOD_BODY, JSON, OPERATIONS, SmallAnswer, pointers
from loopslack.api.operations import problems_of
from loopslack.contract.encoding import NotFiniteError, encoded, place_of_non_finite
from loopslack.contract.problems import FIELD_CODES, PROBLEM_TYPES


def post(client, path, **headers):
    return client.post(path, content=GOOD_BODY, headers=JSON | headers)


def test_a_problem_has_every_member_the_contract_names(client):
    refused = post(client, "/v1/double", **{"content-type": "text/plain"})
    problem = refused.json()
    assert set(problem) == {"type", "title", "status", "detail", "instance", "requestId"}
    assert problem["status"] == refused.status_code == 415
    assert problem["requestId"] == refused.headers["x-request-id"]
    assert uuid.UUID(problem["instance"].removeprefix("urn:uuid:"))
    assert refused.headers["cache-control"] == "no-store"


def test_the_instance_names_the_request(client):
    own = str(uuid.uuid4())
    assert client.get("/none", headers={"x-request-id": own}).json()["instance"] == f"urn:uuid:{own}"
    first, second = (client.get("/none", headers={"x-request-id": "quote-7"}).json() for _ in range(2))
    assert first == second
    assert first["requestId"] == "quote-7"
    assert uuid.UUID(first["instance"].removeprefix("urn:uuid:"))


def test_a_fault_tells_its_request_id_and_nothing_else_and_is_logged_with_its_traceback(client, caplog):
    with caplog.at_level(logging.ERROR, logger="loopslack.request"):
        answered = post(client, "/v1/fault", **{"x-request-id": "night-17"})
    assert answered.status_code == 500
    assert answered.json()["type"] == "/docs/problems/internal-fault"
    assert answered.json()["requestId"] == "night-17"
    assert b"secret" not in answered.content
    assert b"ZeroDivision" not in answered.content
    logged = caplog.records[-1]
    assert logged.requestId == "night-17"
    assert "secret of the house" in str(logged.exc_info)


def test_an_answer_that_is_not_a_number_is_a_fault_and_never_null(client, caplog):
    with caplog.at_level(logging.ERROR, logger="loopslack.request"):
        answered = post(client, "/v1/not-a-number")
    assert answered.status_code == 500
    assert b"null" not in answered.content
    assert "/double" in str(caplog.records[-1].exc_info)


@pytest.mark.parametrize("number", [float("nan"), float("inf"), float("-inf")])
def test_a_number_that_is_none_is_found_wherever_it_lies(number):
    for answer, place in (
        (SmallAnswer(double=number), "/double"),
        ([1.0, {"a": (2.0, number)}], "/1/a/1"),
        ({"deep": [SmallAnswer(double=1.0), SmallAnswer(double=number)]}, "/deep/1/double"),
        (number, ""),
    ):
        assert place_of_non_finite(answer) == place
        with pytest.raises(NotFiniteError):
            encoded(answer)


def test_an_answer_with_the_word_null_in_a_text_or_an_honest_null_is_sent():
    assert encoded({"note": "null", "none": None}) == b'{"note":"null","none":null}'


def test_several_refusals_of_a_calculation_are_all_told(client):
    refused = post(client, "/v1/refuse")
    assert refused.status_code == 422
    assert refused.json()["type"] == "/docs/problems/invalid-field"
    assert pointers(refused) == {"/fluid/massPercent": "out-of-range", "": "contradiction"}
    first, second = refused.json()["errors"]
    assert first["message"] == "80 % is above 60 %. State less."
    assert first["parameters"] == {"limit": 60}
    assert "parameters" not in second


def test_a_refusal_that_is_about_fields_alone_is_an_invalid_field(client):
    refused = post(client, "/v1/out-of-range")
    assert refused.status_code == 422
    assert refused.json()["type"] == "/docs/problems/invalid-field"
    assert pointers(refused) == {"/count": "out-of-range"}


def test_the_table_of_problems_is_complete_and_well_formed():
    for slug, kind in PROBLEM_TYPES.items():
        assert kind.slug == slug == slug.lower()
        assert 400 <= kind.status < 600
        assert kind.meaning.endswith(".")
        assert kind.remedy.endswith(".")
    assert len({kind.title for kind in PROBLEM_TYPES.values()}) == len(PROBLEM_TYPES)
    assert all(code == code.lower() and meaning.endswith(".") for code, meaning in FIELD_CODES.items())


def test_an_operation_knows_the_problems_it_can_give():
    by_id = {
        operation.operation_id: {kind.slug for kind in problems_of(operation)} for operation in OPERATIONS
    }
    assert "invalid-field" in by_id["double"]
    assert "deadline-passed" in by_id["slow"]
    assert "deadline-passed" not in by_id["double"]
    assert "body-too-large" not in by_id["words"]
    assert "not-acceptable" in by_id["words"]


def test_no_message_of_ours_is_lost_to_a_character_json_must_escape(client):
    refused = client.post("/v1/double", content=b'{"\\u0000\\"":1}', headers=JSON)
    assert refused.status_code == 422
    assert json.loads(refused.content)["errors"][0]["code"] == "unknown-field"
