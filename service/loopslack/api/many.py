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
from loopslack.api.many_bodies import Designs, Spool, batch_parts, stream_parts
from loopslack.api.many_work import AS_BATCH, AS_LINES, Form, Slice, Work
from loopslack.api.operations import BodySize, Floor
from loopslack.api.reading import JSON, check_body_head, header, read_body, take_body
from loopslack.api.record import Note, note_of
from loopslack.contract.reading_many import Shared
from loopslack.contract.refusals import Refused
from loopslack.observability import count_design

NDJSON = AS_LINES.media_type
_logger = logging.getLogger("loopslack.request")

Parts = tuple[Shared, Designs]
Read = Callable[[Floor, Scope, Receive], Awaitable[Parts]]


class Kind(Struct, frozen=True, kw_only=True):
    """How designs come in and outcomes go out."""

    operation_id: str
    accepted: tuple[str, ...]
    body_size: BodySize
    read: Read
    form: Form


async def _read_batch(floor: Floor, scope: Scope, receive: Receive) -> Parts:
    settings = floor.settings
    body = await read_body(scope, receive, settings.batch_body_bytes, settings.body_seconds)
    return await floor.many.run(lambda: batch_parts(body, settings))


async def _read_stream(floor: Floor, scope: Scope, receive: Receive) -> Parts:
    settings = floor.settings
    spool = Spool()
    await take_body(scope, receive, settings.stream_body_bytes, settings.body_seconds, spool.take)
    return await floor.many.run(lambda: stream_parts(spool, settings))


_BATCH = Kind(
    operation_id="designLoops",
    accepted=(JSON,),
    body_size=BodySize.BATCH,
    read=_read_batch,
    form=AS_BATCH,
)
_STREAM = Kind(
    operation_id="streamLoopDesigns",
    accepted=(NDJSON, "application/jsonl"),
    body_size=BodySize.STREAM,
    read=_read_stream,
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
        """Read the body, answer its designs, send the outcomes.

        Raises:
            Refused: before anything was sent.

        """
        floor, kind = self._floor, self._kind
        check_body_head(scope, kind.accepted)
        if floor.many.is_full:
            await _let_pass(scope, receive, kind.body_size.limit(floor.settings), floor.settings.body_seconds)
        with floor.many.place():
            begun = time.perf_counter()
            parts = await kind.read(floor, scope, receive)
            work = Work(parts, kind.form, floor.settings.nesting, self._over(begun))
            await self._answer(work, scope, receive, send)

    def _over(self, begun: float) -> Callable[[], Refused | None]:
        """Why the work must end now, asked before each design."""
        allowed = self._floor.settings.batch_seconds
        must_end = self._floor.many.must_end

        def over() -> Refused | None:
            if time.perf_counter() > begun + allowed:
                return Refused("deadline-passed", f"What came before took the {allowed:g} s allowed.")
            if must_end():
                return Refused("overloaded", "This server is stopping; send what is left again.")
            return None

        return over

    async def _answer(self, work: Work, scope: Scope, receive: Receive, send: Send) -> None:
        """Send slice by slice, until all is sent or the client has gone."""
        note = note_of(scope)
        sending = asyncio.create_task(self._send(work, note, send))
        leaving = asyncio.create_task(_gone(receive))
        try:
            await asyncio.wait({sending, leaving}, return_when=asyncio.FIRST_COMPLETED)
            if sending.done():
                await sending  # for its error, if there was one
            else:
                note.problem = "client-left"
        finally:
            work.left = True
            for task in (sending, leaving):
                task.cancel()
            await asyncio.gather(sending, leaving, return_exceptions=True)

    async def _send(self, work: Work, note: Note, send: Send) -> None:
        headers = [(b"content-type", self._kind.form.media_type.encode()), (b"cache-control", b"no-store")]
        await send({"type": "http.response.start", "status": 200, "headers": headers})
        is_last = False
        while not is_last:
            done = await self._floor.many.run(work.next_slice)
            self._take_note(done, note)
            is_last = done.is_last
            await send({"type": "http.response.body", "body": done.piece, "more_body": not is_last})

    def _take_note(self, done: Slice, note: Note) -> None:
        note.calculation_seconds += done.seconds
        for outcome in done.outcomes:
            count_design(self._kind.operation_id, outcome.verdict, outcome.advisories)
            if outcome.fault is not None:
                facts = {"requestId": note.request_id, "traceId": note.trace[0] if note.trace else ""}
                _logger.error("internal fault", exc_info=outcome.fault, extra=facts)


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
