"""The fill pressure against the temperature of the day: what the installer reads at the vessel."""

from loopslack.contract.answers.loop import FillRow
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, Point, Scale, tick_labels
from loopslack.sheet.lines import Drawing

NAME = "fill-pressure-over-temperature"
_LEFT, _TOP, _HIGH = 44.0, 16.0, 216.0


def fill_pressure_over_temperature(case: Case) -> Drawing | None:
    """The window as a band, the recommended pressure as a heavy line with a point for every row of the card."""
    settings = case.result.settings
    if settings is None:
        return None
    rows = [
        (row.temperature.value, row.lower.value, row.recommended.value, row.upper.value)
        for row in settings.by_temperature
        if row.lower is not None and row.recommended is not None and row.upper is not None
    ]
    if len(rows) < 2:
        return None
    words = case.words
    low, high = min(row[1] for row in rows), max(row[3] for row in rows)
    spare = 0.12 * (high - low)
    bottom = _TOP + _HIGH
    canvas = Canvas(bottom + 56.0)
    across = Scale(rows[0][0], rows[-1][0], _LEFT + 10.0, WIDTH - 16.0)
    up = Scale(low - spare, high + spare, bottom, _TOP)
    lower = [(across(t), up(p)) for t, p, _, _ in rows]
    upper = [(across(t), up(p)) for t, _, _, p in rows]
    canvas.path([*lower, *reversed(upper)], "band", closed=True, weight=0)
    _grid(canvas, case, across, up, [row[0] for row in rows], bottom)
    canvas.path(lower, weight=1.2, dash="6 3")
    canvas.path(upper, weight=1.2, dash="2 2")
    middle = [(across(t), up(p)) for t, _, p, _ in rows]
    canvas.path(middle, weight=2.2)
    for point in middle:
        canvas.ring(point, 3.4)
    _key(canvas, case, bottom + 48.0)
    title = words(f"figure.{NAME}.title")
    description = words(
        f"figure.{NAME}.description",
        rows="; ".join(_told(case, row) for row in settings.by_temperature if row.recommended is not None),
    )
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


def _told(case: Case, row: FillRow) -> str:
    return f"{case.say(row.temperature)}: {case.say(row.recommended)}"


def _grid(canvas: Canvas, case: Case, across: Scale, up: Scale, days: list[float], bottom: float) -> None:
    say, words = case.say, case.words
    right = WIDTH - 10.0
    for tick, label in tick_labels(up.ticks(12)):
        canvas.line((_LEFT, up(tick)), (right, up(tick)), "grid")
        canvas.text((_LEFT - 5.0, up(tick) + 3.5), say.plain(label), "end", size=SMALL)
    for day in days:
        canvas.line((across(day), _TOP), (across(day), bottom), "grid")
        canvas.text((across(day), bottom + 13.0), say.plain(f"{day:g}"), "middle", size=SMALL)
    canvas.line((_LEFT, bottom), (right, bottom), weight=1.2)
    canvas.line((_LEFT, _TOP), (_LEFT, bottom), weight=1.2)
    pressure, temperature = case.write.gauge(0.0).unit, case.write.temperature(288.15).unit
    canvas.text((2.0, 9.0), f"{words('axis.fill-pressure')}, {say.unit(pressure)}", size=SMALL, kind="q")
    canvas.text(
        (right, bottom + 27.0), f"{words('axis.day')}, {say.unit(temperature)}", "end", size=SMALL, kind="q"
    )


def _key(canvas: Canvas, case: Case, base: float) -> None:
    """The three lines of the band by name, side by side."""
    for x, name, dash in (
        (6.0, "highest", "2 2"),
        (140.0, "recommended", ""),
        (282.0, "lowest", "6 3"),
    ):
        start: Point = (x, base - 4.0)
        canvas.line(start, (x + 22.0, base - 4.0), weight=1.2 if dash else 2.2, dash=dash)
        if not dash:
            canvas.ring((x + 11.0, base - 4.0), 3.2)
        canvas.text((x + 28.0, base), case.words(f"figure.{name}"), size=SMALL)
