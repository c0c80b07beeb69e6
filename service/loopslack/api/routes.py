"""How an operation is served: read strictly, ask, answer. One function for all of them.

What an operation is stands in `operations`; nothing here knows a particular one.
"""

import time
from collections.abc import Callable, Generator, Iterable
from datetime import UTC, date, datetime
from datetime import time as time_of_day
from email.utils import format_datetime
from typing import Any

from litestar import Request
from litestar.exceptions import HTTPException
from litestar.handlers import HTTPRouteHandler
from litestar.types import ASGIApp

from loopslack.api.operations import Floor, Operation, finished
from loopslack.api.reading import check_acceptable, check_body_head, read_body, refuse_query
from loopslack.api.record import internal_fault, log_fault, note_of
from loopslack.api.reference import Page, page_route, reference_page
from loopslack.api.reply import Reply, problem_reply
from loopslack.api.side_words import Answered, judged
from loopslack.api.turns import in_turns
from loopslack.api.wrappers import nothing_here
from loopslack.contract.answering.loop import Unfinished
from loopslack.contract.refusals import Refused, refusal_of
from loopslack.contract.strict.decoding import decode_in_steps
from loopslack.contract.strict.reader import reader_of
from loopslack.kernel.errors import CalculationError
from loopslack.observability import count_design

Handler = Callable[[Request[Any, Any, Any]], Any]


def routes_of(
    operations: Iterable[Operation[Any, Any]], pages: Iterable[Page], floor: Floor
) -> list[HTTPRouteHandler]:
    """The routes of all operations and pages, with the OPTIONS of each path."""
    routes: list[HTTPRouteHandler] = []
    methods: dict[str, list[str]] = {}
    for operation in operations:
        methods.setdefault(operation.path, []).append(operation.method)
        if operation.method == "GET":
            routes.append(page_route(reference_page(operation, tuple(farewell(operation)))))
        else:
            routes.append(_question_route(operation, floor))
    for page in pages:
        methods.setdefault(page.path, []).append("GET")
        routes.append(page_route(page))
    # first, since the framework adds an OPTIONS of its own to a path that has none yet
    return [options_route(path, own) for path, own in methods.items()] + routes


def _question_route(operation: Operation[Any, Any], floor: Floor) -> HTTPRouteHandler:
    handler = _answering(operation, floor) if operation.respond is None else _responding(operation, floor)
    return HTTPRouteHandler(operation.path, http_method="POST", status_code=200, name=operation.operation_id)(
        handler
    )


def _answering(operation: Operation[Any, Any], floor: Floor) -> Handler:
    question, ask, settings = operation.question, operation.ask, floor.settings
    if question is None or ask is None:
        raise TypeError(f"{operation.operation_id} needs a question and a function that answers it")
    reader_of(question)  # fails at start, not at the first request
    limit = operation.body_size.limit(settings)
    media_type = operation.media_type.encode()
    standing = [(b"cache-control", b"no-store"), *farewell(operation)]
    is_costly = operation.costly if callable(operation.costly) else None

    async def answer(request: Request[Any, Any, Any]) -> ASGIApp:
        scope = request.scope
        check_acceptable(scope, operation.media_type)
        refuse_query(scope)
        check_body_head(scope)
        body = await read_body(scope, request.receive, limit, settings.body_seconds)
        asked = await decode_in_steps(body, question, settings.nesting)
        costly = operation.costly is True or (is_costly is not None and is_costly(asked))
        try:
            answered = None if costly else await _here(operation, ask, asked)
            if answered is None:
                answered = await floor.costly.ask(operation.operation_id, body)
        except Refused as refused:
            raise refused.in_order_of(body) from None
        note_of(scope).calculation_seconds = answered.seconds
        for verdict, codes in answered.judged:
            count_design(operation.operation_id, verdict, codes)
        timing = (b"server-timing", b"calc;dur=%.3f" % (answered.seconds * 1e3))
        return Reply(answered.sent, media_type, 200, [*standing, timing])

    return answer


async def _here(operation: Operation[Any, Any], ask: Callable[[Any], Any], asked: object) -> Answered | None:
    """The answer computed here, with a pause where it takes long, or None where that is too long for here."""
    begun, waited = time.perf_counter(), 0.0
    try:
        answer = ask(asked)
        if isinstance(answer, Generator):
            answer, waited = await in_turns(answer)
        if isinstance(answer, Unfinished):
            return None
        told, sent = finished(answer)
    except CalculationError as error:
        raise refusal_of(error) from None
    designs = judged(operation.outcomes(told)) if operation.outcomes is not None else ()
    return Answered(sent, designs, time.perf_counter() - begun - waited)


def _responding(operation: Operation[Any, Any], floor: Floor) -> Handler:
    respond = operation.respond
    if respond is None:
        raise TypeError(f"{operation.operation_id} does not respond by itself")

    async def answer(request: Request[Any, Any, Any]) -> ASGIApp:
        refuse_query(request.scope)
        check_acceptable(request.scope, operation.media_type)
        return await respond(request, floor)

    return answer


def options_route(path: str, methods: Iterable[str]) -> HTTPRouteHandler:
    """The route that tells the methods of a path."""
    allow = (b"allow", allowed(methods).encode())

    async def tell(request: Request[Any, Any, Any]) -> ASGIApp:  # noqa: ARG001 - the framework passes it by name
        return Reply(b"", b"", 204, [allow])

    return HTTPRouteHandler(path, http_method="OPTIONS", status_code=200, name=f"OPTIONS {path}")(tell)


def allowed(methods: Iterable[str]) -> str:
    """The value of `Allow` for a path with these methods; HEAD and OPTIONS come with every one of them."""
    known = {*methods, "OPTIONS"}
    if "GET" in known:
        known.add("HEAD")
    return ", ".join(sorted(known))


def farewell(operation: Operation[Any, Any]) -> list[tuple[bytes, bytes]]:
    """The headers that say an operation is deprecated (RFC 9745) and when it ends (RFC 8594)."""
    headers = []
    if operation.deprecated_since is not None:
        headers.append((b"deprecation", b"@%d" % int(_midnight(operation.deprecated_since).timestamp())))
    if operation.ends_on is not None:
        headers.append((b"sunset", format_datetime(_midnight(operation.ends_on), usegmt=True).encode()))
    return headers


def _midnight(day: date) -> datetime:
    return datetime.combine(day, time_of_day(), UTC)


def on_refused(request: Request[Any, Any, Any], refused: Refused) -> Any:  # noqa: ANN401 - the framework asks for its own class
    """A refusal of ours as the answer."""
    note = note_of(request.scope)
    note.problem = refused.kind.slug
    return problem_reply(refused, note.request_id)


def on_http_exception(request: Request[Any, Any, Any], error: HTTPException) -> Any:  # noqa: ANN401 - as above
    """What the framework refuses by itself, told in our words."""
    if error.status_code == 404:
        refused = nothing_here()
    elif error.status_code == 405:
        methods = allowed(
            part.strip() for part in (error.headers or {}).get("allow", "").split(",") if part.strip()
        )
        detail = f"The path does not have this method; it has {methods}."
        refused = Refused("method-not-allowed", detail, headers={"Allow": methods})
    elif 400 <= error.status_code < 500:
        refused = Refused(
            "bad-request", "The request breaks a rule of HTTP, for instance with an invalid Host."
        )
    else:
        return on_fault(request, error)
    return on_refused(request, refused)


def on_fault(request: Request[Any, Any, Any], error: Exception) -> Any:  # noqa: ANN401 - as above
    """A fault of the service: logged with its traceback, told without."""
    log_fault(note_of(request.scope), error)
    return problem_reply(internal_fault(), note_of(request.scope).request_id)
