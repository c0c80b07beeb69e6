"""Pressures in every state: in the vessel against what it holds, over the height of the loop, and as a table."""

from loopslack.sheet.case import Case
from loopslack.sheet.figures.heights import pressure_over_height
from loopslack.sheet.figures.liquid import pressure_over_liquid
from loopslack.sheet.lines import Beside, Block, Column, Row, Section, Table


def pressures(case: Case) -> Section:
    """The two figures side by side and the numbers behind them."""
    words, say = case.words, case.say
    blocks: list[Block] = []
    drawn = [
        drawing for drawing in (pressure_over_liquid(case), pressure_over_height(case)) if drawing is not None
    ]
    if len(drawn) == 2:
        blocks.append(Beside((drawn[0],), (drawn[1],)))
    else:
        blocks += drawn
    rows = []
    for state in case.result.states:
        empty = state.vessel_pressure is None
        name = words(f"state.{state.id}")
        if state.frozen:
            name = f"{name} ({words('state.frozen')})"
        cells = (
            name,
            say(state.vessel_temperature),
            say(state.vessel_liquid),
            words("state.undefined") if empty else say(state.vessel_pressure),
            say(state.top_pressure),
            say(state.gauge_reading),
        )
        rows.append(Row(cells, "fails" if empty or state.frozen else ""))
    columns = (
        Column(words("column.state")),
        Column(words("column.vessel-temperature"), "number"),
        Column(words("column.vessel-liquid"), "number"),
        Column(words("column.vessel-pressure"), "number"),
        Column(words("column.top-pressure"), "number"),
        Column(words("column.gauge"), "number"),
    )
    blocks.append(Table(words("table.states"), columns, tuple(rows), words("table.states-note")))
    return Section("pressures", words("section.pressures"), tuple(blocks))
