"""HTML as values: text is escaped unless it is markup already, so no description can become a tag.

Must not live here: anything about a particular page.
"""

import json
import re
from collections.abc import Iterable
from functools import cache
from html import escape

_EMPTY = frozenset({"meta", "link", "input", "br", "hr", "use"})
_WIDEST = 76
"""Longest line of JSON that is not broken up."""

_LEAST = 3
"""Characters that each entry of a list or object takes at least, what separates them included."""


class Html(str):
    """Markup that may be sent as it stands."""

    __slots__ = ()


def joined(*children: object) -> Html:
    """Children one after the other: markup as it is, text escaped, lists opened, `None` left out."""
    return Html("".join(_parts(children)))


def tag(name: str, /, *children: object, **attributes: str | int | bool | None) -> Html:
    """An element. A trailing underscore of an attribute is dropped, others become hyphens (`aria_label`)."""
    written = "".join(
        f" {_attribute(key)}" if value is True else f' {_attribute(key)}="{escape(str(value))}"'
        for key, value in attributes.items()
        if value is not None and value is not False
    )
    if name in _EMPTY:
        return Html(f"<{name}{written}>")
    return Html(f"<{name}{written}>{joined(*children)}</{name}>")


def breakable(text: str) -> Html:
    """A name in capitals and small letters, which a narrow screen may break before a capital."""
    return Html(re.sub(r"(?<=[a-z])(?=[A-Z])", "<wbr>", joined(text)))


def code(text: object) -> Html:
    """Something a program reads."""
    return tag("code", text)


def link(where: str, *children: object) -> Html:
    """A link inside the documentation or to the service itself."""
    return tag("a", *children, href=where)


def listing(text: str, label: str) -> Html:
    """Lines of code; wide ones scroll, by keyboard too, so that the block has a name."""
    return tag("pre", code(text.rstrip("\n")), tabindex=0, role="region", aria_label=label)


def disclosure(summary: object, *children: object) -> Html:
    """Something long that is opened when it is wanted."""
    return tag("details", tag("summary", summary), *children)


def commas(parts: Iterable[object]) -> Html:
    """Parts of a sentence with commas between them."""
    shown: list[object] = []
    for part in parts:
        if shown:
            shown.append(", ")
        shown.append(part)
    return joined(shown)


def table(label: str, heads: Iterable[object], rows: Iterable[Iterable[object]]) -> Html:
    """A table whose rows become blocks on a narrow screen, each cell then under its own heading.

    The roles are stated because a table that is laid out otherwise loses them.
    """
    titles = [str(head) for head in heads]
    head = tag("tr", [tag("th", title, scope="col", role="columnheader") for title in titles], role="row")
    return tag(
        "table",
        tag("caption", label),
        tag("thead", head, role="rowgroup"),
        tag("tbody", [_row(titles, list(row)) for row in rows], role="rowgroup"),
        role="table",
        class_="records broad" if len(titles) > 3 else "records",
    )


def _row(titles: list[str], cells: list[object]) -> Html:
    first = tag("th", tag("div", cells[0]), scope="row", role="rowheader", data_label=titles[0])
    rest = [
        tag("td", tag("div", cell), role="cell", data_label=title)
        for title, cell in zip(titles[1:], cells[1:], strict=True)
    ]
    return tag("tr", first, rest, role="row", id=getattr(cells[0], "anchor", None))


class Anchored(Html):
    """Markup that gives its row of a table an anchor."""

    __slots__ = ("anchor",)
    anchor: str


def anchored(anchor: str, *children: object) -> Anchored:
    """The first cell of a row that links can point at."""
    made = Anchored(joined(*children))
    made.anchor = anchor
    return made


def json_text(value: object, indent: int = 0) -> str:
    """JSON for a person: what fits on a line stays on it, so that a quantity reads as one thing."""
    if not isinstance(value, dict | list) or not value:
        return _short(value)
    if len(value) * _LEAST <= _WIDEST:  # else it is certainly too wide, and writing it out would be in vain
        short = _short(value)
        if len(short) + indent <= _WIDEST:
            return short
    pad = " " * (indent + 2)
    if isinstance(value, dict):
        inner = [f"{pad}{json.dumps(key)}: {json_text(member, indent + 2)}" for key, member in value.items()]
        return "{\n" + ",\n".join(inner) + "\n" + " " * indent + "}"
    return "[\n" + ",\n".join(pad + json_text(item, indent + 2) for item in value) + "\n" + " " * indent + "]"


_short = json.JSONEncoder(ensure_ascii=False).encode


def data_block(name: str, value: object) -> Html:
    """JSON for a script of the page. Not executed; no text in it can end the element."""
    text = json.dumps(value, ensure_ascii=False, separators=(",", ":")).replace("<", "\\u003c")
    return tag("script", Html(text), type="application/json", id=name)


@cache
def _attribute(key: str) -> str:
    return key.rstrip("_").replace("_", "-")


def _parts(children: Iterable[object]) -> Iterable[str]:
    for child in children:
        if child is None:
            continue
        if isinstance(child, Html):
            yield child
        elif isinstance(child, str):
            yield escape(child, quote=False)
        elif isinstance(child, Iterable):
            yield from _parts(child)
        else:
            yield escape(str(child), quote=False)
