"""A stream: a line for a line, whatever the lines are, and a last one that says that it is whole."""

import json

import pytest

from many.designs import (
    BATCH_PATH,
    HEAD,
    JSON,
    NDJSON,
    STREAM_PATH,
    batch,
    design,
    faulty,
    lines,
    read,
)
from many.service import serving


def post(client, body, **headers):
    return client.post(STREAM_PATH, content=body, headers=NDJSON | headers)


def test_every_line_is_answered_by_a_line_in_order_and_the_last_one_counts_them(client):
    names = [f"q-{number}" for number in range(9)]
    answer = post(client, lines(*(faulty(name) if name == "q-4" else design(name) for name in names)))
    assert answer.status_code == 200
    assert answer.headers["content-type"] == "application/x-ndjson"
    items, end = read(answer.content)
    assert [item["id"] for item in items] == names
    assert end["complete"] is True
    assert end["summary"]["designs"] == 9
    assert end["summary"]["refused"] == 1
    assert answer.content.endswith(b"\n")


def test_a_line_has_the_bytes_of_the_same_design_in_a_batch(client):
    asked = [design("a"), faulty("b"), design("a"), {}]
    streamed = post(client, lines(*asked)).content.splitlines()[:-1]
    batched = client.post(BATCH_PATH, content=batch(*asked), headers=JSON).content
    assert batched == b'{"designs":[' + b",".join(streamed) + batched[batched.rindex(b'],"summary"') :]


def test_bad_lines_are_told_and_the_others_go_on(client):
    bad = [b"{", b"nonsense", b"\xff\xfe", b"[]", b'{"id":"x","id":"x"}', b"7", b'"' + b"x" * 90 + b'"']
    items, end = read(post(client, lines(design("a"), *bad, design("b"))).content)
    assert ["answer" in item for item in items] == [True, *[False] * len(bad), True]
    assert [item["problem"]["status"] for item in items[1:-1]] == [400, 400, 400, 422, 400, 422, 422]
    assert end["complete"] is True
    assert end["summary"]["refused"] == len(bad)


@pytest.mark.parametrize(
    "body",
    [
        lines(design("a"), design("b")).rstrip(b"\n"),
        lines(design("a"), design("b")).replace(b"\n", b"\r\n"),
        lines(design("a"), b"", b"   ", design("b"), b"", b""),
        b"\n\n" + lines(design("a"), design("b")),
    ],
    ids=["no end of the last line", "carriage returns", "blank lines", "blank lines first"],
)
def test_line_ends_may_be_written_in_other_ways(client, body):
    items, end = read(post(client, body).content)
    assert [item["id"] for item in items] == ["a", "b"]
    assert end["summary"]["refused"] == 0


def test_a_line_longer_than_allowed_is_refused_alone(client):
    huge = json.dumps(design("huge", x="y" * 256_000)).encode()
    items, end = read(post(client, lines(design("a"), huge, design("b"))).content)
    assert items[1]["problem"]["type"] == "/docs/problems/body-too-large"
    assert [item.get("id") for item in items] == ["a", None, "b"]
    assert end["complete"] is True


def test_a_last_line_longer_than_allowed_is_refused_too(client):
    items, end = read(post(client, lines(design("a")) + b"x" * 5_000_000).content)
    assert items[1]["problem"]["status"] == 413
    assert end["summary"]["designs"] == 2


def test_the_first_line_may_hold_a_long_stock(client):
    stock = [
        {
            "id": f"EV-{number}",
            "nominalVolume": {"value": 50 + number / 10, "unit": "L"},
            "ratedPressure": {"value": 10, "unit": "barg"},
        }
        for number in range(3000)
    ]
    body = lines(faulty("a"), head=HEAD | {"stock": stock})
    assert len(body.splitlines()[0]) > 256_000
    assert post(client, body).status_code == 200


@pytest.mark.parametrize(
    ("body", "status", "pointer"),
    [
        (b"", 400, ""),
        (b"\n\n", 400, ""),
        (b"{", 400, ""),
        (json.dumps(design("a")).encode(), 422, "/id"),
        (lines(design("a"), head=HEAD | {"defaults": {"units": "si"}}), 422, "/defaults/units"),
        (lines(design("a"), head={"stock": [HEAD["stock"][0]] * 2}), 422, "/stock/1/id"),
    ],
)
def test_a_fault_of_the_first_line_refuses_the_stream(client, body, status, pointer):
    answer = post(client, body)
    assert answer.status_code == status
    assert pointer in [fault["pointer"] for fault in answer.json()["errors"]]


def test_a_first_line_longer_than_a_question_may_be_refuses_the_stream():
    with serving(single_body_bytes=1000) as client:
        assert post(client, lines(design("a"))).status_code == 413


def test_a_stream_without_designs_is_whole(client):
    items, end = read(post(client, lines()).content)
    assert items == []
    assert end == {"complete": True, "summary": dict.fromkeys(end["summary"], 0)}


def test_a_stream_of_more_designs_than_allowed_is_refused_before_it_begins():
    with serving(stream_designs=5) as client:
        assert post(client, lines(*(faulty(str(number)) for number in range(5)))).status_code == 200
        assert post(client, lines(*(faulty(str(number)) for number in range(6)))).status_code == 413
        assert post(client, lines(*(faulty(str(number)) for number in range(6))).rstrip()).status_code == 413


def test_a_body_longer_than_allowed_is_refused_before_it_begins():
    with serving(stream_body_bytes=50_000) as client:
        assert post(client, lines(design("a")) + b" " * 50_000).status_code == 413


def test_a_stream_that_is_not_done_in_time_ends_with_a_line_that_says_so():
    """A second is enough for one design on a busy machine, and too little for a thousand on any."""
    with serving(batch_seconds=1.0) as client:
        answer = post(client, lines(*(design(f"q-{number}") for number in range(1000))))
    items, end = read(answer.content)
    assert 0 < len(items) < 1000
    assert end["complete"] is False
    assert end["problem"]["type"] == "/docs/problems/deadline-passed"
    assert end["summary"]["designs"] == len(items)
    assert all("answer" in item for item in items)


def test_a_server_that_stops_ends_the_stream_in_order(client, monkeypatch):
    monkeypatch.setattr(client.service.many, "must_end", lambda: True)
    items, end = read(post(client, lines(design("a"))).content)
    assert items == []
    assert end["problem"]["status"] == 503
    assert end["complete"] is False


def test_a_repeated_name_is_refused_however_far_apart(client):
    asked = [faulty(f"q-{number}") for number in range(3000)]
    items, end = read(post(client, lines(design("first"), *asked, design("first"))).content)
    assert "answer" in items[0]
    assert items[-1]["problem"]["errors"][0]["pointer"] == "/id"
    assert end["summary"]["designs"] == 3002


@pytest.mark.parametrize(
    "declared", ["application/x-ndjson", "application/jsonl", "application/x-ndjson; charset=utf-8"]
)
def test_the_usual_names_of_the_media_type_are_taken(client, declared):
    assert post(client, lines(), **{"content-type": declared}).status_code == 200


@pytest.mark.parametrize(
    "declared", ["application/json", "text/plain", "application/x-ndjson; charset=latin-1"]
)
def test_other_media_types_are_refused(client, declared):
    answer = post(client, lines(), **{"content-type": declared})
    assert answer.status_code == 415
    assert "application/x-ndjson" in answer.headers["accept"]


def test_the_answer_is_the_same_however_the_body_arrives(client):
    body = lines(*(faulty(f"q-{number}") for number in range(40)), design("a"))
    whole = post(client, body).content

    def pieces():
        yield from (body[start : start + 97] for start in range(0, len(body), 97))

    assert client.post(STREAM_PATH, content=pieces(), headers=NDJSON).content == whole
