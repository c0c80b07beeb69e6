"""Finds every faulty field of a question that the strict decoder refused, and says what to do about each.

The decoder stops at the first fault; this module walks the value beside the type and reports them all. It
runs only after a refusal, so that a good question pays nothing, and it accepts nothing: what it finds no
fault with is put to the decoder again, whose verdict counts. The rules of single values are in `field_rules`.
"""

import math
import re
from collections.abc import Iterable, Mapping
from contextlib import suppress
from functools import cache

import msgspec
from msgspec import inspect

from loopslack.contract.problems import MOST_COUNTED, MOST_FAULTS, FaultyField
from loopslack.contract.refusals import fault_of
from loopslack.contract.strict.field_rules import Leaf, broken_rules, size, word, wrong_type
from loopslack.contract.strict.hints import expectation, listing, members_near, shown
from loopslack.kernel.errors import CalculationError, Refusals

MOST_HINTS = 20
"""Near misses looked for in one question; a search costs up to a millisecond."""


class _EnoughError(Exception):
    """Ends the walk."""


class Faults:
    """The faults of one question: the first of them kept, all of them counted."""

    def __init__(self) -> None:
        self.found: list[FaultyField] = []
        self.count = 0
        self._hints = 0

    @property
    def further(self) -> int:
        """Faults beyond those kept."""
        return self.count - len(self.found)

    def walk(self, value: object, kind: inspect.Type, pointer: str) -> None:
        """Report every fault of a value at a place, going into its members."""
        kind = _bare(kind)
        if isinstance(kind, Leaf):
            self._add_all(pointer, broken_rules(value, kind, self._may_hint()))
        elif isinstance(kind, inspect.UnionType):
            self._union(value, kind, pointer)
        elif isinstance(kind, inspect.StructType):
            self._object(value, kind, pointer)
        elif isinstance(kind, inspect.ListType | inspect.VarTupleType):
            self._list(value, kind, pointer)
        elif isinstance(kind, inspect.DictType):
            self._mapping(value, kind, pointer)
        else:
            raise TypeError(f"questions hold no {type(kind).__name__}")

    def _add(self, pointer: str, code: str, message: str) -> None:
        self._count_one()
        if len(self.found) < MOST_FAULTS:
            self.found.append(FaultyField(pointer=pointer, code=code, message=message))

    def _count_one(self) -> None:
        if self.count == MOST_COUNTED:
            raise _EnoughError
        self.count += 1

    def _add_all(self, pointer: str, broken: Iterable[tuple[str, str]]) -> None:
        for code, message in broken:
            self._add(pointer, code, message)

    def _add_cause(self, cause: CalculationError, pointer: str) -> None:
        """Take over a fault that the question's own rules found at this place."""
        for one in cause.errors if isinstance(cause, Refusals) else (cause,):
            self._count_one()
            if len(self.found) < MOST_FAULTS:
                self.found.append(fault_of(one, pointer))

    def _may_hint(self) -> bool:
        return self._hints < MOST_HINTS and len(self.found) < MOST_FAULTS

    def _union(self, value: object, kind: inspect.UnionType, pointer: str) -> None:
        options = [_bare(option) for option in kind.types]
        if value is None and any(isinstance(option, inspect.NoneType) for option in options):
            return
        options = [option for option in options if not isinstance(option, inspect.NoneType)]
        if len(options) == 1:
            self.walk(value, options[0], pointer)
            return
        variants = [option for option in options if isinstance(option, inspect.StructType)]
        if isinstance(value, dict) and variants:
            self._variant(value, variants, pointer)
            return
        fitting = next((option for option in options if _json_type_fits(value, option)), None)
        if fitting is None:
            self._add(pointer, *wrong_type(value, inspect.UnionType(tuple(options))))
        else:
            self.walk(value, fitting, pointer)

    def _variant(self, value: Mapping[str, object], variants: list[inspect.StructType], pointer: str) -> None:
        by_tag = {variant.tag: variant for variant in variants}
        tag_name = variants[0].tag_field
        if tag_name is None:
            self._object(value, variants[0], pointer)
            return
        tag = value.get(tag_name)
        if isinstance(tag, str) and tag in by_tag:
            self._object(value, by_tag[tag], pointer)
        elif tag_name not in value:
            message = f'"{tag_name}" is missing; it says which kind is meant. State one of {listing(by_tag)}.'
            self._add(f"{pointer}/{tag_name}", "missing", message)
        else:
            self._add_word(f"{pointer}/{tag_name}", tag, tuple(by_tag))

    def _add_word(self, pointer: str, value: object, words: tuple[object, ...]) -> None:
        self._add_all(pointer, word(value, words, hint=self._may_hint()))

    def _object(self, value: object, kind: inspect.StructType, pointer: str) -> None:
        if not isinstance(value, dict):
            self._add(pointer, *wrong_type(value, kind))
            return
        if _is_sound(value, kind):
            return
        before = self.count
        known = {field.encode_name for field in kind.fields}
        if kind.tag_field is not None:
            known.add(kind.tag_field)
            if kind.tag_field in value:
                self._add_word(f"{pointer}/{kind.tag_field}", value[kind.tag_field], (kind.tag,))
        for field in kind.fields:
            place = f"{pointer}/{escaped(field.encode_name)}"
            if field.encode_name in value:
                self.walk(value[field.encode_name], field.type, place)
            elif field.required:
                self._add(place, "missing", f'"{field.encode_name}" is missing.{_purpose(field.type)}')
        if kind.forbid_unknown_fields:
            for name in value:
                if name not in known:
                    self._unknown(name, known, pointer)
        if self.count == before:
            self._own_rules(value, kind, pointer)

    def _unknown(self, name: str, known: set[str], pointer: str) -> None:
        near = members_near(name, known) if self._may_hint() else ()
        self._hints += 1
        remedy = f"Did you mean {listing(near, last='or')}?" if near else f"It has {listing(sorted(known))}."
        place = f"{pointer}/{escaped(name[:64])}"
        self._add(place, "unknown-field", f"{shown(name)} is no member of this object. {remedy}")

    def _own_rules(self, value: object, kind: inspect.StructType, pointer: str) -> None:
        """Rules a structure checks about itself once its members are sound."""
        try:
            msgspec.convert(value, kind.cls, strict=True)
        except CalculationError as cause:
            self._add_cause(cause, pointer)
        except msgspec.ValidationError as error:
            if isinstance(error.__cause__, CalculationError):
                self._add_cause(error.__cause__, pointer)
            else:
                self._add(pointer, "invalid", _sentence(error))

    def _list(self, value: object, kind: inspect.ListType | inspect.VarTupleType, pointer: str) -> None:
        if not isinstance(value, list):
            self._add(pointer, *wrong_type(value, kind))
            return
        self._add_all(pointer, size(len(value), kind.min_length, kind.max_length, "entries"))
        for place, entry in enumerate(value):
            self.walk(entry, kind.item_type, f"{pointer}/{place}")

    def _mapping(self, value: object, kind: inspect.DictType, pointer: str) -> None:
        if not isinstance(value, dict):
            self._add(pointer, *wrong_type(value, kind))
            return
        self._add_all(pointer, size(len(value), kind.min_length, kind.max_length, "members"))
        for name, entry in value.items():
            place = f"{pointer}/{escaped(name[:64])}"
            self.walk(name, kind.key_type, place)
            self.walk(entry, kind.value_type, place)


def faults_of(value: object, question: type) -> Faults:
    """Every fault of a decoded body as a question of this type.

    Falls back on the decoder's own words where the walk finds nothing: a refused body always has a fault.
    """
    faults = Faults()
    with suppress(_EnoughError):
        faults.walk(value, shape_of(question), "")
    if not faults.count:
        try:
            msgspec.convert(value, question, strict=True)
        except msgspec.ValidationError as error:
            faults.count = 1
            faults.found = [first_fault(error)]
    return faults


def first_fault(error: msgspec.ValidationError) -> FaultyField:
    """The one fault the decoder itself reports, in its words."""
    path = re.search(r"`\$((?:\.[A-Za-z0-9_-]+|\[\d+\])*)", str(error))
    place = "" if path is None else path[1].replace(".", "/").replace("[", "/").replace("]", "")
    return FaultyField(pointer=place, code="invalid", message=_sentence(error))


@cache
def shape_of(question: type) -> inspect.Type:
    """What a type of question consists of, looked up once."""
    return inspect.type_info(question)


def escaped(name: str) -> str:
    """A member's name as one step of a JSON Pointer."""
    return name.replace("~", "~0").replace("/", "~1")


def _bare(kind: inspect.Type) -> inspect.Type:
    while isinstance(kind, inspect.Metadata):
        kind = kind.type
    return kind


def _json_type_fits(value: object, kind: inspect.Type) -> bool:
    if isinstance(value, bool):
        return isinstance(kind, inspect.BoolType)
    if isinstance(value, str):
        return isinstance(kind, inspect.StrType | inspect.EnumType | inspect.LiteralType)
    if isinstance(value, int | float):
        return isinstance(kind, inspect.IntType | inspect.FloatType)
    if isinstance(value, list):
        return isinstance(kind, inspect.ListType | inspect.VarTupleType)
    return isinstance(value, dict) and isinstance(kind, inspect.DictType | inspect.StructType)


def _purpose(kind: inspect.Type) -> str:
    """What a missing member is for: the first sentence of its description."""
    while isinstance(kind, inspect.Metadata):
        description = str((kind.extra_json_schema or {}).get("description", ""))
        if description:
            return " State it: " + description.partition(". ")[0].rstrip(".") + "."
        kind = kind.type
    return f" State it; {expectation(kind)} is expected."


def _sentence(error: msgspec.ValidationError) -> str:
    return str(error).partition(" - at ")[0].rstrip(".") + "."


def _is_sound(value: Mapping[str, object], kind: inspect.StructType) -> bool:
    """Whether an object is sound with all that is in it, asked of the decoder at a fiftieth of a walk."""
    try:
        msgspec.convert(value, kind.cls, strict=True)
    except (msgspec.ValidationError, CalculationError):
        return False
    return not holds_infinity(value)


def holds_infinity(value: object) -> bool:
    """Whether a value holds a number too large to be one, which the conversion lets pass."""
    if isinstance(value, dict | list):
        return any(map(holds_infinity, value.values() if isinstance(value, dict) else value))
    return isinstance(value, float) and math.isinf(value)
