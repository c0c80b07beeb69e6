"""Reference data: one set of bytes, its tag, and 304 for whoever has it."""

import hashlib

from litestar.testing import TestClient

from api.small_service import OPERATIONS, serving
from loopslack.api.reference import Page, has_already
from loopslack.app import create_app
from loopslack.settings import Settings


def test_reference_data_have_a_strong_tag_and_may_be_kept(client):
    answered = client.get("/v1/words")
    assert answered.json() == {"words": ["expansion", "stagnation"]}
    assert answered.headers["etag"] == f'"{hashlib.sha256(answered.content).hexdigest()[:32]}"'
    assert answered.headers["cache-control"] == "public, max-age=3600, stale-while-revalidate=86400"
    assert "server-timing" not in answered.headers


def test_whoever_has_the_bytes_is_told_so_without_them(client):
    tag = client.get("/v1/words").headers["etag"]
    for known in (tag, f"W/{tag}", f'"other", {tag}', "*"):
        for method in ("GET", "HEAD"):
            unchanged = client.request(method, "/v1/words", headers={"if-none-match": known})
            assert (unchanged.status_code, unchanged.content) == (304, b"")
            assert unchanged.headers["etag"] == tag
            assert "content-type" not in unchanged.headers
            assert "cache-control" in unchanged.headers
    assert client.get("/v1/words", headers={"if-none-match": '"other"'}).status_code == 200


def test_two_services_give_the_same_tag():
    tags = set()
    for _ in range(2):
        with serving() as client:
            tags.add(client.get("/v1/words").headers["etag"])
    assert len(tags) == 1


def test_a_tag_is_compared_as_the_standard_says():
    assert has_already('"a", W/"b"', '"b"')
    assert not has_already("b", '"b"')
    assert not has_already(None, '"b"')
    assert not has_already('"a", *', '"b"')


def test_a_page_is_served_with_its_own_headers_and_takes_any_query():
    page = Page(
        path="/docs",
        media_type="text/html; charset=utf-8",
        body=b"<!doctype html>",
        headers=((b"content-security-policy", b"default-src 'self'"),),
    )
    app = create_app(Settings(), operations=OPERATIONS, pages=[page])
    with TestClient(app) as client:
        answered = client.get("/docs?theme=dark", headers={"accept": "image/png"})
        assert answered.content == b"<!doctype html>"
        assert answered.headers["content-security-policy"] == "default-src 'self'"
        assert client.options("/docs").headers["allow"] == "GET, HEAD, OPTIONS"
