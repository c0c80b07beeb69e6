"""Pages that do not change while the service runs: reference data, the document, static files.

Each is made once at start, with a strong entity tag over its bytes, so that a client that has it gets 304.
"""

import hashlib
from typing import Any

from litestar import Request
from litestar.handlers import HTTPRouteHandler
from litestar.types import ASGIApp
from msgspec import Struct

from loopslack.api.operations import Operation
from loopslack.api.reading import check_acceptable, header, refuse_query
from loopslack.api.reply import Reply
from loopslack.contract.encoding import encoded

CACHEABLE = "public, max-age=3600, stale-while-revalidate=86400"


class Page(Struct, frozen=True, kw_only=True):
    """Bytes at a path. `strict` pages are operations: they refuse a query, and an `Accept` without them."""

    path: str
    media_type: str
    body: bytes
    cache_control: str = CACHEABLE
    headers: tuple[tuple[bytes, bytes], ...] = ()
    strict: bool = False

    @property
    def entity_tag(self) -> str:
        """The strong entity tag (RFC 9110, 8.8.3) of the bytes."""
        return f'"{hashlib.sha256(self.body).hexdigest()[:32]}"'


def reference_page(operation: Operation[Any, Any], headers: tuple[tuple[bytes, bytes], ...] = ()) -> Page:
    """The page of a GET operation, its answer computed now."""
    if operation.ask is None:
        raise TypeError(f"{operation.operation_id} has nothing to ask")
    return Page(
        path=operation.path,
        media_type=operation.media_type,
        body=encoded(operation.ask()),
        headers=headers,
        strict=True,
    )


def page_route(page: Page) -> HTTPRouteHandler:
    """The route that serves a page, or tells a client that it has it already."""
    tag = page.entity_tag
    headers = [
        (b"etag", tag.encode()),
        (b"cache-control", page.cache_control.encode()),
        *page.headers,
    ]
    whole = Reply(page.body, page.media_type.encode(), 200, headers)
    unchanged = Reply(b"", b"", 304, headers)

    async def serve(request: Request[Any, Any, Any]) -> ASGIApp:
        if page.strict:
            refuse_query(request.scope)
            check_acceptable(request.scope, page.media_type)
        return unchanged if has_already(header(request.scope, b"if-none-match"), tag) else whole

    return HTTPRouteHandler(page.path, http_method="GET", status_code=200, name=f"GET {page.path}")(serve)


def has_already(if_none_match: str | None, tag: str) -> bool:
    """Whether a client holds the page with this tag; compared weakly, as RFC 9110 (13.1.2) has it."""
    if if_none_match is None:
        return False
    known = [one.strip().removeprefix("W/") for one in if_none_match.split(",")]
    return tag in known or known == ["*"]
