"""What a connection is allowed, and what it is told beyond: the time limits, and answers that need no application."""

from __future__ import annotations

import json
import os
from http import HTTPStatus


def answer(status: HTTPStatus, detail: str, extra: str = "") -> bytes:
    """Write a whole HTTP/1.1 answer that carries a problem document and closes the connection."""
    problem = {"type": "about:blank", "title": status.phrase, "status": status, "detail": detail}
    body = json.dumps(problem).encode("ascii")
    head = (
        f"HTTP/1.1 {status} {status.phrase}\r\nContent-Type: application/problem+json\r\n"
        f"Cache-Control: no-store\r\nContent-Length: {len(body)}\r\n{extra}Connection: close\r\n\r\n"
    )
    return head.encode("latin-1") + body


REFUSAL = answer(
    HTTPStatus.SERVICE_UNAVAILABLE,
    "This worker serves as many connections as it may; try again in a second.",
    "Retry-After: 1\r\n",
)


def seconds_allowed(variable: str, default: float) -> float:
    """Read a time limit from the environment, in seconds; a limit cannot be switched off.

    Raises:
        ValueError: the variable holds no number between 0.1 s and one hour.

    """
    text = os.environ.get(variable, "")
    seconds = float(text) if text else default
    if not 0.1 <= seconds <= 3600.0:
        raise ValueError(f"{variable} must lie between 0.1 and 3600 seconds, not {text!r}")
    return seconds


class Limits:
    """The time limits of a connection in seconds, read from the environment once per worker."""

    __slots__ = ("head", "reader")

    def __init__(self) -> None:
        self.head = seconds_allowed("LOOPSLACK_HEAD_SECONDS", 5.0)
        self.reader = seconds_allowed("LOOPSLACK_READER_SECONDS", 30.0)
