"""The outermost wrapper: one id, one log line and one count for each request, and the last answer to a fault.

It sees everything, also what the framework refuses before a route is found. The others live in `wrappers`.
"""

import logging
import re
import time
import uuid
from typing import cast

from msgspec import Struct

from loopslack.api.asgi import ASGIApp, Message, Receive, Scope, Send
from loopslack.api.reply import NOTE, problem_reply
from loopslack.contract.refusals import Refused, occurrence
from loopslack.observability import Lines, RequestCounts, moment, trace_of

_logger = logging.getLogger("loopslack.request")
_REQUEST_ID = re.compile(rb"[A-Za-z0-9._-]{1,128}")
_METHODS = frozenset({"GET", "HEAD", "POST", "OPTIONS", "PUT", "PATCH", "DELETE", "TRACE", "CONNECT"})


class Note:
    """What is known of a request while it is answered."""

    __slots__ = ("calculation_seconds", "caller", "problem", "request_id", "trace")

    def __init__(self, request_id: str, trace: tuple[str, str] | None) -> None:
        self.request_id = request_id
        self.trace = trace
        self.caller = ""
        self.problem = ""
        self.calculation_seconds = 0.0


def note_of(scope: Scope) -> Note:
    """The notes on the request of this scope."""
    return cast(Note, scope[NOTE])


class Record:
    """Gives a request its id, counts and logs it, and answers 500 if nothing else did."""

    def __init__(self, app: ASGIApp, lines: Lines | None) -> None:
        self.app = app
        self._lines = lines
        self._counts = RequestCounts()

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Pass a request on and see what becomes of it."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return
        begun = time.perf_counter()
        note = scope[NOTE] = _note(scope)
        path = scope["path"]
        identity = (b"x-request-id", note.request_id.encode())
        status = 0
        length = 0

        async def observed(message: Message) -> None:
            nonlocal status, length
            if message["type"] == "http.response.start":
                status = message["status"]
                message["headers"] = [*message["headers"], identity]
            elif message["type"] == "http.response.body":
                length += len(message.get("body", b""))
            await send(message)

        try:
            await self.app(scope, receive, observed)
        except Exception as error:
            log_fault(note, error)
            if status:  # the answer has begun: only cutting the connection shows that it is not whole
                raise
            await problem_reply(internal_fault(), note.request_id)(scope, receive, observed)
        finally:
            seconds = time.perf_counter() - begun
            route = scope.get("path_template") or "unmatched"
            method = scope["method"] if scope["method"] in _METHODS else "other"
            self._counts.count(route, method, status or 499, seconds)
            if self._lines is not None:
                outcome = Outcome(method, route, status or 499, seconds, length)
                self._lines.write(_line(note, path, outcome))


def _note(scope: Scope) -> Note:
    request_id = traceparent = None
    for name, value in scope["headers"]:
        if name == b"x-request-id" and _REQUEST_ID.fullmatch(value):
            request_id = value.decode()
        elif name == b"traceparent":
            traceparent = value.decode("latin-1")
    return Note(request_id or str(uuid.uuid4()), trace_of(traceparent))


def internal_fault() -> Refused:
    """The only thing a caller learns of a fault of the service."""
    return Refused("internal-fault", "A fault of the service. It has been logged under the request id.")


def log_fault(note: Note, error: BaseException) -> None:
    """Log a fault with its traceback, under the id the caller was told."""
    note.problem = "internal-fault"
    _logger.error(
        "internal fault",
        exc_info=error,
        extra={"requestId": note.request_id, "traceId": note.trace[0] if note.trace else ""},
    )


class Outcome(Struct, frozen=True):
    """What became of a request."""

    method: str
    route: str
    status: int
    seconds: float
    length: int


def _line(note: Note, path: str, outcome: Outcome) -> dict[str, object]:
    line: dict[str, object] = {
        "time": moment(time.time()),
        "level": "info",
        "logger": "loopslack.access",
        "method": outcome.method,
        "route": outcome.route,
        "status": outcome.status,
        "milliseconds": round(outcome.seconds * 1e3, 3),
        "bytes": outcome.length,
        "requestId": note.request_id,
    }
    if outcome.route == "unmatched":
        line["path"] = path[:200].encode("ascii", "backslashreplace").decode()
    if note.trace is not None:
        line["traceId"], line["parentId"] = note.trace
    if note.caller:
        line["key"] = note.caller
    if note.calculation_seconds:
        line["calculationMilliseconds"] = round(note.calculation_seconds * 1e3, 3)
    if note.problem:
        line["problem"] = note.problem
        line["instance"] = occurrence(note.request_id)
    return line
