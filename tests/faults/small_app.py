"""A small ASGI application for the tests of the connection limits, which must not depend on a real answer."""

from __future__ import annotations

import asyncio
from typing import Any


async def app(scope: dict[str, Any], receive: Any, send: Any) -> None:
    """Answers 200 with the body's length after the body has come, 408 if it did not come in time.

    Under `/no-more` it answers 413 after the first piece, as a limit on the body does.
    """
    if scope["type"] == "lifespan":
        await lifespan(receive, send)
        return
    if scope["path"] == "/no-more":
        await receive()
        headers = [(b"content-length", b"8"), (b"connection", b"close")]
        await send({"type": "http.response.start", "status": 413, "headers": headers})
        await send({"type": "http.response.body", "body": b"too much"})
        return
    length = 0
    status = 200
    while True:
        message = await receive()
        if message["type"] == "http.disconnect":
            status = 408
            break
        length += len(message.get("body", b""))
        if not message.get("more_body", False):
            break
    if scope["path"] == "/slow":
        await asyncio.sleep(0.5)
    answer = b"x" * 30_000_000 if scope["path"] == "/large" else str(length).encode()
    headers = [(b"content-length", str(len(answer)).encode()), (b"content-type", b"text/plain")]
    await send({"type": "http.response.start", "status": status, "headers": headers})
    for start in range(0, len(answer), 65536):
        more = start + 65536 < len(answer)
        await send({"type": "http.response.body", "body": answer[start : start + 65536], "more_body": more})


async def lifespan(receive: Any, send: Any) -> None:
    """Starts and stops at once: there is nothing to set up."""
    while True:
        message = await receive()
        await send({"type": message["type"] + ".complete"})
        if message["type"] == "lifespan.shutdown":
            return
