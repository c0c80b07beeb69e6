"""What leaves through the relief valve where it opens, and what is left of the loop afterwards."""

from loopslack.contract.answers.remedies import Discharge
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Table
from loopslack.sheet.sections.names import state_name


def discharges(case: Case) -> Table | None:
    """A row for every case in which the valve opens."""
    found = case.result.discharge
    if not found:
        return None
    words = case.words
    rows = tuple(
        Row(_cells(case, one), "fails" if one.scenario in case.counted else "aside") for one in found
    )
    columns = (
        Column(words("column.case")),
        Column(words("column.leaves"), "number"),
        Column(words("column.shuts"), "number"),
        Column(words("column.refill"), "number"),
        Column(words("column.afterwards")),
    )
    return Table(words("table.discharge"), columns, rows, words("table.discharge-note"))


def _cells(case: Case, one: Discharge) -> tuple[str, ...]:
    words, say = case.words, case.say
    left = [words("discharge.air" if one.draws_air else "discharge.pressure")]
    if one.vents_steam:
        left.append(words("discharge.steam"))
    more = "≥ " if one.at_least or one.stays_open else ""
    shuts = words("discharge.stays-open") if one.stays_open else say(one.closing_pressure)
    return (
        state_name(case, one.scenario),
        f"{more}{say(one.volume)}",
        shuts,
        f"{more}{say(one.refill)}",
        " ".join(left),
    )
