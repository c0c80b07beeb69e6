"""Finds members of an object that are stated twice, of which the decoder would silently take the last.

A member stated twice shows in the quotation marks: a body that is decoded and encoded again has lost one of the
two, and its marks with it. Only a body that has lost some is read by the slower reader that names the places.
Nothing here knows a type of question.
"""

import json
from collections.abc import Iterator

import msgspec

from loopslack.contract.problems import MOST_FAULTS, FaultyField
from loopslack.contract.refusals import Refused
from loopslack.contract.strict.findings import escaped

LARGE_BODY = 64_000
"""Bytes beyond which a body is read in steps, so that no step holds the event loop for long."""

_untyped = msgspec.json.Decoder()
_members = msgspec.json.Decoder(dict[str, msgspec.Raw])
_entries = msgspec.json.Decoder(list[msgspec.Raw])
_encode = msgspec.json.Encoder().encode


def pieces(body: bytes) -> Iterator[tuple[str, bytes]]:
    """A large valid body cut into parts small enough to be looked at in one go, with their pointers.

    A part that holds an object of many members, or one of them stated twice, is not cut.
    """
    waiting = [("", body)]
    while waiting:
        pointer, piece = waiting.pop()
        head = piece.lstrip()[:1]
        if len(piece) <= LARGE_BODY or head not in (b"{", b"["):
            yield pointer, piece
        elif head == b"[":
            entries = _entries.decode(piece)
            waiting += ((f"{pointer}/{place}", bytes(entry)) for place, entry in enumerate(entries))
        else:
            members = _members.decode(piece)
            inside = sum(bytes(raw).count(b'"') for raw in members.values())
            names = sum(_encode(name).count(b'"') for name in members)
            if inside + names != piece.count(b'"') or b"\\u0022" in piece:
                yield pointer, piece
            else:
                waiting += [(f"{pointer}/{escaped(name)}", bytes(raw)) for name, raw in members.items()]


def keeps_its_marks(body: bytes) -> bool:
    """Whether decoding and encoding a body loses no quotation mark, and with it no member.

    A mark written as an escape could make up for a lost one; such a body is always looked at more closely.
    """
    if b"\\u0022" in body:
        return False
    try:
        return body.count(b'"') == _encode(_untyped.decode(body)).count(b'"')
    except msgspec.ValidationError:  # a number too large to hold
        return False


class _Members(list[tuple[str, object]]):
    """An object as the pairs that were written, nothing dropped."""


def stated_twice(piece: bytes, pointer: str) -> list[FaultyField]:
    """Members of an object that an earlier member of the same name precedes."""
    if keeps_its_marks(piece):
        return []
    twice: list[FaultyField] = []
    waiting: list[tuple[str, object]] = [
        (pointer, json.loads(piece, object_pairs_hook=_Members, parse_int=str, parse_float=str))
    ]
    while waiting:
        place, value = waiting.pop()
        if isinstance(value, _Members):
            seen: set[str] = set()
            for name, inner in value:
                step = f"{place}/{escaped(name)}"
                if name in seen:
                    message = f'"{name[:64]}" is stated more than once in this object. Leave one of them.'
                    twice.append(FaultyField(pointer=step, code="duplicate-key", message=message))
                seen.add(name)
                waiting.append((step, inner))
        elif isinstance(value, list):
            waiting += [(f"{place}/{step}", inner) for step, inner in enumerate(value)]
    return sorted(twice, key=lambda fault: fault.pointer)


def refusal_of_duplicates(twice: list[FaultyField]) -> Refused:
    """The refusal of a body with these members stated twice."""
    count = len(twice)
    detail = "1 member is stated twice." if count == 1 else f"{count} members are stated twice."
    further = max(0, count - MOST_FAULTS)
    return Refused("duplicate-keys", detail, faults=twice[:MOST_FAULTS], further=further)
