"""The numbers on the sheet are those of the answer: each quantity is found rounded, and none is made up."""

import re
from collections.abc import Iterator
from typing import Any

import msgspec
import pytest
from msgspec.structs import replace

from loopslack.contract.answers.shared import AnyQuantity
from loopslack.sheet.lines import Facts, Row, Sheet, Table, Text
from loopslack.sheet.numerals import Numerals, numerals
from sheet.sheets import NAMES, asked, blocks, case, sheet

# Where each part of an answer stands on the sheet; of some parts only the members named stand there.
EVERY: frozenset[str] = frozenset()
SHOWN: dict[tuple[str, ...], tuple[str, frozenset[str]]] = {
    ("result", "states"): ("pressures", EVERY),
    ("result", "stagnation"): (
        "steam",
        frozenset(
            [
                "vesselPressure",
                "steamTemperature",
                "stagnationTemperature",
                "steamPower",
                "unspentPower",
                "steamVolume",
                "vesselLiquid",
                "gasTemperature",
                "mixedTemperature",
                "lastArrivingTemperature",
            ]
        ),
    ),
    ("result", "discharge"): ("steam", frozenset({"volume", "closingPressure", "refill"})),
    ("result", "content", "parts"): ("order", EVERY),
    ("result", "order"): ("order", EVERY),
    ("result", "settings", "byTemperature"): ("settings", EVERY),
    ("result", "settings", "readings"): ("settings", EVERY),
    ("result", "settings"): (
        "settings",
        frozenset(
            [
                "precharge",
                "prechargeTemperature",
                "fillPressure",
                "lower",
                "upper",
                "finalPressure",
                "reliefSetPressure",
                "topPressureCold",
                "gaugeRange",
                "staticHeight",
                "reliefHeight",
                "gaugeHeight",
            ]
        ),
    ),
    ("result", "chosenVessel"): ("result", frozenset({"nominalVolume", "ratedPressure", "content"})),
    ("result", "volumes"): ("sizing", EVERY),
    ("result", "checks"): ("checks", frozenset({"value", "limit"})),
    ("assumptions",): ("assumptions", EVERY),
    ("rules",): ("rules", frozenset({"nominalVolume"})),
    ("walk",): ("rules", frozenset({"startVolume", "endVolume"})),
    ("sensitivity", "headRoom"): ("sensitivity", EVERY),
    ("course",): ("day", frozenset({"course", "low", "high"})),
    ("remedies",): ("remedies", frozenset({"fillPressure", "nominalVolume", "amount"})),
}
ONLY_MASS_OR_VOLUME = {"massConcentration", "volumeConcentration"}  # not told of an own fluid or of water


def quantities(value: Any, path: tuple[str, ...] = ()) -> Iterator[tuple[tuple[str, ...], AnyQuantity]]:
    if isinstance(value, dict):
        if set(value) == {"value", "unit"}:
            yield path, AnyQuantity(value=value["value"], unit=value["unit"])
            return
        for name, inner in value.items():
            yield from quantities(inner, (*path, name))
    elif isinstance(value, list):
        for place, inner in enumerate(value):
            yield from quantities(inner, (*path, str(place)))


def part(answer: Any, path: tuple[str, ...]) -> Any:
    for name in path:
        if answer is None or name not in answer:
            return None
        answer = answer[name]
    return answer


def texts(of: Sheet) -> str:
    found = []
    for block in blocks(of):
        if isinstance(block, Facts):
            found += [f"{fact.name} {fact.value} {fact.more}" for fact in block.facts]
        if isinstance(block, Text):
            found.append(block.text)
        if isinstance(block, Table):
            found += [" | ".join(row.cells) for row in block.rows]
            found.append(block.note)
    return "\n".join(found)


def written(say: Numerals, quantity: AnyQuantity) -> tuple[str, ...]:
    """The ways a quantity may stand on a sheet: with its unit, within a range, as a change, as a thickness."""
    thickness = say.thin(quantity)
    return (say(quantity), say.size(quantity), say.digits(quantity), thickness.partition("\u00a0")[0])


def section_text(name: str, id: str) -> str:
    found = [section for section in sheet(name).sections if section.id == id]
    return texts(replace(sheet(name), sections=tuple(found)))


@pytest.mark.parametrize("start", SHOWN, ids="-".join)
@pytest.mark.parametrize("name", NAMES)
def test_every_number_of_a_part_of_the_answer_stands_in_its_section(
    name: str, start: tuple[str, ...]
) -> None:
    answer = msgspec.json.decode(msgspec.json.encode(asked(name).answer))
    id, members = SHOWN[start]
    say, shown = numerals(sheet(name).language), section_text(name, id)
    mixed = asked(name).question.design.fluid.__struct_config__.tag.endswith("glycol")
    missing = [
        (path, say(quantity))
        for path, quantity in quantities(part(answer, start), start)
        if (not members or path[-1] in members)
        and "closedForms" not in path  # for comparison: told by the derivation alone
        and (mixed or path[-1] not in ONLY_MASS_OR_VOLUME)
        and not any(text in shown for text in written(say, quantity))
    ]
    assert missing == []


def table(of: Sheet, caption: str) -> list[Row]:
    return next(
        list(block.rows) for block in blocks(of) if isinstance(block, Table) and block.caption == caption
    )


@pytest.mark.parametrize("name", [name for name in NAMES if sheet(name).language == "en"])
def test_a_row_of_checks_is_the_check_of_the_answer(name: str) -> None:
    say = numerals("en")
    rows = table(sheet(name), "Checks in every state")
    checks = asked(name).answer.result.checks
    assert len(rows) == len(checks)
    for row, check in zip(rows, checks, strict=True):
        assert row.cells[2].removeprefix("≥ ") == say(check.value)
        assert row.cells[2].startswith("≥ ") == bool(check.at_least)
        assert row.cells[3] == say(check.limit)
        assert row.cells[4] == say.signed(check.margin)


@pytest.mark.parametrize("name", NAMES)
def test_no_failed_check_reads_like_a_pass(name: str) -> None:
    of = sheet(name)
    words = {"en": ("holds", "FAILS"), "de": ("erfüllt", "NICHT ERFÜLLT")}[of.language]
    caption = {"en": "Checks in every state", "de": "Prüfungen in jedem Zustand"}[of.language]
    for row, check in zip(table(of, caption), asked(name).answer.result.checks, strict=True):
        verdict = row.cells[-1]
        assert (words[0] in verdict and "✗" not in verdict) == (check.verdict == "holds"), (check, verdict)
        if check.verdict == "does-not-hold":
            assert verdict.startswith("✗")
            counted = check.scenario in case(name).counted
            assert row.mark == ("aside" if not counted else "fails" if check.group == "core" else "warns")
            assert (words[1] in verdict) == (row.mark == "fails")


@pytest.mark.parametrize("name", NAMES)
def test_the_verdict_is_that_of_the_answer_and_a_vessel_not_chosen_is_not_offered(name: str) -> None:
    of, result = sheet(name), asked(name).answer.result
    assert of.banner.verdict == result.verdict
    assert (result.verdict == "holds") == (of.banner.word in {"HOLDS", "NACHWEIS ERFÜLLT"})
    shown = texts(of)
    offered = re.search(r"(Expansion vessel|Ausdehnungsgefäß) ", shown.splitlines()[0])
    assert bool(offered) == (result.chosen_vessel is not None and result.verdict == "holds")


def test_us_units_stand_on_the_sheet_of_a_question_in_us_units() -> None:
    shown = texts(sheet("cabin-us-units"))
    stated = shown.split("Rated pressure of the station")[0]
    assert "psig" in stated
    assert "°F" in stated
    assert " gal" in stated.replace("\u00a0", " ")
    assert "bar(g)" not in stated
    assert sheet("cabin-us-units").paper == "letter"


def test_the_derivation_keeps_every_digit_so_that_it_can_be_redone() -> None:
    derived = asked("wash-house").answer.derivation
    assert derived is not None
    say: Numerals = numerals("en")
    shown = texts(sheet("wash-house"))
    for step in derived.steps:
        if step.answers:
            assert f"{step.number} | {step.name.replace('degC', '°C')}" in shown
            assert say.derived(step.value) in shown


def test_a_gauge_at_another_height_is_told_what_it_shows_on_the_day() -> None:
    """It stands 0.8 m below the vessel: whoever fills by it must not stop at the pressure of the vessel."""
    card = asked("boat-shed-long-stock").answer.result.settings
    assert card is not None
    rows = {row.temperature.value: row for row in card.by_temperature}
    filled = next(one.reading for one in card.readings if one.state == "fill")
    at_fill = rows[card.window.temperature.value]
    assert at_fill.reading == filled
    for row in rows.values():
        assert row.reading is not None
        assert row.recommended is not None
        assert row.reading.value - row.recommended.value == pytest.approx(
            0.8 * 9.81 * 1.037e3 / 1e5, rel=0.02
        )
    shown = table(sheet("boat-shed-long-stock"), "Fill pressure by the temperature of the day")
    assert [row.cells[-1] for row in shown] == [numerals("en")(row.reading) for row in card.by_temperature]


def test_a_gauge_beside_the_vessel_needs_no_column_of_its_own() -> None:
    card = asked("wash-house").answer.result.settings
    assert card is not None
    assert all(row.reading == row.recommended for row in card.by_temperature)
    assert len(table(sheet("wash-house"), "Fill pressure by the temperature of the day")[0].cells) == 4


def test_a_number_that_misses_its_limit_never_reads_like_it() -> None:
    """42 L do not miss 42 L; the candidate's 42 L miss the 42.004 L that are needed."""
    refused = table(sheet("boat-shed-long-stock"), "Refused candidates, the nearest last")
    reasons = [reason for row in refused for reason in row.cells[1].split("; ")]
    numbers = [
        re.search(r": (\S+).* where (\S+).* is needed", reason.replace("\u00a0", " ")) for reason in reasons
    ]
    assert numbers
    for found, reason in zip(numbers, reasons, strict=True):
        assert found is not None
        assert found[1] != found[2], reason
