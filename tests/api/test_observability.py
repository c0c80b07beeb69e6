"""What an operator sees: request ids, traces, log lines, metrics, probes."""

import errno
import json
import logging
import os
import re

import pytest

import loopslack.app as wiring
from api.small_service import GOOD_BODY, JSON, ask_raw, serving
from loopslack.observability import LineHandler, Lines, trace_of

TRACE = "00-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01"


@pytest.fixture
def logged(tmp_path, monkeypatch):
    """A service whose log lines go to a file, and a function that reads them."""
    path = tmp_path / "log"
    descriptor = os.open(path, os.O_CREAT | os.O_WRONLY | os.O_APPEND)
    set_up = wiring.set_up_logging
    monkeypatch.setattr(wiring, "set_up_logging", lambda level: set_up(level, descriptor))
    with serving() as client:
        yield client, lambda: [json.loads(line) for line in path.read_text().splitlines()]
    os.close(descriptor)


@pytest.mark.parametrize("given", ["quote-7", "a", "A.b_c-9", "x" * 128])
def test_a_request_id_is_echoed(client, given):
    assert client.get("/livez", headers={"x-request-id": given}).headers["x-request-id"] == given


@pytest.mark.parametrize("given", [None, "", "x" * 129, "a b", "a;b", "<script>", "a\tb"])
def test_a_request_without_a_proper_id_gets_one(client, given):
    headers = {} if given is None else {"x-request-id": given}
    first, second = (client.get("/livez", headers=headers).headers["x-request-id"] for _ in range(2))
    assert re.fullmatch(r"[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}", first)
    assert first != second


def test_a_line_is_written_for_each_request_without_its_body(logged):
    client, lines = logged
    headers = JSON | {"x-request-id": "quote-7", "traceparent": TRACE, "authorization": "Bearer secret"}
    client.post("/v1/double", content=GOOD_BODY, headers=headers)
    line = lines()[-1]
    assert line["logger"] == "loopslack.access"
    assert (line["method"], line["route"], line["status"]) == ("POST", "/v1/double", 200)
    assert (line["requestId"], line["bytes"]) == ("quote-7", 15)
    assert line["traceId"] == "4bf92f3577b34da6a3ce929d0e0e4736"
    assert line["parentId"] == "00f067aa0ba902b7"
    assert 0 < line["calculationMilliseconds"] < line["milliseconds"]
    assert re.fullmatch(r"\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z", line["time"])
    written = json.dumps(lines())
    assert "barg" not in written
    assert "secret" not in written
    assert "testclient" not in written


def test_a_line_of_a_refused_request_names_the_problem(logged):
    client, lines = logged
    refused = client.get("/nothing/here")
    line = lines()[-1]
    assert (line["status"], line["problem"], line["route"]) == (404, "not-found", "unmatched")
    assert line["path"] == "/nothing/here"
    assert line["instance"] == refused.json()["instance"]


def test_a_path_that_is_no_text_is_logged_all_the_same(logged):
    client, lines = logged
    status, *_ = ask_raw(client.service, [], path="/v1/\udcff\u00e4", method="GET")
    assert status == 404
    assert lines()[-1]["path"] == r"/v1/\udcff\xe4"


def test_a_fault_is_a_line_with_its_traceback(logged):
    client, lines = logged
    answered = client.post("/v1/fault", content=GOOD_BODY, headers=JSON)
    fault = next(line for line in lines() if line["level"] == "error")
    assert fault["requestId"] == answered.headers["x-request-id"]
    assert "ZeroDivisionError: the secret of the house" in fault["traceback"]


def test_the_access_log_can_be_switched_off(tmp_path, monkeypatch):
    written = []
    monkeypatch.setattr(wiring, "set_up_logging", lambda level: type("Sink", (), {"write": written.append})())
    with serving(access_log=False) as client:
        client.get("/livez")
    assert written == []


def test_a_full_disk_ends_no_request(monkeypatch):
    def full(descriptor, line):
        raise OSError(errno.ENOSPC, "No space left on device")

    with serving() as client:
        before = metric(client, "loopslack_log_lines_lost_total")
        monkeypatch.setattr("loopslack.observability.os.write", full)
        assert client.get("/livez").status_code == 200
        assert client.post("/v1/fault", content=GOOD_BODY, headers=JSON).status_code == 500
        monkeypatch.undo()
        assert metric(client, "loopslack_log_lines_lost_total") >= before + 3


def test_messages_of_the_service_are_lines_of_the_same_form():
    written = []
    handler = LineHandler(type("Sink", (Lines,), {"write": lambda self, line: written.append(line)})(0))
    record = logging.makeLogRecord(
        {"name": "loopslack.x", "levelname": "WARNING", "msg": "a %s", "args": ("b",)}
    )
    record.detail = 7
    handler.emit(record)
    assert written[0]["message"] == "a b"
    assert (written[0]["level"], written[0]["detail"]) == ("warning", "7")


@pytest.mark.parametrize(
    "header",
    [
        None,
        "",
        "00-" + "0" * 32 + "-00f067aa0ba902b7-01",
        "00-4bf92f3577b34da6a3ce929d0e0e4736-" + "0" * 16 + "-01",
        "ff-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01",
        TRACE.upper(),
        TRACE + "-extra",
        TRACE[:-1],
        "garbage",
    ],
)
def test_a_trace_that_is_none_is_ignored(header):
    assert trace_of(header) is None


def test_a_trace_of_a_later_version_is_read():
    assert trace_of(TRACE) == ("4bf92f3577b34da6a3ce929d0e0e4736", "00f067aa0ba902b7")
    assert trace_of("01" + TRACE[2:] + "-more") == trace_of(TRACE)


def metric(client, name, **labels):
    total = 0.0
    for line in client.get("/metrics").text.splitlines():
        if line.startswith((name + "{", name + " ")) and all(f'{k}="{v}"' in line for k, v in labels.items()):
            total += float(line.rpartition(" ")[2])
    return total


def test_requests_are_counted_by_route_method_and_status(client):
    count = "loopslack_http_request_seconds_count"
    kinds = [
        ({"route": "/v1/double", "method": "POST", "status": "200"}, ("POST", "/v1/double", GOOD_BODY)),
        ({"route": "/v1/double", "method": "POST", "status": "400"}, ("POST", "/v1/double", b"{")),
        ({"route": "unmatched", "method": "GET", "status": "404"}, ("GET", "/a/b/c", None)),
        ({"route": "unmatched", "method": "other", "status": "405"}, ("BREW", "/v1/double", None)),
        ({"route": "/livez", "method": "HEAD", "status": "200"}, ("HEAD", "/livez", None)),
    ]
    before = [metric(client, count, **labels) for labels, _ in kinds]
    for _, (method, path, body) in kinds:
        client.request(method, path, content=body, headers=JSON)
    assert [metric(client, count, **labels) for labels, _ in kinds] == [number + 1 for number in before]


def test_unknown_paths_do_not_make_series(client):
    for number in range(50):
        client.get(f"/unknown/{number}")
    assert "/unknown/" not in client.get("/metrics").text


def test_designs_advisories_and_refusals_are_counted(client):
    designs = {"operation": "double", "outcome": "holds"}
    before = (
        metric(client, "loopslack_designs_total", **designs),
        metric(client, "loopslack_advisories_total", code="steam-at-station"),
    )
    client.post("/v1/double", content=GOOD_BODY, headers=JSON)
    assert metric(client, "loopslack_designs_total", **designs) == before[0] + 1
    assert metric(client, "loopslack_advisories_total", code="steam-at-station") == before[1] + 1


def test_ready_means_loaded_and_not_stopping():
    with serving() as client:
        assert client.get("/readyz").json() == {"status": "pass"}
        client.service.readiness.draining = True
        stopping = client.get("/readyz")
        assert (stopping.status_code, stopping.json()["reason"]) == (503, "stopping")
        assert client.get("/livez").status_code == 200
        client.service.readiness.draining = False
        client.service.readiness.loaded = False
        assert client.get("/readyz").json() == {"status": "fail", "reason": "starting"}
        for path in ("/livez", "/readyz", "/metrics"):
            assert client.get(path).headers["cache-control"] == "no-store"
    assert client.service.readiness.draining
