"""A service with a few small operations, so that the floor is tested apart from any calculation."""

from __future__ import annotations

import asyncio
import os
import signal
import time
from contextlib import contextmanager
from datetime import date
from enum import Enum
from typing import Annotated, Any

from litestar.testing import TestClient
from msgspec import Meta, Struct

from loopslack.api.operations import Operation
from loopslack.app import Application, create_app
from loopslack.kernel.errors import Contradiction, OutOfRange, Refusals
from loopslack.settings import Settings


class PressureUnit(Enum):
    BARG = "barg"
    BARA = "bara"
    PSIG = "psig"


class Strict(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, rename="camel"):
    pass


class Pressure(Strict, frozen=True, kw_only=True):
    value: float
    unit: PressureUnit


class Water(Strict, frozen=True, kw_only=True, tag="water", tag_field="kind"):
    pass


class Glycol(Strict, frozen=True, kw_only=True, tag="propylene-glycol", tag_field="kind"):
    mass_percent: Annotated[float, Meta(ge=0, le=60, description="Glycol by mass. In percent.")]


class Vessel(Strict, frozen=True, kw_only=True):
    id: Annotated[str, Meta(min_length=1, max_length=8, pattern=r"^[a-z0-9-]+$")]
    litres: Annotated[float, Meta(gt=0)]


class Span(Strict, frozen=True, kw_only=True):
    low: float
    high: float

    def __post_init__(self) -> None:
        if self.low > self.high:
            raise Contradiction(
                f"low {self.low:g} lies above high {self.high:g}.", remedy="Swap them.", pointer="/low"
            )


class SmallQuestion(Strict, frozen=True, kw_only=True, omit_defaults=True):
    relief_pressure: Pressure
    count: Annotated[int, Meta(ge=1, le=50)] = 1
    fluid: Water | Glycol | None = None
    stock: Annotated[list[Vessel], Meta(max_length=20_000)] | None = None
    span: Span | None = None
    exact: bool = False
    note: Annotated[str, Meta(max_length=40)] | None = None


class OpenHandedQuestion(SmallQuestion, frozen=True, kw_only=True, omit_defaults=False):
    """The same, but written with its defaults when it is encoded."""


class SmallAnswer(Struct, frozen=True, kw_only=True, rename="camel", omit_defaults=True):
    double: float
    vessels: int = 0


class WordsAnswer(Struct, frozen=True, kw_only=True):
    words: tuple[str, ...]


def double(question: SmallQuestion) -> SmallAnswer:
    return SmallAnswer(double=2 * question.relief_pressure.value, vessels=len(question.stock or ()))


def not_a_number(question: SmallQuestion) -> SmallAnswer:
    return SmallAnswer(double=float("nan"))


def fault(question: SmallQuestion) -> SmallAnswer:
    raise ZeroDivisionError("the secret of the house")


def refuse(question: SmallQuestion) -> SmallAnswer:
    raise Refusals(
        [
            OutOfRange(
                "80 % is above 60 %.", remedy="State less.", pointer="/fluid/massPercent", facts={"limit": 60}
            ),
            Contradiction("The relief valve opens below the fill pressure.", remedy="Raise it."),
        ]
    )


def out_of_range(question: SmallQuestion) -> SmallAnswer:
    raise OutOfRange("-300 degC lies below absolute zero.", remedy="Correct it.", pointer="/count")


def slow(question: SmallQuestion) -> SmallAnswer:
    time.sleep(0.3)
    return double(question)


def endless(question: SmallQuestion) -> SmallAnswer:
    while True:
        time.sleep(0.01)


def dying(question: SmallQuestion) -> SmallAnswer:
    os.kill(os.getpid(), signal.SIGKILL)
    return double(question)


def operation(name: str, ask: Any, **more: Any) -> Operation[Any, Any]:
    return Operation(
        operation_id=name,
        path=f"/v1/{name}",
        tag="test",
        summary=name,
        description=name,
        question=SmallQuestion,
        answer=SmallAnswer,
        ask=ask,
        **more,
    )


OPERATIONS = (
    operation(
        "double",
        double,
        deprecated_since=date(2026, 1, 2),
        ends_on=date(2027, 1, 2),
        outcomes=lambda answer: [("holds", ["steam-at-station"])],
    ),
    operation("not-a-number", not_a_number),
    operation("fault", fault),
    operation("refuse", refuse),
    operation("out-of-range", out_of_range),
    operation("slow", slow, costly=True),
    operation("endless", endless, costly=True),
    operation("dying", dying, costly=True),
    operation("page", lambda question: b"<p>page</p>", media_type="text/html; charset=utf-8"),
    Operation(
        operation_id="words",
        method="GET",
        path="/v1/words",
        tag="test",
        summary="words",
        description="words",
        answer=WordsAnswer,
        ask=lambda: WordsAnswer(words=("expansion", "stagnation")),
    ),
)

GOOD: dict[str, Any] = {"reliefPressure": {"value": 6, "unit": "barg"}}
GOOD_BODY = b'{"reliefPressure":{"value":6,"unit":"barg"}}'
JSON = {"content-type": "application/json"}


def small_app(**settings: Any) -> Application:
    return create_app(Settings(**settings), operations=OPERATIONS, pages=())


@contextmanager
def serving(**settings: Any) -> Any:
    app = small_app(**{"shed_lag_seconds": 5.0} | settings)  # a busy test machine is late by itself
    with TestClient(app, raise_server_exceptions=False) as client:
        client.service = app
        yield client


def pointers(response: Any) -> dict[str, str]:
    """Code of each fault by its pointer."""
    return {fault["pointer"]: fault["code"] for fault in response.json().get("errors", [])}


def ask_raw(app: Any, messages: list[dict[str, Any]], **scope: Any) -> tuple[int, dict[str, str], bytes, int]:
    """Status, headers, body and number of messages read, for a request given message by message.

    After the last message the client is silent for ever.
    """
    sent: list[dict[str, Any]] = []
    read = 0

    async def receive() -> dict[str, Any]:
        nonlocal read
        if read < len(messages):
            read += 1
            return messages[read - 1]
        await asyncio.Event().wait()
        raise AssertionError

    async def send(message: dict[str, Any]) -> None:
        sent.append(message)

    whole = {
        "type": "http",
        "asgi": {"version": "3.0"},
        "http_version": "1.1",
        "method": "POST",
        "scheme": "http",
        "path": "/v1/double",
        "raw_path": b"/v1/double",
        "query_string": b"",
        "root_path": "",
        "headers": [(b"content-type", b"application/json")],
        "client": ("127.0.0.1", 1),
        "server": ("127.0.0.1", 8000),
        **scope,
    }
    asyncio.run(app(whole, receive, send))
    headers = {name.decode(): value.decode() for name, value in sent[0]["headers"]}
    body = b"".join(message.get("body", b"") for message in sent[1:])
    return sent[0]["status"], headers, body, read
