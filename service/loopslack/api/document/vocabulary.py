"""Names for what Python leaves nameless: closed lists of values and unions of kinds.

A `Literal` or a union of structs has no name of its own, but every generated client needs one. Lives here:
the two kinds of entry and the look-up that refuses whatever has none, so that nothing reaches the document
inline. The entries stand in `words` and `kinds`. Must not live here: schemas.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import msgspec

CLASHING_NAMES = frozenset({"Unit", "Result", "Error", "Data", "Type", "Date", "Measurement", "Any"})

MOST_TOLD = 20
"""Words of a list whose meanings a description can take."""


class DocumentError(Exception):
    """The contract says something that has no clean place in the document; the message names it."""


@dataclass(frozen=True, slots=True)
class Word:
    """One value of a closed list: as sent, as a constant in generated code, and in a sentence."""

    value: str
    constant: str
    meaning: str


@dataclass(frozen=True, slots=True, kw_only=True)
class NamedValues:
    """A closed list of values. `extensible` warns readers that answers may gain values within version 1."""

    name: str
    meaning: str
    words: tuple[Word, ...]
    extensible: bool = False

    def schema(self) -> dict[str, object]:
        """The component schema: values, constants and meanings side by side.

        Few generators show the meanings that stand beside the values, all of them the description.
        """
        told = " ".join(f"`{word.value}`: {word.meaning}." for word in self.words)
        schema: dict[str, object] = {
            "type": "string",
            "description": f"{self.meaning}\n\n{told}" if len(self.words) <= MOST_TOLD else self.meaning,
            "enum": [word.value for word in self.words],
            "x-enum-varnames": [word.constant for word in self.words],
            "x-enum-descriptions": [word.meaning for word in self.words],
            "examples": [self.words[0].value],
        }
        if self.extensible:
            schema["x-extensible-enum"] = True
        return schema


@dataclass(frozen=True, slots=True, kw_only=True)
class NamedUnion:
    """One of several kinds, told apart by the tag member of each."""

    name: str
    meaning: str
    members: tuple[type[msgspec.Struct], ...]


def named(name: str, meaning: str, words: Mapping[str, str], *, extensible: bool = False) -> NamedValues:
    """A named list of values, its constants spelled after them."""
    spelled = tuple(Word(value, constant_of(value), words[value]) for value in words)
    return NamedValues(name=name, meaning=meaning, words=spelled, extensible=extensible)


def constant_of(value: str) -> str:
    """A value in the spelling of constants: `mass-balance` becomes `MASS_BALANCE`."""
    return re.sub(r"[^A-Z0-9]+", "_", value.upper())


class Vocabulary:
    """All names, looked up by what they name. Two names for the same thing, or one for two, are refused."""

    def __init__(self, values: Iterable[NamedValues], unions: Iterable[NamedUnion]) -> None:
        listed, joined = list(values), list(unions)
        self._values = {frozenset[object](word.value for word in entry.words): entry for entry in listed}
        self._unions = {frozenset(entry.members): entry for entry in joined}
        if len(self._values) < len(listed) or len(self._unions) < len(joined):
            raise DocumentError("two entries of the vocabulary name the same thing")
        names = [entry.name for entry in listed] + [entry.name for entry in joined]
        for name in names:
            if names.count(name) > 1 or name in CLASHING_NAMES:
                raise DocumentError(f"the name {name} is taken, twice used or clashes with generated code")

    def values(self, listed: Iterable[object], place: str) -> NamedValues:
        """The name of a closed list of values."""
        entry = self._values.get(frozenset(listed))
        if entry is None:
            raise DocumentError(f"{place}: no name in the vocabulary for {sorted(map(str, listed))}")
        return entry

    def union(self, members: Iterable[type[msgspec.Struct]], place: str) -> NamedUnion:
        """The name of a union of structs."""
        joined = frozenset(members)
        entry = self._unions.get(joined)
        if entry is None:
            classes = sorted(member.__name__ for member in joined)
            raise DocumentError(f"{place}: no name in the vocabulary for the union of {classes}")
        return entry
