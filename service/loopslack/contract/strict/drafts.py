"""Questions that are faulty in places, made whole by something that stands in there, another thing in each turn.

What stands in is in itself sound: the documented example, either end of the documented range, each word of a list,
each variant, nothing at all where nothing need be stated. What is read from such a question is judged in
`reading.again`; no answer is ever computed from one.
"""

import math
from collections.abc import Callable, Mapping, Sequence
from typing import Any

from msgspec import inspect

Draft = Callable[[int], Any]
"""A value as it is in a turn."""


def fixed(value: object) -> Draft:
    """A sound value, the same in every turn."""
    return lambda _: value


def members(kind: inspect.StructType, drafts: Mapping[str, Draft]) -> Draft:
    """An object of drafted members; the others are absent."""
    return lambda turn: kind.cls(**{name: draft(turn) for name, draft in drafts.items()})


def entries(drafts: Sequence[Draft]) -> Draft:
    """A list of drafted entries."""
    return lambda turn: [draft(turn) for draft in drafts]


def each_in_turn(options: Sequence[Draft]) -> Draft:
    """One of several values that may be meant, each as it is in as many turns as there are of it."""
    return lambda turn: options[turn % len(options)](turn // len(options))


def stand_in(kind: inspect.Type, place: str) -> Draft:
    """What stands in for the value of a type at a place."""
    options = _options(kind, place)
    return lambda turn: options[turn % len(options)](turn)


def is_quantity(member: inspect.Type) -> bool:
    """Whether a member is described as a quantity with a range, so that the number is nothing without its unit."""
    return isinstance(member, inspect.Metadata) and (
        "low" in (member.extra or {}) or is_quantity(member.type)
    )


def _options(kind: inspect.Type, place: str, described: inspect.Metadata | None = None) -> list[Draft]:
    match kind:
        case inspect.Metadata():
            return _options(kind.type, place, kind)
        case inspect.UnionType():
            ordered = sorted(kind.types, key=lambda option: not isinstance(option, inspect.NoneType))
            return [draft for option in ordered for draft in _options(option, place, described)]
        case inspect.StructType():
            if described is not None and is_quantity(described):
                return _quantities(kind, described)
            return [_least(kind, place)]
        case inspect.ListType() | inspect.VarTupleType():
            return [
                entries(
                    [stand_in(kind.item_type, f"{place}/{k}") for k in range(max(1, kind.min_length or 0))]
                )
            ]
        case inspect.DictType():
            return [fixed({})]
        case _:
            return [fixed(value) for value in _values(kind, place)]


def _values(kind: inspect.Type, place: str) -> Sequence[object]:
    """Values without members; a text is that of its place, as no two places may need to have the same."""
    match kind:
        case inspect.BoolType():
            return (False, True)
        case inspect.LiteralType():
            return kind.values
        case inspect.EnumType():
            return tuple(kind.cls)
        case inspect.IntType() | inspect.FloatType():
            return [limit for limit in (kind.ge, kind.le) if limit is not None] or [0]
        case inspect.StrType():
            return (f"stands in at {place}",)
        case _:
            return (None,)


def _least(kind: inspect.StructType, place: str) -> Draft:
    """An object of the members it must have."""
    return members(
        kind,
        {
            field.name: stand_in(field.type, f"{place}/{field.encode_name}")
            for field in kind.fields
            if field.required
        },
    )


def _quantities(kind: inspect.StructType, described: inspect.Metadata) -> list[Draft]:
    """The quantity of the example and those at the ends of the range."""
    extra: Mapping[str, Any] = described.extra or {}
    schema: Mapping[str, Any] = described.extra_json_schema or {}
    numbers = [schema["examples"][0]["value"], extra["low"], extra["high"]]
    return [
        fixed(kind.cls(value=float(number), unit=extra["unit"]))
        for number in numbers
        if math.isfinite(number)
    ]
