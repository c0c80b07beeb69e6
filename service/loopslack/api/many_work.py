"""Answers the designs of one batch or stream in slices, and puts them into the form they are sent in.

Runs in the thread of `many_places`; nothing here waits, sends or knows a request.
"""

import time
from collections.abc import Callable

import msgspec
from msgspec import Struct

from loopslack.api.many_bodies import Designs
from loopslack.api.many_places import SLICE_SECONDS
from loopslack.contract.answering_many import (
    Outcome,
    Tally,
    answer_design,
    end_line,
    id_of,
    refuse_design,
)
from loopslack.contract.names import Names
from loopslack.contract.reading_many import Shared
from loopslack.contract.refusals import Refused

PIECE_BYTES = 65_536
"""Length from which a piece is sent, so that a client that reads slowly leaves little waiting."""


class Form(Struct, frozen=True, kw_only=True):
    """How outcomes are strung together."""

    media_type: str
    opening: bytes
    between: bytes
    end: Callable[[Tally, Refused | None], bytes]
    answers_each: bool
    """Whether designs that are not reached are told one by one, or all at once in the end."""


def _end_of_batch(tally: Tally, _: Refused | None) -> bytes:
    return b'],"summary":%b}' % msgspec.json.encode(tally.summary())


def _end_of_stream(tally: Tally, refused: Refused | None) -> bytes:
    return (b"\n" if tally.designs else b"") + end_line(tally, refused) + b"\n"


AS_BATCH = Form(
    media_type="application/json",
    opening=b'{"designs":[',
    between=b",",
    end=_end_of_batch,
    answers_each=True,
)
AS_LINES = Form(
    media_type="application/x-ndjson",
    opening=b"",
    between=b"\n",
    end=_end_of_stream,
    answers_each=False,
)


class Slice(Struct, frozen=True):
    """What a turn of work came to: bytes to send, the outcomes in them, and the time it took."""

    piece: bytes
    outcomes: list[Outcome]
    is_last: bool
    seconds: float


class Work:
    """The designs of one batch or stream, on their way to being answered."""

    def __init__(
        self, parts: tuple[Shared, Designs], form: Form, nesting: int, over: Callable[[], Refused | None]
    ) -> None:
        self._shared, self._designs = parts
        self._form = form
        self._nesting = nesting
        self._over = over
        self._names = Names()
        self._tally = Tally()
        self.left = False
        """Set once nobody waits for the answers any more."""

    def next_slice(self) -> Slice:
        """Answer designs until the turn is over or there is enough to send."""
        begun = time.perf_counter()
        pieces = [] if self._tally.designs else [self._form.opening]
        outcomes: list[Outcome] = []
        length = 0
        is_last = False
        while not (is_last or self.left):
            over = self._over()
            design = None if over is not None and not self._form.answers_each else next(self._designs, None)
            if design is None:
                pieces.append(self._form.end(self._tally, over))
                is_last = True
                break
            outcome = self._answer(design, over)
            outcomes.append(outcome._replace(line=b""))
            pieces += (self._form.between if self._tally.designs else b"", outcome.line)
            self._tally.add(outcome.verdict)
            length += len(outcome.line)
            if length >= PIECE_BYTES or time.perf_counter() - begun >= SLICE_SECONDS:
                break
        return Slice(b"".join(pieces), outcomes, is_last, time.perf_counter() - begun)

    def _answer(self, design: bytes | Refused, over: Refused | None) -> Outcome:
        index = self._tally.designs
        if isinstance(design, Refused):
            return refuse_design(b"", index, design)
        if over is not None:
            return refuse_design(design, index, over)
        name = id_of(design)
        repeated = name is not None and not self._names.is_new(name)
        return answer_design(design, index, self._shared, repeated=repeated, nesting=self._nesting)
