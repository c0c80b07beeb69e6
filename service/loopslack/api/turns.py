"""Computing in the event loop without holding it: work that pauses lets the others go on.

For questions that are short as a rule and longer at times, so that a hand-over to a side process would cost most of
them more than it saves. What always takes long is a matter of `costly`.
"""

import asyncio
from time import perf_counter
from typing import TypeVar

from loopslack.kernel.work import Work

T = TypeVar("T")

TURN_SECONDS = 0.006
"""Work goes on through its pauses for so long: every turn of the loop serves all that has arrived meanwhile, and a
design that waited at each of its pauses would come last."""


async def in_turns(work: Work[T]) -> tuple[T, float]:
    """The result of work, and the seconds in which it let others go on."""
    waited, begun = 0.0, perf_counter()
    while True:
        try:
            next(work)
        except StopIteration as end:
            return end.value, waited
        now = perf_counter()
        if now - begun > TURN_SECONDS:
            await asyncio.sleep(0)
            begun = perf_counter()
            waited += begun - now
