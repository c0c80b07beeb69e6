"""How many batches and streams a worker takes on, and whose turn it is in the side process that answers them.

A design takes longer than the event loop may be held, and some take much longer than others. So designs are
answered beside the loop, by one process for all batches of a worker: they take turns in slices of `SLICE_SECONDS`
(see `many_work`), a short batch does not wait for a long one to end, and a client that reads slowly holds nobody
up. Nothing here knows what a batch is made of.
"""

import asyncio
from collections.abc import Iterator
from contextlib import contextmanager
from time import monotonic

from loopslack.api.side import Side, SideLostError
from loopslack.api.side_words import Begin, Begun, Next, Slice, encode, read_many_reply
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness, count_refusal

LAST_SECONDS = 10.0
"""How long a batch may go on once the worker was told to stop; the server gives it 20 s."""


class ManyPlaces:
    """The batches and streams of one worker."""

    def __init__(self, side: Side, waiting: int, slice_seconds: float, readiness: Readiness) -> None:
        self._side = side
        self._places = waiting + 1
        self._slice_seconds = slice_seconds
        self._readiness = readiness
        self._stop_at: float | None = None
        self._number = 0
        self._ended: list[int] = []
        self.taken = 0

    @property
    def is_full(self) -> bool:
        """Whether a further batch would be refused."""
        return self.taken >= self._places

    @contextmanager
    def place(self) -> Iterator[None]:
        """Hold a place as long as the block runs.

        Raises:
            Refused: 503, because all are taken.

        """
        if self.is_full:
            count_refusal("batch")
            detail = "As many batches and streams as this worker takes on are being answered already."
            raise Refused("overloaded", detail, headers={"Retry-After": "5"})
        self.taken += 1
        try:
            yield
        finally:
            self.taken -= 1

    async def begin(self, form: str, parts: tuple[bytes, ...], seconds: float) -> int:
        """Hand over a batch or stream that may take so many seconds; the number it is asked for by from here on.

        Raises:
            Refused: it cannot be answered as a whole.
            SideFault, SideLostError: as `next_slice`.

        """
        self._number += 1
        number = self._number
        reply = await self._ask(
            Begin(number=number, form=form, parts=parts, seconds=seconds, ended=self._told_ended())
        )
        if not isinstance(reply, Begun):
            raise self._unexpected(reply)
        return number

    async def next_slice(self, number: int) -> Slice:
        """What a batch or stream comes to in its next turn.

        Raises:
            SideFault: a bug of ours.
            SideLostError: the side process was ended from outside.

        """
        reply = await self._ask(Next(number=number, is_stopping=self.must_end(), ended=self._told_ended()))
        if not isinstance(reply, Slice):
            raise self._unexpected(reply)
        return reply

    def forget(self, number: int) -> None:
        """Say that nobody waits for a batch any more; the side process learns it with the next turn of any."""
        self._ended.append(number)

    def _told_ended(self) -> tuple[int, ...]:
        ended = tuple(self._ended)
        self._ended.clear()
        return ended

    async def _ask(self, order: Begin | Next) -> object:
        """Ask, and wait for the answer even where the caller does not: the process works for others too."""
        turn = asyncio.ensure_future(self._side.ask(encode(order), self._slice_seconds))
        turn.add_done_callback(_look_at)
        return read_many_reply(await asyncio.shield(turn))

    def _unexpected(self, reply: object) -> Exception:
        error = getattr(reply, "error", None)
        if error is None:
            return SideLostError("the side process that knew the batch has ended")
        found: Exception = error()
        return found

    def must_end(self) -> bool:
        """Whether the worker stops so soon that a batch should say what it has and end."""
        if not self._readiness.draining:
            self._stop_at = None
            return False
        if self._stop_at is None:
            self._stop_at = monotonic() + LAST_SECONDS
        return monotonic() > self._stop_at


def _look_at(turn: "asyncio.Future[bytes]") -> None:
    """Take note of an error for which nobody may be left to ask."""
    if not turn.cancelled():
        turn.exception()
