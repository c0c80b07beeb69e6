"""What can stand on a sheet, as data: sections of blocks, all in words, nothing in markup.

Both typesetters know exactly these blocks. No number is rounded and no word chosen here or in a typesetter.
"""

from typing import Literal

from msgspec import Struct

Align = Literal["text", "number", "value"]
"""``number`` takes the room its digits need; ``value`` is set right too, but shares the width like words."""
Tone = Literal["plain", "lead", "stop", "warning", "note", "small"]
Mark = Literal["", "holds", "fails", "warns", "open", "aside"]
"""``warns`` fails a check that does not decide; ``aside`` fails under a doubt that was not asked for: both are shown,
not counted."""


class Column(Struct, frozen=True):
    """A column of a table."""

    title: str
    align: Align = "text"
    share: int = 0
    """Of the width of the page, where all columns of the table have one and so stand in line with other tables."""


class Row(Struct, frozen=True):
    """A row of a table. A marked row says so in words in its last cell; the mark only adds weight."""

    cells: tuple[str, ...]
    mark: Mark = ""
    marks: tuple[Mark, ...] = ()
    """Of each cell, where they differ."""


class Table(Struct, frozen=True, tag_field="block", tag="table"):
    """A table; the first cell of a row names it."""

    caption: str
    columns: tuple[Column, ...]
    rows: tuple[Row, ...]
    note: str = ""
    compact: bool = False
    whole: bool = False
    """Never broken across pages when printed; short ones are not in any case."""


class Fact(Struct, frozen=True):
    """A name and what it is."""

    name: str
    value: str
    more: str = ""
    large: bool = False


class Facts(Struct, frozen=True, tag_field="block", tag="facts"):
    """Names and values, one to a line."""

    facts: tuple[Fact, ...]


class Text(Struct, frozen=True, tag_field="block", tag="text"):
    """A paragraph."""

    text: str
    tone: Tone = "plain"


class Bullets(Struct, frozen=True, tag_field="block", tag="bullets"):
    """A list; numbered where the order counts."""

    items: tuple[str, ...]
    numbered: bool = False


class Notice(Struct, frozen=True, tag_field="block", tag="notice"):
    """Something to know, how grave it is in a word, and what to do."""

    tone: Tone
    grade: str
    message: str
    remedy: str


class Drawing(Struct, frozen=True, tag_field="block", tag="drawing"):
    """A figure: complete SVG, what it shows in a line, and in words for whoever cannot see it."""

    name: str
    svg: str
    title: str
    description: str


class Blanks(Struct, frozen=True, tag_field="block", tag="blanks"):
    """Lines to write on."""

    names: tuple[str, ...]


Simple = Table | Facts | Text | Bullets | Notice | Drawing | Blanks


class Beside(Struct, frozen=True, tag_field="block", tag="beside"):
    """Two stacks of blocks side by side where the page is wide enough, else one under the other."""

    left: tuple[Simple, ...]
    right: tuple[Simple, ...]


class Card(Struct, frozen=True, tag_field="block", tag="card"):
    """A card to cut out and hang at the vessel; never broken across pages."""

    title: str
    blocks: tuple[Simple | Beside, ...]


Block = Simple | Beside | Card


class Section(Struct, frozen=True):
    """A titled part of the sheet. ``on_new_page``: begins a page when printed; ``whole``: stays on one."""

    id: str
    title: str
    blocks: tuple[Block, ...]
    on_new_page: bool = False
    whole: bool = False


class Banner(Struct, frozen=True):
    """The verdict. ``sign`` is its sign as SVG, ``word`` the verdict in a word."""

    verdict: str
    sign: str
    word: str
    sentence: str
    basis: str


class Sheet(Struct, frozen=True):
    """A whole sheet."""

    language: str
    paper: str
    title: str
    subject: str
    author: str
    date: str
    head: tuple[Fact, ...]
    banner: Banner
    sections: tuple[Section, ...]
    foot: str
    page_word: str
    contents_word: str
