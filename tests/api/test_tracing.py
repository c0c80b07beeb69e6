"""Spans of requests, where an operator asked for them."""

import sys

import pytest
from litestar.testing import TestClient
from opentelemetry.sdk.trace.export import SimpleSpanProcessor
from opentelemetry.sdk.trace.export.in_memory_span_exporter import InMemorySpanExporter
from opentelemetry.trace import StatusCode

from api.small_service import GOOD_BODY, JSON, small_app
from loopslack.settings import SettingsError

TRACE = "00-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01"


@pytest.fixture
def traced(monkeypatch):
    app = small_app(tracing=True)
    spans = InMemorySpanExporter()
    start = app.tracing.start
    monkeypatch.setattr(app.tracing, "start", lambda: start(SimpleSpanProcessor(spans)))
    with TestClient(app, raise_server_exceptions=False) as client:
        yield client, spans.get_finished_spans


def test_a_request_is_a_span_of_its_route_and_child_of_the_callers(traced):
    client, spans = traced
    client.post("/v1/double", content=GOOD_BODY, headers=JSON | {"traceparent": TRACE, "x-request-id": "q7"})
    (span,) = spans()
    assert span.name == "POST /v1/double"
    assert f"{span.context.trace_id:032x}" == "4bf92f3577b34da6a3ce929d0e0e4736"
    assert f"{span.parent.span_id:016x}" == "00f067aa0ba902b7"
    assert dict(span.attributes) == {
        "http.request.method": "POST",
        "http.route": "/v1/double",
        "http.response.status_code": 200,
        "loopslack.request_id": "q7",
        "loopslack.problem": "",
    }


def test_a_fault_is_a_span_of_an_error_and_a_refusal_is_not(traced):
    client, spans = traced
    client.post("/v1/fault", content=GOOD_BODY, headers=JSON)
    client.head("/nothing")
    fault, refusal = spans()
    assert (fault.status.status_code, fault.attributes["loopslack.problem"]) == (
        StatusCode.ERROR,
        "internal-fault",
    )
    assert (refusal.name, refusal.status.status_code) == ("HEAD unmatched", StatusCode.UNSET)


def test_without_the_library_the_setting_is_refused_by_name(monkeypatch):
    monkeypatch.delitem(sys.modules, "loopslack.api.tracing", raising=False)
    monkeypatch.setitem(sys.modules, "opentelemetry.sdk.trace", None)
    with pytest.raises(SettingsError, match="LOOPSLACK_TRACING"):
        small_app(tracing=True)


def test_without_the_setting_the_module_is_not_loaded(monkeypatch):
    monkeypatch.delitem(sys.modules, "loopslack.api.tracing", raising=False)
    small_app()
    assert "loopslack.api.tracing" not in sys.modules
