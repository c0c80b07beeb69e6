"""What the service tells its operator: log lines, metrics, lateness of its event loop, whether it is ready.

Nothing here knows a route or a framework, and nothing a caller sent is written anywhere but its request id,
its trace and the path: no body, no address, no key.
"""

import asyncio
import logging
import math
import os
import re
import sys
import time
from collections.abc import Iterable
from datetime import UTC, datetime
from typing import Any

import msgspec
from prometheus_client import (
    CONTENT_TYPE_LATEST,
    REGISTRY,
    CollectorRegistry,
    Counter,
    Gauge,
    Histogram,
    disable_created_metrics,
    generate_latest,
    multiprocess,
)

_encode = msgspec.json.Encoder().encode
_TRACEPARENT = re.compile(r"([0-9a-f]{2})-([0-9a-f]{32})-([0-9a-f]{16})-([0-9a-f]{2})(-.*)?")
_OWN_FIELDS = frozenset(vars(logging.makeLogRecord({}))) | {"message", "asctime", "taskName"}

disable_created_metrics()  # type: ignore[no-untyped-call] # a second series for each, of no use here

LATENCY_BOUNDS = (0.0005, 0.001, 0.0025, 0.005, 0.01, 0.025, 0.05, 0.1, 0.25, 1.0, 5.0)

REQUESTS = Histogram(
    "loopslack_http_request_seconds",
    "Requests and the time they took, by route, method and status.",
    ["route", "method", "status"],
    buckets=LATENCY_BOUNDS,
)
DESIGNS = Counter(
    "loopslack_designs", "Designs answered, by operation and verdict.", ["operation", "outcome"]
)
ADVISORIES = Counter("loopslack_advisories", "Advisories given, by code.", ["code"])
REFUSALS = Counter("loopslack_refusals", "Requests refused for the service's sake, by reason.", ["reason"])
LOST_LINES = Counter("loopslack_log_lines_lost", "Log lines that could not be written.")
LOST_SIDES = Counter(
    "loopslack_side_processes_lost", "Side processes that ended in the middle of their work."
)
LAG = Gauge("loopslack_event_loop_lag_seconds", "Lateness of the event loop.", multiprocess_mode="livemax")


class Lines:
    """Writes log lines to a file descriptor, each in one piece, and never lets a full disk end a request."""

    def __init__(self, descriptor: int) -> None:
        self._descriptor = descriptor

    def write(self, line: dict[str, object]) -> None:
        """Write one line, or count it as lost."""
        try:
            os.write(self._descriptor, _encode(line) + b"\n")
        except OSError:
            LOST_LINES.inc()


class LineHandler(logging.Handler):
    """Sends the messages of every library as lines of the same form."""

    def __init__(self, lines: Lines) -> None:
        super().__init__()
        self._lines = lines

    def emit(self, record: logging.LogRecord) -> None:
        """Write a message with whatever fields were given beside it, and the traceback if there is one."""
        line: dict[str, object] = {
            "time": moment(record.created),
            "level": record.levelname.lower(),
            "logger": record.name,
            "message": record.getMessage(),
        }
        line |= {name: str(value) for name, value in vars(record).items() if name not in _OWN_FIELDS}
        if record.exc_info:
            line["traceback"] = logging.Formatter().formatException(record.exc_info)
        self._lines.write(line)


def set_up_logging(level: str, descriptor: int | None = None) -> Lines:
    """Send all log messages from here on as JSON lines to standard error, replacing our earlier handlers."""
    lines = Lines(sys.__stderr__.fileno() if descriptor is None and sys.__stderr__ else descriptor or 2)
    root = logging.getLogger("loopslack")
    for handler in list(root.handlers):
        if isinstance(handler, LineHandler):
            root.removeHandler(handler)
    root.addHandler(LineHandler(lines))
    root.setLevel(level.upper())
    return lines


def moment(seconds: float) -> str:
    """A point in time as RFC 3339 in UTC, to the millisecond."""
    return datetime.fromtimestamp(seconds, UTC).isoformat(timespec="milliseconds").replace("+00:00", "Z")


def trace_of(traceparent: str | None) -> tuple[str, str] | None:
    """Trace id and parent id of a W3C `traceparent` header, or None where it is absent or not valid."""
    found = _TRACEPARENT.fullmatch(traceparent) if traceparent else None
    if found is None or found[1] == "ff" or (found[1] == "00" and found[5]):
        return None
    if not found[2].strip("0") or not found[3].strip("0"):
        return None
    return found[2], found[3]


class RequestCounts:
    """Counts requests, remembering the series of each kind: looking one up costs more than counting."""

    def __init__(self) -> None:
        self._series: dict[tuple[str, str, int], Any] = {}

    def count(self, route: str, method: str, status: int, seconds: float) -> None:
        """Count one request. `route` must be a template, not a path: each value is a series that stays."""
        key = (route, method, status)
        series = self._series.get(key)
        if series is None:
            series = self._series[key] = REQUESTS.labels(route, method, str(status))
        series.observe(seconds)


def count_design(operation: str, outcome: str, advisories: Iterable[str] = ()) -> None:
    """Count a design by its verdict, and the advisories it was given."""
    DESIGNS.labels(operation, outcome).inc()
    for code in advisories:
        ADVISORIES.labels(code).inc()


def count_refusal(reason: str) -> None:
    """Count a request refused to protect the service: `lag`, `costly`, `batch`, `rate` or `key`."""
    REFUSALS.labels(reason).inc()


def count_lost_side() -> None:
    """Count a side process that ended without an answer, for instance for want of memory."""
    LOST_SIDES.inc()


def metrics_page() -> tuple[bytes, str]:
    """All metrics in the Prometheus text format, summed over the workers where there are several."""
    registry = REGISTRY
    if os.environ.get("PROMETHEUS_MULTIPROC_DIR"):
        registry = CollectorRegistry()
        multiprocess.MultiProcessCollector(registry)  # type: ignore[no-untyped-call]  # the library has no types here
    return generate_latest(registry), CONTENT_TYPE_LATEST


class LoopLag:
    """How late the event loop runs: the time a short sleep takes beyond its length.

    Requests in progress are no measure of load here, since a computation runs to its end before the next
    request is looked at: the queue is in the sockets, and lateness is what shows it.
    """

    def __init__(self, period: float = 0.01) -> None:
        self.seconds = 0.0
        self._period = period
        self._due = math.inf

    @property
    def now(self) -> float:
        """How late it is at this moment, s: as measured last, and what the turn that is on takes beyond.

        A flood brings hundreds of requests in one turn of the loop; the sleep would show it when all are answered. And
        what this turn reads may have arrived at any time in the last one: a request waits for both.
        """
        return self.seconds + max(0.0, time.perf_counter() - self._due)

    async def watch(self) -> None:
        """Measure until cancelled. A late moment counts for a while: it halves with each measurement."""
        turns = 0
        while True:
            self._due = time.perf_counter() + self._period
            await asyncio.sleep(self._period)
            late = time.perf_counter() - self._due
            self.seconds = max(late, self.seconds / 2 if self.seconds > 0.001 else 0.0)
            turns += 1
            if turns % 100 == 0:
                LAG.set(self.seconds)


class Readiness:
    """Whether this worker should be sent requests: not before its data are loaded, nor once it stops.

    `failure` names what it has lost and cannot get again; the server's worker then stops and is replaced.
    """

    def __init__(self) -> None:
        self.loaded = False
        self.draining = False
        self.failure = ""

    @property
    def reason(self) -> str:
        """Why not, or an empty text."""
        if self.draining:
            return "stopping"
        if self.failure:
            return self.failure
        return "" if self.loaded else "starting"


READINESS = Readiness()
"""The readiness of this process; the server's worker sets `draining` when it is told to stop."""
