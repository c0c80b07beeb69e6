"""What an operation is: a question, an answer, the function between them, and what the document says of it.

The register of operations is in `v1`; how one is served is in `routes`. Nothing here reads a request.
"""

from collections.abc import Awaitable, Callable, Generator, Iterable
from datetime import date
from enum import Enum
from typing import Any, Generic, Literal, TypeVar

from litestar import Request
from litestar.types import ASGIApp
from msgspec import Struct

from loopslack.api.costly import Costly
from loopslack.api.many_places import ManyPlaces
from loopslack.contract.answering.loop import Unfinished
from loopslack.contract.encoding import encoded
from loopslack.contract.problems import PROBLEM_TYPES, ProblemType
from loopslack.kernel.work import finished as run
from loopslack.settings import Settings

Question = TypeVar("Question")
Answer = TypeVar("Answer")


class BodySize(Enum):
    """Which of the body limits holds for an operation."""

    SINGLE = "single_body_bytes"
    BATCH = "batch_body_bytes"
    STREAM = "stream_body_bytes"

    def limit(self, settings: Settings) -> int:
        """The limit in bytes."""
        bytes_allowed: int = getattr(settings, self.value)
        return bytes_allowed


class Floor(Struct, frozen=True):
    """What an operation that answers by itself may use."""

    settings: Settings
    costly: Costly
    many: ManyPlaces


class Operation(Struct, Generic[Question, Answer], frozen=True, kw_only=True):
    """One operation of the contract.

    `ask` is a function from the question to the answer, or to `Work` that comes to it with pauses; that of a GET takes
    nothing and is asked once, when the service starts. An answer of bytes is sent as it is, with `media_type`. An
    operation that is no single question and answer (a batch, a stream) gives `respond` instead, which reads the request
    itself.
    """

    operation_id: str
    method: Literal["GET", "POST"] = "POST"
    path: str
    tag: str
    summary: str
    description: str
    question: type[Question] | None = None
    answer: type[Answer] | None = None
    ask: Callable[..., Answer] | None = None
    respond: Callable[[Request[Any, Any, Any], Floor], Awaitable[ASGIApp]] | None = None
    media_type: str = "application/json"
    body_size: BodySize = BodySize.SINGLE
    problems: tuple[str, ...] = ()
    """Slugs of problems beyond those every operation of its method can give."""
    costly: Callable[[Question], bool] | bool = False
    """Whether the question takes long enough (5 ms and more) to be computed beside the event loop."""
    outcomes: Callable[[Answer], Iterable[tuple[str, Iterable[str]]]] | None = None
    """For the metrics: verdict and codes of the advisories of each design in an answer."""
    deprecated_since: date | None = None
    ends_on: date | None = None


def finished(answer: object) -> tuple[object, bytes]:
    """An answer of an operation, brought to its end where it pauses or was left unfinished, with the bytes to send."""
    if isinstance(answer, Generator):
        answer = run(answer)
    told = answer.finish() if isinstance(answer, Unfinished) else answer
    return told, told if isinstance(told, bytes) else encoded(told)


_EVERY = ("bad-request", "unexpected-query", "key-missing", "key-refused", "not-found", "method-not-allowed")
_EVERY_TOO = ("not-acceptable", "too-many-requests", "internal-fault", "overloaded")
_WITH_BODY = (
    "malformed-body",
    "nested-too-deeply",
    "duplicate-keys",
    "body-overdue",
    "body-too-large",
    "unsupported-media-type",
    "unsupported-encoding",
    "invalid-field",
    "unanswerable-question",
)


def problems_of(operation: Operation[Any, Any]) -> tuple[ProblemType, ...]:
    """Every kind of problem an operation can answer with, in the order of the table."""
    slugs = {*_EVERY, *_EVERY_TOO, *operation.problems}
    if operation.method == "POST":
        slugs.update(_WITH_BODY)
    if operation.costly:
        slugs.add("deadline-passed")
    unknown = slugs - set(PROBLEM_TYPES)
    if unknown:
        raise ValueError(f"{operation.operation_id} names unknown problems: {sorted(unknown)}")
    return tuple(kind for slug, kind in PROBLEM_TYPES.items() if slug in slugs)
