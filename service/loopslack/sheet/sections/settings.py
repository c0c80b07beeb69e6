"""The card that hangs at the vessel: what to set, what to fill to on the day, what the gauge should show."""

from loopslack.contract.answers.loop import SettingsCard
from loopslack.contract.answers.shared import AnyQuantity
from loopslack.contract.quantity import Pressure
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
from loopslack.sheet.sections.fluids import fluid_name


def settings(case: Case) -> Section:
    """The card, or why there is none.

    Settings of a vessel that was not chosen are shown, but not as a card: nobody shall hang them up.
    """
    words, card = case.words, case.result.settings
    if card is None:
        return Section("settings", words("section.settings"), (Text(words("settings.none"), "stop"),))
    figure = fill_pressure_over_temperature(case)
    lead = Text(words("settings.not-chosen"), "stop")
    table = _by_temperature(case, card)
    upper = Beside((Facts(tuple(_facts(case, card))),), (table,) if figure is None else (figure,))
    if not case.chosen:
        beside = Beside((_readings(case, card),), () if figure is None else (table,))
        return Section("settings", words("section.settings-nearest"), (lead, upper, beside))
    steps = Bullets(tuple(words.phrase(step) for step in card.instructions), numbered=True)
    lower = Beside((_readings(case, card), steps), () if figure is None else (table,))
    names = ("blank.date", "blank.temperature", "blank.pressure", "blank.name")
    blanks = Blanks(tuple(words(name) for name in names))
    card_blocks = (upper, lower, Text(words("caution.scalding"), "lead"), blanks)
    return Section(
        "settings",
        words("section.settings"),
        (Card(words("settings.card"), card_blocks),),
        on_new_page=True,
    )


def _facts(case: Case, card: SettingsCard) -> list[Fact]:
    words, say = case.words, case.say
    vessel = case.vessel
    freezing = words("fact.fluid-more", freezing=say(case.result.order.freezing_point))
    found = [Fact(words("head.project"), case.project)] if case.project else []
    found.append(Fact(words("fact.fluid"), fluid_name(case), freezing))
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
            _at(case, card),
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


def _at(case: Case, card: SettingsCard) -> str:
    """At which temperature the fill pressure counts, and what the gauge then shows where it stands elsewhere."""
    words, say = case.words, case.say
    told = words("settings.at", temperature=say(card.window.temperature))
    filled = _filled(card)
    if filled is None:
        return told
    return f"{told}; {words('settings.on-gauge', reading=say(filled))}"


def _filled(card: SettingsCard) -> Pressure | None:
    """What the gauge shows once the loop is filled, where it stands at another height than the vessel."""
    if card.gauge_height.value == 0:
        return None
    return next((one.reading for one in card.readings if one.state == "fill"), None)


def _by_temperature(case: Case, card: SettingsCard) -> Table:
    """Fill pressures at the vessel; what the gauge then shows where it stands at another height."""
    words, say = case.words, case.say
    apart = card.gauge_height.value != 0
    columns = [
        Column(words("column.day"), "number"),
        Column(words("figure.lowest"), "number"),
        Column(words("figure.recommended"), "number"),
        Column(words("figure.highest"), "number"),
        Column(words("figure.recommended-on-gauge"), "number"),
    ]
    rows = []
    for row in card.by_temperature:
        numbers = [say(one) for one in (row.lower, row.recommended, row.upper, row.reading)]
        if row.recommended is None:
            numbers[1] = words(f"omitted.{row.omitted}")
        rows.append(Row((say(row.temperature), *(numbers if apart else numbers[:3]))))
    shown = columns if apart else columns[:4]
    return Table(words("table.fill"), tuple(shown), tuple(rows), _note(case, card), compact=True)


def _note(case: Case, card: SettingsCard) -> str:
    """By how much the gauge differs from the vessel; nothing where both stand at one height."""
    filled = _filled(card)
    if filled is None:
        return ""
    less = card.fill_pressure.value - filled.value
    unit = case.write.pressure_difference(0.0).unit
    shown = case.say(AnyQuantity(value=abs(less), unit=unit))
    height = case.say.size(card.gauge_height)
    return case.words(
        "settings.gauge-above" if less > 0 else "settings.gauge-below", height=height, less=shown
    )


def _readings(case: Case, card: SettingsCard) -> Table:
    words, say = case.words, case.say
    rows = []
    for reading in card.readings:
        shown = words("state.undefined") if reading.reading is None else say(reading.reading)
        rows.append(Row((words(f"reading.{reading.state}"), f"≥ {shown}" if reading.at_least else shown)))
    columns = (Column(words("column.state")), Column(words("column.gauge"), "number"))
    return Table(words("table.readings"), columns, tuple(rows), compact=True)
