"""The states of a loop as every figure shows them: one sign and one line each, and a key of them with their numbers."""

from collections.abc import Sequence

from msgspec import Struct

from loopslack.sheet.drawing import LETTER, SMALL, WIDTH, Canvas, fitted, width_of

ROW = 17.0

SIGNS = {
    "fill": ("ring", ""),
    "cold": ("square", "5 3"),
    "operating": ("disc", "9 2 2 2"),
    "cut-off": ("diamond", "2 3"),
    "base": ("block", ""),
    "worst": ("up", "7 3"),
}
"""Sign and dash of each state."""


class Entry(Struct, frozen=True):
    """A line of a key: sign, name, and numbers right-aligned in their columns."""

    state: str
    name: str
    numbers: tuple[str, ...] = ()
    stop: bool = False


def key(canvas: Canvas, top: float, entries: Sequence[Entry], heads: Sequence[str] = ()) -> None:
    """Set a key below a figure: one line an entry, its numbers in columns at the right."""
    columns = max((len(entry.numbers) for entry in entries), default=0)
    widths = [
        max(
            [width_of(entry.numbers[k]) for entry in entries if k < len(entry.numbers)]
            + ([width_of(heads[k], SMALL)] if k < len(heads) else [])
        )
        for k in range(columns)
    ]
    ends, right = [0.0] * columns, WIDTH - 4.0
    for k in reversed(range(columns)):
        ends[k] = right
        right -= widths[k] + 12.0
    if heads:
        for end, head in zip(ends, heads, strict=True):
            canvas.text((end, top + SMALL), head, "end", kind="q", size=SMALL)
        top += ROW - 2
    for number, entry in enumerate(entries):
        base = top + number * ROW + LETTER
        shape, dash = SIGNS[entry.state]
        canvas.line((2.0, base - 4.0), (27.0, base - 4.0), weight=1.4, dash=dash)
        canvas.sign("cross" if entry.stop else shape, (14.0, base - 4.0), 4.0 if entry.stop else 3.6)
        canvas.text((34.0, base), fitted(entry.name, right - 36.0), bold=entry.stop)
        for end, text in zip(ends, entry.numbers, strict=False):
            canvas.text((end, base), text, "end", bold=entry.stop)


def key_height(entries: Sequence[Entry], *, heads: bool = False) -> float:
    """How much room a key takes."""
    return len(entries) * ROW + (ROW - 2 if heads else 0.0) + 4.0
