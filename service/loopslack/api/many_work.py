"""Answers the designs of batches and streams in slices, and puts them into the form they are sent in.

This is what their side process does; nothing here waits, sends or knows a request.
"""

import time
from collections.abc import Callable
from traceback import format_exception

import msgspec
from msgspec import Struct

from loopslack.api.many_bodies import Designs, batch_parts, stream_parts
from loopslack.api.nursery import Work
from loopslack.api.side_words import (
    Begin,
    Begun,
    Next,
    Slice,
    Told,
    Unknown,
    encode,
    read_many_order,
    told_of,
)
from loopslack.contract.answering.many import (
    Outcome,
    Tally,
    answer_design,
    end_line,
    id_of,
    refuse_design,
)
from loopslack.contract.names import Names
from loopslack.contract.reading.many import Shared
from loopslack.contract.refusals import Refused
from loopslack.settings import Settings

SLICE_SECONDS = 0.02
"""Time a batch may work before another one takes its turn; handing a slice over costs a hundredth of it."""

PIECE_BYTES = 65_536
"""Length from which a piece is sent, so that a client that reads slowly leaves little waiting."""


Parts = tuple[Shared, Designs]


class Form(Struct, frozen=True, kw_only=True):
    """How designs come in and outcomes are strung together."""

    name: str
    media_type: str
    parts: Callable[[tuple[bytes, ...], Settings], Parts]
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
    name="batch",
    parts=lambda bodies, settings: batch_parts(b"".join(bodies), settings),
    media_type="application/json",
    opening=b'{"designs":[',
    between=b",",
    end=_end_of_batch,
    answers_each=True,
)
AS_LINES = Form(
    name="lines",
    parts=stream_parts,
    media_type="application/x-ndjson",
    opening=b"",
    between=b"\n",
    end=_end_of_stream,
    answers_each=False,
)


_FORMS = {form.name: form for form in (AS_BATCH, AS_LINES)}


def many_work(settings: Settings) -> Work:
    """The work: all batches and streams of a worker, each known by its number until it ends."""
    known: dict[int, Designing] = {}

    def obeyed(order: Begin | Next) -> Begun | Slice | Unknown:
        for number in order.ended:
            known.pop(number, None)
        if isinstance(order, Begin):
            form = _FORMS[order.form]
            parts = form.parts(order.parts, settings)
            known[order.number] = Designing(parts, form, settings, order.seconds)
            return Begun()
        designing = known.get(order.number)
        if designing is None:
            return Unknown()
        done = designing.next_slice(is_stopping=order.is_stopping)
        if done.is_last:
            del known[order.number]
        return done

    def answer(message: bytes) -> bytes:
        try:
            return encode(obeyed(read_many_order(message)))
        except Exception as error:  # noqa: BLE001 - whatever it is, the worker must be told
            return encode(told_of(error))

    return answer


class Designing:
    """The designs of one batch or stream, on their way to being answered."""

    def __init__(self, parts: Parts, form: Form, settings: Settings, seconds: float) -> None:
        self._shared, self._designs = parts
        self._form = form
        self._settings = settings
        self._ends_at = time.perf_counter() + seconds
        self._names = Names()
        self._tally = Tally()

    def next_slice(self, *, is_stopping: bool = False) -> Slice:
        """Answer designs until the turn is over or there is enough to send."""
        begun = time.perf_counter()
        pieces = [] if self._tally.designs else [self._form.opening]
        outcomes: list[Told] = []
        length = 0
        is_last = False
        while True:
            over = self._over(is_stopping=is_stopping)
            design = None if over is not None and not self._form.answers_each else next(self._designs, None)
            if design is None:
                pieces.append(self._form.end(self._tally, over))
                is_last = True
                break
            outcome = self._answer(design, over)
            fault = "" if outcome.fault is None else "".join(format_exception(outcome.fault))
            outcomes.append(Told(outcome.verdict, outcome.advisories, fault))
            pieces += (self._form.between if self._tally.designs else b"", outcome.line)
            self._tally.add(outcome.verdict)
            length += len(outcome.line)
            if length >= PIECE_BYTES or time.perf_counter() - begun >= SLICE_SECONDS:
                break
        return Slice(b"".join(pieces), tuple(outcomes), is_last, time.perf_counter() - begun)

    def _over(self, *, is_stopping: bool) -> Refused | None:
        """Why the work must end now."""
        if time.perf_counter() > self._ends_at:
            allowed = self._settings.batch_seconds
            return Refused("deadline-passed", f"What came before took the {allowed:g} s allowed.")
        if is_stopping:
            return Refused("overloaded", "This server is stopping; send what is left again.")
        return None

    def _answer(self, design: bytes | Refused, over: Refused | None) -> Outcome:
        index = self._tally.designs
        if isinstance(design, Refused):
            return refuse_design(b"", index, design)
        if over is not None:
            return refuse_design(design, index, over)
        name = id_of(design)
        repeated = name is not None and not self._names.is_new(name)
        return answer_design(design, index, self._shared, repeated=repeated, nesting=self._settings.nesting)
