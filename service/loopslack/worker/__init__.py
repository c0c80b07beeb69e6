"""The gunicorn worker of the service: gunicorn's own ASGI worker with the limits it does not enforce.

Here lives what a worker does as a whole; what one connection may do stands in `connection`. The worker's names that
are used here were read in gunicorn 27.0.1, which the requirement files pin.
"""

# ruff: noqa: ANN401, SLF001 - a wrapper around private, untyped names; see above
# mypy: allow-subclassing-any
from __future__ import annotations

import time
from email.utils import formatdate
from typing import Any

from gunicorn.asgi import protocol  # type: ignore[import-untyped]  # gunicorn ships no types
from gunicorn.asgi.protocol import ASGIProtocol  # type: ignore[import-untyped]  # as above
from gunicorn.workers import gasgi  # type: ignore[import-untyped]  # as above

from loopslack.observability import READINESS
from loopslack.worker.connection import GuardedProtocol
from loopslack.worker.limits import Limits


class DateHeader:
    """The `Date` of answers, made anew every second.

    gunicorn's own is kept until the wall clock has gone on by a second, so that a clock set back leaves it in the
    future until the clock has caught up.
    """

    def __init__(self) -> None:
        self._made_at = -2.0
        self._line = b""

    def __call__(self) -> bytes:
        """Give the header line."""
        now = time.monotonic()
        if now - self._made_at >= 1.0:
            self._made_at = now
            self._line = f"Date: {formatdate(usegmt=True)}\r\n".encode("ascii")
        return self._line


class Worker(gasgi.ASGIWorker):
    """gunicorn's ASGI worker, serving guarded connections and letting idle ones go when it stops."""

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.limits = Limits()
        self.connections: set[GuardedProtocol] = set()
        # Kept-alive connections without a request, the one that has been so longest first.
        self.idle: dict[GuardedProtocol, None] = {}
        self._giving_way = 0
        self._listens = False

    def load_wsgi(self) -> None:
        """Load the application, and let it fork what it needs while there is no event loop to be forked with."""
        super().load_wsgi()
        before_serving = getattr(self.asgi, "before_serving", None)
        if before_serving is not None:
            before_serving()

    def connections_beyond(self, allowed: int) -> int:
        """How many connections are too many, after idle ones have made what room they can."""
        surplus: int = self.nr_conns - self._giving_way - allowed
        while surplus > 0 and self.idle:
            longest = next(iter(self.idle))
            del self.idle[longest]
            if longest.give_way():
                self._giving_way += 1
                surplus -= 1
        return surplus

    def forget(self, connection: GuardedProtocol) -> None:
        """Note that a connection has gone."""
        self.connections.discard(connection)
        self.idle.pop(connection, None)
        self._giving_way -= connection.gives_way

    def notify(self) -> None:
        """Say once a second that the worker lives, or stop where it has lost what it cannot get again."""
        if READINESS.failure:
            self.handle_exit_signal()
        if not self._listens:
            self._listen_as_configured()
        super().notify()

    def _listen_as_configured(self) -> None:
        """Let as many connections wait as `backlog` says: the event loop has just cut the queue to a hundred."""
        for listener in self.sockets:
            listener.sock.listen(self.cfg.backlog)
        self._listens = True

    def handle_exit_signal(self) -> None:
        """Stop gracefully: requests finish, and idle kept-alive connections do not hold the stop up."""
        READINESS.draining = True
        super().handle_exit_signal()
        for connection in tuple(self.connections):
            connection.close_if_idle()


# gunicorn looks for its compiled parser once per class and reads half of what it found from the base class:
# asked on the base class, the answer holds for both.
ASGIProtocol._check_h1c_protocol_available()
# The worker makes its connections from this name of its module; there is no other place to put a class.
gasgi.ASGIProtocol = GuardedProtocol
protocol._get_cached_date_header = DateHeader()
