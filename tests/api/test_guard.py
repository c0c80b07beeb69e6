"""Keys and rates: who may pass, how often, and what an operator is warned of."""

import hashlib
import logging

import pytest

from api.small_service import GOOD_BODY, JSON, serving
from loopslack.api import guard
from loopslack.api.docs.contract import contract
from loopslack.api.guard import (
    Bucket,
    Keys,
    KeysError,
    is_guarded,
    is_public,
    new_key,
    read_keys,
    warn_if_open,
)
from loopslack.settings import Settings


def entry(name, key, **more):
    lines = [f'[[key]]\nname = "{name}"\nsha256 = "{hashlib.sha256(key.encode()).hexdigest()}"']
    lines += [f"{field} = {str(value).lower()}" for field, value in more.items()]
    return "\n".join(lines) + "\n"


@pytest.fixture
def keys_file(tmp_path):
    path = tmp_path / "keys.toml"
    path.write_text(
        entry("quotes", "key-of-quotes")
        + entry("old", "key-of-old", allowed=False)
        + entry("slow", "key-of-slow", rate_per_second=0.5, rate_burst=2)
    )
    return path


def ask(client, key=None, scheme="Bearer"):
    headers = JSON | ({"authorization": f"{scheme} {key}"} if key else {})
    return client.post("/v1/double", content=GOOD_BODY, headers=headers)


def test_only_a_known_key_passes(keys_file):
    with serving(keys_file=str(keys_file)) as client:
        assert ask(client, "key-of-quotes").status_code == 200
        assert ask(client, "key-of-quotes", scheme="bearer").status_code == 200
        for refused in (
            ask(client),
            ask(client, "key-of-nobody"),
            ask(client, "key-of-quote"),
            ask(client, "key-of-quotes", scheme="Basic"),
            ask(client, hashlib.sha256(b"key-of-quotes").hexdigest()),
        ):
            assert refused.status_code == 401
            assert refused.json()["type"] == "/docs/problems/key-missing"
            assert refused.headers["www-authenticate"].startswith("Bearer")


def test_a_key_that_was_switched_off_is_refused_with_403(keys_file):
    with serving(keys_file=str(keys_file)) as client:
        refused = ask(client, "key-of-old")
        assert refused.status_code == 403
        assert refused.json()["type"] == "/docs/problems/key-refused"


def test_probes_the_document_and_preflights_need_no_key(keys_file):
    with serving(keys_file=str(keys_file)) as client:
        for path in ("/livez", "/readyz", "/metrics"):
            assert client.get(path).status_code == 200
        assert client.get("/v1/openapi.json").status_code == 404
        assert client.options("/v1/double").status_code == 204
        assert client.get("/v1/words").status_code == 401
        assert client.get("/v1/nothing").status_code == 401


def test_keys_are_added_and_withdrawn_while_serving(keys_file, monkeypatch):
    monkeypatch.setattr(guard, "SECONDS_BETWEEN_LOOKS", -1.0)
    with serving(keys_file=str(keys_file)) as client:
        assert ask(client, "key-of-new").status_code == 401
        keys_file.write_text(entry("new", "key-of-new"))
        assert ask(client, "key-of-new").status_code == 200
        assert ask(client, "key-of-quotes").status_code == 401


def test_a_keys_file_that_breaks_while_serving_leaves_the_old_keys(keys_file, monkeypatch, caplog):
    monkeypatch.setattr(guard, "SECONDS_BETWEEN_LOOKS", -1.0)
    keys = Keys(keys_file)
    for broken in ("nonsense [", "", entry("a", "x") + entry("a", "y")):
        keys_file.write_text(broken)
        with caplog.at_level(logging.ERROR, logger="loopslack.guard"):
            caplog.clear()
            assert keys.find("key-of-quotes") is not None
            assert "not usable" in caplog.text
    keys_file.unlink()
    assert keys.find("key-of-quotes") is not None
    assert keys.find("x") is None


@pytest.mark.parametrize("text", ["", "[[key]]\nname='a'\n", "[[key]]\nname='a'\nsha256='plain-key'\n", "{"])
def test_a_keys_file_that_cannot_be_used_stops_the_start(tmp_path, text):
    path = tmp_path / "keys.toml"
    path.write_text(text)
    for broken in (path, tmp_path / "absent"):
        with pytest.raises(KeysError):
            read_keys(broken)
    with pytest.raises(KeysError), serving(keys_file=str(path)):
        pass


def test_a_new_key_is_admitted_by_its_entry(tmp_path):
    key, text = new_key("tablet-app")
    path = tmp_path / "keys.toml"
    path.write_text(text)
    assert key not in text
    assert Keys(path).find(key).name == "tablet-app"
    assert len(key) >= 43


def test_a_rate_is_kept_for_each_key_by_itself(keys_file):
    with serving(keys_file=str(keys_file)) as client:
        statuses = [ask(client, "key-of-slow").status_code for _ in range(4)]
        assert statuses == [200, 200, 429, 429]
        assert ask(client, "key-of-quotes").status_code == 200
        refused = ask(client, "key-of-slow")
        assert refused.json()["type"] == "/docs/problems/too-many-requests"
        assert 1 <= int(refused.headers["retry-after"]) <= 2


def test_without_keys_a_rate_holds_for_each_client_address():
    with serving(rate_per_second=0.1, rate_burst=3) as client:
        assert [ask(client).status_code for _ in range(5)] == [200, 200, 200, 429, 429]
        assert client.get("/livez").status_code == 200


def test_a_rate_is_shared_out_among_the_workers():
    with serving(rate_per_second=0.1, rate_burst=4, workers=2) as client:
        assert [ask(client).status_code for _ in range(3)] == [200, 200, 429]


def test_a_bucket_fills_again_and_not_beyond_its_burst():
    bucket = Bucket(rate=2.0, burst=3, now=0.0)
    assert [bucket.take(0.0) for _ in range(3)] == [0.0, 0.0, 0.0]
    assert bucket.take(0.0) == 0.5
    assert bucket.take(0.5) == 0.0
    assert [bucket.take(100.0) for _ in range(3)] == [0.0, 0.0, 0.0]
    assert bucket.take(100.0) > 0
    assert bucket.take(50.0) > 0  # a clock that goes back gives nothing away


def test_callers_remembered_are_bounded(monkeypatch):
    monkeypatch.setattr(guard, "MOST_BUCKETS", 5)
    made = guard.Guard(None, Settings(rate_per_second=1.0))
    for number in range(50):
        made._pace(f"10.0.0.{number}", 1.0, 5)
    assert len(made._buckets) == 5


@pytest.mark.parametrize(
    ("bind", "public"),
    [
        ("127.0.0.1:8000", False),
        ("[::1]:8000", False),
        ("localhost:8000", False),
        ("unix:/run/loopslack.sock", False),
        ("127.0.0.1:8000,unix:/run/x", False),
        ("0.0.0.0:8000", True),
        ("[::]:8000", True),
        (":8000", True),
        ("10.1.2.3", True),
        ("design.example:80", True),
        ("127.0.0.1:8000,0.0.0.0:80", True),
    ],
)
def test_a_public_address_without_keys_and_rate_is_warned_of(bind, public, caplog):
    assert is_public(bind) == public
    with caplog.at_level(logging.WARNING, logger="loopslack.guard"):
        assert warn_if_open(Settings(bind=bind)) == public
    assert ("WITHOUT KEYS" in caplog.text) == public
    assert not warn_if_open(Settings(bind=bind, rate_per_second=5.0))
    assert not warn_if_open(Settings(bind=bind, keys_file="keys.toml"))


def test_the_warning_is_given_at_start(caplog):
    with caplog.at_level(logging.WARNING, logger="loopslack.guard"), serving(bind="0.0.0.0:8000"):
        assert "SERVING A PUBLIC ADDRESS" in caplog.text


def test_the_document_says_that_a_key_may_be_asked_for_and_where_never() -> None:
    document = contract().document
    assert document["security"] == [{}, {"key": []}]
    scheme = document["components"]["securitySchemes"]["key"]
    assert (scheme["type"], scheme["scheme"]) == ("http", "bearer")
    for path, item in document["paths"].items():
        for method, operation in item.items():
            may_be_asked = operation.get("security", document["security"]) != []
            assert is_guarded({"path": path, "method": method.upper()}) == may_be_asked, path
