"""The card that hangs at the vessel: what to set, what to fill to on the day, what the gauge should show."""

from loopslack.contract.answers_loop import SettingsCard
from loopslack.sheet.case import Case
from loopslack.sheet.figures.filling import fill_pressure_over_temperature
from loopslack.sheet.lines import (
    Beside,
    Blanks,
    Bullets,
    Card,
    Column,
    Fact,
    Facts,
    Row,
    Section,
    Table,
    Text,
)


def settings(case: Case) -> Section:
    """The card, or why there is none."""
    words, card = case.words, case.result.settings
    if card is None:
        return Section("settings", words("section.settings"), (Text(words("settings.none"), "stop"),))
    figure = fill_pressure_over_temperature(case)
    lead: tuple[Text, ...] = ()
    if not case.chosen:
        lead = (Text(words("settings.not-chosen"), "stop"),)
    table = _by_temperature(case, card)
    upper = Beside((Facts(tuple(_facts(case, card))),), (table,) if figure is None else (figure,))
    steps = Bullets(tuple(words.phrase(step) for step in card.instructions), numbered=True)
    lower = Beside((_readings(case, card), steps), () if figure is None else (table,))
    names = ("blank.date", "blank.temperature", "blank.pressure", "blank.name")
    blanks = Blanks(tuple(words(name) for name in names))
    title = words("settings.card") if case.chosen else words("settings.card-nearest")
    return Section(
        "settings",
        words("section.settings"),
        (Card(title, (*lead, upper, lower, blanks)),),
        on_new_page=True,
    )


def _facts(case: Case, card: SettingsCard) -> list[Fact]:
    words, say = case.words, case.say
    vessel = case.vessel
    found = []
    if vessel is not None:
        found.append(
            Fact(
                words("part.vessel"), f"{vessel.pieces} \N{MULTIPLICATION SIGN} {say(vessel.nominal_volume)}"
            )
        )
        if vessel.cooling_vessel is not None:
            found.append(Fact(words("part.cooling-vessel"), say(vessel.cooling_vessel.content)))
    found += [
        Fact(
            words("fact.precharge"),
            say(card.precharge),
            words("fact.precharge-more", temperature=say(card.precharge_temperature)),
            large=True,
        ),
        Fact(
            words("fact.fill"),
            say(card.fill_pressure),
            words("settings.at", temperature=say(card.window.temperature)),
            large=True,
        ),
        Fact(
            words("fact.window"),
            say.between(card.window.lower, card.window.upper),
            words("settings.at", temperature=say(card.window.temperature)),
        ),
        Fact(words("fact.relief"), say(card.relief_set_pressure)),
        Fact(words("fact.final"), say(card.final_pressure)),
        Fact(words("fact.top-cold"), say(card.top_pressure_cold)),
    ]
    if card.gauge_range is not None:
        found.append(Fact(words("fact.gauge-range"), words("settings.range", end=say(card.gauge_range))))
    heights = words(
        "settings.heights",
        top=say(card.static_height),
        relief=say(card.relief_height),
        gauge=say(card.gauge_height),
    )
    found.append(Fact(words("fact.heights"), heights))
    return found


def _by_temperature(case: Case, card: SettingsCard) -> Table:
    words, say = case.words, case.say
    rows = []
    for row in card.by_temperature:
        if row.recommended is None:
            rows.append(
                Row((say(row.temperature), "\N{EN DASH}", words(f"omitted.{row.omitted}"), "\N{EN DASH}"))
            )
        else:
            rows.append(Row((say(row.temperature), say(row.lower), say(row.recommended), say(row.upper))))
    columns = (
        Column(words("column.day"), "number"),
        Column(words("figure.lowest"), "number"),
        Column(words("figure.recommended"), "number"),
        Column(words("figure.highest"), "number"),
    )
    return Table(words("table.fill"), columns, tuple(rows), compact=True)


def _readings(case: Case, card: SettingsCard) -> Table:
    words, say = case.words, case.say
    rows = []
    for reading in card.readings:
        shown = words("state.undefined") if reading.reading is None else say(reading.reading)
        rows.append(Row((words(f"reading.{reading.state}"), f"≥ {shown}" if reading.at_least else shown)))
    columns = (Column(words("column.state")), Column(words("column.gauge"), "number"))
    return Table(words("table.readings"), columns, tuple(rows), compact=True)
