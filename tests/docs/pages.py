"""The documentation as a browser without eyes reads it: elements, texts, anchors and links of every page."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache
from html.parser import HTMLParser

from msgspec import Struct

from loopslack.api.docs import DOCS_PAGES
from loopslack.api.reference import Page

VOID = frozenset({"meta", "link", "input", "br", "hr", "use", "wbr", "path", "circle"})


class Element(Struct):
    """A start tag, and the text inside it."""

    name: str
    attributes: dict[str, str]
    text: str = ""


class Reader(HTMLParser):
    """Reads a page strictly: a tag that is closed out of turn, or never, is an error."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.elements: list[Element] = []
        self._open: list[Element] = []

    def handle_starttag(self, tag: str, attributes: list[tuple[str, str | None]]) -> None:
        names = [name for name, _ in attributes]
        if len(names) != len(set(names)):
            raise ValueError(f"<{tag}> has an attribute twice: {names}")
        element = Element(tag, {name: value or "" for name, value in attributes})
        self.elements.append(element)
        if tag not in VOID:
            self._open.append(element)

    def handle_startendtag(self, tag: str, attributes: list[tuple[str, str | None]]) -> None:
        self.handle_starttag(tag, attributes)

    def handle_endtag(self, tag: str) -> None:
        if not self._open or self._open[-1].name != tag:
            raise ValueError(f"</{tag}> closes nothing; open are {[element.name for element in self._open]}")
        self._open.pop()

    def handle_data(self, data: str) -> None:
        for element in self._open:
            element.text += data

    def close(self) -> None:
        super().close()
        if self._open:
            raise ValueError(f"never closed: {[element.name for element in self._open]}")


PAGES: dict[str, Page] = {page.path: page for page in DOCS_PAGES}
HTML = tuple(path for path, page in PAGES.items() if page.media_type.startswith("text/html"))


@cache
def elements(path: str) -> tuple[Element, ...]:
    """Every element of a page."""
    reader = Reader()
    reader.feed(PAGES[path].body.decode())
    reader.close()
    return tuple(reader.elements)


def named(path: str, *names: str) -> Iterator[Element]:
    """The elements of some names."""
    return (element for element in elements(path) if element.name in names)


def one(path: str, name: str) -> Element:
    """The only element of a name."""
    (found,) = named(path, name)
    return found


def text(path: str) -> str:
    """What a page says in its content, blanks joined."""
    return " ".join(one(path, "main").text.split())


@cache
def anchors(path: str) -> frozenset[str]:
    """What links to a page may point at."""
    return frozenset(element.attributes["id"] for element in elements(path) if "id" in element.attributes)


def row(path: str, anchor: str) -> str:
    """The text of the row of a table, or the section, that has an anchor."""
    (found,) = (element for element in elements(path) if element.attributes.get("id") == anchor)
    return " ".join(found.text.split())
