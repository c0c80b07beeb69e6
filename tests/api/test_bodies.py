"""What a body must be before it is a question."""

import json
import time

import msgspec
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from api.small_service import GOOD, GOOD_BODY, JSON, OpenHandedQuestion, SmallQuestion, pointers, serving
from loopslack.contract.refusals import Refused
from loopslack.contract.strict.decoding import decode
from loopslack.contract.strict.duplicates import LARGE_BODY
from loopslack.contract.strict.reader import reader_of


class Anything(msgspec.Struct, forbid_unknown_fields=True):
    part: object


class Endless(msgspec.Struct, forbid_unknown_fields=True):
    part: "Endless | None" = None


class Open(msgspec.Struct):
    part: int


def post(client, body, path="/v1/double", **headers):
    return client.post(path, content=body, headers=JSON | headers)


def test_a_good_question_is_answered_with_the_same_bytes_each_time(client):
    answers = [post(client, GOOD_BODY) for _ in range(3)]
    assert {answer.status_code for answer in answers} == {200}
    assert {answer.content for answer in answers} == {b'{"double":12.0}'}
    assert answers[0].headers["cache-control"] == "no-store"
    assert answers[0].headers["server-timing"].startswith("calc;dur=")


@pytest.mark.parametrize(
    ("body", "code"),
    [
        (b"", "empty-body"),
        (b"  \n", "empty-body"),
        (b"\xef\xbb\xbf" + GOOD_BODY, "byte-order-mark"),
        (GOOD_BODY.decode().encode("utf-16"), "not-utf-8"),
        (b'{"note":"\xff"}', "not-utf-8"),
        (b'{"note":"\xed\xa0\x80"}', "not-utf-8"),
        (b'{"note":"\\ud800"}', "not-json"),
        (b'{"reliefPressure":{"value":NaN,"unit":"barg"}}', "not-finite"),
        (b'{"reliefPressure":{"value": Infinity,"unit":"barg"}}', "not-finite"),
        (b'{"reliefPressure":{"value":-Infinity,"unit":"barg"}}', "not-finite"),
        (b'{"count":1e999,"note":NaN}', "not-finite"),
        (b'{"count":1', "not-json"),
        (b'{"count":1}}', "not-json"),
        (b'{"count":1,}', "not-json"),
        (b'{"count":01}', "not-json"),
        (b'{"count":+1}', "not-json"),
        (b"{'count':1}", "not-json"),
        (b'{"count":True}', "not-json"),
        (b'{"note":"a\x00b"}', "not-json"),
        (b"count=1", "not-json"),
        (b'{"wrong":[}', "not-json"),
    ],
)
def test_a_body_that_is_no_json_is_refused_with_400(client, body, code):
    refused = post(client, body)
    assert refused.status_code == 400
    assert refused.json()["type"] == "/docs/problems/malformed-body"
    assert pointers(refused) == {"": code}


@pytest.mark.parametrize("opening", [b"[", b'{"a":', b'[{"a":'])
@pytest.mark.parametrize("levels", [33, 500, 5_000, 100_000])
def test_deep_nesting_is_refused_with_400_and_costs_little(client, opening, levels):
    closing = b"".join({91: b"]", 123: b"}"}.get(letter, b"") for letter in reversed(opening))
    begun = time.perf_counter()
    refused = post(client, opening * levels + b"1" + closing * levels)
    assert refused.status_code == 400
    assert refused.json()["type"] == "/docs/problems/nested-too-deeply"
    assert time.perf_counter() - begun < 1


def test_nesting_is_counted_exactly():
    def nested(levels):
        return b'{"note":' + b"[" * (levels - 1) + b"]" * (levels - 1) + b"}"

    kinds = []
    for levels in (32, 33):
        with pytest.raises(Refused) as refused:
            decode(nested(levels), SmallQuestion)
        kinds.append(refused.value.kind.slug)
    assert kinds == ["invalid-field", "nested-too-deeply"]


@pytest.mark.parametrize(
    ("body", "places"),
    [
        (b'{"count":1,"count":2,"reliefPressure":{"value":6,"unit":"barg"}}', ["/count"]),
        (b'{"reliefPressure":{"value":6,"unit":"barg","value":7}}', ["/reliefPressure/value"]),
        (b'{"reliefPressure":{"value":6,"unit":"barg"},"count" :1, "count"\n:1}', ["/count"]),
        (b'{"reliefPressure":{"value":6,"unit":"barg"},"count":1,"c\\u006funt":1}', ["/count"]),
        (b'{"note":"\\u0022","note":"\\u0022","reliefPressure":{"value":6,"unit":"barg"}}', ["/note"]),
        (
            (
                b'{"reliefPressure":{"value":6,"value":6,"unit":"barg"},'
                b'"stock":[{"id":"a","litres":1},{"id":"b","id":"c","litres":1}]}'
            ),
            ["/reliefPressure/value", "/stock/1/id"],
        ),
        (b'{"unknown":1,"unknown":2}', ["/unknown"]),
        (b'{"a/b":1,"a/b":2}', ["/a~1b"]),
    ],
)
def test_a_member_stated_twice_is_refused_with_its_pointer(client, body, places):
    refused = post(client, body)
    assert refused.status_code == 400
    assert refused.json()["type"] == "/docs/problems/duplicate-keys"
    assert pointers(refused) == dict.fromkeys(places, "duplicate-key")


@pytest.mark.parametrize(
    "note", ['say \\"note\\": twice', "\\u0022note\\u0022:1", "\\\\", "note", '\\"', "\\u00e9\\ud83d\\ude00"]
)
def test_quotation_marks_inside_a_text_are_no_member_stated_twice(client, note):
    body = GOOD_BODY[:-1] + b',"note":"' + note.encode() + b'"}'
    assert post(client, body).status_code == 200


def twice_by_the_standard_library(body):
    """Whether a member is stated twice, as the slow reader of the standard library sees it."""
    found = []

    def look(pairs):
        found.append(len(dict(pairs)) < len(pairs))
        return dict(pairs)

    json.loads(body, object_pairs_hook=look)
    return any(found)


TEXTS = st.sampled_from(['"a"', '"\\""', '"\\u0022"', '"\\\\"', '"\\\\\\""', '":"', '"\\u0041,"', "null"])
SPACES = st.sampled_from(["", " ", "\n\t"])
NAMES = {
    "count": st.sampled_from(["1", "7", "null"]),
    "note": TEXTS,
    "exact": st.sampled_from(["true", "false"]),
    "stock": st.sampled_from(["[]", "null", '[{"id":"a","litres":1}]', '[{"id":"a","litres":1,"id":"b"}]']),
    "fluid": st.sampled_from(["null", '{"kind":"water"}', '{"kind":"water","kind":"water"}']),
}


@st.composite
def bodies(draw):
    """A question written in some way, with members stated once or more often."""
    names = draw(st.lists(st.sampled_from(sorted(NAMES)), max_size=6))
    space = draw(SPACES)
    members = ['"reliefPressure":{"value":6,"unit":"barg"}']
    members += [f'"{name}"{space}:{space}{draw(NAMES[name])}' for name in names]
    return ("{" + f"{space},".join(draw(st.permutations(members))) + "}").encode()


@settings(max_examples=400, derandomize=True, deadline=None)
@given(body=bodies(), question=st.sampled_from([SmallQuestion, OpenHandedQuestion]))
def test_members_stated_twice_are_seen_as_the_standard_library_sees_them(body, question):
    try:
        decode(body, question)
        kind = ""
    except Refused as refused:
        kind = refused.kind.slug
    assert (kind == "duplicate-keys") == twice_by_the_standard_library(body)


def large_body(entries, **more):
    stock = [{"id": f"v-{number}", "litres": 80} for number in range(entries)]
    return json.dumps(GOOD | more | {"stock": stock}).encode()


def test_a_large_body_is_read_as_a_small_one_is(client):
    body = large_body(10_000)
    assert len(body) > LARGE_BODY
    answered = post(client, body)
    assert answered.status_code == 200
    assert answered.json() == {"double": 12.0, "vessels": 10_000}


def test_in_a_large_body_a_member_stated_twice_is_found_deep_inside(client):
    body = large_body(10_000).replace(b'"id": "v-7777"', b'"id": "v-7777", "id": "x"')
    refused = post(client, body)
    assert refused.status_code == 400
    assert pointers(refused) == {"/stock/7777/id": "duplicate-key"}


def test_in_a_large_body_a_member_stated_twice_is_found_at_the_top(client):
    body = large_body(10_000)[:-1] + b', "count": 1, "count": 2}'
    assert pointers(post(client, body)) == {"/count": "duplicate-key"}


def test_all_faults_of_a_large_body_are_counted_and_fifty_listed(client):
    body = large_body(9_000).replace(b'"litres": 80', b'"litres": -1', 900)
    refused = post(client, body)
    assert refused.status_code == 422
    problem = refused.json()
    assert len(problem["errors"]) == 50
    assert problem["furtherErrors"] == 850
    assert "900 fields" in problem["detail"]
    assert problem["errors"][0]["pointer"] == "/stock/0/litres"


def test_faults_are_counted_up_to_a_thousand(client):
    problem = post(client, large_body(9_000).replace(b'"litres": 80', b'"litres": -1')).json()
    assert problem["furtherErrors"] == 950
    assert problem["detail"].startswith("1000 fields of the question are faulty, and there may be more.")


def test_one_fault_at_the_end_of_a_large_body_is_found(client):
    body = large_body(9_000).replace(b'{"id": "v-8999", "litres": 80}', b'{"id": "v-8999", "liters": 80}')
    assert pointers(post(client, body)) == {
        "/stock/8999/litres": "missing",
        "/stock/8999/liters": "unknown-field",
    }


@pytest.mark.parametrize(
    ("filling", "slug", "place"),
    [
        (b'"note":[' + b"[]," * 400_000 + b"[]]", "invalid-field", "/note"),
        (b'"note":[' + b"0," * 600_000 + b"0]", "invalid-field", "/note"),
        (b"".join(b'"k%d":1,' % number for number in range(160_000)) + b'"k":1', "invalid-field", ""),
        (b'"stock":[' + b"0," * 200_000 + b"NaN]", "invalid-field", "/stock/0"),
        (b'"note":null,' * 160_000 + b'"note":NaN', "malformed-body", ""),
    ],
    ids=["lists", "numbers", "members", "stock", "repeated"],
)
def test_a_body_of_very_many_values_is_refused_at_its_first_fault(client, filling, slug, place):
    begun = time.perf_counter()
    refused = post(client, b"{" + filling + b"}")
    assert refused.json()["type"] == f"/docs/problems/{slug}"
    assert list(pointers(refused)) == [place]
    assert time.perf_counter() - begun < 1.5


def test_a_body_may_be_as_long_as_the_limit_and_no_longer():
    with serving(single_body_bytes=1_000) as client:
        assert post(client, GOOD_BODY + b" " * (1_000 - len(GOOD_BODY))).status_code == 200
        refused = post(client, GOOD_BODY + b" " * (1_001 - len(GOOD_BODY)))
    assert refused.status_code == 413
    assert refused.json()["type"] == "/docs/problems/body-too-large"
    assert "1000 bytes" in refused.json()["detail"]


@pytest.mark.parametrize("digits", [400, 4_000, 500_000])
def test_a_number_too_large_to_hold_is_refused_at_its_place(client, digits):
    for number in (b"1e999", b"-1e999", b"9" * digits):
        refused = post(client, b'{"reliefPressure":{"unit":"barg","value":' + number + b"}}")
        assert refused.status_code in (400, 422)
        if digits == 400:
            assert pointers(refused) == {"/reliefPressure/value": "out-of-range"}


def test_a_unit_expression_is_never_evaluated(client):
    begun = time.perf_counter()
    refused = post(client, b'{"reliefPressure":{"value":6,"unit":"9**9**9**9"}}')
    assert refused.status_code == 422
    assert pointers(refused) == {"/reliefPressure/unit": "not-a-member"}
    assert time.perf_counter() - begun < 1


def test_a_question_of_any_shape_is_refused_when_the_service_is_made():
    for kind in (Anything, Endless, Open):
        with pytest.raises(TypeError):
            reader_of(kind)
