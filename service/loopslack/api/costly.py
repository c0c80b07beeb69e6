"""Runs costly questions beside the event loop: one at a time, few waiting, none beyond a deadline.

A thread of its own keeps the loop answering short questions (it gets the interpreter back after half a
millisecond, see `SWITCH_SECONDS`). A computation cannot be stopped from outside: past the deadline the caller
is told so, and the place it holds is free only once it has ended, so that overload cannot pile up unseen.
"""

import asyncio
import sys
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from typing import TypeVar

from loopslack.contract.refusals import Refused
from loopslack.observability import count_refusal

Answer = TypeVar("Answer")

SWITCH_SECONDS = 0.0005
"""How long a thread may hold the interpreter; the default of 5 ms would show in every short answer."""


class Costly:
    """The costly work of one worker."""

    def __init__(self, waiting: int, deadline_seconds: float) -> None:
        self._places = waiting + 1
        self._taken = 0
        self._deadline_seconds = deadline_seconds
        self._thread: ThreadPoolExecutor | None = None

    async def run(self, work: Callable[[], Answer]) -> Answer:
        """The result of some work.

        Raises:
            Refused: 503, because too much waits already or the deadline has passed.

        """
        if self._taken >= self._places:
            count_refusal("costly")
            detail = "As many costly questions as may wait are waiting already."
            raise Refused("overloaded", detail, headers={"Retry-After": "2"})
        if self._thread is None:
            sys.setswitchinterval(SWITCH_SECONDS)
            self._thread = ThreadPoolExecutor(max_workers=1, thread_name_prefix="costly")
        self._taken += 1
        job = self._thread.submit(work)
        future = asyncio.wrap_future(job)
        future.add_done_callback(self._leave)
        try:
            return await asyncio.wait_for(asyncio.shield(future), self._deadline_seconds)
        except TimeoutError:
            if future.done() and not future.cancelled():
                raise  # the work's own
            count_refusal("deadline")
            raise Refused(
                "deadline-passed",
                f"The computation did not end within {self._deadline_seconds:g} s.",
                headers={"Retry-After": "5"},
            ) from None
        finally:
            job.cancel()  # takes out what still waits; what runs, runs on and keeps its place

    def _leave(self, future: "asyncio.Future[Answer]") -> None:
        self._taken -= 1
        if not future.cancelled():
            future.exception()  # nobody may be left to ask for it

    def close(self) -> None:
        """Take no more work; what waits is dropped."""
        if self._thread is not None:
            self._thread.shutdown(wait=False, cancel_futures=True)
