"""Words of the messages about faulty fields: how a value is shown, what is expected, what may be meant.

Only wording and near misses live here; which rule was broken is decided in `faults`.
"""

import json
from collections.abc import Iterable, Mapping, Sequence
from difflib import get_close_matches

from msgspec import inspect

from loopslack.contract.questions.collectors import EMPTYING_CLASSES
from loopslack.kernel.units import GAUGE_UNITS

LONGEST_SHOWN = 60
"""Characters of a caller's own value that a message repeats."""

MOST_LISTED = 16
"""Words a message lists before it only counts the rest."""

_ALSO_CALLED: dict[str, tuple[str, ...]] = {
    "c": ("degC",),
    "celsius": ("degC",),
    "centigrade": ("degC",),
    "f": ("degF",),
    "fahrenheit": ("degF",),
    "kelvin": ("K",),
    "degk": ("K",),
    "bar": ("barg", "bara"),
    "kpa": ("kPag", "kPaa"),
    "psi": ("psig", "psia"),
    "metre": ("m",),
    "metres": ("m",),
    "meter": ("m",),
    "meters": ("m",),
    "inch": ("in",),
    "inches": ("in",),
    "feet": ("ft",),
    "foot": ("ft",),
    "litre": ("L",),
    "litres": ("L",),
    "liter": ("L",),
    "liters": ("L",),
    "gal": ("gal_us", "gal_uk"),
    "gallon": ("gal_us", "gal_uk"),
    "gallons": ("gal_us", "gal_uk"),
    "sqm": ("m2",),
    "sqft": ("ft2",),
    "volpercent": ("volume-percent",),
    "vol": ("volume-percent",),
    "masspercent": ("mass-percent",),
    "wtpercent": ("mass-percent",),
    "wt": ("mass-percent",),
}
"""What units are also called, plainly spelt, and the unit or units that may be meant."""

_MEANINGS: tuple[Mapping[str, str], ...] = (EMPTYING_CLASSES,)
"""Meanings of lists of words whose words alone do not say which to choose."""

_NAMES: tuple[tuple[tuple[type[inspect.Type], ...], str], ...] = (
    ((inspect.FloatType,), "a number"),
    ((inspect.IntType,), "a whole number"),
    ((inspect.StrType,), "a text"),
    ((inspect.BoolType,), "true or false"),
    ((inspect.NoneType,), "null"),
    ((inspect.ListType, inspect.VarTupleType), "a list"),
    ((inspect.StructType, inspect.DictType), "an object"),
    ((inspect.EnumType, inspect.LiteralType), "a word of a list"),
)


def shown(value: object) -> str:
    """A caller's value as JSON in plain ASCII, shortened.

    In ASCII because a look-alike letter of another alphabet would otherwise seem the very thing expected.
    """
    if isinstance(value, str):
        return json.dumps(value if len(value) <= LONGEST_SHOWN else value[:LONGEST_SHOWN] + "...")
    if isinstance(value, dict):
        return "An object"
    if isinstance(value, list):
        return "A list"
    if isinstance(value, float | int) and not isinstance(value, bool):
        text = repr(value) if abs(value) < 1e30 else f"{value:e}"
        return text.removesuffix(".0")
    return json.dumps(value)


def listing(words: Iterable[object], last: str = "") -> str:
    """Words in quotes, separated by commas, with a last conjunction where one is wanted."""
    quoted = [json.dumps(word) for word in words]
    if len(quoted) > MOST_LISTED:
        return ", ".join(quoted[:MOST_LISTED]) + f" and {len(quoted) - MOST_LISTED} more"
    if last and len(quoted) > 1:
        return ", ".join(quoted[:-1]) + f" {last} {quoted[-1]}"
    return ", ".join(quoted)


def expectation(kind: inspect.Type) -> str:
    """What is expected at a place, in words."""
    while isinstance(kind, inspect.Metadata):
        kind = kind.type
    if isinstance(kind, inspect.UnionType):
        options = [option for option in kind.types if not isinstance(option, inspect.NoneType)]
        return " or ".join(dict.fromkeys(expectation(option) for option in options))
    if isinstance(kind, inspect.StructType):
        members = sorted(field.encode_name for field in kind.fields if field.required)
        return f"an object with {listing(members)}" if members else "an object"
    return next((name for kinds, name in _NAMES if isinstance(kind, kinds)), "another type")


def members_near(name: str, known: Iterable[str]) -> tuple[str, ...]:
    """Known members a caller may have meant: the same letters in another spelling, else the nearest ones."""
    return _near(name, {_plain(member): member for member in sorted(known)})


def words_near(word: str, words: Iterable[object]) -> tuple[str, ...]:
    """Words of a closed list a caller may have meant."""
    known = {_plain(text): text for text in words if isinstance(text, str)}
    units = _ALSO_CALLED.get(_plain(word[:64]), ())
    return tuple(unit for unit in units if unit in known.values()) or _near(word, known)


def meanings(words: Sequence[object], near: Sequence[str]) -> str:
    """What a caller should know to choose among the words, where the words alone do not say it."""
    if len(near) == 2 and near[0] in GAUGE_UNITS:
        return f" {near[0]} counts from the atmosphere at the site, {near[1]} from vacuum."
    for known in _MEANINGS:
        if set(known) == set(words):
            return "".join(f' "{word}": {meaning}.' for word, meaning in known.items())
    return ""


def example_of(kind: inspect.Type) -> object | None:
    """The example a member is described with, if any."""
    while isinstance(kind, inspect.Metadata):
        examples = (kind.extra_json_schema or {}).get("examples")
        if examples:
            return examples[0]  # type: ignore[no-any-return] # of the member's own type
        kind = kind.type
    return None


def _near(name: str, known: dict[str, str]) -> tuple[str, ...]:
    if len(name) > 64:
        return ()
    plain = _plain(name)
    if plain in known:
        return (known[plain],)
    longer = [
        known[other] for other in known if len(plain) > 2 and (other.startswith(plain) or plain in other)
    ]
    close = [known[other] for other in get_close_matches(plain, known, n=2, cutoff=0.6)]
    return tuple(dict.fromkeys([*longer, *close]))[:3]


def _plain(name: str) -> str:
    return "".join(letter for letter in name.casefold() if letter.isalnum())
