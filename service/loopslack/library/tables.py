"""Reads the tables that ship with the service; every cell is in SI and knows where it came from.

A table is a TOML file: what it is, which source it was taken from and how that was seen, the unit and kind
of each column, and the rows. What the rows mean stands in the modules that use them.
"""

import tomllib
from collections.abc import Mapping
from functools import cache
from importlib.resources import files

from msgspec import Struct, convert

from loopslack.kernel.citations import Cite, HowSeen
from loopslack.kernel.kinds import KINDS, Kind
from loopslack.kernel.units import to_si
from loopslack.kernel.value import Tabulated, Value

KIND_NAMED: Mapping[str, Kind] = {kind.name: kind for kind in KINDS}
"""Every kind by its name, as tables write it."""


class Column(Struct, frozen=True, forbid_unknown_fields=True):
    """What a column measures and the unit it is written in."""

    kind: str
    unit: str

    def si(self, number: float) -> float:
        """Turn a number of this column into SI."""
        return to_si(number, self.unit, KIND_NAMED[self.kind])


class Table(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """A table as written down: title, provenance, columns and rows.

    ``seen`` says how the numbers were seen, for every row that does not say otherwise in
    ``seen_otherwise``. ``note`` says what a user of the table must know, ``facts`` holds words about the
    table as a whole.
    """

    title: str
    source: str
    seen: HowSeen
    columns: Mapping[str, Column]
    rows: Mapping[str, Mapping[str, float]]
    place: str = ""
    note: str = ""
    facts: Mapping[str, str] = {}
    seen_otherwise: Mapping[str, HowSeen] = {}

    def cite(self, row: str) -> Cite:
        """Where a row was published and how it was seen."""
        return Cite(self.source, self.seen_otherwise.get(row, self.seen), self.place)

    def number(self, row: str, column: str) -> float:
        """One cell in SI. KeyError for a cell the table does not have."""
        return self.columns[column].si(self.rows[row][column])


def data(name: str) -> dict[str, object]:
    """Parse a data file. FileNotFoundError for a name that does not ship."""
    return tomllib.loads((files(__package__) / "data" / f"{name}.toml").read_text(encoding="utf-8"))


@cache
def table(name: str) -> Table:
    """Read a table by its file name, once. A malformed one raises ``msgspec.ValidationError``."""
    return convert(data(name), Table)


def cell(name: str, row: str, column: str) -> Value:
    """Read one cell of a table as a value that knows its row. KeyError for a cell the table does not have."""
    found = table(name)
    kind = KIND_NAMED[found.columns[column].kind]
    return Value(
        found.number(row, column), kind, column.replace("_", " "), Tabulated(name, row, found.cite(row))
    )
