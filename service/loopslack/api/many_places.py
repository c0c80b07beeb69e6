"""How many batches and streams a worker takes on, and the thread that answers their designs, slice by slice.

A design takes longer than the event loop may be held, and some take much longer than others. So designs are
answered beside the loop, by one thread for all batches of a worker: they take turns in slices of
`SLICE_SECONDS`, a short batch does not wait for a long one to end, and a client that reads slowly holds nobody
up. The thread hands the interpreter back within half a millisecond (see `SWITCH_SECONDS`). Nothing here knows
what a batch is made of.
"""

import asyncio
import sys
from collections.abc import Callable, Iterator
from concurrent.futures import ThreadPoolExecutor
from contextlib import contextmanager
from time import monotonic
from typing import TypeVar

from loopslack.api.costly import SWITCH_SECONDS
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness, count_refusal

Result = TypeVar("Result")

SLICE_SECONDS = 0.02
"""Time a batch may work before another one takes its turn; handing a slice over costs a hundredth of it."""

LAST_SECONDS = 10.0
"""How long a batch may go on once the worker was told to stop; the server gives it 20 s."""


class ManyPlaces:
    """The batches and streams of one worker."""

    def __init__(self, waiting: int, readiness: Readiness) -> None:
        self._places = waiting + 1
        self._readiness = readiness
        self._stop_at: float | None = None
        self._thread: ThreadPoolExecutor | None = None
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

    async def run(self, work: Callable[[], Result]) -> Result:
        """The result of a slice of work, done when its turn comes."""
        if self._thread is None:
            sys.setswitchinterval(SWITCH_SECONDS)
            self._thread = ThreadPoolExecutor(max_workers=1, thread_name_prefix="many")
        return await asyncio.get_running_loop().run_in_executor(self._thread, work)

    def must_end(self) -> bool:
        """Whether the worker stops so soon that a batch should say what it has and end."""
        if not self._readiness.draining:
            self._stop_at = None
            return False
        if self._stop_at is None:
            self._stop_at = monotonic() + LAST_SECONDS
        return monotonic() > self._stop_at

    def close(self) -> None:
        """Take no more work; what waits is dropped."""
        if self._thread is not None:
            self._thread.shutdown(wait=False, cancel_futures=True)
            self._thread = None
