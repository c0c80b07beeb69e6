"""Finds the refusals of a question that do not depend on what stands in for its faulty members.

To tell all faults at once, reading goes on past a faulty member, with something else in its place. What that leads to
must not be laid at the caller's door. So a question that is refused is read several times, each time with other
stand-ins (the usual value, both ends of the range, every word of a list, nothing at all where nothing need be stated),
and a refusal counts if it is told each time, at the same place and in the same words: a message names the numbers it
compares, so that one that rests on a stand-in changes with it.

Out of reach: a contradiction with a member that is faulty itself, which shows only once that is mended, and what only
the calculation finds, which begins when the reading has found nothing.
"""

from collections.abc import Callable, Collection, Iterable, Sequence
from contextlib import suppress
from functools import wraps
from itertools import islice
from typing import Protocol, TypeVar

from loopslack.contract.problems import MOST_COUNTED
from loopslack.contract.reading.reader import EnoughError, Reader
from loopslack.kernel.errors import CalculationError, Refusals

Q = TypeVar("Q")
Q_contra = TypeVar("Q_contra", contravariant=True)
R = TypeVar("R")
R_co = TypeVar("R_co", covariant=True)

TURNS = 6
"""Readings of one question: enough for no value and three others, and for the longest lists that decide anything."""


class Reading(Protocol[Q_contra, R_co]):
    """Reads a question; raises what is refused, unless the caller brings a reader that keeps it."""

    def __call__(self, question: Q_contra, reader: Reader | None = None, /) -> R_co:
        """Read a question."""


def refusing(read: Callable[[Q, Reader], R]) -> Reading[Q, R]:
    """Make a reading that raises its refusals where it is not given a reader.

    It then raises ``Refusals``, or the only refusal.
    """

    @wraps(read)
    def reading(question: Q, reader: Reader | None = None, /) -> R:
        if reader is not None:
            return read(question, reader)
        own = Reader()
        try:
            found = read(question, own)
        except EnoughError:
            raise together(lasting(lambda _: question, read) or own.refused[:MOST_COUNTED]) from None
        if own.refused:
            again = [] if own.is_certain else lasting(lambda _: question, read)
            raise together(again or own.refused[:MOST_COUNTED])
        return found

    return reading


def lasting(
    question: Callable[[int], Q],
    read: Callable[[Q, Reader], object],
    unsound: Collection[str] = (),
) -> list[CalculationError]:
    """The refusals that stay the same whatever stands in, those about a stand-in itself left out.

    ``question`` gives the question as it is in each turn; ``unsound`` are the places at which something stands in.
    """
    kept: dict[tuple[str, str, str], CalculationError] | None = None
    for turn in range(TURNS):
        reader = Reader(turn=turn)
        try:
            with suppress(EnoughError):
                read(question(turn), reader)
        except CalculationError:
            continue  # not read to its end, so that nothing can be said of what was not told
        told = {(error.pointer, error.code, error.message): error for error in reader.refused}
        kept = told if kept is None else {key: kept[key] for key in kept if key in told}
        if not kept:
            break
    found = (error for error in (kept or {}).values() if not lies_within(error.pointer, unsound))
    return list(islice(found, MOST_COUNTED))


def lies_within(pointer: str, places: Iterable[str]) -> bool:
    """Whether a pointer is one of some places or inside one."""
    return any(pointer == place or pointer.startswith(f"{place}/") for place in places)


def within(error: CalculationError, place: str) -> CalculationError:
    """The same refusal of a question that stands at a place of another."""
    causes = error.errors if isinstance(error, Refusals) else (error,)
    for cause in causes:
        cause.pointer = place + cause.pointer
    return error


def together(errors: Sequence[CalculationError]) -> CalculationError:
    """Several refusals as one, a single one as it is."""
    return errors[0] if len(errors) == 1 else Refusals(errors)
