"""One connection of a client: what it may cost, and how it ends.

Here live the time limits of one connection (request head, a client that stops reading, a body nobody wants), the
refusal of surplus ones, and the shape of the errors that never reach the application. Nothing here knows a route, a
design or a setting of the application; limits on a body and on the work live with the routes.

The protocol class of gunicorn is not a public interface. The names used here were read in gunicorn 27.0.1,
which the requirement files pin; `tests/faults/test_connections.py` opens every connection a limit must cut.
"""

# ruff: noqa: ANN401, SLF001 - a wrapper around private, untyped names; see above
# mypy: allow-subclassing-any
from __future__ import annotations

import os
import socket
import struct
from array import array
from collections.abc import Callable
from contextlib import suppress
from fcntl import ioctl
from http import HTTPStatus
from termios import FIONREAD
from typing import TYPE_CHECKING, Any

from gunicorn.asgi.protocol import (  # type: ignore[import-untyped]  # gunicorn ships no types
    _REASON_PHRASES,
    ASGIProtocol,
)

from loopslack.worker.limits import REFUSAL, answer

if TYPE_CHECKING:
    from asyncio import TimerHandle

    from loopslack.worker import Worker

LINGER_SECONDS = 1.0
"""How long a refused connection is drained, so that the refusal is not lost to a reset of unread bytes."""

LINGER_LONGEST = 10.0
LINGER_BYTES = 64_000_000
"""How long a connection may go on sending the body of a request that has been answered, and how much of it."""


for _status in HTTPStatus:  # gunicorn has no phrase for some, such as 406, and would call it unknown
    _REASON_PHRASES.setdefault(_status.value, _status.phrase)


def _unread(handle: int) -> int:
    """How many bytes have arrived on a connection that nobody has read yet."""
    count = array("i", [0])
    ioctl(handle, FIONREAD, count)
    return count[0]


class GuardedProtocol(ASGIProtocol):
    """One HTTP/1.1 connection that is cut when its client is slow, and refused when there are too many.

    * A request head must be complete a set time after the connection opened, or after its first byte on a
      connection kept alive (which also stays bounded by gunicorn's own idle limit).
    * A client that reads nothing for a set time while an answer waits for it loses the connection.
    * A client that closes its sending side after a request still gets the answer.
    * A client that sends its next request the moment it has the answer is not cut off: what arrives before
      the last request is put away waits. The server's own way keeps 64 kB of it and closes beyond.
    * A client that is answered before it has sent its whole request (too long a body, one of the wrong type) may go
      on for a while; what it sends is dropped. Closed at once, the connection would be reset by the unread bytes, and
      the answer lost with it.
    * Where `worker_connections` are open, a new connection takes the place of the kept-alive one that has been idle
      longest: after a flood such ones would hold every place until their idle limit.
    * Where none is idle, it is answered 503 without its request being looked at, and given a moment to take the
      answer; beyond twice that number it is closed right behind the answer.

    Not covered: HTTP/2, which the configuration does not switch on; a proxy that speaks it speaks HTTP/1.1
    here.
    """

    _closed: bool

    def __init__(self, worker: Worker) -> None:
        super().__init__(worker)
        self._limits = worker.limits
        self._timers: dict[str, TimerHandle] = {}
        self._refused = False
        self._head_begun = False
        self._no_more_requests = False
        self._early = b""
        self._told_off = False
        self._to_drop: int | None = None
        self.gives_way = False

    def connection_made(self, transport: Any) -> None:
        """Refuse the connection if there are too many, else start to wait for its first request."""
        super().connection_made(transport)
        self.worker.connections.add(self)
        allowed = self.cfg.worker_connections
        self._refused = self.worker.connections_beyond(allowed) > 0
        if self.worker.nr_conns > 2 * allowed:
            self._drop_what_has_come()
            self._safe_write(REFUSAL)
            self._close()
        elif self._refused:
            self._safe_write(REFUSAL)
            self._start("head", LINGER_SECONDS, self._close)
        else:
            self._start("head", self._limits.head, self._head_overdue)

    def data_received(self, data: bytes) -> None:
        """Read on, unless the connection has been refused: then what comes is dropped."""
        if self._refused or self.gives_way:
            return
        self.worker.idle.pop(self, None)
        if self._to_drop is not None:
            self._drop(data)
        elif self._is_answering():
            self._early += data
            self._pause_reading()
        else:
            # more may have come before what was kept was fed
            early, self._early = self._early, b""
            super().data_received(early + data)

    def eof_received(self) -> bool:
        """Keep a connection whose client has sent its last request but still waits for the answer.

        A client that has gone altogether looks the same from here; the first bytes written to it find out.
        """
        if self._to_drop is not None:
            return False
        receiver = self._body_receiver
        self._no_more_requests = receiver is not None and receiver._complete and not self._is_ssl
        return self._no_more_requests

    def pause_writing(self) -> None:
        """Give a client that does not keep up a set time to take what waits for it."""
        super().pause_writing()
        self._start("reader", self._limits.reader, self._cut)

    def resume_writing(self) -> None:
        """Note that the client reads again."""
        super().resume_writing()
        self._stop("reader")

    def connection_lost(self, exc: Exception | None) -> None:
        """Forget the connection and its timers."""
        for name in tuple(self._timers):
            self._stop(name)
        self.worker.forget(self)
        super().connection_lost(exc)

    def close_if_idle(self) -> None:
        """Close a kept-alive connection on which no further request has begun.

        One that has not sent its first request is left alone: its client has just been let in.
        """
        if self.req_count > 1 and self._awaiting_request and not self._head_begun:
            self._close()

    def give_way(self) -> bool:
        """Close to make room for another, unless the next request has just arrived, unread."""
        connection = self.transport.get_extra_info("socket")
        if self._closed or connection is None or _unread(connection.fileno()):
            return False
        self.gives_way = True
        self._close()
        return True

    def _is_answering(self) -> bool:
        """Whether a request has come completely and has not been put away yet."""
        receiver = self._body_receiver
        return self._current_request is not None and receiver is not None and receiver._complete

    def _resume_reading(self) -> None:
        """Read on; the server calls this just before it puts the last request away."""
        super()._resume_reading()
        if self._early:
            self.worker.loop.call_soon(self._feed_early)

    def _feed_early(self) -> None:
        if self._early and not (self._closed or self._is_answering()):
            self.data_received(b"")

    def _feed_callback_parser(self, data: bytes) -> bool:
        going_on: bool = super()._feed_callback_parser(data)
        if going_on and self._current_request is None and not self._closed:
            self._head_begun = True
            self._start("head", self._limits.head, self._head_overdue)
        return going_on

    def _on_headers_complete(self) -> bool:
        self._stop("head")
        self._head_begun = False
        skip_body: bool = super()._on_headers_complete()
        return skip_body

    def _arm_keepalive_timer(self) -> None:
        if self._no_more_requests:
            self._close()
        else:
            super()._arm_keepalive_timer()
            self.worker.idle[self] = None

    def _send_error_response(self, status: int, message: str, extra_headers: Any = ()) -> None:
        """Answer an error of the connection itself as a problem document, like the application's own."""
        self._told_off = True
        extra = "".join(f"{name}: {value}\r\n" for name, value in extra_headers)
        self._safe_write(answer(HTTPStatus(status), message[:200], extra))

    def _head_overdue(self) -> None:
        if self._head_begun and not self._closed:
            self._send_error_response(HTTPStatus.REQUEST_TIMEOUT, "The request head did not arrive in time.")
        self._close()

    def _start(self, name: str, seconds: float, overdue: Callable[[], None]) -> None:
        """Start a timer unless it runs already: a second piece of the same thing gains no time."""
        if name not in self._timers:
            self._timers[name] = self.worker.loop.call_later(seconds, overdue)

    def _stop(self, name: str) -> None:
        timer = self._timers.pop(name, None)
        if timer is not None:
            timer.cancel()

    def _close_transport(self) -> None:
        """Close, or first let a client that has been answered send what it is sending."""
        if self._closed or self._to_drop is not None:
            return
        receiver = self._body_receiver
        half_sent = self._told_off if receiver is None else not (receiver._complete or receiver._closed)
        if not (half_sent and self.transport.can_write_eof()) or self.transport.is_closing():
            super()._close_transport()
            return
        self._to_drop = LINGER_BYTES
        self.transport.write_eof()
        self._closed = True  # for the server, which must write nothing more
        self._resume_reading()
        self._start("longest", LINGER_LONGEST, self.transport.close)
        self._start("silence", LINGER_SECONDS, self.transport.close)

    def _drop(self, data: bytes) -> None:
        """Drop what comes after the answer, until it is too much or nothing comes any more."""
        self._to_drop = (self._to_drop or 0) - len(data)
        self._stop("silence")
        if self._to_drop > 0:
            self._start("silence", LINGER_SECONDS, self.transport.close)
        else:
            self.transport.close()

    def _drop_what_has_come(self) -> None:
        """Read what the system has received so far: a connection closed over unread bytes would be reset."""
        connection = self.transport.get_extra_info("socket")
        if connection is not None:
            with suppress(OSError):
                os.read(connection.fileno(), 65_536)

    def _close(self) -> None:
        """Close once everything written has been sent, and let the task that waits for a request go."""
        self._close_transport()
        if self._request_ready is not None:
            self._request_ready.set()

    def _cut(self) -> None:
        """Drop the connection and whatever waits to be written to it, in the system's buffers too."""
        self._closed = True
        connection = self.transport.get_extra_info("socket")
        if connection is not None:
            with suppress(OSError):
                connection.setsockopt(socket.SOL_SOCKET, socket.SO_LINGER, struct.pack("ii", 1, 0))
        self.transport.abort()
