"""Wiring: settings, operations and pages to one ASGI application. No rule of HTTP and no number lives here.

`loopslack.app:app` is what the server serves; it is made when it is first asked for, from the environment.
"""

import asyncio
import os
import sys
from collections.abc import AsyncIterator, Iterable
from contextlib import asynccontextmanager, suppress
from importlib import import_module
from typing import Any

from litestar import Litestar
from litestar.exceptions import HTTPException
from litestar.types import ASGIApp, Receive, Scope, Send

from loopslack.api.costly import Costly
from loopslack.api.costly_work import MOST_GROWN, costly_work
from loopslack.api.docs import DOCS_PAGES
from loopslack.api.guard import Guard, is_guarding, warn_if_open
from loopslack.api.many_places import ManyPlaces
from loopslack.api.many_work import many_work
from loopslack.api.openapi import document_pages
from loopslack.api.operations import Floor, Operation
from loopslack.api.probes import probe_routes
from loopslack.api.record import Record
from loopslack.api.reference import Page
from loopslack.api.routes import on_fault, on_http_exception, on_refused, routes_of
from loopslack.api.side import Side
from loopslack.api.v1 import OPERATIONS
from loopslack.api.wrappers import CrossOrigin, HeadAsGet, LiteralPaths, Shedding, StandingHeaders
from loopslack.contract.refusals import Refused
from loopslack.contract.writing.shared import provenance
from loopslack.observability import READINESS, Lines, LoopLag, set_up_logging
from loopslack.settings import Settings, SettingsError, settings_from
from loopslack.sheet.pdf import too_late_to_fork

SWITCH_SECONDS = 0.0005
"""How long a thread may hold the interpreter: one is used to look for all faults of a long body."""


class Application:
    """The whole service as one ASGI application, with the parts a test or a server may want to reach."""

    def __init__(
        self, settings: Settings, operations: Iterable[Operation[Any, Any]], pages: Iterable[Page]
    ) -> None:
        self.settings = settings
        self.lag = LoopLag()
        self.readiness = READINESS
        operations = tuple(operations)
        costly = Side(
            lambda: costly_work(operations, settings.nesting), self.readiness, too_late_to_fork, MOST_GROWN
        )
        many = Side(lambda: many_work(settings), self.readiness)
        self._sides = (costly, many)
        self.costly = Costly(costly, settings.costly_waiting, settings.deadline_seconds)
        self.many = ManyPlaces(many, settings.batches_waiting, settings.deadline_seconds, self.readiness)
        lines = set_up_logging(settings.log_level)
        floor = Floor(settings, self.costly, self.many)
        routes = routes_of(operations, pages, floor) + probe_routes(self.readiness)
        framework = Litestar(
            routes,
            debug=False,
            lifespan=[self._lifespan],
            openapi_config=None,  # the document is our own
            logging_config=None,
            exception_handlers={
                Refused: on_refused,
                HTTPException: on_http_exception,
                Exception: on_fault,
            },
        )
        self.tracing: Any = None
        self._outermost = self._wrapped(framework, lines if settings.access_log else None)

    def _wrapped(self, framework: ASGIApp, lines: Lines | None) -> ASGIApp:
        """The wrappers from the inside out."""
        app: ASGIApp = framework
        if is_guarding(self.settings):
            app = Guard(app, self.settings)
        app = HeadAsGet(app)
        app = LiteralPaths(app)
        app = Shedding(app, self.lag, self.settings.shed_lag_seconds)
        if self.settings.cors_origins:
            app = CrossOrigin(app, self.settings.cors_origins)
        if self.settings.tracing:
            app = self.tracing = _tracing_class()(app)
        return StandingHeaders(Record(app, lines))

    def before_serving(self) -> None:
        """Fork what is to be forked; called by a worker before its event loop runs, where it can."""
        for side in self._sides:
            side.start()

    @asynccontextmanager
    async def _lifespan(self, _: Litestar) -> AsyncIterator[None]:
        """Between start and stop of a worker: everything that may not be made before the server forks."""
        warn_if_open(self.settings)
        sys.setswitchinterval(SWITCH_SECONDS)
        watch = asyncio.create_task(self.lag.watch())
        if self.tracing is not None:
            self.tracing.start()
        self.readiness.draining = False
        self.readiness.loaded = True
        try:
            yield
        finally:
            self.readiness.draining = True
            self.close()
            if self.tracing is not None:
                self.tracing.stop()
            watch.cancel()
            with suppress(asyncio.CancelledError):
                await watch

    def close(self) -> None:
        """End what was forked."""
        for side in self._sides:
            side.close()

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """Answer a request."""
        await self._outermost(scope, receive, send)


def create_app(
    settings: Settings | None = None,
    *,
    operations: Iterable[Operation[Any, Any]] | None = None,
    pages: Iterable[Page] | None = None,
) -> Application:
    """The application for some settings, by default those of the environment, with all that the service offers.

    Raises:
        SettingsError: a variable of the environment will not do.

    """
    if settings is None:
        settings = settings_from(os.environ)
    if operations is None:
        operations = OPERATIONS
    provenance()  # read every equation before the server forks, not at the first question
    if pages is None:
        pages = (*document_pages(), *DOCS_PAGES)
    return Application(settings, operations, pages)


def _tracing_class() -> Any:  # noqa: ANN401 - of a module that may be absent
    try:
        return import_module("loopslack.api.tracing").Tracing
    except ImportError as error:
        raise SettingsError(f"LOOPSLACK_TRACING needs the extra `tracing` of the package: {error}") from None


def __getattr__(name: str) -> Application:
    """Make `app` when the server asks for it, so that a test can import `create_app` without one."""
    if name != "app":
        raise AttributeError(name)
    made = globals()["app"] = create_app()
    return made
