"""The sign of a verdict: told apart by its shape, in black and white and from across a room."""

from loopslack.sheet.drawing import Canvas

_SIDE = 48.0


def verdict_sign(verdict: str) -> str:
    """A tick in a full square, a triangle with a bar, a cross in a ring, or an open question."""
    canvas = Canvas(_SIDE, _SIDE)
    if verdict == "holds":
        canvas.box(2.0, 2.0, 44.0, 44.0, "solid")
        canvas.path([(11.0, 25.0), (20.0, 34.0), (37.0, 13.0)], "cut", weight=5.5)
    elif verdict == "favourable-only":
        canvas.path([(24.0, 4.0), (46.0, 44.0), (2.0, 44.0)], weight=4.0, closed=True)
        canvas.line((24.0, 17.0), (24.0, 31.0), weight=4.5)
        canvas.ring((24.0, 37.5), 2.2, "solid")
    elif verdict == "does-not-hold":
        canvas.ring((24.0, 24.0), 21.0, "stop", weight=4.5)
        for start, end in (((13.0, 13.0), (35.0, 35.0)), ((35.0, 13.0), (13.0, 35.0))):
            canvas.line(start, end, "stop", weight=6.0)
    else:
        canvas.box(4.0, 4.0, 40.0, 40.0, "stop", weight=4.0, dash="7 4")
        canvas.text((24.0, 35.0), "?", "middle", kind="stop-t", size=30.0, bold=True)
    return canvas.bare()
