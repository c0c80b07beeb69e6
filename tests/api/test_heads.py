"""What the head of a request may say, and a body that does not come."""

import gzip
import json

import pytest

from api.small_service import GOOD_BODY, JSON, ask_raw, serving, small_app


def slug(response):
    assert response.headers["content-type"] == "application/problem+json"
    return response.json()["type"].removeprefix("/docs/problems/")


@pytest.mark.parametrize(
    "declared",
    [
        "application/json",
        "Application/JSON",
        "application/json; charset=utf-8",
        'application/json;charset="UTF-8"',
        "application/json ; charset=utf8",
        "application/vnd.quote+json",
        "application/json; profile=x",
    ],
)
def test_json_in_utf_8_is_taken(client, declared):
    answered = client.post("/v1/double", content=GOOD_BODY, headers={"content-type": declared})
    assert answered.status_code == 200


@pytest.mark.parametrize(
    "declared",
    [
        "",
        "text/plain",
        "text/json",
        "application/xml",
        "application/jsonp",
        "application/x-www-form-urlencoded",
        "multipart/form-data; boundary=x",
        "application/json; charset=latin-1",
        "application/json; charset=utf-16",
        "application/json; charset=",
        "application/json, text/plain",
        "+json",
    ],
)
def test_any_other_media_type_is_refused_with_415(client, declared):
    headers = {"content-type": declared} if declared else {}
    refused = client.post("/v1/double", content=GOOD_BODY, headers=headers)
    assert refused.status_code == 415
    assert slug(refused) == "unsupported-media-type"
    assert refused.headers["accept"] == "application/json"


def test_a_compressed_body_is_refused_with_415(client):
    for encoding in ("gzip", "br", "gzip, identity"):
        refused = client.post(
            "/v1/double", content=gzip.compress(GOOD_BODY), headers=JSON | {"content-encoding": encoding}
        )
        assert refused.status_code == 415
        assert slug(refused) == "unsupported-encoding"
        assert refused.headers["accept-encoding"] == "identity"
    answered = client.post("/v1/double", content=GOOD_BODY, headers=JSON | {"content-encoding": "identity"})
    assert answered.status_code == 200


@pytest.mark.parametrize(
    ("accept", "status"),
    [
        ("application/json", 200),
        ("*/*", 200),
        ("application/*", 200),
        ("text/html, application/json;q=0.1", 200),
        ("text/html;q=1, */*;q=0.1", 200),
        ("text/html", 406),
        ("application/json;q=0", 406),
        ("application/json;q=0, */*", 406),
        ("*/*;q=0.000", 406),
    ],
)
def test_accept_is_heeded(client, accept, status):
    answered = client.post("/v1/double", content=GOOD_BODY, headers=JSON | {"accept": accept})
    assert answered.status_code == status
    if status == 406:
        assert slug(answered) == "not-acceptable"


def test_a_page_is_answered_in_its_own_media_type(client):
    answered = client.post("/v1/page", content=GOOD_BODY, headers=JSON | {"accept": "text/html"})
    assert answered.content == b"<p>page</p>"
    assert answered.headers["content-type"] == "text/html; charset=utf-8"
    assert "script-src 'self'" in answered.headers["content-security-policy"]
    refused = client.post("/v1/page", content=GOOD_BODY, headers=JSON | {"accept": "application/json"})
    assert refused.status_code == 406


def test_a_query_is_refused_with_400(client):
    for answered in (
        client.post("/v1/double?units=us", content=GOOD_BODY, headers=JSON),
        client.get("/v1/words?x"),
    ):
        assert answered.status_code == 400
        assert slug(answered) == "unexpected-query"
    assert "units" in client.post("/v1/double?units=us", content=GOOD_BODY, headers=JSON).json()["detail"]


def test_a_body_announced_as_too_long_is_refused_unread():
    app = small_app(single_body_bytes=1_000)
    headers = [(b"content-type", b"application/json"), (b"content-length", b"10000000")]
    status, answered, body, read = ask_raw(app, [], headers=headers)
    assert (status, read) == (413, 0)
    assert answered["connection"] == "close"
    assert json.loads(body)["status"] == 413


def test_a_body_that_grows_too_long_is_refused_at_that_point():
    app = small_app(single_body_bytes=1_000)
    part = {"type": "http.request", "body": b" " * 400, "more_body": True}
    status, _, _, read = ask_raw(app, [part] * 100)
    assert (status, read) == (413, 3)


def test_a_body_that_stalls_is_answered_408():
    app = small_app(body_seconds=0.1)
    part = {"type": "http.request", "body": b"{", "more_body": True}
    for messages in ([], [part], [part, {"type": "http.disconnect"}], [{"type": "http.disconnect"}]):
        status, headers, body, _ = ask_raw(app, messages)
        assert status == 408
        assert headers["connection"] == "close"
        assert json.loads(body)["type"] == "/docs/problems/body-overdue"


def test_over_http_2_no_connection_header_is_sent():
    headers = [(b"content-type", b"application/json"), (b"content-length", b"10000000")]
    _, answered, _, _ = ask_raw(small_app(), [], http_version="2", headers=headers)
    assert "connection" not in answered


def test_a_body_in_many_pieces_is_put_together():
    pieces = [
        {"type": "http.request", "body": bytes([letter]), "more_body": place < len(GOOD_BODY) - 1}
        for place, letter in enumerate(GOOD_BODY)
    ]
    status, _, body, _ = ask_raw(small_app(), pieces)
    assert (status, body) == (200, b'{"double":12.0}')


def test_an_invalid_host_is_a_problem_like_any_other():
    headers = [(b"content-type", b"application/json"), (b"host", b"a b/c")]
    status, answered, body, _ = ask_raw(small_app(), [], headers=headers)
    assert status == 400
    assert answered["content-type"] == "application/problem+json"
    assert json.loads(body)["type"] == "/docs/problems/bad-request"


def test_a_limit_of_bytes_is_the_operations_own():
    with serving(single_body_bytes=1_000, batch_body_bytes=2_000) as client:
        body = GOOD_BODY + b" " * 1_500
        assert client.post("/v1/double", content=body, headers=JSON).status_code == 413
