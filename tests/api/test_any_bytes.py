"""Whatever bytes are sent, the answer is an answer or a problem document, and never a fault."""

import json

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from api.small_service import GOOD, GOOD_BODY, JSON

WHOLE = json.dumps(
    GOOD
    | {
        "count": 3,
        "fluid": {"kind": "propylene-glycol", "massPercent": 40.5},
        "stock": [{"id": "a-1", "litres": 80}],
        "span": {"low": 1, "high": 2},
        "note": "é\\u0022",
    }
).encode()
RULES = settings(
    max_examples=300,
    derandomize=True,
    deadline=None,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
)
VALUES = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=20),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=8), inner, max_size=4),
    max_leaves=10,
)


def answered(client, body, headers=JSON):
    response = client.post("/v1/double", content=body, headers=headers)
    assert response.status_code in (200, 400, 413, 415, 422), response.text
    if response.status_code != 200:
        problem = response.json()
        assert response.headers["content-type"] == "application/problem+json"
        assert problem["status"] == response.status_code
        if response.status_code == 422:
            assert all(fault["code"] and fault["message"] for fault in problem["errors"])
            assert problem["errors"]
    return response


@RULES
@given(body=st.binary(max_size=60))
def test_random_bytes(client, body):
    answered(client, body)


@RULES
@given(place=st.integers(0, len(WHOLE)), length=st.integers(0, 8), put=st.binary(max_size=8))
def test_a_question_with_some_bytes_replaced(client, place, length, put):
    answered(client, WHOLE[:place] + put + WHOLE[place + length :])


@RULES
@given(
    member=st.sampled_from(["reliefPressure", "count", "fluid", "stock", "span", "exact", "note"]),
    value=VALUES,
)
def test_a_question_with_anything_in_place_of_a_member(client, member, value):
    answered(client, json.dumps(json.loads(WHOLE) | {member: value}).encode())


@RULES
@given(name=st.text(max_size=300), value=VALUES)
def test_a_question_with_any_further_member(client, name, value):
    answered(client, json.dumps(GOOD | {name: value}).encode())


@RULES
@given(declared=st.text(st.characters(min_codepoint=32, max_codepoint=126), max_size=40))
def test_any_content_type(client, declared):
    answered(client, GOOD_BODY, {"content-type": "application/json" + declared})
