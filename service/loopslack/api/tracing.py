"""OpenTelemetry spans, for an operator who asked for them: one for each request, child of the caller's own.

Without them the trace of a request is still in its log line. Where spans are sent, and how many of them, is told
by the standard variables (`OTEL_EXPORTER_OTLP_ENDPOINT`, `OTEL_TRACES_SAMPLER`). Needs the `tracing` extra.
"""

from typing import Any

from opentelemetry.exporter.otlp.proto.http.trace_exporter import OTLPSpanExporter
from opentelemetry.sdk.resources import Resource
from opentelemetry.sdk.trace import TracerProvider
from opentelemetry.sdk.trace.export import BatchSpanProcessor
from opentelemetry.trace import SpanKind, StatusCode, Tracer
from opentelemetry.trace.propagation.tracecontext import TraceContextTextMapPropagator

from loopslack import __version__
from loopslack.api.asgi import ASGIApp, Message, Receive, Scope, Send
from loopslack.api.record import note_of

_propagator = TraceContextTextMapPropagator()


class Tracing:
    """Makes a span of each request. Its attributes are those of the log line: no body, no address."""

    def __init__(self, app: ASGIApp) -> None:
        self.app = app
        self._provider: TracerProvider | None = None
        self._tracer: Tracer | None = None

    def start(self, processor: Any = None) -> None:  # noqa: ANN401 - any processor of the library
        """Begin to send spans; only in the worker itself, since the sending thread does not survive a fork."""
        self._provider = TracerProvider(
            resource=Resource.create({"service.name": "loopslack", "service.version": __version__})
        )
        self._provider.add_span_processor(processor or BatchSpanProcessor(OTLPSpanExporter()))
        self._tracer = self._provider.get_tracer("loopslack", __version__)

    def stop(self) -> None:
        """Send what is left and end."""
        if self._provider is not None:
            self._provider.shutdown()
            self._tracer = None

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Pass a request on within its span."""
        if scope["type"] != "http" or self._tracer is None:
            await self.app(scope, receive, send)
            return
        status = 0

        async def observed(message: Message) -> None:
            nonlocal status
            if message["type"] == "http.response.start":
                status = message["status"]
            await send(message)

        carrier = {
            name.decode("latin-1"): value.decode("latin-1")
            for name, value in scope["headers"]
            if name in (b"traceparent", b"tracestate")
        }
        method = scope["method"]
        span = self._tracer.start_span(method, context=_propagator.extract(carrier), kind=SpanKind.SERVER)
        try:
            await self.app(scope, receive, observed)
        finally:
            route = scope.get("path_template") or "unmatched"
            span.update_name(f"{method} {route}")
            note = note_of(scope)
            span.set_attributes(
                {
                    "http.request.method": method,
                    "http.route": route,
                    "http.response.status_code": status,
                    "loopslack.request_id": note.request_id,
                    "loopslack.problem": note.problem,
                }
            )
            if status >= 500 or not status:
                span.set_status(StatusCode.ERROR)
            span.end()
