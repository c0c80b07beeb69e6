"""The parts of a loop as line symbols of our own, each drawn around or below a point."""

from loopslack.sheet.drawing import Canvas, Point


def collector(canvas: Canvas, middle: Point, width: float) -> None:
    """A tilted panel with its absorber lines."""
    x, y = middle
    half, rise = width / 2.0, 9.0
    corners = [
        (x - half, y + rise),
        (x - half + 8.0, y - rise),
        (x + half, y - rise),
        (x + half - 8.0, y + rise),
    ]
    canvas.path(corners, "paper", weight=1.6, closed=True)
    count = max(2, int(width // 14))
    for k in range(1, count):
        share = k / count
        foot = x - half + (width - 8.0) * share
        canvas.line((foot, y + rise), (foot + 8.0, y - rise), "soft", weight=0.7)


def station(canvas: Canvas, middle: Point) -> None:
    """A box with a heat exchanger in it."""
    x, y = middle
    canvas.box(x - 20.0, y - 13.0, 40.0, 26.0, weight=1.6)
    canvas.path(
        [(x - 12.0, y - 13.0), (x - 12.0, y - 6.0), (x + 12.0, y), (x - 12.0, y + 6.0), (x - 12.0, y + 13.0)]
    )


def vessel(canvas: Canvas, top: Point) -> None:
    """A capsule below its connection, liquid above the membrane, gas below."""
    x, y = top
    canvas.box(x - 14.0, y, 28.0, 42.0, "paper", weight=1.8, radius=11.0)
    canvas.path(
        [(x - 14.0, y + 17.0), (x - 5.0, y + 22.0), (x + 5.0, y + 22.0), (x + 14.0, y + 17.0)], weight=1.2
    )
    for k in range(3):
        canvas.ring((x - 6.0 + 6.0 * k, y + 31.0 + 3.0 * (k % 2)), 0.9, "solid", weight=0.5)


def cooling_vessel(canvas: Canvas, top: Point) -> None:
    """A small flat capsule in the line."""
    x, y = top
    canvas.box(x - 9.0, y, 18.0, 15.0, "paper", weight=1.6, radius=5.0)
    canvas.line((x, y + 15.0), (x, y + 20.0), weight=1.5)


def relief_valve(canvas: Canvas, at: Point) -> None:
    """An angle valve with its spring, blowing to the right."""
    x, y = at
    canvas.path([(x - 5.0, y), (x + 5.0, y), (x, y - 7.0)], "paper", closed=True, weight=1.3)
    canvas.path([(x, y - 7.0), (x + 9.0, y - 12.0), (x + 9.0, y - 2.0)], "paper", closed=True, weight=1.3)
    canvas.path([(x, y - 7.0), (x - 3.0, y - 10.0), (x + 3.0, y - 13.0), (x - 3.0, y - 16.0)], weight=1.1)
