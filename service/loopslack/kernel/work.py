"""Long computations that pause, so that whoever waits for them can do something else meanwhile or give up.

Nothing here computes; who pauses, and how often, is each computation's own.
"""

from collections.abc import Generator
from typing import TypeVar

T = TypeVar("T")

Work = Generator[None, None, T]
"""A computation that pauses every few milliseconds and returns its result; see ``finished``."""


def finished(work: Work[T]) -> T:
    """Run a paused computation to its end without pauses."""
    while True:
        try:
            next(work)
        except StopIteration as end:
            result: T = end.value
            return result
