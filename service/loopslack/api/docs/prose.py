"""The little Markdown that descriptions of the contract use, as HTML: paragraphs, lists, headings, code, stress.

Anything else is shown as it was written. Must not live here: text of its own.
"""

import re

from loopslack.api.docs.markup import Html, code, joined, link, tag

_INLINE = re.compile(
    r"`(?P<code>[^`]+)`|\[(?P<label>[^\]]+)\]\((?P<where>/[^)\s]*)\)|\*(?P<stress>[^*\s][^*]*)\*"
)
_POINT = re.compile(r"[*-] ")


def prose(text: str, *, level: int = 3) -> Html:
    """A description as blocks; its headings begin at a level."""
    return joined([_block(block, level) for block in re.split(r"\n\s*\n", text.strip()) if block.strip()])


def phrase(text: str) -> Html:
    """A description of one paragraph, without a block around it."""
    shown: list[object] = []
    end = 0
    for found in _INLINE.finditer(text):
        shown.append(text[end : found.start()])
        if found["code"]:
            shown.append(code(found["code"]))
        elif found["label"]:
            shown.append(link(found["where"], phrase(found["label"])))
        else:
            shown.append(tag("em", found["stress"]))
        end = found.end()
    return joined(shown, text[end:])


def paragraph(text: str) -> Html:
    """A description of one paragraph."""
    return tag("p", phrase(text))


def _block(block: str, level: int) -> Html:
    heading = re.fullmatch(r"#+ (.*)", block.strip())
    if heading:
        return tag(f"h{level}", phrase(heading[1]))
    if _POINT.match(block):
        return tag("ul", [tag("li", phrase(point)) for point in _points(block)])
    return tag("p", phrase(" ".join(block.split())))


def _points(block: str) -> list[str]:
    points: list[str] = []
    for line in block.splitlines():
        if _POINT.match(line) or not points:
            points.append(_POINT.sub("", line, count=1))
        else:
            points[-1] += f" {line.strip()}"
    return points
