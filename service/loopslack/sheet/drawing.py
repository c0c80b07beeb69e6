"""SVG written by hand: lines, areas, letters of one width, scales with round ticks, labels that keep clear.

A drawing is the same text on screen, in print and as a file of its own. All lettering is set in a font whose letters
are equally wide, so that what fits is known without measuring. Strokes and patterns tell things apart, never colour
alone; the dark colours hold on dark screens only. No figure is composed here.
"""

import math
import unicodedata
from collections.abc import Iterable, Sequence
from html import escape
from typing import Literal

Anchor = Literal["start", "middle", "end"]
Point = tuple[float, float]

WIDTH = 400.0
LETTER = 11.0
SMALL = 9.5
_LETTER_WIDTH = 0.61  # of the letter's height, for fonts of one width; the widest in use has 0.602

STYLE = (
    ".ls-ink{stroke:#1d1d1b;fill:none}.ls-soft{stroke:#6f6d68;fill:none}.ls-grid{stroke:#d5d3cd;fill:none}"
    ".ls-t{fill:#1d1d1b;stroke:none}.ls-q{fill:#55534e;stroke:none}.ls-solid{fill:#1d1d1b;stroke:#1d1d1b}"
    ".ls-paper{fill:#ffffff;stroke:#1d1d1b}.ls-blank{fill:#ffffff;stroke:none}.ls-water{fill:#c9dbe6;stroke:#1d1d1b}"
    ".ls-band{fill:#e4e9ec;stroke:none}.ls-steam{stroke:#1d1d1b;fill:none}.ls-stop{stroke:#8c1d18;fill:none}"
    ".ls-cut{stroke:#ffffff;fill:none}.ls-stop-t{fill:#8c1d18;stroke:none}.ls-stop-solid{fill:#8c1d18;stroke:#8c1d18}"
    "@media screen and (prefers-color-scheme:dark){"
    ".ls-ink{stroke:#eceae4}.ls-soft{stroke:#a9a69e}.ls-grid{stroke:#3d3f42}.ls-t{fill:#eceae4}.ls-q{fill:#b9b6ae}"
    ".ls-solid{fill:#eceae4;stroke:#eceae4}.ls-paper{fill:#17191b;stroke:#eceae4}.ls-blank{fill:#17191b}"
    ".ls-water{fill:#2c4a5c;stroke:#eceae4}.ls-band{fill:#2a3238}.ls-steam{stroke:#eceae4}.ls-stop{stroke:#ff9d94}"
    ".ls-cut{stroke:#17191b}.ls-stop-t{fill:#ff9d94}.ls-stop-solid{fill:#ff9d94;stroke:#ff9d94}}"
)
"""One style for every figure, so that a page can allow it by its fingerprint and nothing else."""

_FONT = "'DejaVu Sans Mono',Menlo,Consolas,'Liberation Mono',monospace"


def width_of(text: str, size: float = LETTER) -> float:
    """How wide a text is set at most: wide letters of East Asia count twice."""
    letters = sum(2 if unicodedata.east_asian_width(letter) in "WF" else 1 for letter in text)
    return letters * size * _LETTER_WIDTH


def fitted(text: str, width: float, size: float = LETTER) -> str:
    """A text cut to a width, with a mark where it was cut."""
    if width_of(text, size) <= width:
        return text
    while text and width_of(text, size) + width_of("…", size) > width:
        text = text[:-1]
    return text.rstrip() + "…"


def spread(wanted: Sequence[float], gap: float, low: float, high: float) -> list[float]:
    """Places as near as can be to those wanted, in the same order, at least ``gap`` apart, between two ends.

    Where there is not room enough for all, the gap shrinks.
    """
    if not wanted:
        return []
    gap = min(gap, (high - low) / max(1, len(wanted) - 1)) if len(wanted) > 1 else gap
    order = sorted(range(len(wanted)), key=lambda k: wanted[k])
    placed = [min(max(wanted[k], low), high) for k in order]
    for k in range(1, len(placed)):
        placed[k] = max(placed[k], placed[k - 1] + gap)
    if placed[-1] > high:
        placed[-1] = high
        for k in range(len(placed) - 2, -1, -1):
            placed[k] = min(placed[k], placed[k + 1] - gap)
    found = [0.0] * len(wanted)
    for k, place in zip(order, placed, strict=True):
        found[k] = place
    return found


def round_ticks(low: float, high: float, most: int) -> list[float]:
    """Round numbers from ``low`` to ``high``, at most ``most`` of them, stepping by 1, 2 or 5 times a power of ten."""
    span = high - low
    if not span > 0 or not math.isfinite(span):
        return [low]
    power = 10.0 ** math.floor(math.log10(span / most))
    step = next((power * m for m in (1, 2, 5, 10, 20) if span / (power * m) + 1 <= most + 1e-9), 50 * power)
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [0.0 if k == 0 else float(f"{k * step:.12g}") for k in range(first, last + 1)]


def tick_labels(ticks: Sequence[float]) -> list[tuple[float, str]]:
    """Ticks with their digits, all with as many decimals as the finest of them needs."""
    places = max((len(f"{tick:.10g}".partition(".")[2]) for tick in ticks), default=0)
    return [(tick, f"{tick:.{places}f}") for tick in ticks]


class Scale:
    """A straight scale from numbers to places on paper."""

    def __init__(self, low: float, high: float, start: float, end: float) -> None:
        if not high > low:
            high = low + 1.0
        self.low, self.high, self._start = low, high, start
        self._slope = (end - start) / (high - low)

    def __call__(self, number: float) -> float:
        """Where a number lies."""
        return self._start + (number - self.low) * self._slope

    def ticks(self, most: int) -> list[float]:
        """Round numbers on the scale."""
        return round_ticks(self.low, self.high, most)


def _c(number: float) -> str:
    """A coordinate, to a tenth."""
    return f"{number:.1f}".removesuffix(".0")


class Canvas:
    """A drawing being drawn."""

    def __init__(self, height: float, width: float = WIDTH) -> None:
        self.width, self.height = width, height
        self._parts: list[str] = []

    def line(
        self, start: Point, end: Point, kind: str = "ink", *, weight: float = 1.0, dash: str = ""
    ) -> None:
        """A straight line."""
        (x1, y1), (x2, y2) = start, end
        self._parts.append(
            f'<line class="ls-{kind}" x1="{_c(x1)}" y1="{_c(y1)}" x2="{_c(x2)}" y2="{_c(y2)}"{_stroke(weight, dash)}/>'
        )

    def path(
        self,
        points: Iterable[Point],
        kind: str = "ink",
        *,
        weight: float = 1.5,
        dash: str = "",
        closed: bool = False,
    ) -> None:
        """A line through points, or an area."""
        steps = "L".join(f"{_c(x)} {_c(y)}" for x, y in points)
        end = "Z" if closed else ""
        self._parts.append(f'<path class="ls-{kind}" d="M{steps}{end}"{_stroke(weight, dash)}/>')

    def box(
        self,
        left: float,
        top: float,
        width: float,
        height: float,
        kind: str = "paper",
        *,
        weight: float = 1.0,
        radius: float = 0.0,
        dash: str = "",
    ) -> None:
        """A rectangle."""
        rounded = f' rx="{_c(radius)}"' if radius else ""
        self._parts.append(
            f'<rect class="ls-{kind}" x="{_c(left)}" y="{_c(top)}" width="{_c(max(0.0, width))}" '
            f'height="{_c(max(0.0, height))}"{rounded}{_stroke(weight, dash)}/>'
        )

    def ring(self, centre: Point, radius: float, kind: str = "paper", *, weight: float = 1.2) -> None:
        """A circle."""
        self._parts.append(
            f'<circle class="ls-{kind}" cx="{_c(centre[0])}" cy="{_c(centre[1])}" r="{_c(radius)}"'
            f"{_stroke(weight, '')}/>"
        )

    def text(
        self,
        place: Point,
        text: str,
        anchor: Anchor = "start",
        *,
        kind: str = "t",
        size: float = LETTER,
        bold: bool = False,
        upright: bool = True,
    ) -> None:
        """A line of lettering on its base line."""
        x, y = place
        turned = "" if upright else f' transform="rotate(-90 {_c(x)} {_c(y)})"'
        side = "" if anchor == "start" else f' text-anchor="{anchor}"'
        heavy = ' font-weight="bold"' if bold else ""
        sized = "" if size == LETTER else f' font-size="{_c(size)}"'
        self._parts.append(
            f'<text class="ls-{kind}" x="{_c(x)}" y="{_c(y)}"{side}{sized}{heavy}{turned}>'
            f"{escape(text, quote=False)}</text>"
        )

    def hatched(self, left: float, top: float, width: float, height: float, step: float = 5.0) -> None:
        """Slanted hatching within a rectangle: what is full of steam."""
        right, bottom = left + width, top + height
        strokes = []
        for k in range(1, int((width + height) / step) + 1):
            away = k * step
            x1, y1 = (left + away, top) if away <= width else (right, top + away - width)
            x2, y2 = (left, top + away) if away <= height else (left + away - height, bottom)
            strokes.append(f"M{_c(x1)} {_c(y1)}L{_c(x2)} {_c(y2)}")
        if strokes:
            self._parts.append(f'<path class="ls-steam" d="{"".join(strokes)}" stroke-width="0.8"/>')

    def sign(self, shape: str, centre: Point, size: float = 4.0) -> None:
        """A sign that tells a state apart without colour."""
        x, y = centre
        if shape == "ring":
            self.ring(centre, size, "paper", weight=1.6)
        elif shape == "disc":
            self.ring(centre, size, "solid", weight=1.0)
        elif shape == "square":
            self.box(x - size, y - size, 2 * size, 2 * size, "paper", weight=1.6)
        elif shape == "block":
            self.box(x - size, y - size, 2 * size, 2 * size, "solid")
        elif shape == "cross":
            for a, b in ((-size, size), (size, -size)):
                self.line((x - size, y + a), (x + size, y + b), "stop", weight=2.4)
        else:
            corners = {
                "up": ((0, -1.3), (1.2, 0.9), (-1.2, 0.9)),
                "down": ((0, 1.3), (1.2, -0.9), (-1.2, -0.9)),
                "diamond": ((0, -1.4), (1.4, 0), (0, 1.4), (-1.4, 0)),
            }[shape]
            self.path(((x + size * a, y + size * b) for a, b in corners), "solid", closed=True, weight=1)

    def bare(self) -> str:
        """The finished drawing as an ornament: what it says stands in words beside it."""
        return (
            f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {_c(self.width)} {_c(self.height)}" '
            f'width="{_c(self.width)}" height="{_c(self.height)}" aria-hidden="true" font-family="{_FONT}">'
            f"<style>{STYLE}</style>{''.join(self._parts)}</svg>"
        )

    def svg(self, name: str, title: str, description: str) -> str:
        """The finished drawing, named and described for whoever cannot see it."""
        return (
            f'<svg xmlns="http://www.w3.org/2000/svg" class="ls-figure" '
            f'viewBox="0 0 {_c(self.width)} {_c(self.height)}" '
            f'width="{_c(self.width)}" height="{_c(self.height)}" role="img" '
            f'aria-labelledby="figure-{name}-title figure-{name}-desc" font-family="{_FONT}" font-size="{_c(LETTER)}">'
            f'<title id="figure-{name}-title">{escape(title, quote=False)}</title>'
            f'<desc id="figure-{name}-desc">{escape(description, quote=False)}</desc>'
            f"<style>{STYLE}</style>{''.join(self._parts)}</svg>"
        )


def _stroke(weight: float, dash: str) -> str:
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    return f' stroke-width="{_c(weight)}"{dashed}'
