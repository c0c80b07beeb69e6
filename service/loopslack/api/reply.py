"""What is sent back: bytes with a status and headers, as a plain ASGI answer.

Here lives the encoding of answers and problems. The headers every answer bears are added further out.
"""

import math
from collections.abc import Mapping

import msgspec

from loopslack.api.asgi import Receive, Scope, Send
from loopslack.api.problems import PROBLEM_MEDIA_TYPE
from loopslack.api.refusals import Refused

encode = msgspec.json.Encoder().encode
NOTE = "loopslack.note"
"""Where the notes on a request are kept in its scope."""


class Reply:
    """A complete answer; also what an exception handler of the framework may return."""

    __slots__ = ("body", "headers", "status")

    def __init__(
        self,
        body: bytes,
        media_type: bytes,
        status: int = 200,
        headers: list[tuple[bytes, bytes]] | None = None,
    ) -> None:
        self.status = status
        self.body = body
        self.headers = list(headers or ())
        if status not in (204, 304):
            self.headers += [(b"content-type", media_type), (b"content-length", b"%d" % len(body))]

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:  # noqa: ARG002 - an ASGI answer
        """Send it."""
        await send({"type": "http.response.start", "status": self.status, "headers": self.headers})
        await send({"type": "http.response.body", "body": self.body, "more_body": False})

    def to_asgi_response(self, **_: object) -> "Reply":
        """The answer itself, as the framework asks for it."""
        return self


class NotFiniteError(ArithmeticError):
    """An answer holds NaN or an infinity: a fault of the service, never to be sent as `null`."""


def encoded(answer: object) -> bytes:
    """An answer as JSON.

    The encoder writes NaN and infinities as `null`, which a caller would take for an absent number. An answer
    has no other use for `null`, so that only a body with that word in it needs to be searched.

    Raises:
        NotFiniteError: the answer holds a number that is none.

    """
    body = encode(answer)
    if b"null" in body:
        place = place_of_non_finite(answer)
        if place is not None:
            raise NotFiniteError(f"the answer is not finite at {place or 'its top'}")
    return body


def place_of_non_finite(value: object, pointer: str = "") -> str | None:
    """JSON Pointer of the first number that is not finite, if there is one."""
    if isinstance(value, float):
        return None if math.isfinite(value) else pointer
    if isinstance(value, msgspec.Struct):
        fields = zip(value.__struct_encode_fields__, value.__struct_fields__, strict=True)
        members = ((name, getattr(value, field)) for name, field in fields)
    elif isinstance(value, Mapping):
        members = ((str(name), inner) for name, inner in value.items())
    elif isinstance(value, list | tuple | set | frozenset):
        members = ((str(place), inner) for place, inner in enumerate(value))
    else:
        return None
    for name, inner in members:
        found = place_of_non_finite(inner, f"{pointer}/{name}")
        if found is not None:
            return found
    return None


def problem_reply(refused: Refused, request_id: str) -> Reply:
    """A refusal as the answer to the request of this id."""
    headers = [(b"cache-control", b"no-store")]
    headers += [(name.lower().encode(), text.encode("latin-1")) for name, text in refused.headers.items()]
    body = encode(refused.document(request_id))
    return Reply(body, PROBLEM_MEDIA_TYPE.encode(), refused.kind.status, headers)
