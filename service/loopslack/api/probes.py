"""What an orchestrator and a monitor ask: is the process alive, is it ready, what has it counted."""

from typing import Any

from litestar import Request
from litestar.handlers import HTTPRouteHandler
from litestar.types import ASGIApp

from loopslack.api.reply import Reply, encode
from loopslack.api.routes import options_route
from loopslack.observability import Readiness, metrics_page

_FRESH = [(b"cache-control", b"no-store")]


def probe_routes(readiness: Readiness) -> list[HTTPRouteHandler]:
    """The routes of the three."""

    async def live(request: Request[Any, Any, Any]) -> ASGIApp:  # noqa: ARG001 - the framework passes it by name
        return Reply(b'{"status":"pass"}', b"application/json", 200, _FRESH)

    async def ready(request: Request[Any, Any, Any]) -> ASGIApp:  # noqa: ARG001 - as above
        if readiness.reason:
            body = encode({"status": "fail", "reason": readiness.reason})
            return Reply(body, b"application/json", 503, [*_FRESH, (b"retry-after", b"1")])
        return Reply(b'{"status":"pass"}', b"application/json", 200, _FRESH)

    async def metrics(request: Request[Any, Any, Any]) -> ASGIApp:  # noqa: ARG001 - as above
        body, media_type = metrics_page()
        return Reply(body, media_type.encode(), 200, _FRESH)

    routes = []
    for path, handler in (("/livez", live), ("/readyz", ready), ("/metrics", metrics)):
        routes.append(options_route(path, ("GET",)))
        routes.append(HTTPRouteHandler(path, http_method="GET", status_code=200, name=f"GET {path}")(handler))
    return routes
