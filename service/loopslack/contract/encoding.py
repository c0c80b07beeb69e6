"""An answer as JSON, never with a number that is none.

Where an answer is sent or written to is no matter of this module.
"""

import math
from collections.abc import Mapping

import msgspec

_encode = msgspec.json.Encoder().encode


class NotFiniteError(ArithmeticError):
    """An answer holds NaN or an infinity: a fault of the service, never to be sent as `null`."""


def encoded(answer: object) -> bytes:
    """An answer as JSON.

    The encoder writes NaN and infinities as `null`, which a caller would take for an absent number. An answer
    has no other use for `null`, so that only a body with that word in it needs to be searched.

    Raises:
        NotFiniteError: the answer holds a number that is none.

    """
    body = _encode(answer)
    if b"null" in body:
        place = place_of_non_finite(answer)
        if place is not None:
            raise NotFiniteError(f"the answer is not finite at {place or 'its top'}")
    return body


def place_of_non_finite(value: object, pointer: str = "") -> str | None:
    """JSON Pointer of the first number that is not finite, if there is one."""
    if isinstance(value, float):
        return None if math.isfinite(value) else pointer
    if isinstance(value, msgspec.Struct):
        fields = zip(value.__struct_encode_fields__, value.__struct_fields__, strict=True)
        members = ((name, getattr(value, field)) for name, field in fields)
    elif isinstance(value, Mapping):
        members = ((str(name), inner) for name, inner in value.items())
    elif isinstance(value, list | tuple | set | frozenset):
        members = ((str(place), inner) for place, inner in enumerate(value))
    else:
        return None
    for name, inner in members:
        found = place_of_non_finite(inner, f"{pointer}/{name}")
        if found is not None:
            return found
    return None
