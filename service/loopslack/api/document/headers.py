"""Headers of the contract: what a caller may send beside the body and what comes back.

Each is one named component. Which answer carries which header is said in `responses` and `paths`.
"""

from __future__ import annotations

from typing import Any

Schema = dict[str, Any]

REQUEST_ID_PATTERN = "^[A-Za-z0-9._-]{1,128}$"


def _header(meaning: str, example: object, *, always: bool = False, **schema: object) -> Schema:
    required = {"required": True} if always else {}
    return {"description": meaning, **required, "schema": {"type": "string", **schema}, "example": example}


HEADERS: dict[str, tuple[str, Schema]] = {
    "RequestId": (
        "X-Request-Id",
        _header(
            "The request id: the caller's own if one was sent in the right form, else a new one. It stands "
            "in every line the service logs about the request.",
            "quote-2024-0117.roof-2",
            always=True,
            maxLength=128,
            pattern=REQUEST_ID_PATTERN,
        ),
    ),
    "ServerTiming": (
        "Server-Timing",
        _header("Time the computation took, in milliseconds.", "calc;dur=1.8", maxLength=200),
    ),
    "NoStore": (
        "Cache-Control",
        _header(
            "Answers to questions are not to be stored by caches.", "no-store", always=True, maxLength=200
        ),
    ),
    "Cacheable": (
        "Cache-Control",
        _header(
            "How long the answer may be used without asking again.",
            "public, max-age=3600, stale-while-revalidate=86400",
            always=True,
            maxLength=200,
        ),
    ),
    "EntityTag": (
        "ETag",
        _header(
            "Strong tag of these bytes; send it in If-None-Match to be spared an unchanged answer.",
            '"9c1185a5c5e9fc54"',
            always=True,
            maxLength=128,
        ),
    ),
    "RetryAfter": (
        "Retry-After",
        {
            "description": "Seconds to wait before sending the same request again.",
            "required": True,
            "schema": {"type": "integer", "minimum": 1, "maximum": 3600},
            "example": 2,
        },
    ),
    "Allow": (
        "Allow",
        _header("Methods the path does have.", "OPTIONS, POST", always=True, maxLength=200),
    ),
    "AcceptedMediaTypes": (
        "Accept",
        _header("The media type the operation reads.", "application/json", always=True, maxLength=200),
    ),
    "Authenticate": (
        "WWW-Authenticate",
        _header("How to show a key.", "Bearer", always=True, maxLength=200),
    ),
}
"""By component name: the header's name on the wire and its definition."""

PARAMETERS: dict[str, Schema] = {
    "RequestId": {
        "name": "X-Request-Id",
        "in": "header",
        "required": False,
        "description": "An id of your own for this request, up to 128 letters, digits, points, underscores and "
        "hyphens; it comes back and stands in the logs. One in another form is replaced.",
        "schema": {"type": "string"},
        "example": "quote-2024-0117.roof-2",
    },
    "TraceParent": {
        "name": "traceparent",
        "in": "header",
        "required": False,
        "description": "W3C Trace Context of the calling span; it is written to the logs. "
        "One in another form is ignored.",
        "schema": {"type": "string"},
        "example": "00-4bf92f3577b34da6a3ce929d0e0e4736-00f067aa0ba902b7-01",
    },
    "IfNoneMatch": {
        "name": "If-None-Match",
        "in": "header",
        "required": False,
        "description": "ETag of an answer you still have; if it is current the answer is 304 without a body.",
        "schema": {"type": "string"},
        "example": '"9c1185a5c5e9fc54"',
    },
}
"""Parameters by component name."""

KEY = "key"
SCHEME: Schema = {
    "type": "http",
    "scheme": "bearer",
    "description": "A key from whoever runs the service, sent as `Authorization: Bearer`. Most installations ask for "
    "none; one that does answers 401 without it.",
}
"""The security scheme and its component name."""


def header_references(*names: str) -> Schema:
    """The `headers` member of a response that carries the named headers."""
    return {HEADERS[name][0]: {"$ref": f"#/components/headers/{name}"} for name in names}


def parameter_references(*names: str) -> list[Schema]:
    """The `parameters` member of an operation that takes the named parameters."""
    return [{"$ref": f"#/components/parameters/{name}"} for name in names]
