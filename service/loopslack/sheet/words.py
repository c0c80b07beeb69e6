"""The words of the sheet in one language, from one catalogue per language, and texts of callers made safe to set.

English is the first catalogue and complete; another has the same keys. Sentences that an answer brings in English
(why something was assumed, what to do on site) stand in the other catalogue under the English sentence itself, so
that a sentence nobody has translated yet is printed in English rather than not at all; ``{}`` in it is a number.
Names of steps are put together from short ones, and are taken apart and put together again the same way.
"""

import re
import tomllib
import unicodedata
from collections.abc import Iterator, Mapping
from functools import cache
from importlib.resources import files
from typing import Any

from loopslack.sheet.numerals import Language

_FOLDER = "words"
REPLACEMENT = "\N{REPLACEMENT CHARACTER}"
# Marks that turn the direction of everything behind them: no part of a name, and able to reorder a sheet.
_DIRECTIONS = frozenset("\u061c\u200e\u200f\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")
_BREAKS = frozenset("\n\r\x0b\x0c\x85\u2028\u2029")
_UNPRINTABLE = frozenset({"Cc", "Cs", "Co", "Cn"})

_SENTENCE = re.compile(r"(?<=[.])\s+(?=[A-Z])")
_UNITS = {
    "degC": "°C",
    "degF": "°F",
    "kJ/m2K": "kJ/(m²·K)",
    "W/m2K": "W/(m²·K)",
    "W/m2": "W/m²",
    "J/kgK": "J/(kg·K)",
    "kg/m3": "kg/m³",
    "mm2": "mm²",
    "m2": "m²",
    "m3": "m³",
}
_UNIT = re.compile(rf"(?<![\w/])(?:{'|'.join(_UNITS)})(?![\w/])")
_NUMBER = re.compile(r"-?\d+(?:\.\d+)?")


class Words:
    """What the sheet says, by key."""

    def __init__(
        self,
        language: Language,
        entries: Mapping[str, str],
        phrases: Mapping[str, str],
        names: Mapping[str, str],
    ) -> None:
        self.language = language
        self._entries, self._phrases = entries, phrases
        self._names = {english: told for english, told in names.items() if "{}" not in english}
        self._compound = [(_ends(english), told) for english, told in names.items() if "{}" in english]
        # What is said behind a name is taken off first, the longest first.
        self._compound.sort(key=lambda one: (one[0][0] != "", -sum(map(len, one[0]))))
        self._patterns = [(_pattern(english), told) for english, told in phrases.items() if "{}" in english]

    def __call__(self, key: str, **parts: object) -> str:
        """The text of a key, its places filled. Raises ``KeyError`` for a key the catalogue has not."""
        text = self._entries[key]
        return text.format(**parts) if parts else text

    def or_else(self, key: str, other: str, **parts: object) -> str:
        """The text of a key, or another text where the catalogue has not got it."""
        text = self._entries.get(key)
        return other if text is None else text.format(**parts)

    def phrase(self, english: str) -> str:
        """An English text of an answer in this language, sentence by sentence, units written as everywhere."""
        found = self._phrase(english)
        if found is None:
            found = " ".join(self._phrase(one) or one for one in _SENTENCE.split(english))
        return self.unit_words(found)

    def _phrase(self, english: str) -> str | None:
        exact = self._phrases.get(english)
        if exact is not None:
            return exact
        for pattern, told in self._patterns:
            found = pattern.fullmatch(english)
            if found is not None:
                return told.format(*(self._number(part) for part in found.groups()))
        return None

    def name(self, english: str, parts: Mapping[str, str]) -> str | None:
        """What a step of a derivation computes, in this language; None where a part of its name is not known.

        ``parts`` are the loop's own names, which no language changes.
        """
        found = parts.get(english) or self._names.get(english)
        if found is not None:
            return found
        for (head, middle, tail), told in self._compound:
            if not (english.startswith(head) and english.endswith(tail)):
                continue
            inner = english[len(head) : len(english) - len(tail)]
            pieces = inner.rsplit(middle, 1) if middle else [inner]
            if "" in pieces or len(pieces) != told.count("{}"):
                continue
            names = [piece if piece.isdigit() else self.name(piece, parts) for piece in pieces]
            if None not in names:
                return told.format(*names)
        return None

    def unit_words(self, text: str) -> str:
        """A text with its units written as everywhere."""
        return _UNIT.sub(lambda code: _UNITS[code[0]], text)

    def _number(self, part: str) -> str:
        """A number within a sentence, with the language's decimal sign; anything else as it is."""
        return part.replace(".", ",") if self.language == "de" and _NUMBER.fullmatch(part) else part

    def __contains__(self, key: str) -> bool:
        return key in self._entries

    @property
    def keys(self) -> frozenset[str]:
        """Every key."""
        return frozenset(self._entries)


@cache
def words(language: Language) -> Words:
    """The catalogue of a language, read once."""
    text = files("loopslack.sheet").joinpath(_FOLDER, f"{language}.toml").read_text(encoding="utf-8")
    tables = tomllib.loads(text)
    phrases = tables.pop("phrases", {})
    names = tables.pop("names", {})
    return Words(language, dict(_flat(tables)), phrases, names)


def _ends(english: str) -> tuple[str, str, str]:
    """What stands before, between and behind the places of a compound name."""
    head, *between, tail = english.split("{}")
    return head, "".join(between), tail


def _pattern(english: str) -> "re.Pattern[str]":
    """A sentence with places for its numbers."""
    return re.compile("(.+)".join(re.escape(part) for part in english.split("{}")))


def _flat(tables: Mapping[str, Any], prefix: str = "") -> Iterator[tuple[str, str]]:
    for key, value in tables.items():
        if isinstance(value, str):
            yield prefix + key, value
        else:
            yield from _flat(value, f"{prefix}{key}.")


def plain(text: str) -> str:
    """A caller's text on one line: nothing in it can break a line, turn a direction or be no character at all."""
    if text.isascii() and text.isprintable():
        return text
    return "".join(_safe(letter) for letter in text)


MOST_LINES = 60


def paragraphs(text: str) -> list[str]:
    """A caller's longer text, line by line, each of them plain; empty lines are left out, very many run together."""
    lines = [line for part in text.replace("\r", "\n").split("\n") if (line := plain(part).strip())]
    return (
        lines if len(lines) <= MOST_LINES else [*lines[: MOST_LINES - 1], " ".join(lines[MOST_LINES - 1 :])]
    )


def _safe(letter: str) -> str:
    if letter in _BREAKS or letter == "\t":
        return " "
    if letter in _DIRECTIONS:
        return ""
    if unicodedata.category(letter) in _UNPRINTABLE or ord(letter) & 0xFFFE == 0xFFFE:
        return REPLACEMENT
    return letter
