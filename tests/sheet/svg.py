"""What is in a drawing, read back from its SVG: lettering with the room it takes, and the edges of the paper."""

import re
from typing import NamedTuple
from xml.etree import ElementTree as ET

from loopslack.sheet.drawing import LETTER, width_of

NAMESPACE = "{http://www.w3.org/2000/svg}"
_RISE, _DROP = 0.76, 0.22  # of the size: how far letters stand above and hang below their line


class Lettering(NamedTuple):
    text: str
    left: float
    top: float
    right: float
    bottom: float

    def meets(self, other: "Lettering") -> bool:
        spare = 0.25
        return (
            self.left + spare < other.right
            and other.left + spare < self.right
            and self.top + spare < other.bottom
            and other.top + spare < self.bottom
        )


def root(svg: str) -> ET.Element:
    return ET.fromstring(svg)  # noqa: S314 - drawn a moment ago


def paper(svg: str) -> tuple[float, float]:
    _, _, width, height = (float(number) for number in root(svg).attrib["viewBox"].split())
    return width, height


def lettering(svg: str) -> list[Lettering]:
    found = []
    for text in root(svg).iter(f"{NAMESPACE}text"):
        size = float(text.get("font-size", LETTER))
        x, y = float(text.attrib["x"]), float(text.attrib["y"])
        width = width_of(text.text or "", size)
        start = x - {"start": 0.0, "middle": width / 2.0, "end": width}[text.get("text-anchor", "start")]
        found.append(Lettering(text.text or "", start, y - _RISE * size, start + width, y + _DROP * size))
    return found


def places(svg: str) -> list[tuple[float, float]]:
    """Every point a line, an area or a sign goes through."""
    found = []
    for part in root(svg).iter():
        kind = part.tag.removeprefix(NAMESPACE)
        number = {
            name: float(value) for name, value in part.attrib.items() if re.fullmatch(r"-?[\d.]+", value)
        }
        if kind == "line":
            found += [(number["x1"], number["y1"]), (number["x2"], number["y2"])]
        elif kind == "rect":
            x, y = number["x"], number["y"]
            found += [(x, y), (x + number["width"], y + number["height"])]
        elif kind == "circle":
            x, y, r = number["cx"], number["cy"], number["r"]
            found += [(x - r, y - r), (x + r, y + r)]
        elif kind == "path":
            numbers = [float(one) for one in re.findall(r"-?\d+(?:\.\d+)?", part.attrib["d"])]
            found += list(zip(numbers[::2], numbers[1::2], strict=True))
    return found
