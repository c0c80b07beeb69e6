"""What the head of a request says about its body, and the body's arrival.

Here live media type, encoding, `Accept`, query, length and time limit of a request. What the bytes mean is a
matter of `decoding`. Nothing here knows an operation.
"""

import asyncio
import re
from collections.abc import Callable, Iterable
from functools import lru_cache

from loopslack.api.asgi import Receive, Scope
from loopslack.contract.refusals import Refused

JSON = "application/json"
_JSON_TYPE = re.compile(r"application/(?:[A-Za-z0-9!#$&^_.+-]+\+)?json", re.IGNORECASE)
_CHARSET = re.compile(r'\s*charset\s*=\s*"?([A-Za-z0-9_:.+-]+)"?\s*', re.IGNORECASE)


def header(scope: Scope, name: bytes) -> str | None:
    """The first header of this (lower-case) name, as text."""
    for key, value in scope["headers"]:
        if key == name:
            text: str = value.decode("latin-1")
            return text
    return None


def refuse_query(scope: Scope) -> None:
    """Refuse a query: no operation takes one, and one that is ignored was meant by somebody.

    Raises:
        Refused: 400.

    """
    if scope["query_string"]:
        names = [part.partition(b"=")[0][:32] for part in scope["query_string"].split(b"&")[:5]]
        told = ", ".join(name.decode("ascii", "replace") for name in names)
        raise Refused(
            "unexpected-query", f"The operation takes no query parameters; these were sent: {told}."
        )


def check_acceptable(scope: Scope, media_type: str) -> None:
    """Refuse an `Accept` header that excludes the operation's media type.

    Raises:
        Refused: 406.

    """
    accept = header(scope, b"accept")
    if accept is not None and not accepts(accept, media_type.partition(";")[0]):
        raise Refused("not-acceptable", f"The operation answers {media_type}, which Accept excludes.")


@lru_cache(maxsize=256)
def accepts(accept: str, media_type: str) -> bool:
    """Whether an `Accept` header allows a media type: the most specific range that matches decides."""
    best, allowed = -1, False
    for part in accept.split(","):
        name, *parameters = (piece.strip().lower() for piece in part.split(";"))
        group = media_type.partition("/")[0]
        rank = {media_type: 2, f"{group}/*": 1, "*/*": 0}.get(name, -1)
        if rank > best:
            best, allowed = rank, not any(_is_zero(parameter) for parameter in parameters)
    return allowed if best >= 0 else not accept.strip()


def _is_zero(parameter: str) -> bool:
    return re.fullmatch(r"q\s*=\s*0(\.0*)?", parameter) is not None


def check_body_head(scope: Scope, accepted: Iterable[str] = (JSON,)) -> None:
    """Refuse a body that is not declared as one of these media types in UTF-8, uncompressed.

    Raises:
        Refused: 415.

    """
    encoding = header(scope, b"content-encoding")
    if encoding is not None and encoding.strip().lower() not in ("", "identity"):
        detail = f"Content-Encoding {encoding[:40]!r} is not supported; send the body uncompressed."
        raise Refused("unsupported-encoding", detail, headers={"Accept-Encoding": "identity"})
    declared = header(scope, b"content-type")
    if declared == JSON and JSON in accepted:
        return
    wanted = " or ".join(accepted)
    if not declared:
        raise _not_supported(f"No Content-Type was sent; send {wanted}.", wanted)
    if not _media_type_fits(declared, tuple(accepted)):
        raise _not_supported(
            f"Content-Type {declared[:80]!r} is not supported; send {wanted} in UTF-8.", wanted
        )


@lru_cache(maxsize=256)
def _media_type_fits(declared: str, accepted: tuple[str, ...]) -> bool:
    name, *parameters = declared.split(";")
    name = name.strip()
    if name.lower() not in accepted and not (JSON in accepted and _JSON_TYPE.fullmatch(name)):
        return False
    for parameter in parameters:
        charset = _CHARSET.fullmatch(parameter)
        if charset is not None and charset[1].lower() not in ("utf-8", "utf8"):
            return False
        if charset is None and "charset" in parameter.lower():
            return False
    return True


def _not_supported(detail: str, wanted: str) -> Refused:
    return Refused("unsupported-media-type", detail, headers={"Accept": wanted.replace(" or ", ", ")})


async def read_body(scope: Scope, receive: Receive, limit: int, seconds: float) -> bytes:
    """The complete body of a request.

    A body announced as too long is refused before any of it is read; one that turns out so, at that point.

    Raises:
        Refused: 413 or 408, either of which ends the connection where the protocol lets an answer say so.

    """
    parts: list[bytes] = []
    await take_body(scope, receive, limit, seconds, parts.append)
    return parts[0] if len(parts) == 1 else b"".join(parts)


async def take_body(
    scope: Scope, receive: Receive, limit: int, seconds: float, take: Callable[[bytes], object]
) -> None:
    """Hand over the body of a request part by part, as it arrives.

    Raises:
        Refused: as `read_body`.

    """
    announced = header(scope, b"content-length")
    if announced is not None and announced.isdigit() and int(announced[:20]) > limit:
        raise _too_large(scope, limit)
    length = 0
    try:
        async with asyncio.timeout(seconds):
            message = await receive()
            while message["type"] == "http.request":
                part = message.get("body", b"")
                length += len(part)
                if length > limit:
                    raise _too_large(scope, limit)
                take(part)
                if not message.get("more_body", False):
                    return
                message = await receive()
    except TimeoutError:
        pass
    raise Refused("body-overdue", "The request body did not arrive in time.", headers=_closing(scope))


def _too_large(scope: Scope, limit: int) -> Refused:
    return Refused(
        "body-too-large",
        f"The body is longer than the {limit} bytes this operation takes.",
        headers=_closing(scope),
    )


def _closing(scope: Scope) -> dict[str, str]:
    return {"Connection": "close"} if scope["http_version"].startswith("1") else {}
