"""Tubes by standard and nominal size: diameters, content per length, material, limit of temperature.

Rows stand in ``data/tubes_*.toml``. The bore is the nominal one; tolerances are neglected. Whether a tube
may be used at a temperature is the caller's question, answered by ``highest_temperature``.
"""

from collections.abc import Mapping
from difflib import get_close_matches
from functools import cache
from math import pi, sqrt
from types import MappingProxyType

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import ContentPerLength, Length, Temperature
from loopslack.library.tables import Table, table


class Tube(Struct, frozen=True, kw_only=True):
    """One size of one standard. SI: m, m3/m, K.

    ``bore`` is the clear diameter, for a corrugated tube the diameter of the round tube of equal content.
    ``highest_temperature`` is None where nothing the service computes comes near the material's limit.
    """

    standard: str
    size: str
    material: str
    outer_diameter: Length
    wall: Length
    bore: Length
    content: ContentPerLength
    highest_temperature: Temperature | None
    source: Cite


class TubeStandard(Struct, frozen=True, kw_only=True):
    """A standard with its sizes, smallest first."""

    id: str
    title: str
    material: str
    note: str
    source: Cite
    tubes: Mapping[str, Tube]


_FILES: Mapping[str, str] = {
    "astm-b88-k": "tubes_astm_b88_k",
    "astm-b88-l": "tubes_astm_b88_l",
    "astm-b88-m": "tubes_astm_b88_m",
    "en-1057": "tubes_en_1057",
    "en-10220": "tubes_en_10220",
    "asme-b36-10-schedule-40": "tubes_asme_b36_10",
    "en-10312": "tubes_en_10312",
    "astm-a554": "tubes_astm_a554",
    "corrugated-stainless": "tubes_corrugated_stainless",
    "cross-linked-polyethylene": "tubes_cross_linked_polyethylene",
}


MOST_LISTED = 16
"""Names a message lists; of longer lists it gives only the nearest, if there are any."""


@cache
def tube_standards() -> Mapping[str, TubeStandard]:
    """Every standard with every size, by its id; read once."""
    return MappingProxyType({standard: _standard(standard, table(name)) for standard, name in _FILES.items()})


def tube(standard: str, size: str) -> Tube:
    """Look up a tube by standard and nominal size.

    Blanks, case, a trailing ``in``, ``mm`` or inch sign and the sign for "by" do not matter. Raises
    ``OutOfRange`` with the nearest names when the standard or the size is not in the tables.
    """
    found = tube_standards().get(standard)
    if found is None:
        raise OutOfRange(
            f"There is no table of tubes {standard!r}.",
            remedy=_hint(standard, tuple(tube_standards()), "Name one of the standards, or state a bore."),
            code="unknown-tube-standard",
            facts={"standard": standard, "known": list(tube_standards())},
        )
    row = found.tubes.get(_plain(size))
    if row is None:
        raise OutOfRange(
            f"The table {standard} has no size {size!r}.",
            remedy=_hint(
                _plain(size), tuple(found.tubes), "Name a size of the table, or state bore or content."
            ),
            code="unknown-tube-size",
            facts={"standard": standard, "size": size, "known": list(found.tubes)},
        )
    return row


def _plain(size: str) -> str:
    text = size.casefold().replace("\N{MULTIPLICATION SIGN}", "x").replace("*", "x").replace("-", " ")
    for unit in ("inches", "inch", "in", "mm", '"', "\N{DOUBLE PRIME}"):
        text = text.strip().removesuffix(unit)
    text = " ".join(text.split()).replace("dn ", "dn")
    # "22 x 1.0" is 22x1, while "1 1/4" keeps its blank.
    numbers = [part.strip() for part in text.split("x")]
    return "x".join(number.rstrip("0").rstrip(".") if "." in number else number for number in numbers)


def _hint(word: str, known: tuple[str, ...], otherwise: str) -> str:
    near = _near(word, known)
    listed = "" if near and len(known) > MOST_LISTED else f"Known: {', '.join(known)}. "
    meant = f"Did you mean {' or '.join(near)}? " if near else ""
    return f"{meant}{listed}{otherwise}"


def _near(word: str, known: tuple[str, ...]) -> list[str]:
    """Sizes of the same outer diameter, the nearest wall first; else names that are spelt alike."""
    outer, by, wall = word.partition("x")
    same = [name for name in known if by and name.partition("x")[0] == outer]
    if not same:
        return get_close_matches(word, known, n=3, cutoff=0.5)
    return sorted(same, key=lambda name: _apart(wall, name.partition("x")[2]))[:3]


def _apart(wall: str, other: str) -> float:
    try:
        return abs(float(wall) - float(other))
    except ValueError:
        return 0.0


def _standard(id: str, rows: Table) -> TubeStandard:
    material = rows.facts["material"]
    limit = rows.facts.get("highest_celsius")
    highest = None if limit is None else Temperature(float(limit) + 273.15)
    tubes = {size: _tube(id, size, material, highest, rows) for size in rows.rows}
    return TubeStandard(
        id=id,
        title=rows.title,
        material=material,
        note=rows.note,
        source=Cite(rows.source, rows.seen, rows.place),
        tubes=MappingProxyType(tubes),
    )


def _tube(id: str, size: str, material: str, highest: Temperature | None, rows: Table) -> Tube:
    outer = rows.number(size, "outer_diameter")
    wall = rows.number(size, "wall")
    bore = outer - 2 * wall
    if "content" in rows.columns:
        bore = sqrt(4 * rows.number(size, "content") / pi)
    return Tube(
        standard=id,
        size=size,
        material=material,
        outer_diameter=Length(outer),
        wall=Length(wall),
        bore=Length(bore),
        content=ContentPerLength(pi / 4 * bore * bore),
        highest_temperature=highest,
        source=rows.cite(size),
    )
