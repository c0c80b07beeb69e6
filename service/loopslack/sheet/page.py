"""Sets a sheet as one HTML file: complete in itself, without scripts, forbidden to load or run anything.

Every text is escaped here; the only markup passed through is that of our own figures. The style sheet is an asset of
its own, allowed by its fingerprint.
"""

import base64
import hashlib
import re
from collections.abc import Callable
from functools import cache
from html import escape
from importlib.resources import files
from typing import Any

from loopslack.sheet.drawing import STYLE
from loopslack.sheet.lines import (
    Banner,
    Beside,
    Blanks,
    Block,
    Bullets,
    Card,
    Drawing,
    Fact,
    Facts,
    Notice,
    Section,
    Sheet,
    Table,
    Text,
)

_ALIGN = {"text": "txt", "number": "num", "value": "val"}
_LONG = 28  # letters without a gap, which a narrow column may break
_NUMBERS = 4  # columns of numbers alone that a narrow screen has room for
_WIDE = 20  # letters beyond which a unit is not kept together at any price
_PART = re.compile(rf"[^\s\u00a0]{{{_LONG}}}(?=[^\s\u00a0])")
_BREAK = "\x00"  # no text has it any more: see ``words.plain``
# Scripts that run from right to left.
_FROM_RIGHT = re.compile(
    "[\u0590-\u08ff\ufb1d-\ufdff\ufe70-\ufeff\U00010800-\U00010fff\U0001e800-\U0001efff]"
)


@cache
def _style() -> tuple[str, str]:
    """The style sheet, and the policy that allows it and the figures' own style and nothing else."""
    style = files("loopslack.sheet").joinpath("assets", "sheet.css").read_text(encoding="utf-8")
    marks = " ".join(
        f"'sha256-{base64.b64encode(hashlib.sha256(text.encode()).digest()).decode()}'"
        for text in (style, STYLE)
    )
    return style, f"default-src 'none'; style-src {marks}; base-uri 'none'; form-action 'none'"


def page(sheet: Sheet) -> str:
    """The whole page."""
    style, policy = _style()
    title = f"{sheet.title} \N{EN DASH} {sheet.subject}" if sheet.subject else sheet.title
    head = "".join(_fact(fact) for fact in sheet.head)
    contents = "".join(
        f'<li><a href="#{section.id}">{escape(section.title)}</a></li>' for section in sheet.sections
    )
    sections = "".join(_section(number, section) for number, section in enumerate(sheet.sections, 1))
    return (
        f'<!DOCTYPE html>\n<html lang="{sheet.language}"><head><meta charset="utf-8">'
        f'<meta http-equiv="Content-Security-Policy" content="{policy}">'
        '<meta name="viewport" content="width=device-width, initial-scale=1">'
        '<meta name="color-scheme" content="light dark">'
        '<meta name="referrer" content="no-referrer"><meta name="robots" content="noindex">'
        f"<title>{escape(title)}</title><style>{style}</style></head>"
        f'<body class="paper-{sheet.paper}"><header class="head"><h1>{escape(sheet.title)}</h1>'
        f"{f'<dl>{head}</dl>' if head else ''}</header><main>{_banner(sheet.banner)}"
        f'<nav aria-label="{escape(sheet.contents_word)}"><ol>{contents}</ol></nav>'
        f"{sections}</main><footer>{escape(sheet.foot)}</footer></body></html>\n"
    )


def _banner(banner: Banner) -> str:
    return (
        f'<section class="verdict {banner.verdict}" aria-labelledby="verdict">{banner.sign}<div>'
        f'<h2 id="verdict">{escape(banner.word)}</h2><p>{escape(banner.sentence)}</p>'
        f'<p class="basis">{escape(banner.basis)}</p></div></section>'
    )


def _section(number: int, section: Section) -> str:
    printed = f"{' fresh' if section.on_new_page else ''}{' whole' if section.whole else ''}"
    blocks = "".join(_block(block) for block in section.blocks)
    return (
        f'<section class="part{printed}" id="{section.id}" aria-labelledby="{section.id}-title">'
        f'<h2 id="{section.id}-title"><span class="number">{number}</span> {escape(section.title)}</h2>'
        f"{blocks}</section>"
    )


def _block(block: Block) -> str:
    return _SET[type(block)](block)


def _beside(block: Beside) -> str:
    left, right = ("".join(_block(one) for one in side) for side in (block.left, block.right))
    return f'<div class="beside"><div>{left}</div><div>{right}</div></div>'


def _card(card: Card) -> str:
    blocks = "".join(_block(one) for one in card.blocks)
    return f'<div class="card"><h3>{escape(card.title)}</h3>{blocks}</div>'


def _facts(facts: Facts) -> str:
    return f'<dl class="facts">{"".join(_fact(fact) for fact in facts.facts)}</dl>'


def _text(text: Text) -> str:
    return f'<p class="{text.tone}">{_guarded(text.text)}</p>'


def _bullets(bullets: Bullets) -> str:
    kind = "ol" if bullets.numbered else "ul"
    return f"<{kind}>{''.join(f'<li>{_guarded(item)}</li>' for item in bullets.items)}</{kind}>"


def _notice(notice: Notice) -> str:
    return (
        f'<div class="notice {notice.tone}"><p><strong>{escape(notice.grade)}</strong> {_guarded(notice.message)}</p>'
        f"<p>{_guarded(notice.remedy)}</p></div>"
    )


def _drawing(drawing: Drawing) -> str:
    return f"<figure>{drawing.svg}<figcaption>{escape(drawing.title)}</figcaption></figure>"


def _fact(fact: Fact) -> str:
    more = f" <small>{_guarded(fact.more)}</small>" if fact.more else ""
    large = ' class="large"' if fact.large else ""
    return f"<div{large}><dt>{escape(fact.name)}</dt><dd><span>{_guarded(fact.value)}</span>{more}</dd></div>"


def _table(table: Table) -> str:
    """A table that keeps its roles when a narrow screen sets its rows one under the other."""
    align = [_ALIGN[column.align] for column in table.columns]
    head = "".join(
        f'<th role="columnheader" scope="col" class="{kind}">{escape(column.title)}</th>'
        for kind, column in zip(align, table.columns, strict=True)
    )
    rows = []
    for row in table.rows:
        first, *others = row.cells
        cells = [f'<th role="rowheader" scope="row" class="{align[0]}">{_guarded(first)}</th>']
        marks = row.marks[1:] or ("",) * len(others)
        cells += [
            f'<td role="cell" class="{kind}{f" {own}" if own else ""}" data-name="{escape(column.title)}">'
            f"{_guarded(cell)}</td>"
            for kind, own, column, cell in zip(align[1:], marks, table.columns[1:], others, strict=True)
        ]
        mark = f' class="{row.mark}"' if row.mark else ""
        rows.append(f'<tr role="row"{mark}>{"".join(cells)}</tr>')
    note = f'<p class="small">{escape(table.note)}</p>' if table.note else ""
    kind = "compact" if table.compact else "open"
    numbers = all(column.align == "number" for column in table.columns)
    wide = " wide" if len(table.columns) > (_NUMBERS if numbers else 3) else ""
    whole = " whole" if table.whole else ""
    return (
        f'<table role="table" class="{kind}{wide}{whole}"><caption>{_guarded(table.caption)}</caption>'
        f'<thead role="rowgroup"><tr role="row">{head}</tr></thead>'
        f'<tbody role="rowgroup">{"".join(rows)}</tbody></table>{note}'
    )


def _blanks(blanks: Blanks) -> str:
    return (
        f'<div class="blanks">{"".join(f"<p><span></span>{escape(name)}</p>" for name in blanks.names)}</div>'
    )


def _guarded(text: str) -> str:
    """A text that may break where it is one long word, and whose direction ends where it ends."""
    if len(text) > _LONG and _PART.search(text):
        text = _PART.sub(lambda found: f"{found[0]}{_BREAK}", text)
    safe = escape(text).replace(_BREAK, "<wbr>")
    if len(text) > _WIDE:  # a long unit may break where it is divided
        safe = safe.replace("/(", "/<wbr>(")
    return f"<bdi>{safe}</bdi>" if _FROM_RIGHT.search(text) else safe


_SET: dict[type, Callable[[Any], str]] = {
    Beside: _beside,
    Card: _card,
    Table: _table,
    Facts: _facts,
    Text: _text,
    Bullets: _bullets,
    Notice: _notice,
    Drawing: _drawing,
    Blanks: _blanks,
}
