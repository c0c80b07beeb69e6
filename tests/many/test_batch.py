"""A batch: every design answered on its own, in order, or the batch refused as a whole."""

import json
import time

import pytest

from loopslack.api import many_places, many_work
from loopslack.observability import DESIGNS
from many.designs import BATCH, BATCH_PATH, HEAD, JSON, batch, design, faulty
from many.service import serving


def post(client, body, **headers):
    return client.post(BATCH_PATH, content=body, headers=JSON | headers)


def pointers(answer):
    return {fault["pointer"]: fault["code"] for fault in answer.json().get("errors", [])}


def test_the_order_and_the_names_are_kept_and_the_outcomes_counted(client):
    names = [f"q-{number}" for number in range(12)]
    asked = [faulty(name) if place % 3 == 2 else design(name) for place, name in enumerate(names)]
    answer = post(client, batch(*asked))
    assert answer.status_code == 200
    assert answer.headers["content-type"] == "application/json"
    assert answer.headers["cache-control"] == "no-store"
    items = answer.json()["designs"]
    assert [item["id"] for item in items] == names
    assert [item["index"] for item in items] == list(range(12))
    assert [("problem" in item, "answer" in item) for item in items] == [
        (place % 3 == 2, place % 3 != 2) for place in range(12)
    ]
    assert all(
        item.get("verdict") == item.get("answer", {}).get("result", {}).get("verdict") for item in items
    )
    summary = answer.json()["summary"]
    assert summary["designs"] == 12
    assert summary["refused"] == 4
    verdicts = [item["verdict"] for item in items if "verdict" in item]
    assert summary["holds"] == verdicts.count("holds")
    assert sum(summary.values()) == 2 * summary["designs"]


def test_the_committed_example_is_answered(client):
    answer = post(client, json.dumps(BATCH))
    assert [
        item.get("verdict", item.get("problem", {}).get("title")) for item in answer.json()["designs"]
    ] == [
        "holds",
        "holds",
        "Fields refused",
    ]


def test_the_same_batch_gets_the_same_bytes_whoever_asks(client):
    body = batch(design("a"), faulty("b"), {"id": "c"})
    first = post(client, body, **{"x-request-id": "one"}).content
    assert post(client, body, **{"x-request-id": "two"}).content == first


def test_the_bytes_do_not_depend_on_how_the_work_is_cut(client, monkeypatch):
    body = batch(*(design(f"d-{number}") for number in range(4)), faulty("x"))
    whole = post(client, body).content
    monkeypatch.setattr(many_work, "SLICE_SECONDS", 0.0)
    with serving() as cut:  # its side process is forked from here on
        assert post(cut, body).content == whole


def test_only_the_first_of_two_with_one_name_is_answered(client):
    items = post(client, batch(design("a"), design("b"), design("a"), design("c"))).json()["designs"]
    assert ["answer" in item for item in items] == [True, True, False, True]
    assert items[2]["id"] == "a"
    assert items[2]["problem"]["errors"][0]["pointer"] == "/id"


def test_remedies_are_left_out_unless_asked_for(client):
    small = [
        {
            "id": "S",
            "nominalVolume": {"value": 8, "unit": "L"},
            "ratedPressure": {"value": 10, "unit": "barg"},
        }
    ]
    items = post(client, batch(design("a"), stock=small)).json()["designs"]
    assert items[0]["verdict"] == "does-not-hold"
    assert not [member for member in items[0]["answer"] if "remed" in member.lower()]


def test_a_fault_in_one_design_leaves_the_others_alone(client):
    items = post(client, batch(7, design("a"), [], {}, design("b"), None, "x")).json()["designs"]
    assert ["answer" in item for item in items] == [False, True, False, False, True, False, False]


@pytest.mark.parametrize(
    ("body", "status", "expected"),
    [
        (b"", 400, {"": "empty-body"}),
        (b'{"designs":[', 400, {"": "not-json"}),
        (b'{"designs":[{"id":"\xff"}]}', 400, {"": "not-utf-8"}),
        (b'\xef\xbb\xbf{"designs":[]}', 400, {"": "byte-order-mark"}),
        (b'{"designs":[NaN]}', 400, {"": "not-finite"}),
        (b"[]", 422, {"": "wrong-type"}),
        (b"{}", 422, {"/designs": "missing"}),
        (b'{"designs":null}', 422, {"/designs": "wrong-type"}),
        (b'{"designs":[]}', 422, {"/designs": "too-few"}),
        (b'{"designs":[{"id":"a"}],"designs":[{"id":"b"}]}', 400, {"/designs": "duplicate-key"}),
        (b'{"defaults":{},"designs":[{"id":"a"}],"defaults":null}', 400, {"/defaults": "duplicate-key"}),
        (
            b'{"defaults":{"units":"us","units":"us"},"designs":[{"id":"a"}]}',
            400,
            {"/defaults/units": "duplicate-key"},
        ),
        (b'{"defaults":{"units":"si"},"designs":[{"id":"a"}]}', 422, {"/defaults/units": "not-a-member"}),
        (b'{"stock":[],"designs":[{"id":"a"}]}', 422, {"/stock": "too-few"}),
        (b"[" * 100_000, 400, {}),
    ],
)
def test_a_fault_of_the_batch_itself_refuses_it(client, body, status, expected):
    answer = post(client, body)
    assert answer.status_code == status
    assert answer.headers["content-type"] == "application/problem+json"
    assert pointers(answer) == expected


def test_an_unknown_member_beside_the_designs_is_told_with_the_faults_of_the_rest(client):
    answer = post(client, json.dumps({"designs": [design("a")], "default": {}}))
    assert answer.status_code == 422
    assert pointers(answer) == {"/default": "unknown-field"}
    assert "defaults" in answer.json()["errors"][0]["message"]


def test_a_batch_longer_than_allowed_is_refused_as_a_whole():
    with serving(batch_designs=3) as client:
        assert post(client, batch(*(faulty(f"q-{number}") for number in range(3)))).status_code == 200
        answer = post(client, batch(*(faulty(f"q-{number}") for number in range(4))))
        assert answer.status_code == 422
        assert pointers(answer) == {"/designs": "too-many"}


def test_a_thousand_designs_are_taken_by_default(client):
    answer = post(client, batch(*({"id": f"q-{number}", "x": 1} for number in range(1000))))
    assert answer.json()["summary"]["designs"] == 1000
    assert post(client, batch(*({"id": f"q-{number}"} for number in range(1001)))).status_code == 422


def test_a_body_longer_than_allowed_is_refused_as_a_whole():
    with serving(batch_body_bytes=20_000) as client:
        assert post(client, batch(design("a", x="y" * 20_000))).status_code == 413


def test_a_design_longer_than_a_single_question_may_be_is_refused_alone():
    with serving(single_body_bytes=10_000) as client:
        items = post(client, batch(design("a"), design("b", x="y" * 20_000))).json()["designs"]
        assert "answer" in items[0]
        assert items[1]["problem"]["status"] == 413


def test_designs_that_are_not_reached_in_time_say_so_and_the_answer_is_whole():
    """A second is enough for one design on a busy machine, and too little for a thousand on any."""
    with serving(batch_seconds=1.0) as client:
        answer = post(client, batch(*(design(f"q-{number}") for number in range(1000))))
    items = answer.json()["designs"]
    assert len(items) == 1000
    late = [item for item in items if item.get("problem", {}).get("type") == "/docs/problems/deadline-passed"]
    assert 0 < len(late) < 1000
    assert [item["id"] for item in items] == [f"q-{number}" for number in range(1000)]
    assert items[-1] == late[-1]
    assert answer.json()["summary"]["refused"] == len(late)


def test_a_server_that_stops_says_so_for_each_design_it_leaves(client, monkeypatch):
    monkeypatch.setattr(client.service.many, "must_end", lambda: True)
    items = post(client, batch(design("a"), design("b"))).json()["designs"]
    assert [item["problem"]["status"] for item in items] == [503, 503]
    assert [item["id"] for item in items] == ["a", "b"]


def test_a_stopping_worker_goes_on_for_a_while(client, monkeypatch):
    places = client.service.many
    monkeypatch.setattr(client.service.readiness, "draining", True)
    assert not places.must_end()
    later = time.monotonic() + 11
    monkeypatch.setattr(many_places, "monotonic", lambda: later)
    assert places.must_end()
    monkeypatch.setattr(client.service.readiness, "draining", False)
    assert not places.must_end()


@pytest.mark.parametrize(
    ("headers", "status"),
    [
        ({"content-type": "application/x-ndjson"}, 415),
        ({"content-type": "text/plain"}, 415),
        ({"content-encoding": "gzip"}, 415),
        ({"accept": "application/x-ndjson"}, 406),
    ],
)
def test_the_head_of_the_request_is_held_to_what_the_operation_takes(client, headers, status):
    assert post(client, batch(design("a")), **headers).status_code == status


def test_a_query_is_refused_and_other_methods_are_named(client):
    assert client.post(BATCH_PATH + "?x=1", content=batch(design("a")), headers=JSON).status_code == 400
    assert client.get(BATCH_PATH).headers["allow"] == "OPTIONS, POST"


def test_a_bug_is_logged_with_the_request_and_told_without_its_text(monkeypatch, caplog):
    def broken(question):
        raise ZeroDivisionError("the secret of the house")

    monkeypatch.setattr("loopslack.contract.answering.many.design_loop", broken)
    with serving() as client:
        answer = post(client, batch(design("a")), **{"x-request-id": "night-18"})
    assert answer.status_code == 200
    assert answer.json()["designs"][0]["problem"]["status"] == 500
    assert b"secret" not in answer.content
    assert caplog.records[-1].requestId == "night-18"
    assert "the secret of the house" in caplog.records[-1].traceback


def test_every_design_is_counted_by_its_outcome(client):
    def counted(outcome):
        return DESIGNS.labels("designLoops", outcome)._value.get()

    before = counted("refused")
    post(client, batch(faulty("a"), faulty("b")))
    assert counted("refused") == before + 2


def test_a_stock_list_is_chosen_from_by_every_design(client):
    items = post(client, batch(design("a"), design("b"))).json()["designs"]
    known = {vessel["id"] for vessel in HEAD["stock"]}
    assert {item["answer"]["result"]["chosenVessel"]["id"] for item in items} <= known
