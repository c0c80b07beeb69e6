"""The gunicorn worker that serves the service: gunicorn's own ASGI worker with the limits it does not enforce.

Here live the time limits of one connection (request head, request body, a reader who stops reading), the
number of connections a worker accepts, and the shape of the errors that never reach the application. Nothing
here knows a route, a design or a setting of the application; limits on the work itself live with the routes.

The protocol class of gunicorn is not a public interface. The names used here were read in gunicorn 27.0.1,
which the requirement files pin, and `tests/api/test_worker.py` opens the connections each limit must cut.
"""

from __future__ import annotations

import json
import os
from asyncio import TimerHandle
from typing import Any

from gunicorn.asgi.protocol import ASGIProtocol
from gunicorn.workers import gasgi

REFUSAL = (
    b'{"type":"about:blank","title":"Service Unavailable","status":503,'
    b'"detail":"This worker serves as many connections as it may; try again in a second."}'
)
REFUSED = (
    b"HTTP/1.1 503 Service Unavailable\r\nContent-Type: application/problem+json\r\n"
    b"Cache-Control: no-store\r\nRetry-After: 1\r\nConnection: close\r\n"
    b"Content-Length: %d\r\n\r\n%s" % (len(REFUSAL), REFUSAL)
)
LINGER_SECONDS = 1.0
"""How long a refused connection is drained, so that the refusal is not lost to a reset of unread bytes."""


def seconds_allowed(variable: str, default: float) -> float:
    """A time limit from the environment, in seconds; a limit cannot be switched off.

    Raises:
        ValueError: the variable holds no number between 0.1 s and one hour.
    """
    text = os.environ.get(variable, "")
    seconds = float(text) if text else default
    if not 0.1 <= seconds <= 3600.0:
        raise ValueError(f"{variable} must lie between 0.1 and 3600 seconds, not {text!r}")
    return seconds


class GuardedProtocol(ASGIProtocol):
    """One HTTP/1.1 connection that is cut when its client is slow, and refused when there are too many.

    * A request head must be complete a set time after the connection opened, or after its first byte on a
      connection kept alive (which also stays bounded by gunicorn's own idle limit).
    * A request body must be complete a set time after its head. The application sees a disconnect, as with
      gunicorn's own limit between two pieces of a body, and answers 408.
    * A client that reads nothing for a set time while an answer waits for it loses the connection.
    * A client that closes its sending side after a request still gets the answer.
    * Beyond `worker_connections` a connection is answered 503 without being read.

    Not covered: HTTP/2, which the configuration does not switch on; a proxy that speaks it speaks HTTP/1.1 here.
    """

    def __init__(self, worker: Worker) -> None:
        super().__init__(worker)
        self._limits = worker.limits
        self._head_timer: TimerHandle | None = None
        self._body_timer: TimerHandle | None = None
        self._reader_timer: TimerHandle | None = None
        self._refused = False
        self._head_begun = False
        self._no_more_requests = False

    def connection_made(self, transport: Any) -> None:
        super().connection_made(transport)
        self.worker.connections.add(self)
        allowed = self.cfg.worker_connections
        if self.worker.nr_conns > 2 * allowed:
            self._refused = True
            self._cut()
        elif self.worker.nr_conns > allowed:
            self._refused = True
            self._safe_write(REFUSED)
            self._head_timer = self._after(LINGER_SECONDS, self._close)
        else:
            self._head_timer = self._after(self._limits.head, self._head_overdue)

    def data_received(self, data: bytes) -> None:
        if not self._refused:
            super().data_received(data)

    def _feed_callback_parser(self, data: bytes) -> bool:
        going_on: bool = super()._feed_callback_parser(data)
        if not going_on or self._closed:
            return going_on
        receiver = self._body_receiver
        if receiver is None:
            self._head_begun = True
            if self._head_timer is None:
                self._head_timer = self._after(self._limits.head, self._head_overdue)
        elif receiver._complete:
            self._body_timer = cancelled(self._body_timer)
        elif self._body_timer is None:
            self._body_timer = self._after(self._limits.body, self._body_overdue)
        return going_on

    def _on_headers_complete(self) -> bool:
        self._head_timer = cancelled(self._head_timer)
        self._head_begun = False
        skip_body: bool = super()._on_headers_complete()
        return skip_body

    def eof_received(self) -> bool:
        """Keep a connection whose client has sent its last request but still waits for the answer.

        A client that has gone altogether looks the same from here; the first bytes written to it find that out.
        """
        receiver = self._body_receiver
        waits_for_answer = receiver is not None and receiver._complete and not self._is_ssl
        self._no_more_requests = waits_for_answer
        return waits_for_answer

    def _arm_keepalive_timer(self) -> None:
        if self._no_more_requests:
            self._close()
        else:
            super()._arm_keepalive_timer()

    def pause_writing(self) -> None:
        super().pause_writing()
        self._reader_timer = cancelled(self._reader_timer) or self._after(self._limits.reader, self._cut)

    def resume_writing(self) -> None:
        super().resume_writing()
        self._reader_timer = cancelled(self._reader_timer)

    def connection_lost(self, exc: Exception | None) -> None:
        self._head_timer = cancelled(self._head_timer)
        self._body_timer = cancelled(self._body_timer)
        self._reader_timer = cancelled(self._reader_timer)
        self.worker.connections.discard(self)
        super().connection_lost(exc)

    def close_if_idle(self) -> None:
        """Close a kept-alive connection on which no further request has begun.

        A connection that has not sent its first request is left alone: its client has been promised an answer.
        """
        if self.req_count > 1 and self._awaiting_request and self._head_timer is None:
            self._close()

    def _send_error_response(self, status: int, message: str, extra_headers: Any = ()) -> None:
        """Answer an error of the connection itself as a problem document, like every error of the application."""
        reason = self._get_reason_phrase(status)
        if reason == "Unknown":
            reason = "Request Header Fields Too Large" if status == 431 else "Error"
        problem = {"type": "about:blank", "title": reason, "status": status, "detail": message[:200]}
        body = json.dumps(problem).encode("ascii")
        extra = "".join(f"{name}: {value}\r\n" for name, value in extra_headers)
        head = (
            f"HTTP/1.1 {status} {reason}\r\nContent-Type: application/problem+json\r\nCache-Control: no-store\r\n"
            f"Content-Length: {len(body)}\r\n{extra}Connection: close\r\n\r\n"
        )
        self._safe_write(head.encode("latin-1") + body)

    def _after(self, seconds: float, action: Any) -> TimerHandle:
        handle: TimerHandle = self.worker.loop.call_later(seconds, action)
        return handle

    def _head_overdue(self) -> None:
        self._head_timer = None
        if self._closed:
            return
        if self._head_begun:
            self._send_error_response(408, "The request head did not arrive in time.")
        self._close()

    def _body_overdue(self) -> None:
        self._body_timer = None
        receiver = self._body_receiver
        if receiver is not None and not receiver._complete:
            receiver._body_wait_expired = True
            receiver._wake_waiter()

    def _close(self) -> None:
        self._close_transport()
        if self._request_ready is not None:
            self._request_ready.set()

    def _cut(self) -> None:
        """Drop the connection and whatever waits to be written to it."""
        self._closed = True
        if self.transport is not None:
            self.transport.abort()


def cancelled(timer: TimerHandle | None) -> None:
    """Cancel a timer if one runs; answers None, for the name that held it."""
    if timer is not None:
        timer.cancel()


class Limits:
    """The time limits of a connection, read from the environment once per worker."""

    __slots__ = ("body", "head", "reader")

    def __init__(self) -> None:
        self.head = seconds_allowed("LOOPSLACK_HEAD_SECONDS", 5.0)
        self.body = seconds_allowed("LOOPSLACK_BODY_SECONDS", 60.0)
        self.reader = seconds_allowed("LOOPSLACK_READER_SECONDS", 30.0)


class Worker(gasgi.ASGIWorker):
    """gunicorn's ASGI worker, serving guarded connections and letting idle ones go when it stops."""

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.limits = Limits()
        self.connections: set[GuardedProtocol] = set()

    def handle_exit_signal(self) -> None:
        """Stop gracefully: requests finish, while idle kept-alive connections no longer hold the stop up."""
        super().handle_exit_signal()
        for connection in tuple(self.connections):
            connection.close_if_idle()


# The worker builds its connections from this name of its module and offers no other place to put a class of one's own.
gasgi.ASGIProtocol = GuardedProtocol
