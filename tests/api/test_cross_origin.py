"""Pages of other origins: none by default, those named if any are."""

from api.small_service import GOOD_BODY, JSON, serving
from loopslack.api.guard import new_key

PAGE = {"origin": "https://app.example"}
PREFLIGHT = {"access-control-request-method": "POST", "access-control-request-headers": "content-type"}


def test_without_origins_nothing_is_allowed(client):
    for answered in (
        client.options("/v1/double", headers=PAGE | PREFLIGHT),
        client.post("/v1/double", content=GOOD_BODY, headers=JSON | PAGE),
    ):
        assert not [name for name in answered.headers if name.startswith("access-control")]


def test_a_named_origin_may_ask_and_read():
    with serving(cors_origins=("https://app.example", "https://other.example")) as client:
        preflight = client.options("/v1/double", headers=PAGE | PREFLIGHT)
        assert preflight.status_code == 204
        assert preflight.headers["access-control-allow-origin"] == "https://app.example"
        assert preflight.headers["access-control-allow-methods"] == "OPTIONS, POST"
        assert "Content-Type" in preflight.headers["access-control-allow-headers"]
        assert preflight.headers["access-control-max-age"] == "7200"
        answered = client.post("/v1/double", content=GOOD_BODY, headers=JSON | PAGE)
        assert answered.headers["access-control-allow-origin"] == "https://app.example"
        assert "X-Request-Id" in answered.headers["access-control-expose-headers"]
        assert answered.headers["vary"] == "Origin"
        assert "access-control-allow-credentials" not in answered.headers
        refused = client.post("/v1/double", content=b"{", headers=JSON | PAGE)
        assert refused.headers["access-control-allow-origin"] == "https://app.example"


def test_another_origin_may_not():
    with serving(cors_origins=("https://app.example",)) as client:
        for origin in ("https://evil.example", "https://app.example.evil.example", "null", ""):
            for answered in (
                client.options("/v1/double", headers={"origin": origin} | PREFLIGHT),
                client.post("/v1/double", content=GOOD_BODY, headers=JSON | {"origin": origin}),
            ):
                assert not [name for name in answered.headers if name.startswith("access-control")]
                assert answered.headers["vary"] == "Origin"


def test_a_preflight_needs_no_key(tmp_path):
    path = tmp_path / "keys.toml"
    path.write_text(new_key("app")[1])
    with serving(cors_origins=("https://app.example",), keys_file=str(path)) as client:
        assert client.options("/v1/double", headers=PAGE | PREFLIGHT).status_code == 204
        refused = client.post("/v1/double", content=GOOD_BODY, headers=JSON | PAGE)
        assert refused.status_code == 401
        assert refused.headers["access-control-allow-origin"] == "https://app.example"
