"""Reads a JSON body strictly: what is accepted is exactly what the document of the service says.

Here lives what a body must be before it is a question: JSON in UTF-8, nested no deeper than allowed, no
member stated twice, every value of its own JSON type. Headers and arrival of the body live in `reading`, the
search for all faulty fields in `faults`.
"""

import asyncio
import json
import math
import re
import sys
from time import perf_counter
from typing import TypeVar, cast

import msgspec

from loopslack.contract.problems import FaultyField
from loopslack.contract.reading.register import READINGS, Read
from loopslack.contract.refusals import Refused, refusal_of, refusal_of_fields
from loopslack.contract.strict.duplicates import (
    LARGE_BODY,
    keeps_its_marks,
    pieces,
    refusal_of_duplicates,
    stated_twice,
)
from loopslack.contract.strict.faults import faults_of, holds_infinity
from loopslack.contract.strict.findings import first_fault
from loopslack.contract.strict.reader import reader_of
from loopslack.kernel.errors import CalculationError

Question = TypeVar("Question")

SLICE_SECONDS = 0.002
"""Time a step may take before other requests are let in."""

MOST_VALUES = 100_000
"""Commas in a body beyond which a fault is reported alone, as looking for more would cost too much."""

_untyped = msgspec.json.Decoder()
_HUGE = int(sys.float_info.max)
_BYTE = re.compile(r"\(byte (\d+)\)")


def decode(body: bytes, question: type[Question], nesting: int = 32, read: Read | None = None) -> Question:
    """A question read from a body.

    ``read`` reads a question of this type, where that depends on more than its type; it is asked only for the faults of
    a question that is refused.

    Looking for members stated twice costs, for a body of 1.3 kB, 4 us where questions spare their defaults and 10
    us where they do not, beside 3 us of decoding (own measurement; the standard library's hook takes 29 us).

    Raises:
        Refused: with every fault found, as the problem document to answer.

    """
    reader = reader_of(question)
    try:
        asked: Question = reader.read(body)
        if reader.is_surely_whole(asked, body) or keeps_its_marks(body):
            return asked
    except (msgspec.DecodeError, RecursionError, CalculationError):
        pass
    return _decode_with_care(body, question, nesting, read or READINGS.get(question))


async def decode_in_steps(body: bytes, question: type[Question], nesting: int = 32) -> Question:
    """The same for a body of any length, letting other requests go on in between.

    Raises:
        Refused: as `decode`.

    """
    if len(body) <= LARGE_BODY:
        return decode(body, question, nesting)
    reader = reader_of(question)
    try:
        asked: Question = reader.read(body)
    except (msgspec.DecodeError, RecursionError, CalculationError):
        return await asyncio.to_thread(_decode_with_care, body, question, nesting, READINGS.get(question))
    await asyncio.sleep(0)
    if reader.is_surely_whole(asked, body):
        return asked
    twice: list[FaultyField] = []
    pause = perf_counter() + SLICE_SECONDS
    for pointer, piece in pieces(body):
        twice += stated_twice(piece, pointer)
        if perf_counter() > pause:
            await asyncio.sleep(0)
            pause = perf_counter() + SLICE_SECONDS
    if twice:
        raise refusal_of_duplicates(twice)
    return asked


def _decode_with_care(body: bytes, question: type[Question], nesting: int, read: Read | None) -> Question:
    """Find out what is wrong with a body that was refused at first sight, or that it is sound after all."""
    if body.count(b",") > MOST_VALUES:
        _refuse_at_first_fault(body, question)
    value = _value(body)
    if _deeper_than(value, nesting):
        raise _nested(nesting)
    twice = stated_twice(body, "")
    if twice:
        raise refusal_of_duplicates(twice)
    value = _whole_numbers(value)
    try:
        asked = msgspec.convert(value, question, strict=True)
        if not holds_infinity(value):  # which the conversion, unlike the decoder, lets pass
            return asked
    except (msgspec.ValidationError, CalculationError):
        pass
    faults = faults_of(value, question, read)
    if not faults:
        raise AssertionError("a body was refused in which no fault can be found")
    raise refusal_of_fields(faults)


def _refuse_at_first_fault(body: bytes, question: type) -> None:
    """Refuse a body of very many values with the one fault the decoder stopped at, unless it has none."""
    try:
        reader_of(question).read(body)
    except RecursionError:
        raise _nested(0) from None
    except CalculationError as error:
        raise refusal_of(error) from None
    except msgspec.ValidationError as error:
        refused = refusal_of_fields([first_fault(error)])
        refused.detail = (
            "A field of the question is faulty; in so long a question only the first is looked for."
        )
        raise refused from None
    except msgspec.DecodeError as error:
        raise _not_json(body, str(error)) from None


def _value(body: bytes) -> object:
    """The body as plain JSON, or the refusal of what is not JSON at all."""
    if not body.strip():
        raise _malformed("empty-body", "The body is empty; send one JSON object.")
    if body.startswith(b"\xef\xbb\xbf"):
        raise _malformed("byte-order-mark", "The body begins with a byte order mark; send UTF-8 without one.")
    try:
        body.decode()
    except UnicodeDecodeError as error:
        message = f"The body is not UTF-8: byte {error.start} begins no character."
        raise _malformed("not-utf-8", message) from None
    try:
        return cast(object, _untyped.decode(body))
    except RecursionError:
        raise _nested(0) from None
    except msgspec.ValidationError:
        return _value_with_huge_numbers(body)
    except msgspec.DecodeError as error:
        raise _not_json(body, str(error)) from None


def _value_with_huge_numbers(body: bytes) -> object:
    """Read a body again in which a number is too large to be held, so that its place can be named."""

    def not_a_number(name: str) -> None:
        raise _malformed("not-finite", f"{name} is no number of JSON. State a finite number or leave it out.")

    try:
        return cast(object, json.loads(body, parse_constant=not_a_number, parse_int=_whole))
    except RecursionError:
        raise _nested(0) from None
    except ValueError:
        raise _malformed("not-json", "The body is not JSON.") from None


def _whole(digits: str) -> float:
    """A whole number, or infinity for one with more digits than a floating point number can have."""
    return int(digits) if len(digits) < 400 else math.inf


def _not_json(body: bytes, told: str) -> Refused:
    found = _BYTE.search(told)
    if found is None:
        return _malformed(
            "not-json",
            "The body is not JSON: it ends too early, or half of an escaped character pair is missing.",
        )
    place = int(found[1])
    word = re.match(rb".?(-?(NaN|Infinity|nan|inf))", body[max(0, place - 1) : place + 10], re.DOTALL)
    if word:
        name = word[1].decode()
        return _malformed(
            "not-finite", f"{name} at byte {place} is no number of JSON. State a finite number."
        )
    reason = told.removeprefix("JSON is malformed: ").split(" (")[0]
    return _malformed("not-json", f"The body is not JSON: {reason} at byte {place}.")


def _malformed(code: str, message: str) -> Refused:
    return Refused("malformed-body", message, faults=[FaultyField(pointer="", code=code, message=message)])


def _nested(nesting: int) -> Refused:
    limit = f" than the {nesting} levels allowed" if nesting else " than can be read"
    return Refused("nested-too-deeply", f"Objects and lists are nested deeper{limit}.")


def _deeper_than(value: object, nesting: int) -> bool:
    """Whether lists and objects lie deeper in one another than so many levels; found level by level."""
    level = [value]
    for _ in range(nesting):
        level = [
            inner
            for outer in level
            if isinstance(outer, dict | list)
            for inner in (outer.values() if isinstance(outer, dict) else outer)
            if isinstance(inner, dict | list)
        ]
        if not level:
            return False
    return True


def _whole_numbers(value: object) -> object:
    """The same value with 9.0 written as 9: JSON knows one kind of number, the decoder two."""
    if isinstance(value, float):
        return int(value) if value.is_integer() and abs(value) < 2**53 else value
    if isinstance(value, int):
        return value if abs(value) < _HUGE else math.inf
    if isinstance(value, list):
        return [_whole_numbers(inner) for inner in value]
    if isinstance(value, dict):
        return {name: _whole_numbers(inner) for name, inner in value.items()}
    return value
