"""Markup is made of escaped text, and descriptions may use the little Markdown of the contract."""

import json

import pytest
from hypothesis import given
from hypothesis import strategies as st

from docs.pages import Reader
from loopslack.api.docs.markup import Html, breakable, data_block, joined, json_text, table, tag
from loopslack.api.docs.prose import phrase, prose

TEXTS = st.text(max_size=60).filter(lambda text: "\r" not in text and "\x00" not in text)


@given(text=TEXTS)
def test_no_text_becomes_a_tag(text: str) -> None:
    reader = Reader()
    reader.feed(tag("p", text, title=text))
    reader.close()
    (element,) = reader.elements
    assert element.text == text
    assert element.attributes["title"] == text


@given(text=TEXTS)
def test_no_description_becomes_a_tag(text: str) -> None:
    reader = Reader()
    reader.feed(tag("main", prose(text), phrase(text)))
    reader.close()
    assert {element.name for element in reader.elements} <= {"main", "p", "ul", "li", "h3", "code", "em", "a"}
    for element in reader.elements:
        assert element.attributes.get("href", "/").startswith("/")


JSON = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False) | st.text(),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=8), inner, max_size=4),
    max_leaves=12,
)


@given(value=JSON)
def test_json_for_a_person_is_the_same_json(value: object) -> None:
    assert json.loads(json_text(value)) == value


@given(value=JSON)
def test_data_of_a_page_cannot_end_its_element(value: object) -> None:
    made = data_block("data", value)
    body = made.partition(">")[2].rpartition("</script>")[0]
    assert "<" not in body
    assert json.loads(body) == value


def test_a_quantity_stays_on_one_line() -> None:
    assert (
        json_text({"staticHeight": {"value": 8, "unit": "m"}})
        == '{"staticHeight": {"value": 8, "unit": "m"}}'
    )
    long = json_text({"members": list(range(60))})
    assert long.startswith('{\n  "members": [\n    0,\n')


def test_descriptions_keep_their_code_stress_links_and_lists() -> None:
    assert phrase("State `a < b`, *all* of it.") == "State <code>a &lt; b</code>, <em>all</em> of it."
    assert phrase("[`here`](/docs)") == '<a href="/docs"><code>here</code></a>'
    assert phrase("[out](https://example.org)") == "[out](https://example.org)"
    assert prose("One\ntwo.\n\n* a\n  b\n* c") == "<p>One two.</p><ul><li>a b</li><li>c</li></ul>"
    assert prose("## Title\n\nText", level=2) == "<h2>Title</h2><p>Text</p>"


def test_a_long_name_may_be_broken_before_a_capital_and_nowhere_else() -> None:
    assert breakable("CollectorGroup") == "Collector<wbr>Group"
    assert breakable("EN 12977 <& more>") == "EN 12977 &lt;&amp; more&gt;"


def test_children_and_attributes_are_written_as_told() -> None:
    made = tag(
        "td", None, ["a", Html("<b>"), 3], class_="x", data_label="l", hidden=True, id=None, open=False
    )
    assert made == '<td class="x" data-label="l" hidden>a<b>3</td>'
    assert tag("br") == "<br>"
    assert joined("&", Html("&")) == "&amp;&"


def test_a_row_of_a_table_has_as_many_cells_as_the_table_has_heads() -> None:
    with pytest.raises(ValueError, match="zip"):
        table("label", ("a", "b"), [("only",)])
