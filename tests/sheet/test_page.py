"""The page: complete in itself, well formed, forbidden to load or run anything, tagged for whoever cannot see it."""

import base64
import hashlib
import re
from html.parser import HTMLParser
from itertools import pairwise

import pytest

from loopslack.sheet.page import _guarded
from sheet.sheets import NAMES, html, sheet

VOID = {"meta", "wbr", "br", "link"}


class Reader(HTMLParser):
    """Reads a page strictly: every element is closed by its own end tag."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.seen: list[tuple[str, dict[str, str | None]]] = []
        self.headings: list[int] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.seen.append((tag, dict(attrs)))
        if re.fullmatch(r"h[1-6]", tag):
            self.headings.append(int(tag[1]))
        if tag not in VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.seen.append((tag, dict(attrs)))

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag


def read(text: str) -> Reader:
    reader = Reader()
    reader.feed(text)
    reader.close()
    assert reader.open == []
    return reader


@pytest.mark.parametrize("name", NAMES)
def test_the_page_is_well_formed_and_asks_for_nothing(name: str) -> None:
    page = read(html(name))
    assert {tag for tag, _ in page.seen} & {
        "script",
        "link",
        "iframe",
        "object",
        "img",
        "form",
        "base",
        "embed",
    } == set()
    for tag, attributes in page.seen:
        assert not [key for key in attributes if key.startswith("on")], tag
        assert attributes.get("href", "#").startswith("#"), attributes
        assert "src" not in attributes


@pytest.mark.parametrize("name", NAMES)
def test_its_policy_allows_its_own_style_and_nothing_else(name: str) -> None:
    text = html(name)
    policy = re.search(r'Content-Security-Policy" content="([^"]+)"', text)
    assert policy
    assert policy[1].startswith("default-src 'none'; style-src 'sha256-")
    allowed = set(re.findall(r"'sha256-([^']+)'", policy[1]))
    used = {
        base64.b64encode(hashlib.sha256(style.encode()).digest()).decode()
        for style in re.findall(r"<style>(.*?)</style>", text, re.DOTALL)
    }
    assert used == allowed
    assert "url(" not in text
    assert "@import" not in text


@pytest.mark.parametrize("name", NAMES)
def test_ids_are_unique_links_lead_somewhere_and_headings_skip_no_level(name: str) -> None:
    page = read(html(name))
    ids = [attributes["id"] for _, attributes in page.seen if "id" in attributes]
    assert len(ids) == len(set(ids))
    for _, attributes in page.seen:
        target = attributes.get("href")
        assert target is None or target.removeprefix("#") in ids
        for named in (attributes.get("aria-labelledby") or "").split():
            assert named in ids
    assert page.headings[0] == 1
    assert page.headings.count(1) == 1
    assert all(after - before <= 1 for before, after in pairwise(page.headings))


@pytest.mark.parametrize("name", NAMES)
def test_every_cell_of_a_table_knows_its_heading(name: str) -> None:
    page = read(html(name))
    cells = [attributes for tag, attributes in page.seen if tag == "td"]
    assert cells
    assert all(cell["data-name"] is not None and cell["role"] == "cell" for cell in cells)
    assert sum(tag == "table" for tag, _ in page.seen) == sum(tag == "caption" for tag, _ in page.seen)


@pytest.mark.parametrize("name", NAMES)
def test_language_and_paper_are_those_asked_for(name: str) -> None:
    text = html(name)
    assert f'<html lang="{sheet(name).language}">' in text
    assert f'class="paper-{sheet(name).paper}"' in text


def test_a_long_word_may_break_and_nothing_else_is_changed() -> None:
    assert _guarded("a" * 30) == "a" * 28 + "<wbr>" + "aa"
    assert (
        _guarded("short words only, many of them, in a line") == "short words only, many of them, in a line"
    )
    assert _guarded("שלום") == "<bdi>שלום</bdi>"
    assert _guarded('<b> & "x"') == "&lt;b&gt; &amp; &quot;x&quot;"
