"""The rules of a single value (number, text, word of a list) and what is said when one is broken.

Each function tells every broken rule; where the value stands and what lies around it
is known in `faults`.
"""

import math
import re
from collections.abc import Iterator, Mapping
from typing import NamedTuple

from msgspec import inspect

from loopslack.contract.strict.hints import example_of, expectation, listing, meanings, shown, words_near


class Broke(NamedTuple):
    """A broken rule: its code, what is said of it, and the numbers and words behind the message."""

    code: str
    message: str
    parameters: Mapping[str, float] = {}
    words: Mapping[str, str] = {}


Broken = Iterator[Broke]
Leaf = (
    inspect.FloatType
    | inspect.IntType
    | inspect.StrType
    | inspect.EnumType
    | inspect.LiteralType
    | inspect.BoolType
    | inspect.NoneType
)
"""Types without members."""


def broken_rules(value: object, kind: inspect.Type, member: inspect.Type, *, hint: bool) -> Broken:
    """Every rule a value without members breaks; ``member`` describes it as its member does."""
    match kind:
        case inspect.FloatType() | inspect.IntType():
            yield from _number(value, kind)
        case inspect.StrType():
            yield from _text(value, kind, member)
        case inspect.EnumType():
            yield from word(value, tuple(member.value for member in kind.cls), hint=hint)
        case inspect.LiteralType():
            yield from word(value, kind.values, hint=hint)
        case inspect.BoolType():
            if not isinstance(value, bool):
                yield wrong_type(value, kind)
        case _:
            if value is not None:
                yield wrong_type(value, kind)


def wrong_type(value: object, kind: inspect.Type) -> Broke:
    """A value of another JSON type than expected; null is one only where the member may not be absent."""
    remedy = ""
    if isinstance(value, str) and isinstance(kind, inspect.FloatType | inspect.IntType):
        remedy = " Send the number without quotes."
    elif value is None:
        remedy = " It must be stated."
    elif isinstance(value, int | float) and _has_unit(kind):
        remedy = " State the number together with its unit."
    return Broke("wrong-type", f"{shown(value)} will not do here: {expectation(kind)} is expected.{remedy}")


def _has_unit(kind: inspect.Type) -> bool:
    return isinstance(kind, inspect.StructType) and {field.name for field in kind.fields} == {"value", "unit"}


def word(value: object, words: tuple[object, ...], *, hint: bool) -> Broken:
    """A word of a closed list; near misses are looked for if `hint`."""
    if value in words and not isinstance(value, bool):
        return
    if not isinstance(value, str):
        yield Broke("wrong-type", f"{shown(value)} will not do here: one of {listing(words)} is expected.")
        return
    near = words_near(value, words) if hint else ()
    remedy = f"Did you mean {listing(near, last='or')}?" if near else "State one of them."
    message = f"{shown(value)} is none of {listing(words)}. {remedy}{meanings(words, near)}"
    yield Broke("not-a-member", message, words={"near": ", ".join(near)} if near else {})


def size(count: int, least: int | None, most: int | None, what: str) -> Broken:
    """The number of entries, members or characters."""
    short, long = ("too-short", "too-long") if what == "characters" else ("too-few", "too-many")
    if least is not None and count < least:
        message = f"There are {count} {what}; at least {least} are needed. Add to them."
        yield Broke(short, message, {"count": count, "low": least})
    if most is not None and count > most:
        message = f"There are {count} {what}; at most {most} are taken. Shorten it."
        yield Broke(long, message, {"count": count, "high": most})


def _number(value: object, kind: inspect.FloatType | inspect.IntType) -> Broken:
    if isinstance(value, bool) or not isinstance(value, int | float):
        yield wrong_type(value, kind)
    elif not _finite(value):
        yield Broke("out-of-range", "The number is larger than any this service can hold. Correct it.")
    elif isinstance(kind, inspect.IntType) and isinstance(value, float):
        yield Broke("wrong-type", f"{shown(value)} is no whole number. State a whole number.")
    else:
        rules = (
            ("at least", kind.ge, kind.ge is None or value >= kind.ge),
            ("more than", kind.gt, kind.gt is None or value > kind.gt),
            ("at most", kind.le, kind.le is None or value <= kind.le),
            ("less than", kind.lt, kind.lt is None or value < kind.lt),
            ("a multiple of", kind.multiple_of, kind.multiple_of is None or value % kind.multiple_of == 0),
        )
        if not all(kept for _, _, kept in rules):
            rule = " and ".join(f"{words} {limit:g}" for words, limit, _ in rules if limit is not None)
            message = f"{shown(value)} is outside the range: it must be {rule}. Correct it."
            yield Broke("out-of-range", message, _limits(value, kind))


def _limits(value: float, kind: inspect.FloatType | inspect.IntType) -> dict[str, float]:
    low = kind.ge if kind.ge is not None else kind.gt
    high = kind.le if kind.le is not None else kind.lt
    named = {"value": value, "low": low, "high": high}
    return {name: float(number) for name, number in named.items() if number is not None}


def _finite(value: float) -> bool:
    try:
        return math.isfinite(value)
    except OverflowError:  # a whole number beyond any floating point number
        return False


def _text(value: object, kind: inspect.StrType, member: inspect.Type) -> Broken:
    if not isinstance(value, str):
        yield wrong_type(value, kind)
        return
    yield from size(len(value), kind.min_length, kind.max_length, "characters")
    if kind.pattern is not None and not re.search(kind.pattern, value[:10_000]):
        like = example_of(member)
        form = (
            f"the form {kind.pattern}"
            if like is None
            else f"the form expected, which is that of {shown(like)}"
        )
        words = {"pattern": kind.pattern} | ({} if like is None else {"example": str(like)})
        yield Broke("pattern", f"{shown(value)} does not have {form}. Rewrite it.", words=words)
