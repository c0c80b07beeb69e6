"""What the service assumes when a caller states nothing, each with its range, its reason and its source.

A default that was used is always listed in the answer. The numbers stand in ``data/defaults.toml``; nothing
may be assumed that is not there.
"""

from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from msgspec import Struct, convert

from loopslack.kernel.citations import Cite, HowSeen
from loopslack.kernel.kinds import Area, Kind, Ratio
from loopslack.kernel.units import to_si
from loopslack.kernel.value import Assumed, Value
from loopslack.library.tables import KIND_NAMED, data


class Default(Struct, frozen=True, kw_only=True):
    """A number of the trade in SI, the range it commonly lies in, and why it is taken.

    Pressures keep the datum of ``kind``. ``unit`` is the unit it is written in in the trade.
    """

    key: str
    si: float
    kind: Kind
    low: float
    high: float
    unit: str
    why: str
    source: Cite

    def value(self, name: str = "") -> Value:
        """Return the number as a value that says it was assumed."""
        return Value(self.si, self.kind, name or self.key.replace("-", " "), Assumed(self.source))


class Choice(Struct, frozen=True, kw_only=True):
    """A word of the trade that is taken when none is stated, among which, and why."""

    key: str
    word: str
    among: tuple[str, ...]
    why: str
    source: Cite


class _Row(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    value: float
    unit: str
    kind: str
    low: float
    high: float
    why: str
    source: str
    seen: HowSeen

    def default(self, key: str) -> Default:
        kind = KIND_NAMED[self.kind]
        return Default(
            key=key,
            si=to_si(self.value, self.unit, kind),
            kind=kind,
            low=to_si(self.low, self.unit, kind),
            high=to_si(self.high, self.unit, kind),
            unit=self.unit,
            why=self.why,
            source=Cite(self.source, self.seen),
        )


class _Word(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    word: str
    among: tuple[str, ...]
    why: str
    source: str
    seen: HowSeen


class _File(Struct, frozen=True, forbid_unknown_fields=True):
    number: Mapping[str, _Row]
    word: Mapping[str, _Word]


@cache
def _file() -> _File:
    return convert(data("defaults"), _File)


@cache
def defaults() -> Mapping[str, Default]:
    """Every default number by its key; read once."""
    return MappingProxyType({key: row.default(key) for key, row in _file().number.items()})


@cache
def choices() -> Mapping[str, Choice]:
    """Every default word by its key; read once."""
    return MappingProxyType(
        {
            key: Choice(
                key=key, word=row.word, among=row.among, why=row.why, source=Cite(row.source, row.seen)
            )
            for key, row in _file().word.items()
        }
    )


def default(key: str) -> Default:
    """Look up a default number. KeyError for a key that is not there, a slip of ours."""
    return defaults()[key]


def choice(key: str) -> Choice:
    """Look up a default word. KeyError for a key that is not there, a slip of ours."""
    return choices()[key]


RELIEF_SIZES = (15, 20, 25, 32, 40)
"""Nominal sizes, mm, of relief valves that the trade's table knows."""

PRESSURE_EQUIPMENT_CATEGORIES = ("sound-engineering-practice", "category-i", "category-ii", "category-iii")


def relief_size_for(area: Area) -> int | None:
    """Nominal size, mm, of the relief valve for a collector area; None above the table: capacity decides."""
    for size in RELIEF_SIZES:
        if area <= default(f"relief-area-dn{size}").si:
            return size
    return None


def pressure_equipment_category(product: Ratio) -> str:
    """Category of a vessel with gas cushion, fluid group 2, by rated pressure times volume in bar litres.

    Above the last limit it is ``category-iv``. Holds above 0.5 bar gauge only, which every vessel of such a
    loop exceeds.
    """
    for category in PRESSURE_EQUIPMENT_CATEGORIES:
        if product <= default(f"pressure-equipment-{category}").si:
            return category
    return "category-iv"
