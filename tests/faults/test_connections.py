"""What one connection may do to the server: a slow or surplus one is cut, an honest one is served."""

from __future__ import annotations

import json
import os
import signal
import socket
import time
from collections.abc import Iterator
from contextlib import suppress
from importlib.util import find_spec
from pathlib import Path

import pytest

from faults.server import Server, serving
from loopslack.worker.connection import LINGER_BYTES, LINGER_LONGEST

REQUEST = b"POST /echo HTTP/1.1\r\nHost: a\r\nContent-Length: 5\r\n\r\nhello"
LIMITS = {
    "LOOPSLACK_HEAD_SECONDS": "0.7",
    "LOOPSLACK_READER_SECONDS": "0.8",
    "LOOPSLACK_KEEPALIVE_SECONDS": "3",
    "LOOPSLACK_CONNECTIONS": "8",
}


PARSERS = ["python", "fast"] if find_spec("gunicorn_h1c") else ["python"]
"""The compiled parser is optional; the stage `connections` of the full run installs it."""


@pytest.fixture(scope="module", params=PARSERS)
def server(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Iterator[Server]:
    environment = dict(LIMITS, GUNICORN_CMD_ARGS=f"--http-parser {request.param}")
    folder = tmp_path_factory.mktemp("server")
    with serving(folder, "faults.small_app:app", environment=environment) as started:
        yield started


def read_until_closed(connection: socket.socket) -> tuple[bytes, float]:
    """Everything the server still sends, and the seconds until it closed the connection."""
    began = time.monotonic()
    received = bytearray()
    while piece := connection.recv(65536):
        received += piece
    return bytes(received), time.monotonic() - began


def read_answer(connection: socket.socket) -> bytes:
    """One answer of the small application, whose body is a single character."""
    received = b""
    while b"\r\n\r\n" not in received or received.endswith(b"\r\n\r\n"):
        piece = connection.recv(4096)
        assert piece, f"closed after {received!r}"
        received += piece
    return received


def test_a_silent_connection_is_closed_without_a_word(server: Server) -> None:
    with server.connect() as connection:
        received, seconds = read_until_closed(connection)
    assert received == b""
    assert 0.5 < seconds < 2.0


def test_half_a_request_head_is_answered_408_as_a_problem_document(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(REQUEST[:25])
        received, seconds = read_until_closed(connection)
    head, _, body = received.partition(b"\r\n\r\n")
    assert head.startswith(b"HTTP/1.1 408 ")
    assert b"Content-Type: application/problem+json" in head
    assert json.loads(body)["status"] == 408
    assert seconds < 2.0


def test_a_head_sent_one_byte_at_a_time_gains_no_time(server: Server) -> None:
    with server.connect() as connection:
        connection.settimeout(0.1)
        began = time.monotonic()
        received = b""
        while not received and time.monotonic() - began < 5.0:
            connection.sendall(b"P")
            with suppress(TimeoutError):
                received = connection.recv(4096)
        assert received.startswith(b"HTTP/1.1 408 ")
        assert time.monotonic() - began < 2.0


def test_half_of_a_later_request_on_a_kept_alive_connection_is_cut_too(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(REQUEST)
        assert read_answer(connection).endswith(b"5")
        connection.sendall(REQUEST[:25])
        received, seconds = read_until_closed(connection)
    assert received.startswith(b"HTTP/1.1 408 ")
    assert seconds < 2.0


def test_half_of_a_pipelined_request_is_cut_too(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(REQUEST + REQUEST[:25])
        received, seconds = read_until_closed(connection)
    assert received.startswith(b"HTTP/1.1 200 ")
    assert b"HTTP/1.1 408 " in received
    assert seconds < 2.0


def test_an_idle_kept_alive_connection_outlives_the_limit_on_a_head(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(REQUEST)
        read_answer(connection)
        time.sleep(1.5)
        connection.sendall(REQUEST)
        assert read_answer(connection).startswith(b"HTTP/1.1 200 ")


def test_a_client_that_stops_reading_loses_the_connection(server: Server) -> None:
    with server.connect() as connection:
        connection.setsockopt(socket.SOL_SOCKET, socket.SO_RCVBUF, 8192)
        connection.sendall(b"GET /large HTTP/1.1\r\nHost: a\r\n\r\n")
        time.sleep(3.0)
        received = 0
        with suppress(ConnectionResetError):
            while piece := connection.recv(65536):
                received += len(piece)
    assert received < 30_000_000


def test_a_client_that_reads_slowly_gets_everything(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(b"GET /large HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n")
        received = 0
        while piece := connection.recv(262144):
            received += len(piece)
            time.sleep(0.02)
    assert received > 30_000_000


def test_a_half_closed_connection_still_gets_its_answer(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(REQUEST.replace(b"/echo", b"/slow"))
        connection.shutdown(socket.SHUT_WR)
        received, seconds = read_until_closed(connection)
    assert received.startswith(b"HTTP/1.1 200 ")
    assert received.endswith(b"5")
    assert seconds < 2.0


def test_a_connection_beyond_the_limit_is_refused_with_503_and_room_comes_back(server: Server) -> None:
    held = [server.connect() for _ in range(8)]
    try:
        for connection in held:
            connection.sendall(REQUEST.replace(b"/echo", b"/slow"))
        with server.connect() as surplus:
            surplus.sendall(REQUEST)
            received, seconds = read_until_closed(surplus)
        head, _, body = received.partition(b"\r\n\r\n")
        assert head.startswith(b"HTTP/1.1 503 ")
        assert b"Retry-After: 1" in head
        assert json.loads(body)["status"] == 503
        assert seconds < 2.0
    finally:
        for connection in held:
            connection.close()
    time.sleep(0.3)
    with server.connect() as connection:
        connection.sendall(REQUEST)
        assert read_answer(connection).startswith(b"HTTP/1.1 200 ")


def test_of_idle_connections_the_one_idle_longest_gives_way_to_a_new_one(server: Server) -> None:
    held = [server.connect() for _ in range(8)]
    try:
        for connection in held:
            connection.sendall(REQUEST)
            read_answer(connection)
        held[0].sendall(REQUEST)  # so that the second has been idle longest
        read_answer(held[0])
        with server.connect() as another:
            another.sendall(REQUEST)
            assert read_answer(another).startswith(b"HTTP/1.1 200 ")
            assert read_until_closed(held[1])[0] == b""
            for connection in (held[0], *held[2:]):
                connection.sendall(REQUEST)
                assert read_answer(connection).startswith(b"HTTP/1.1 200 ")
    finally:
        for connection in held:
            connection.close()
    time.sleep(0.3)


def test_after_a_flood_of_kept_connections_others_find_room_at_once(server: Server) -> None:
    for _ in range(5):
        flood = [server.connect() for _ in range(8)]
        for connection in flood:
            connection.sendall(REQUEST)
            assert read_answer(connection).startswith(b"HTTP/1.1 200 ")
    for connection in flood:
        connection.close()
    time.sleep(0.3)


def test_as_many_connections_may_wait_as_are_configured(tmp_path: Path) -> None:
    with serving(tmp_path, "faults.small_app:app") as started:
        time.sleep(1.2)  # the worker sets the length of the queue with its first sign of life
        [worker] = started.workers()
        os.kill(worker, signal.SIGSTOP)
        try:
            waiting = [started.connect(timeout=2.0) for _ in range(400)]
        finally:
            os.kill(worker, signal.SIGCONT)
        for connection in waiting:
            connection.close()


def test_of_many_connections_at_once_each_is_answered(server: Server) -> None:
    many = [server.connect() for _ in range(60)]
    for connection in many:
        connection.sendall(REQUEST.replace(b"/echo", b"/slow"))
    answers = [connection.recv(65536) for connection in many]
    for connection in many:
        connection.close()
    statuses = [answer[9:12] for answer in answers]
    assert statuses.count(b"200") == 8
    assert statuses.count(b"503") == 52
    time.sleep(0.3)  # until their places are free again


@pytest.mark.parametrize(
    ("request_bytes", "status"),
    [
        (b"GET /" + b"x" * 5000 + b" HTTP/1.1\r\nHost: a\r\n\r\n", 414),
        (b"GET / HTTP/1.1\r\nHost: a\r\nX: " + b"x" * 9000 + b"\r\n\r\n", 431),
        (b"GET / HTTP/1.1\r\n" + b"A: b\r\n" * 60 + b"\r\n", 431),
        (b"GET / HTTP/1.1\r\nHost: a\r\nBad Name: x\r\n\r\n", 400),
        (b"POST / HTTP/1.1\r\nHost: a\r\nContent-Length: 5\r\nTransfer-Encoding: chunked\r\n\r\nhello", 400),
        (b"\x16\x03\x01\x02\x00\x01\x00\x01\xfc\x03\x03\r\n\r\n", 400),
    ],
)
def test_an_error_of_the_connection_itself_is_a_problem_document(
    server: Server, request_bytes: bytes, status: int
) -> None:
    with server.connect() as connection:
        connection.sendall(request_bytes)
        received, _ = read_until_closed(connection)
    head, _, body = received.partition(b"\r\n\r\n")
    assert head.startswith(b"HTTP/1.1 %d " % status), head
    assert b"Content-Type: application/problem+json" in head
    assert json.loads(body)["status"] == status


def test_a_graceful_stop_does_not_wait_for_idle_connections(tmp_path: Path) -> None:
    application = "faults.small_app:app"
    with serving(tmp_path, application) as started, started.connect() as idle, started.connect() as busy:
        idle.sendall(REQUEST)
        read_answer(idle)
        busy.sendall(REQUEST.replace(b"/echo", b"/slow"))
        time.sleep(0.1)
        seconds = started.stop(within=8.0)
        assert read_answer(busy).startswith(b"HTTP/1.1 200 ")
    assert seconds < 4.0


def send_all_then_read(server: Server, head: bytes, length: int, pause: float = 0.0) -> tuple[bytes, int]:
    """Send a request as a simple client does, the whole body before it reads; what came back, and what was sent."""
    piece, sent = b" " * 65_536, 0
    with server.connect() as connection:
        connection.sendall(head)
        with suppress(ConnectionError):
            while sent < length:
                connection.sendall(piece)
                sent += len(piece)
                time.sleep(pause)
        received = bytearray()
        with suppress(ConnectionError):
            while got := connection.recv(65_536):
                received += got
    return bytes(received), sent


LARGE = 50_000_000
TOO_LARGE = b"POST /no-more HTTP/1.1\r\nHost: a\r\nContent-Length: %d\r\n\r\n" % LARGE


def test_a_client_that_sends_far_too_much_gets_to_read_why_it_was_refused(server: Server) -> None:
    for _ in range(5):
        received, sent = send_all_then_read(server, TOO_LARGE, LARGE)
        assert received.startswith(b"HTTP/1.1 413 ")
        assert received.endswith(b"too much")
        assert sent >= LARGE


def test_what_a_client_sends_after_its_answer_is_dropped_up_to_a_bound(server: Server) -> None:
    endless = b"POST /no-more HTTP/1.1\r\nHost: a\r\nTransfer-Encoding: chunked\r\n\r\n" + b"FFFFFFFF\r\n"
    _, sent = send_all_then_read(server, endless, 10 * LINGER_BYTES)
    assert sent < 2 * LINGER_BYTES


def test_a_client_that_sends_slowly_after_its_answer_is_closed_in_bounded_time(server: Server) -> None:
    began = time.monotonic()
    send_all_then_read(server, TOO_LARGE, LARGE, pause=0.1)
    assert time.monotonic() - began < LINGER_LONGEST + 3.0


def keep_sending(connection: socket.socket) -> None:
    """Send for a second, or until the connection breaks."""
    for _ in range(50):
        connection.sendall(b"x" * 65_536)
        time.sleep(0.02)


def test_a_client_that_falls_silent_after_its_answer_is_closed_soon(server: Server) -> None:
    with server.connect() as connection:
        connection.sendall(TOO_LARGE + b"half")
        received, seconds = read_until_closed(connection)
        assert received.startswith(b"HTTP/1.1 413 ")
        assert seconds < 1.0
        time.sleep(1.5)
        with pytest.raises(ConnectionError):
            keep_sending(connection)


def test_others_are_served_while_a_body_is_dropped(server: Server) -> None:
    with server.connect() as sender, server.connect() as other:
        sender.sendall(TOO_LARGE + b" " * 1_000_000)
        other.sendall(REQUEST)
        assert read_answer(other).startswith(b"HTTP/1.1 200 ")
