"""Finds every faulty field of a question that the strict decoder refused, and says what to do about each.

The decoder stops at the first fault; this module walks the value beside the type and reports them all. Where a value is
faulty it drafts another to stand in, so that the question can then be read: numbers outside their range and members
that contradict each other are told in the same answer, as far as they do not depend on what stands in
(`reading.again` says how that is known, and what stays out of reach).

It runs only after a refusal, so that a good question pays nothing, and it accepts nothing: what it finds no
fault with is put to the decoder again, whose verdict counts. The rules of single values are in `field_rules`, the words
of a fault in `findings`.
"""

import math
from collections.abc import Collection, Mapping
from contextlib import suppress
from functools import cache

import msgspec
from msgspec import inspect

from loopslack.contract.order import in_order
from loopslack.contract.problems import FaultyField
from loopslack.contract.reading.again import lasting
from loopslack.contract.reading.register import Read
from loopslack.contract.strict import drafts
from loopslack.contract.strict.drafts import Draft
from loopslack.contract.strict.field_rules import Leaf, broken_rules, size, wrong_type
from loopslack.contract.strict.findings import EnoughError, Findings, escaped, first_fault, sentence
from loopslack.contract.strict.hints import expectation, listing, words_near
from loopslack.kernel.errors import CalculationError


class _Walk(Findings):
    """The walk through one question: what it finds, and the places where something has to stand in."""

    def __init__(self) -> None:
        super().__init__()
        self.unsound: set[str] = set()

    def walk(
        self, value: object, kind: inspect.Type, pointer: str, member: inspect.Type | None = None
    ) -> Draft:
        """Report every fault of a value at a place, going into its members; draft a value that is sound.

        ``member`` is the type as its member declares it, with the range of a quantity and the leave to be absent.
        """
        member, kind = member or kind, _bare(kind)
        if isinstance(kind, Leaf):
            return self._leaf(value, kind, pointer, member)
        if isinstance(kind, inspect.UnionType):
            return self._union(value, kind, pointer, member)
        if isinstance(kind, inspect.StructType):
            return self._object(value, kind, pointer, member)
        if isinstance(kind, inspect.ListType | inspect.VarTupleType):
            return self._list(value, kind, pointer, member)
        if isinstance(kind, inspect.DictType):
            return self._mapping(value, kind, pointer, member)
        raise TypeError(f"questions hold no {type(kind).__name__}")

    def read(self, question: Draft, read: Read) -> None:
        """Report what reading the drafted question brings to light beside the faults found so far."""
        for cause in lasting(question, read, self.unsound):
            self.add_cause(cause, "")

    def _in_place_of(self, kind: inspect.Type, pointer: str) -> Draft:
        """Draft what stands in for a faulty value."""
        self.unsound.add(pointer)
        return drafts.stand_in(kind, pointer)

    def _leaf(self, value: object, kind: inspect.Type, pointer: str, member: inspect.Type) -> Draft:
        before = len(self.found)
        self.add_all(pointer, broken_rules(value, kind, member, hint=self.may_hint()))
        if len(self.found) > before:
            return self._in_place_of(member, pointer)
        return drafts.fixed(float(value) if isinstance(kind, inspect.FloatType) else value)  # type: ignore[arg-type] # it broke no rule of numbers

    def _union(self, value: object, kind: inspect.UnionType, pointer: str, member: inspect.Type) -> Draft:
        options = [_bare(option) for option in kind.types]
        if value is None and any(isinstance(option, inspect.NoneType) for option in options):
            return drafts.fixed(None)
        options = [option for option in options if not isinstance(option, inspect.NoneType)]
        if len(options) == 1:
            return self.walk(value, options[0], pointer, member)
        variants = [option for option in options if isinstance(option, inspect.StructType)]
        if isinstance(value, dict) and variants:
            return self._variant(value, variants, pointer, member)
        fitting = next((option for option in options if _json_type_fits(value, option)), None)
        if fitting is not None:
            return self.walk(value, fitting, pointer, member)
        self.add_all(pointer, [wrong_type(value, inspect.UnionType(tuple(options)))])
        return self._in_place_of(member, pointer)

    def _variant(
        self,
        value: Mapping[str, object],
        variants: list[inspect.StructType],
        pointer: str,
        member: inspect.Type,
    ) -> Draft:
        by_tag = {variant.tag: variant for variant in variants}
        tag_name = variants[0].tag_field
        if tag_name is None:
            return self._object(value, variants[0], pointer, member)
        tag = value.get(tag_name)
        if isinstance(tag, str) and tag in by_tag:
            return self._object(value, by_tag[tag], pointer, member)
        if tag_name not in value:
            message = f'"{tag_name}" is missing; it says which kind is meant. State one of {listing(by_tag)}.'
            self.add(f"{pointer}/{tag_name}", "missing", message)
        else:
            self.add_word(f"{pointer}/{tag_name}", tag, tuple(by_tag))
        near = words_near(tag, by_tag) if isinstance(tag, str) and self.may_hint() else ()
        others = {name: entry for name, entry in value.items() if name != tag_name}
        if near:
            return self._whichever_is_meant(others, [by_tag[word] for word in near], pointer, member)
        fitting = _those_with_all(others.keys(), variants)
        # What is there shows which kind may be meant, but not enough of it to ask for what is not there.
        return self._whichever_is_meant(
            others, fitting, pointer, member, guessed=len(fitting) < len(variants)
        )

    def _whichever_is_meant(
        self,
        value: Mapping[str, object],
        variants: list[inspect.StructType],
        pointer: str,
        member: inspect.Type,
        *,
        guessed: bool = False,
    ) -> Draft:
        """Report what is wrong with the members but the tag, whichever variant is meant; draft each in turn."""
        stated = {f"{pointer}/{escaped(name)}" for name in value}
        searches, meant = [], []
        for variant in variants:
            search = _Walk()
            try:
                meant.append(drafts.members(variant, search._members(value, variant, pointer)))
            except EnoughError:
                meant.append(self._in_place_of(member, pointer))
            if guessed:
                search.forget({f"{pointer}/{field.encode_name}" for field in variant.fields} - stated)
            searches.append(search)
        self.add_shared(searches)
        self.unsound.update(*(search.unsound for search in searches))
        return drafts.each_in_turn(meant)

    def _object(self, value: object, kind: inspect.StructType, pointer: str, member: inspect.Type) -> Draft:
        if not isinstance(value, dict):
            self.add_all(pointer, [wrong_type(value, kind)])
            return self._in_place_of(member, pointer)
        sound = _sound(value, kind)
        if sound is not None:
            return drafts.fixed(sound)
        before = len(self.found)
        stated = self._members(value, kind, pointer)
        if len(self.found) == before:
            self._own_rules(value, kind, pointer)
        elif not drafts.is_quantity(member):
            return drafts.members(kind, stated)
        return self._in_place_of(member, pointer)

    def _members(
        self, value: Mapping[str, object], kind: inspect.StructType, pointer: str
    ) -> dict[str, Draft]:
        known = {field.encode_name for field in kind.fields}
        if kind.tag_field is not None:
            known.add(kind.tag_field)
            if kind.tag_field in value:
                self.add_word(f"{pointer}/{kind.tag_field}", value[kind.tag_field], (kind.tag,))
        stated: dict[str, Draft] = {}
        unknown = [name for name in value if name not in known] if kind.forbid_unknown_fields else []
        for field in kind.fields:
            place = f"{pointer}/{escaped(field.encode_name)}"
            if field.encode_name in value:
                stated[field.name] = self.walk(value[field.encode_name], field.type, place)
            elif field.required:
                self.add(place, "missing", f'"{field.encode_name}" is missing.{_purpose(field.type)}')
                stated[field.name] = self._in_place_of(field.type, place)
            elif unknown:  # any of which may have been meant as this one
                stated[field.name] = drafts.stand_in(field.type, place)
        for name in unknown:
            self.add_unknown(name, known, pointer)
        return stated

    def _own_rules(self, value: object, kind: inspect.StructType, pointer: str) -> None:
        """Rules a structure checks about itself once its members are sound."""
        try:
            msgspec.convert(value, kind.cls, strict=True)
        except CalculationError as cause:
            self.add_cause(cause, pointer)
        except msgspec.ValidationError as error:
            if isinstance(error.__cause__, CalculationError):
                self.add_cause(error.__cause__, pointer)
            else:
                self.add(pointer, "invalid", sentence(error))

    def _list(
        self, value: object, kind: inspect.ListType | inspect.VarTupleType, pointer: str, member: inspect.Type
    ) -> Draft:
        if not isinstance(value, list):
            self.add_all(pointer, [wrong_type(value, kind)])
            return self._in_place_of(member, pointer)
        self.add_all(pointer, size(len(value), kind.min_length, kind.max_length, "entries"))
        stated = [self.walk(entry, kind.item_type, f"{pointer}/{place}") for place, entry in enumerate(value)]
        lacking = range(len(value), kind.min_length or 0)
        stated += [self._in_place_of(kind.item_type, f"{pointer}/{place}") for place in lacking]
        return drafts.entries(stated)

    def _mapping(self, value: object, kind: inspect.DictType, pointer: str, member: inspect.Type) -> Draft:
        if not isinstance(value, dict):
            self.add_all(pointer, [wrong_type(value, kind)])
            return self._in_place_of(member, pointer)
        self.add_all(pointer, size(len(value), kind.min_length, kind.max_length, "members"))
        for name, entry in value.items():
            place = f"{pointer}/{escaped(name[:64])}"
            self.walk(name, kind.key_type, place)
            self.walk(entry, kind.value_type, place)
        return drafts.fixed(value)


def faults_of(value: object, question: type, read: Read | None = None) -> list[FaultyField]:
    """Every fault of a decoded body as a question of this type, in the order of the body.

    ``read`` reads such a question and so finds what no single member shows. Falls back on the decoder's own words where
    the walk finds nothing: a refused body always has a fault.
    """
    walk = _Walk()
    with suppress(EnoughError):
        draft = walk.walk(value, shape_of(question), "")
        if read is not None and walk.found:
            walk.read(draft, read)
    if not walk.found:
        try:
            msgspec.convert(value, question, strict=True)
        except msgspec.ValidationError as error:
            return [first_fault(error)]
    return in_order(walk.found, value)


@cache
def shape_of(question: type) -> inspect.Type:
    """What a type of question consists of, looked up once."""
    return inspect.type_info(question)


def _those_with_all(names: Collection[str], variants: list[inspect.StructType]) -> list[inspect.StructType]:
    """The variants that have all members of these names, or all variants if none has."""
    fitting = [
        variant for variant in variants if {field.encode_name for field in variant.fields}.issuperset(names)
    ]
    return fitting or variants


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


def _sound(value: Mapping[str, object], kind: inspect.StructType) -> object | None:
    """An object that is sound with all that is in it, asked of the decoder at a fiftieth of a walk."""
    try:
        found: object = msgspec.convert(value, kind.cls, strict=True)
    except (msgspec.ValidationError, CalculationError):
        return None
    return None if holds_infinity(value) else found


def holds_infinity(value: object) -> bool:
    """Whether a value holds a number too large to be one, which the conversion lets pass."""
    if isinstance(value, dict | list):
        return any(map(holds_infinity, value.values() if isinstance(value, dict) else value))
    return isinstance(value, float) and math.isinf(value)
