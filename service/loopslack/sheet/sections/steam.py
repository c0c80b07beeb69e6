"""Stagnation: how far steam reaches, and what the vessel sees in the base case and under every doubt."""

from loopslack.contract.answers_loop import StagnationState
from loopslack.sheet.case import Case
from loopslack.sheet.figures.reach import steam_reach
from loopslack.sheet.lines import Block, Column, Mark, Row, Section, Table
from loopslack.sheet.sections.names import state_name, verdict_word


def steam(case: Case) -> Section | None:
    """The figure and the table of all cases."""
    states = case.result.stagnation
    if not states:
        return None
    words, say = case.words, case.say
    rows = []
    for state in states:
        bound = "≥ " if state.lower_bound else ""
        mark = _mark(case, state)
        cells = (
            state_name(case, state.scenario),
            words(f"regime.{state.regime}"),
            f"{bound}{say(state.vessel_pressure)}",
            say(state.steam_temperature),
            say(state.stagnation_temperature),
            f"{bound}{say(state.steam_volume)}",
            say(state.steam_power),
            say(state.unspent_power),
            f"{bound}{say(state.vessel_liquid)}",
            say(state.mixed_temperature),
            verdict_word(case, mark),
        )
        rows.append(Row(cells, mark))
    numbers = (
        "pressure",
        "steam-temperature",
        "stagnation-temperature",
        "steam-volume",
        "steam-power",
        "unspent",
        "vessel-liquid",
        "mixed",
    )
    columns = (
        Column(words("column.case")),
        Column(words("column.regime")),
        *(Column(words(f"column.{name}"), "number") for name in numbers),
        Column(words("column.verdict")),
    )
    figure = steam_reach(case)
    blocks: list[Block] = [] if figure is None else [figure]
    blocks.append(
        Table(words("table.stagnation"), columns, tuple(rows), words("table.stagnation-note"), compact=True)
    )
    return Section("steam", words("section.steam"), tuple(blocks))


def _mark(case: Case, state: StagnationState) -> Mark:
    if state.verdict == "holds":
        return "holds"
    if state.verdict == "not-assessed":
        return "open"
    return "fails" if state.scenario in case.counted else "aside"
