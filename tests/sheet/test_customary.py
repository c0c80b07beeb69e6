"""US sheets: sentences that come with SI numbers are converted, to the digits they have, and none is left in SI."""

import re

import pytest

from loopslack.library.defaults import choices, defaults
from loopslack.sheet.customary import customary, nominal_size
from loopslack.sheet.words import words
from sheet.sheets import asked, case, sheet
from sheet.test_german import texts

SHEETS = ("cabin-us-units", "mountain-lodge-high-us")
# What keeps its metric name in the United States too, and the sentence that says to count in SI.
NAMED = re.compile(r"\(\d[\d.]* L\)|\(DN \d+\)|Turn every number into SI.*", re.DOTALL)
SI = re.compile(r"\d (?:m|mm|m²|mm²|L|bar|bar\(g\)|K|°C|W|W/\S+|kJ/\S+|J/\S+|kg|kg/m³)(?![\w/²³])")


@pytest.mark.parametrize(
    ("metric", "shown"),
    [
        ("above 1000 m or in hot climates", "above 3300 ft or in hot climates"),
        ("commonly 10 to 20 K off", "commonly 18 to 36 °F off"),
        ("stays at 20 °C, the room's", "stays at 68 °F, the room's"),
        ("from 76.7 to 110 °C (170 to 230 °F); it has 120 °C.", "from 170 to 230 °F; it has 248 °F."),
        ("loses 1.15 W/K and 8 W/(m²·K)", "loses 2.18 BTU/(h·°F) and 1.4 BTU/(h·ft²·°F)"),
        ("8930 kg/m³, 385 J/(kg·K)", "557 lb/ft³, 0.092 BTU/(lb·°F)"),
        ("hold 8 kJ/(m²·K), 4 kJ/K", "hold 0.39 BTU/(ft²·°F), 2.1 BTU/°F"),
        ("33 mm² as for a nominal size of 15 mm", "0.051 in² as for a nominal size of 1/2 in"),
        ("EN 12828, Task 26, 20 % of 3 L", "EN 12828, Task 26, 20 % of 0.79 gal"),
        ("shuts at 4.8 bar gauge", "shuts at 70 psi gauge"),
        ("loses 0 W/K", "loses 0 BTU/(h·°F)"),
    ],
)
def test_a_sentence_has_its_numbers_converted_and_nothing_else(metric: str, shown: str) -> None:
    assert customary(metric, ".").replace("\u00a0", " ") == shown


def test_a_converted_number_has_the_decimal_sign_of_its_language() -> None:
    assert customary("über 0,5 L und 60 m", ",") == "über 0,13\u00a0gal und 200\u00a0ft"


def test_a_valve_is_called_as_the_trade_calls_it() -> None:
    assert nominal_size(32) == "1 1/4 in (DN 32)"


@pytest.mark.parametrize("language", ["en", "de"])
def test_no_reason_for_a_default_is_left_in_si(language: str) -> None:
    point = "," if language == "de" else "."
    told = [words(language).phrase(row.why) for row in (*defaults().values(), *choices().values())]
    converted = [customary(text, point).replace("\u00a0", " ") for text in told]
    assert [text for text in converted if SI.search(text)] == []


@pytest.mark.parametrize("name", SHEETS)
def test_no_number_of_a_us_sheet_is_left_in_si(name: str) -> None:
    assert asked(name).question.design.units == "us"
    left = [NAMED.sub("", text.replace("\u00a0", " ")) for text in texts(sheet(name))]
    assert [text for text in left if SI.search(text)] == []


def test_a_metric_sheet_is_told_as_the_answer_has_it() -> None:
    assert case("wash-house").prose("above 1000 m") == "above 1000 m"
