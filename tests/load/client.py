"""Clients for load: an open loop that sends at a set rate come what may, and a closed loop of busy callers.

An open loop counts latency from the moment a request was due, so that a server that stalls cannot hide the
requests it kept from being sent. Sends to the loopback address only. Must not live here: what is asked, and what
a figure should be.
"""

from __future__ import annotations

import asyncio
import time
from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field

ADDRESS = "127.0.0.1"


@dataclass
class Report:
    """What came of a run: latencies of the served, counts by status, failures by kind and by the clock."""

    seconds: float = 0.0
    served: list[float] = field(default_factory=list)
    refused: list[float] = field(default_factory=list)
    statuses: Counter[int] = field(default_factory=Counter)
    failures: Counter[str] = field(default_factory=Counter)
    failed_at: list[float] = field(default_factory=list)
    retried: int = 0
    wrong: int = 0

    @property
    def rate(self) -> float:
        """Served requests per second."""
        return len(self.served) / self.seconds if self.seconds else 0.0

    def latency(self, share: float) -> float:
        """The latency, in ms, that a share of the served requests did not exceed."""
        if not self.served:
            return float("nan")
        ordered = sorted(self.served)
        return ordered[min(len(ordered) - 1, int(share * len(ordered)))] * 1e3

    def add(self, part: Report) -> None:
        """Take in what came of a further run."""
        self.seconds += part.seconds
        self.served += part.served
        self.refused += part.refused
        self.statuses += part.statuses
        self.failures += part.failures
        self.failed_at += part.failed_at
        self.retried += part.retried
        self.wrong += part.wrong

    @property
    def failed(self) -> int:
        """Requests without any answer."""
        return sum(self.failures.values())


Right = Callable[[bytes, bytes], bool]
"""Whether an answer (second) is the right one for a body (first)."""


@dataclass
class Target:
    """Where to send and what: a path, a method, the bodies in turn, and how to know a right answer."""

    port: int
    path: str = "/v1/loop-design"
    bodies: Sequence[bytes] = ()
    right: Right | None = None
    reuse: bool = True
    retries: int = 0
    timeout: float = 30.0

    def request(self, body: bytes | None) -> bytes:
        """The bytes of one request."""
        method = "GET" if body is None else "POST"
        head = f"{method} {self.path} HTTP/1.1\r\nHost: {ADDRESS}:{self.port}\r\n"
        if not self.reuse:
            head += "Connection: close\r\n"
        if body is not None:
            head += f"Content-Type: application/json\r\nContent-Length: {len(body)}\r\n"
        return head.encode() + b"\r\n" + (body or b"")


class Connection(asyncio.Protocol):
    """One HTTP/1.1 connection that carries one request at a time."""

    def __init__(self) -> None:
        self.transport: asyncio.Transport | None = None
        self.open = False
        self._received = bytearray()
        self._waiting: asyncio.Future[tuple[int, bytes]] | None = None

    def connection_made(self, transport: asyncio.BaseTransport) -> None:
        """Note that it is open."""
        assert isinstance(transport, asyncio.Transport)
        self.transport, self.open = transport, True

    def connection_lost(self, exc: Exception | None) -> None:
        """Fail the request that waits."""
        self.open = False
        if self._waiting is not None and not self._waiting.done():
            self._waiting.set_exception(exc or ConnectionResetError("closed before the answer"))

    def data_received(self, data: bytes) -> None:
        """Give the answer out once it is complete."""
        self._received += data
        end = self._received.find(b"\r\n\r\n")
        if end < 0 or self._waiting is None or self._waiting.done():
            return
        head = bytes(self._received[:end]).lower()
        if b"\r\ntransfer-encoding: chunked" in head:
            if not self._received.endswith(b"\r\n0\r\n\r\n"):
                return
            body = joined(bytes(self._received[end + 4 :]))
        else:
            length = int(head.partition(b"content-length:")[2].partition(b"\r\n")[0] or 0)
            if len(self._received) < end + 4 + length:
                return
            body = bytes(self._received[end + 4 : end + 4 + length])
        self._received.clear()
        if b"\r\nconnection: close" in head:
            self.close()
        self._waiting.set_result((int(head[9:12]), body))

    async def ask(self, request: bytes) -> tuple[int, bytes]:
        """Send one request and wait for its answer."""
        if self.transport is None:
            raise ConnectionError("not connected")
        self._waiting = asyncio.get_running_loop().create_future()
        self._received.clear()
        self.transport.write(request)
        return await self._waiting

    def close(self) -> None:
        """Close; nothing more is sent."""
        self.open = False
        if self.transport is not None:
            self.transport.close()


def joined(chunks: bytes) -> bytes:
    """The body of an answer sent in chunks (RFC 9112, chunked transfer coding, without extensions)."""
    body = bytearray()
    while chunks:
        size, _, chunks = chunks.partition(b"\r\n")
        length = int(size, 16)
        body += chunks[:length]
        chunks = chunks[length + 2 :]
    return bytes(body)


class Caller:
    """Sends requests to a target and keeps the report."""

    def __init__(self, target: Target) -> None:
        self.target = target
        self.report = Report()
        self._idle: list[Connection] = []

    async def call(self, number: int, due: float) -> None:
        """Send the request of a number; its latency counts from when it was due."""
        target = self.target
        body = target.bodies[number % len(target.bodies)] if target.bodies else None
        request = target.request(body)
        for attempt in range(target.retries + 1):
            try:
                status, answer = await asyncio.wait_for(self._once(request, anew=attempt > 0), target.timeout)
            except (OSError, TimeoutError) as error:
                if attempt < target.retries:
                    self.report.retried += 1
                    continue
                self.report.failures[type(error).__name__] += 1
                self.report.failed_at.append(time.perf_counter())
                return
            break
        elapsed = time.perf_counter() - due
        self.report.statuses[status] += 1
        if status == 200:
            self.report.served.append(elapsed)
            if target.right is not None and not target.right(body or b"", answer):
                self.report.wrong += 1
        else:
            self.report.refused.append(elapsed)

    async def _once(self, request: bytes, *, anew: bool) -> tuple[int, bytes]:
        """Send a request; one that is sent again, over a new connection: another kept one may be as dead."""
        while self._idle and not anew:
            connection = self._idle.pop()
            if connection.open:
                break
        else:
            loop = asyncio.get_running_loop()
            _, connection = await loop.create_connection(Connection, ADDRESS, self.target.port)
        try:
            answered = await connection.ask(request)
        except BaseException:
            connection.close()
            raise
        if connection.open and self.target.reuse:
            self._idle.append(connection)
        else:
            connection.close()
        return answered

    def close(self) -> None:
        """Close what is idle."""
        for connection in self._idle:
            connection.close()


async def open_loop(target: Target, rate: float, seconds: float) -> Report:
    """Send at a rate for a time, whatever the server does, and wait for what is still on its way."""
    caller = Caller(target)
    began = time.perf_counter()
    tasks = []
    for number in range(int(rate * seconds)):
        due = began + number / rate
        wait = due - time.perf_counter()
        if wait > 0:
            await asyncio.sleep(wait)
        tasks.append(asyncio.create_task(caller.call(number, due)))
    await asyncio.gather(*tasks)
    caller.report.seconds = max(seconds, time.perf_counter() - began)
    caller.close()
    return caller.report


async def closed_loop(target: Target, callers: int, seconds: float) -> Report:
    """Keep a number of callers busy for a time, each sending when the last answer has come."""
    caller = Caller(target)
    began = time.perf_counter()
    numbers = iter(range(10**9))

    async def busy() -> None:
        while time.perf_counter() - began < seconds:
            await caller.call(next(numbers), time.perf_counter())

    await asyncio.gather(*(busy() for _ in range(callers)))
    caller.report.seconds = time.perf_counter() - began
    caller.close()
    return caller.report
