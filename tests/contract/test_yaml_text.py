"""The YAML form of the document says exactly what its JSON form says."""

import json

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from loopslack.api.document.yaml_text import yaml_text

scalars = (
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False) | st.text()
)
values = st.recursive(
    scalars,
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=8), inner, max_size=4),
    max_leaves=20,
)


@given(values)
@settings(max_examples=300, deadline=None)
def test_any_json_value_reads_back_unchanged(value: object) -> None:
    assert yaml.safe_load(yaml_text(value)) == value


WORDS = ["yes", "No", "null", "~", "1e3", "1.0", "0x1F", "2026-12-01", "12:30", "", "K", "%", "|", ">"]
MARKS = [
    "@x",
    "`x`",
    "a: b",
    "a #b",
    "- a",
    " a",
    "a ",
    "a\n b\n",
    "a\n\nb",
    "\nb",
    "a\r\nb",
    "tab\there",
    "{a}",
    "[a]",
]


@pytest.mark.parametrize("text", WORDS + MARKS)
def test_text_that_yaml_could_take_for_something_else_stays_text(text: str) -> None:
    assert yaml.safe_load(yaml_text({text: text, "list": [text, [text]]})) == {
        text: text,
        "list": [text, [text]],
    }


def test_text_of_several_lines_is_written_as_lines() -> None:
    assert yaml_text({"description": "one\n\ntwo: 2"}) == "description: |-\n  one\n\n  two: 2\n"


def test_small_and_large_numbers_stay_numbers() -> None:
    numbers = [1e-7, 1e22, 1.5e300, -0.0, 12, 0.1]
    assert json.dumps(yaml.safe_load(yaml_text(numbers))) == json.dumps(numbers)
