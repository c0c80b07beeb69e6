"""Serves batches and streams of designs: takes the body in, sends outcomes as they come, ends when nobody reads.

The answer is sent as plain ASGI messages: the framework's own streaming leaves a listener behind on each
answer, and the server's worker stops serving a connection with sixteen of them. Reading bodies is a matter of
`many_bodies`, answering of `many_work`, places and turns of `many_places`.
"""

import asyncio
import logging
import time
from collections.abc import Awaitable, Callable
from typing import Any

from litestar import Request
from litestar.types import ASGIApp
from msgspec import Struct

from loopslack.api.asgi import Receive, Scope, Send
from loopslack.api.many_bodies import Spool, check_length
from loopslack.api.many_work import AS_BATCH, AS_LINES, Form
from loopslack.api.operations import BodySize, Floor
from loopslack.api.reading import JSON, check_body_head, header, read_body, take_body
from loopslack.api.record import Note, note_of
from loopslack.api.side_words import Slice
from loopslack.observability import count_design
from loopslack.settings import Settings

NDJSON = AS_LINES.media_type
_logger = logging.getLogger("loopslack.request")

Taken = tuple[bytes, ...]
"""A body in the parts the side process takes it in."""


class Kind(Struct, frozen=True, kw_only=True):
    """How designs come in and outcomes go out."""

    operation_id: str
    accepted: tuple[str, ...]
    body_size: BodySize
    take: Callable[[Settings, Scope, Receive], Awaitable[Taken]]
    form: Form


async def _take_batch(settings: Settings, scope: Scope, receive: Receive) -> Taken:
    return (await read_body(scope, receive, settings.batch_body_bytes, settings.body_seconds),)


async def _take_stream(settings: Settings, scope: Scope, receive: Receive) -> Taken:
    spool = Spool()
    await take_body(scope, receive, settings.stream_body_bytes, settings.body_seconds, spool.take)
    check_length(spool, settings.stream_designs)
    return spool.pressed()


_BATCH = Kind(
    operation_id="designLoops",
    accepted=(JSON,),
    body_size=BodySize.BATCH,
    take=_take_batch,
    form=AS_BATCH,
)
_STREAM = Kind(
    operation_id="streamLoopDesigns",
    accepted=(NDJSON, "application/jsonl"),
    body_size=BodySize.STREAM,
    take=_take_stream,
    form=AS_LINES,
)


async def respond_to_batch(_: Request[Any, Any, Any], floor: Floor) -> ASGIApp:
    """Answer a batch of designs."""
    return Many(floor, _BATCH)


async def respond_to_stream(_: Request[Any, Any, Any], floor: Floor) -> ASGIApp:
    """Answer a stream of designs."""
    return Many(floor, _STREAM)


class Many:
    """A request for many designs; everything happens when the server calls it."""

    def __init__(self, floor: Floor, kind: Kind) -> None:
        self._floor = floor
        self._kind = kind

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Take the body, have its designs answered, send the outcomes.

        Raises:
            Refused: before anything was sent.

        """
        settings, many, kind = self._floor.settings, self._floor.many, self._kind
        check_body_head(scope, kind.accepted)
        if many.is_full:
            await _let_pass(scope, receive, kind.body_size.limit(settings), settings.body_seconds)
        with many.place():
            begun = time.perf_counter()
            taken = await kind.take(settings, scope, receive)
            left = settings.batch_seconds - (time.perf_counter() - begun)
            number = await many.begin(kind.form.name, taken, left)
            del taken
            try:
                await self._answer(number, scope, receive, send)
            finally:
                many.forget(number)

    async def _answer(self, number: int, scope: Scope, receive: Receive, send: Send) -> None:
        """Send slice by slice, until all is sent or the client has gone."""
        note = note_of(scope)
        sending = asyncio.create_task(self._send(number, note, send))
        leaving = asyncio.create_task(_gone(receive))
        try:
            await asyncio.wait({sending, leaving}, return_when=asyncio.FIRST_COMPLETED)
            if sending.done():
                await sending  # for its error, if there was one
            else:
                note.problem = "client-left"
        finally:
            for task in (sending, leaving):
                task.cancel()
            await asyncio.gather(sending, leaving, return_exceptions=True)

    async def _send(self, number: int, note: Note, send: Send) -> None:
        headers = [(b"content-type", self._kind.form.media_type.encode()), (b"cache-control", b"no-store")]
        await send({"type": "http.response.start", "status": 200, "headers": headers})
        is_last = False
        while not is_last:
            done = await self._floor.many.next_slice(number)
            self._take_note(done, note)
            is_last = done.is_last
            await send({"type": "http.response.body", "body": done.piece, "more_body": not is_last})

    def _take_note(self, done: Slice, note: Note) -> None:
        note.calculation_seconds += done.seconds
        for outcome in done.outcomes:
            count_design(self._kind.operation_id, outcome.verdict, outcome.advisories)
            if outcome.fault:
                facts = {"requestId": note.request_id, "traceId": note.trace[0] if note.trace else ""}
                _logger.error("internal fault", extra=facts | {"traceback": outcome.fault})


async def _gone(receive: Receive) -> None:
    """Return once the client has left."""
    while (await receive())["type"] != "http.disconnect":
        pass


async def _let_pass(scope: Scope, receive: Receive, limit: int, seconds: float) -> None:
    """Let the body of a request that will be refused arrive, so that its client gets to read the refusal.

    A client that asks before it sends is refused at once.

    Raises:
        Refused: the body is too long or late even for that.

    """
    if header(scope, b"expect") is None:
        await take_body(scope, receive, limit, seconds, len)
