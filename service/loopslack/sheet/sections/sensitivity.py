"""Which inputs move the volume, and how much worse than stated the vessel still takes."""

from loopslack.contract.answers.sizing import HeadRoomRow, SensitivityRow
from loopslack.sheet.case import Case
from loopslack.sheet.figures.bars import sensitivity as figure
from loopslack.sheet.lines import Beside, Block, Column, Row, Section, Table, Text
from loopslack.sheet.sections.names import state_name
from loopslack.sheet.sections.sizing_names import by_weight, input_name, input_number, input_range
from loopslack.sheet.words import plain

_NOTHING = 1e-4  # share of the volume below which a change is told as none


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
    moved = by_weight(row for row in found.inputs if row.decides or _moves(row))
    rows = tuple(Row(_cells(case, row)) for row in moved)
    others = sorted((row for row in found.inputs if row not in moved), key=lambda row: row.input)
    helpless = ", ".join(input_name(case, row.input) for row in others if not _ends(row))
    still = ", ".join(input_name(case, row.input) for row in others if _ends(row))
    note = words("table.sensitivity-note")
    if helpless:
        note = f"{note} {words('sensitivity.helpless', inputs=helpless)}"
    if still:
        note = f"{note} {words('sensitivity.still', inputs=still)}"
    if rows:
        blocks.append(Table(words("table.sensitivity"), columns, rows, note, compact=True))
    else:
        blocks.append(Text(note, "small"))
    return Section("sensitivity", words("section.sensitivity"), tuple(blocks))


def _moves(row: SensitivityRow) -> bool:
    """Whether an input moves the volume by more than the solvers' own rounding."""
    ends = _ends(row)
    return bool(ends) and (row.largest_change is None or row.largest_change.value > _NOTHING * max(ends))


def _ends(row: SensitivityRow) -> list[float]:
    """The volumes at the ends of the range, where a vessel holds."""
    return [end.nominal_volume.value for end in (row.low, row.high) if end.nominal_volume is not None]


def _cells(case: Case, row: SensitivityRow) -> tuple[str, ...]:
    words, say = case.words, case.say
    none = words("volume.none")
    return (
        input_name(case, row.input),
        input_number(case, row.input, row.present),
        input_range(case, row.input, row.low.value, row.high.value),
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
