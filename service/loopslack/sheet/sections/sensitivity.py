"""Which inputs move the volume, and how much worse than stated the vessel still takes."""

from loopslack.contract.answers_sizing import HeadRoomRow, SensitivityRow
from loopslack.sheet.case import Case
from loopslack.sheet.figures.bars import sensitivity as figure
from loopslack.sheet.lines import Beside, Block, Column, Row, Section, Table
from loopslack.sheet.sections.names import state_name
from loopslack.sheet.sections.sizing_names import input_name, input_number
from loopslack.sheet.words import plain

_NOTHING = 1e-6  # share of the volume


def sensitivity(case: Case) -> Section | None:
    """The figure beside what the vessel still takes, then every input."""
    found = case.answer.sensitivity
    if found is None:
        return None
    words = case.words
    room = Table(
        words("table.head-room"),
        (
            Column(words("column.worse")),
            Column(words("column.by-up-to"), "number"),
            Column(words("column.ended-by")),
        ),
        tuple(_room(case, row) for row in found.head_room),
        compact=True,
    )
    drawn = figure(case)
    blocks: list[Block] = [room] if drawn is None else [Beside((drawn,), (room,))]
    columns = (
        Column(words("column.input")),
        Column(words("column.present"), "number"),
        Column(words("column.range"), "number"),
        Column(words("column.volume-low"), "value"),
        Column(words("column.volume-high"), "value"),
        Column(words("column.largest-change"), "value"),
    )
    moved = [row for row in found.inputs if row.decides or _moves(row)]
    rows = tuple(Row(_cells(case, row)) for row in moved)
    still = ", ".join(input_name(case, row.input) for row in found.inputs if row not in moved)
    note = words("table.sensitivity-note")
    if still:
        note = f"{note} {words('sensitivity.still', inputs=still)}"
    blocks.append(Table(words("table.sensitivity"), columns, rows, note, compact=True))
    return Section("sensitivity", words("section.sensitivity"), tuple(blocks))


def _moves(row: SensitivityRow) -> bool:
    """Whether an input moves the volume by more than the solvers' own rounding."""
    ends = [end.nominal_volume.value for end in (row.low, row.high) if end.nominal_volume is not None]
    return row.largest_change is None or not ends or row.largest_change.value > _NOTHING * max(ends)


def _cells(case: Case, row: SensitivityRow) -> tuple[str, ...]:
    words, say = case.words, case.say
    none = words("volume.none")
    low, high = (input_number(case, row.input, end.value) for end in (row.low, row.high))
    return (
        input_name(case, row.input),
        input_number(case, row.input, row.present),
        words("figure.from-to", low=low, high=high),
        none if row.low.nominal_volume is None else say(row.low.nominal_volume),
        none if row.high.nominal_volume is None else say(row.high.nominal_volume),
        words("sensitivity.decides") if row.decides else say(row.largest_change),
    )


def _room(case: Case, row: HeadRoomRow) -> Row:
    words, say = case.words, case.say
    name = words.or_else(f"head-room.{row.id}", plain(row.id))
    ended = "" if row.ended_by is None else words.or_else(f"check.{row.ended_by}", plain(row.ended_by))
    if ended and row.scenario:
        ended = f"{ended} ({state_name(case, row.scenario)})"
    if row.outcome == "none":
        return Row((name, words("head-room.none"), ended), "fails")
    if row.outcome == "beyond-search":
        return Row((name, words("head-room.beyond", value=say(row.value)), ended))
    return Row((name, say(row.value), ended))
