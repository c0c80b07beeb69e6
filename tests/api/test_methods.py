"""Methods and paths: every method is answered, and a path is taken literally."""

import pytest

from api.small_service import GOOD_BODY, JSON

METHODS = ("GET", "HEAD", "PUT", "PATCH", "DELETE", "TRACE", "CONNECT", "BREW")


@pytest.mark.parametrize("method", METHODS)
def test_a_calculation_has_only_post_and_says_so(client, method):
    refused = client.request(method, "/v1/double")
    assert refused.status_code == 405
    assert refused.headers["allow"] == "OPTIONS, POST"
    if method != "HEAD":
        assert refused.json()["type"] == "/docs/problems/method-not-allowed"


@pytest.mark.parametrize("path", ["/v1/words", "/livez", "/readyz", "/metrics"])
def test_whatever_has_get_has_head_and_options_and_nothing_else(client, path):
    whole = client.get(path)
    head = client.head(path)
    assert (head.status_code, head.content) == (200, b"")
    if path != "/metrics":
        assert head.headers["content-length"] == str(len(whole.content))
    options = client.options(path)
    assert (options.status_code, options.content) == (204, b"")
    assert options.headers["allow"] == "GET, HEAD, OPTIONS"
    for method in ("POST", "PUT", "DELETE", "TRACE"):
        refused = client.request(method, path)
        assert refused.status_code == 405
        assert refused.headers["allow"] == "GET, HEAD, OPTIONS"


def test_options_of_a_calculation(client):
    options = client.options("/v1/double")
    assert options.status_code == 204
    assert options.headers["allow"] == "OPTIONS, POST"
    assert "content-length" not in options.headers


@pytest.mark.parametrize(
    "path",
    [
        "/nothing",
        "/v1",
        "/v1/double/",
        "/v1//double",
        "//v1/double",
        "/v1/double//",
        "/v1/words/",
        "/livez/",
        "/v1/double/more",
        "/V1/double",
        "/v1/%64ouble/",
        "/v1/do\u0443ble",
        "/v2/double",
    ],
)
@pytest.mark.parametrize("method", ["GET", "POST", "OPTIONS"])
def test_any_other_path_is_404(client, path, method):
    refused = client.request(method, f"http://testserver.local{path}", headers=JSON)
    assert refused.status_code == 404
    assert refused.json()["type"] == "/docs/problems/not-found"
    assert refused.json()["status"] == 404


def test_an_operation_on_its_way_out_says_since_when_and_until_when(client):
    answered = client.post("/v1/double", content=GOOD_BODY, headers=JSON)
    assert answered.headers["deprecation"] == "@1767312000"
    assert answered.headers["sunset"] == "Sat, 02 Jan 2027 00:00:00 GMT"
    assert "deprecation" not in client.get("/v1/words").headers


def test_every_answer_points_to_the_description_and_forbids_sniffing_and_framing(client):
    for answered in (
        client.post("/v1/double", content=GOOD_BODY, headers=JSON),
        client.get("/nothing"),
        client.get("/livez"),
        client.options("/v1/double"),
        client.post("/v1/fault", content=GOOD_BODY, headers=JSON),
    ):
        assert '</v1/openapi.json>; rel="service-desc"' in answered.headers["link"]
        assert answered.headers["x-content-type-options"] == "nosniff"
        assert answered.headers["referrer-policy"] == "no-referrer"
        assert "frame-ancestors 'none'" in answered.headers["content-security-policy"]
