"""What is sent back: bytes with a status and headers, as a plain ASGI answer.

The headers every answer bears are added further out.
"""

import msgspec

from loopslack.api.asgi import Receive, Scope, Send
from loopslack.contract.problems import PROBLEM_MEDIA_TYPE
from loopslack.contract.refusals import Refused

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


def problem_reply(refused: Refused, request_id: str) -> Reply:
    """A refusal as the answer to the request of this id."""
    headers = [(b"cache-control", b"no-store")]
    headers += [(name.lower().encode(), text.encode("latin-1")) for name, text in refused.headers.items()]
    body = encode(refused.document(request_id))
    return Reply(body, PROBLEM_MEDIA_TYPE.encode(), refused.kind.status, headers)
