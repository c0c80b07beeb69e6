"""A sheet as plain text, line by line, as it is kept in `golden`.

`python tests/sheet/plain_text.py` (with `service` and `tests` on the path) writes them anew. Do that only when a
number or a word was meant to change, and read the difference.
"""

import re
import sys
from collections.abc import Callable, Iterable, Iterator
from pathlib import Path
from typing import Any

from loopslack.sheet.lines import (
    Beside,
    Blanks,
    Block,
    Bullets,
    Card,
    Drawing,
    Facts,
    Notice,
    Sheet,
    Table,
    Text,
)

FOLDER = Path(__file__).parent / "golden"
KEPT = ("wash-house", "too-small", "cabin-us-units", "garden-house", "school-many-branches")
# Versions and fingerprints change with every release, what a root leaves over with every machine.
_CHANGING = re.compile(
    r"\b(?:[0-9a-f]{16}|[0-9a-f]{12})\b|\b\d+\.\d+\.\d+\b"
    r"|(?<=: )[\d.,]+ \u00d7 10\S+ \w+|(?<=: )0 (?:bar|psi|W)\b"
)


def plain_text(sheet: Sheet) -> str:
    """Every word and number of a sheet that should not change by itself."""
    lines = [
        sheet.title,
        *(f"{fact.name}: {fact.value}" for fact in sheet.head),
        f"[{sheet.banner.word}] {sheet.banner.sentence} {sheet.banner.basis}",
    ]
    for number, section in enumerate(sheet.sections, 1):
        lines += ["", f"{number} {section.title}"]
        for block in section.blocks:
            lines += _lines(block)
    text = "\n".join(line.rstrip() for line in lines) + "\n"
    return _CHANGING.sub("…", text.replace("\u00a0", " ").replace("\u202f", " "))


def _lines(block: Block) -> Iterator[str]:
    if isinstance(block, Beside):
        inside: tuple[Block, ...] = (*block.left, *block.right)
    elif isinstance(block, Card):
        yield f"+ {block.title}"
        inside = block.blocks
    else:
        yield from _SIMPLE[type(block)](block)
        return
    for one in inside:
        yield from _lines(one)


def _table(table: Table) -> Iterator[str]:
    yield f"# {table.caption}"
    yield " | ".join(column.title for column in table.columns)
    yield from (" | ".join(row.cells) for row in table.rows)
    if table.note:
        yield f"  {table.note}"


def _facts(facts: Facts) -> Iterator[str]:
    for fact in facts.facts:
        yield f"{fact.name}: {fact.value}{f' ({fact.more})' if fact.more else ''}"


_SIMPLE: dict[type, Callable[[Any], Iterable[str]]] = {
    Table: _table,
    Facts: _facts,
    Text: lambda text: [text.text],
    Bullets: lambda bullets: [f"- {item}" for item in bullets.items],
    Notice: lambda notice: [f"! {notice.grade} {notice.message} {notice.remedy}"],
    Drawing: lambda drawing: [f"~ {drawing.title}: {drawing.description}"],
    Blanks: lambda blanks: [" | ".join(f"{name}: ____" for name in blanks.names)],
}


if __name__ == "__main__":
    from sheet.sheets import sheet

    FOLDER.mkdir(exist_ok=True)
    for name in KEPT:
        (FOLDER / f"{name}.txt").write_text(plain_text(sheet(name)), encoding="utf-8")
        sys.stdout.write(f"{name}\n")
