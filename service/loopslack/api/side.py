"""A side process as the event loop sees it: something that is asked, in turn, and may be lost.

Work that takes longer than the event loop may be held is done by a process beside it, for two reasons. A thread
would share the interpreter: short questions would wait for it at every step (their 99th percentile was five times
that of quiet times, own measurement). And a thread cannot be stopped: here work that is given up is ended, and the next
one gets a process that is new. What is asked, and how many may wait, is a matter of `costly` and `many_places`.
"""

import asyncio
import logging
from collections.abc import Callable
from math import inf
from time import monotonic

from loopslack.api.nursery import ANSWER_HEAD, HEAD, Nursery, NurseryLostError, Work
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness, count_lost_side

Streams = tuple[asyncio.StreamReader, asyncio.StreamWriter]

_logger = logging.getLogger("loopslack.side")

GRACE_SECONDS = 1.0
"""How much longer than its asker a side process waits for its own end; it is ended from here long before."""


class SideLostError(Exception):
    """The side process ended in the middle of its work."""


class _Line:
    """The connection to a side process and the turn to use it, both of which belong to one event loop."""

    def __init__(self, loop: asyncio.AbstractEventLoop) -> None:
        self.loop = loop
        self.turn = asyncio.Lock()
        self.streams: Streams | None = None

    def drop(self) -> None:
        """Close the connection; a loop that is closed has no connections any more."""
        if self.streams is not None and not self.loop.is_closed():
            self.streams[1].close()
        self.streams = None


class Side:
    """One kind of work and the process that does it, begun when it is first needed.

    `too_late` says why this process can no longer be forked for it, or nothing. A process that has grown by more than
    `most_grown` bytes is ended after its answer; only for work that keeps nothing from one message to the next.
    """

    def __init__(
        self,
        prepare: Callable[[], Work],
        readiness: Readiness,
        too_late: Callable[[], str] = str,
        most_grown: float = inf,
    ) -> None:
        self._nursery = Nursery(prepare, too_late, most_grown)
        self._readiness = readiness
        self._line: _Line | None = None

    def start(self) -> None:
        """Get ready to begin a process; called before the event loop runs where there is a choice."""
        self._nursery.start()

    async def ask(self, message: bytes, seconds: float) -> bytes:
        """The answer to a message, when its turn has come.

        A caller that no longer waits (it is cancelled, or its time is up) ends the process with its work.

        Raises:
            SideLostError: the process ended without an answer; the next message gets a new one.
            Refused: 503, because no process can be begun any more and the worker is about to stop.
            RuntimeError: none was begun in time, and now it is too late.

        """
        begun = monotonic()
        loop = asyncio.get_running_loop()
        line = self._line
        if line is None or line.loop is not loop:
            line = self._line = _Line(loop)
        async with line.turn:
            streams = line.streams
            if streams is None or streams[0].at_eof():
                streams = await self._begin(line)
            left = max(0.0, seconds - (monotonic() - begun)) + GRACE_SECONDS
            return await self._exchange(line, streams, HEAD.pack(len(message), left) + message)

    async def _begin(self, line: _Line) -> Streams:
        line.drop()
        try:
            connection = await self._nursery.begin()
        except NurseryLostError:
            if not self._readiness.failure:
                _logger.critical("the nursery of side processes was ended; the worker stops")
            self._readiness.failure = "lost its nursery"
            detail = "This worker is about to be replaced."
            raise Refused("overloaded", detail, headers={"Retry-After": "2"}) from None
        line.streams = await asyncio.open_unix_connection(sock=connection)
        return line.streams

    async def _exchange(self, line: _Line, streams: Streams, message: bytes) -> bytes:
        reader, writer = streams
        answered = False
        try:
            writer.write(message)
            length, worn = ANSWER_HEAD.unpack(await reader.readexactly(ANSWER_HEAD.size))
            answer = await reader.readexactly(length)
            answered = not worn  # one that is worn out is ended; the next message gets a new one
        except (OSError, asyncio.IncompleteReadError):
            count_lost_side()
            raise SideLostError("the side process ended in the middle of its work") from None
        finally:
            if not answered:
                line.drop()
                self._nursery.end()
        return answer

    def close(self) -> None:
        """End the process; the next message begins another."""
        if self._line is not None:
            self._line.drop()
            self._line = None
        self._nursery.close()
