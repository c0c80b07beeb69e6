"""Stagnation: how far steam reaches, the doubts, and what the loop does in the base case and under each of them."""

from collections.abc import Callable

from loopslack.contract.answers.loop import StagnationState
from loopslack.sheet.case import Case
from loopslack.sheet.figures.reach import steam_reach
from loopslack.sheet.lines import Beside, Block, Column, Row, Section, Table, Text
from loopslack.sheet.sections.discharges import discharges
from loopslack.sheet.sections.doubts import doubts
from loopslack.sheet.sections.names import mark_of_state, state_name, verdict_word

_Cell = Callable[[Case, StagnationState], str]


def steam(case: Case) -> Section:
    """The figure beside the doubts, then a column for every case."""
    figure = steam_reach(case)
    blocks: list[Block] = [doubts(case)] if figure is None else [Beside((figure,), (doubts(case),))]
    if case.result.stagnation:
        blocks.append(_table(case))
    left = discharges(case)
    if left is not None:
        blocks.append(left)
    cooler = case.answer.robust_cooler
    if cooler is not None:
        say = case.say
        blocks.append(
            Text(
                case.words(
                    "steam.robust-cooler",
                    unspent=say(cooler.unspent_power),
                    power=say(cooler.power),
                    volume=say(cooler.nominal_volume),
                )
            )
        )
    return Section("steam", case.words("section.steam"), tuple(blocks))


def _bounded(state: StagnationState, shown: str) -> str:
    return f"≥ {shown}" if state.lower_bound else shown


_ROWS: tuple[tuple[str, _Cell], ...] = (
    ("regime", lambda case, state: case.words(f"regime.{state.regime}")),
    ("pressure", lambda case, state: _bounded(state, case.say(state.vessel_pressure))),
    ("steam-temperature", lambda case, state: case.say(state.steam_temperature)),
    ("stagnation-temperature", lambda case, state: case.say(state.stagnation_temperature)),
    ("steam-power", lambda case, state: case.say(state.steam_power)),
    ("unspent", lambda case, state: case.say(state.unspent_power)),
    ("steam-volume", lambda case, state: _bounded(state, case.say(state.steam_volume))),
    ("vessel-liquid", lambda case, state: _bounded(state, case.say(state.vessel_liquid))),
    ("gas", lambda case, state: case.say(state.gas_temperature)),
    ("mixed", lambda case, state: case.say(state.mixed_temperature)),
    ("last", lambda case, state: case.say(state.last_arriving_temperature)),
)


def _table(case: Case) -> Table:
    words, states = case.words, case.result.stagnation
    marks = [mark_of_state(case, state.scenario) for state in states]
    rows = [Row((words("column.verdict"), *(verdict_word(case, mark) for mark in marks)), marks=("", *marks))]
    rows += [Row((words(f"column.{name}"), *(cell(case, state) for state in states))) for name, cell in _ROWS]
    columns = (
        Column(words("column.case")),
        *(Column(state_name(case, state.scenario), "value") for state in states),
    )
    return Table(
        words("table.stagnation"),
        columns,
        tuple(rows),
        words("table.stagnation-note"),
        compact=True,
        whole=True,
    )
