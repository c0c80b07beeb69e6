"""Thin wrappers around the application, each for one rule of HTTP that the framework leaves to us.

They are plain ASGI (about a microsecond each) because the framework's own hooks cost a hundred times that and
never see a request that matches no route. Order and wiring are in `loopslack.app`.
"""

from collections.abc import Iterable

from loopslack.api.asgi import ASGIApp, Message, Receive, Scope, Send
from loopslack.api.record import note_of
from loopslack.api.reply import problem_reply
from loopslack.contract.refusals import Refused
from loopslack.observability import LoopLag, count_refusal

UNSHED = frozenset({"/livez", "/readyz", "/metrics"})
"""Paths that are answered however late the event loop runs: they are how anyone learns that it does."""


async def refuse(refused: Refused, scope: Scope, receive: Receive, send: Send) -> None:
    """Answer with a problem document."""
    note = note_of(scope)
    note.problem = refused.kind.slug
    await problem_reply(refused, note.request_id)(scope, receive, send)


class StandingHeaders:
    """Headers every answer bears: where the description is, and what a browser must not do with it."""

    _PLAIN = (
        (b"x-content-type-options", b"nosniff"),
        (b"referrer-policy", b"no-referrer"),
        (b"link", b'</v1/openapi.json>; rel="service-desc", </docs>; rel="service-doc"'),
        (b"cross-origin-resource-policy", b"same-origin"),
    )
    _NOTHING = (b"content-security-policy", b"default-src 'none'; frame-ancestors 'none'")
    _PAGE = (
        b"content-security-policy",
        (
            b"default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; "
            b"font-src 'self'; connect-src 'self'; base-uri 'none'; form-action 'none'; "
            b"frame-ancestors 'none'"
        ),
    )

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Add them."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return

        async def with_headers(message: Message) -> None:
            if message["type"] == "http.response.start":
                headers = [*message["headers"], *self._PLAIN]
                names = dict(headers)
                if b"content-security-policy" not in names:
                    page = names.get(b"content-type", b"").startswith(b"text/html")
                    headers.append(self._PAGE if page else self._NOTHING)
                message["headers"] = headers
            await send(message)

        await self.app(scope, receive, with_headers)


class Shedding:
    """Refuses requests while the event loop runs late, so that those served are served in time."""

    def __init__(self, app: ASGIApp, lag: LoopLag, most_seconds: float) -> None:
        self.app = app
        self._lag = lag
        self._most_seconds = most_seconds

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Let a request through, or say at once that it should come again."""
        if scope["type"] == "http" and self._lag.now > self._most_seconds and scope["path"] not in UNSHED:
            count_refusal("lag")
            detail = "The service has more requests than it can answer in time."
            await refuse(Refused("overloaded", detail, headers={"Retry-After": "1"}), scope, receive, send)
            return
        await self.app(scope, receive, send)


class LiteralPaths:
    """Answers 404 where a slash is doubled or added at the end; the framework would quietly drop it."""

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Pass on a path that is written as it should be."""
        if scope["type"] == "http":
            path = scope["path"]
            if "//" in path or (path.endswith("/") and path != "/"):
                await refuse(nothing_here(), scope, receive, send)
                return
        await self.app(scope, receive, send)


class HeadAsGet:
    """Answers HEAD as GET without the body; the framework knows no HEAD."""

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Ask for the whole and send its head."""
        if scope["type"] != "http" or scope["method"] != "HEAD":
            await self.app(scope, receive, send)
            return

        async def head_only(message: Message) -> None:
            if message["type"] == "http.response.body":
                if message.get("more_body", False):
                    return
                message = {"type": "http.response.body", "body": b"", "more_body": False}
            await send(message)

        scope["method"] = "GET"
        try:
            await self.app(scope, receive, head_only)
        finally:
            scope["method"] = "HEAD"


class CrossOrigin:
    """Lets pages of the configured origins call the service from a browser (the Fetch standard's CORS)."""

    _ALLOWED_HEADERS = b"Authorization, Content-Type, If-None-Match, X-Request-Id, traceparent"
    _EXPOSED = b"ETag, X-Request-Id, Server-Timing, Retry-After, Deprecation, Sunset, Link"

    def __init__(self, app: ASGIApp, origins: Iterable[str]) -> None:
        self.app = app
        self._origins = frozenset(origin.encode() for origin in origins)

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Answer a preflight, or mark the answer as readable by the page."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return
        asked = dict(scope["headers"])
        origin = asked.get(b"origin", b"")
        known = origin in self._origins
        preflight = known and scope["method"] == "OPTIONS" and b"access-control-request-method" in asked

        async def marked(message: Message) -> None:
            if message["type"] == "http.response.start":
                headers = [*message["headers"], (b"vary", b"Origin")]
                if known:
                    headers += [
                        (b"access-control-allow-origin", origin),
                        (b"access-control-expose-headers", self._EXPOSED),
                    ]
                if preflight:
                    allowed = dict(message["headers"]).get(b"allow", b"")
                    headers += [
                        (b"access-control-allow-methods", allowed),
                        (b"access-control-allow-headers", self._ALLOWED_HEADERS),
                        (b"access-control-max-age", b"7200"),
                    ]
                message["headers"] = headers
            await send(message)

        await self.app(scope, receive, marked)


def nothing_here() -> Refused:
    """The refusal of a path that leads nowhere."""
    return Refused(
        "not-found", "Nothing has this path; paths are taken literally, a slash at the end included."
    )
