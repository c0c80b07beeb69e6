"""The operations for many designs, served in this process."""

from contextlib import contextmanager
from typing import Any

from litestar.testing import TestClient

from loopslack.api.v1_many import MANY_OPERATIONS
from loopslack.app import Application, create_app
from loopslack.settings import Settings


def service(**settings: Any) -> Application:
    """The application; a busy test machine is late by itself, which is no reason to refuse."""
    chosen = {"shed_lag_seconds": 10.0, "access_log": False} | settings
    return create_app(Settings(**chosen), operations=MANY_OPERATIONS)


@contextmanager
def serving(**settings: Any) -> Any:
    """A client of it."""
    app = service(**settings)
    with TestClient(app, raise_server_exceptions=False) as client:
        client.service = app
        yield client
