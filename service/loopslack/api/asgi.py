"""The words of ASGI as this service uses them.

Not typed further: the framework's types tell HTTP from web sockets at every step; this service has only HTTP.
"""

from collections.abc import Awaitable, Callable
from typing import Any, TypeAlias

Scope: TypeAlias = Any
Message: TypeAlias = Any
Receive: TypeAlias = Callable[[], Awaitable[Any]]
Send: TypeAlias = Callable[[Any], Awaitable[None]]
ASGIApp: TypeAlias = Callable[[Any, Any, Any], Awaitable[None]]
