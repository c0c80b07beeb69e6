"""The loop to the scale of its heights: collectors, pipes, station, vessel and valve, each with what it holds."""

from collections.abc import Iterator

from msgspec import Struct

from loopslack.calc.model import Branch
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import (
    LETTER,
    SMALL,
    WIDTH,
    Canvas,
    Point,
    Scale,
    fitted,
    spread,
    tick_labels,
    width_of,
)
from loopslack.sheet.figures.symbols import collector, cooling_vessel, relief_valve, station, vessel
from loopslack.sheet.lines import Drawing

NAME = "loop-schematic"
MOST_GROUPS, MOST_RUNS = 4, 4
_AXIS, _LABELS = 36.0, 214.0
_ROW = 28.0
_BELOW = 62.0  # room under the vessel connection for the vessel
_STATION, _VESSEL = 106.0, 176.0
_LEAST_SPAN = 1.0  # m
_LANE = 46.0  # of the outer pipes from the middle
_KNEE = 40.0  # room above the station in which pipes slant to it


class _Label(Struct, frozen=True):
    """What a part is called, what it holds and where it stands."""

    at: Point
    name: str
    more: str


def loop_schematic(case: Case) -> Drawing:
    """Every part at its height, joined to its name and content by a thin line."""
    words, say, loop = case.words, case.say, case.loop
    heights = [group.height for group in loop.groups]
    low = min(0.0, loop.station.height, loop.relief.height, *heights)
    high = max(loop.top, loop.relief.height, loop.station.height, *heights, low + _LEAST_SPAN)
    count = min(len(loop.groups), MOST_GROUPS) + min(len(loop.branches), MOST_RUNS) + 6
    count += (len(loop.groups) > MOST_GROUPS) + (len(loop.branches) > MOST_RUNS)
    height = max(344.0, count * _ROW + 40.0)
    up = Scale(low, high, height - _BELOW - 38.0, 40.0)
    canvas = Canvas(height)
    _heights(canvas, case, low, high, up)
    labels = [*_field(canvas, case, up), *_plant(canvas, case, up)]
    if loop.top > max(heights) + 0.05:
        x = _STATION
        canvas.line((x - 50.0, up(loop.top)), (x + 50.0, up(loop.top)), "soft", dash="1 3")
        labels.append(_Label((x + 50.0, up(loop.top)), words("part.top"), say(case.write.length(loop.top))))
    _name(canvas, labels, height)
    total = words("figure.content", total=say(case.result.content.total))
    canvas.text((6.0, height - 6.0), total, bold=True)
    title = words(f"figure.{NAME}.title")
    told = "; ".join(f"{label.name}: {label.more}" for label in labels)
    description = words(f"figure.{NAME}.description", parts=told, total=say(case.result.content.total))
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


def _heights(canvas: Canvas, case: Case, low: float, high: float, up: Scale) -> None:
    """The scale of heights at the left, in the units of the answer, and the level of the vessel connection."""
    write, say = case.write, case.say
    scale = Scale(write.length(low).value, write.length(high).value, up(low), up(high))
    canvas.line((_AXIS, up(low)), (_AXIS, up(high)), "soft")
    for tick, label in tick_labels(scale.ticks(7)):
        canvas.line((_AXIS - 4.0, scale(tick)), (_AXIS, scale(tick)), "soft")
        canvas.text((_AXIS - 7.0, scale(tick) + 3.5), say.plain(label), "end", size=SMALL, kind="q")
    unit = say.unit(write.length(0.0).unit)
    canvas.text((2.0, 12.0), f"{case.words('axis.height')}, {unit}", size=SMALL, kind="q")
    canvas.line((_AXIS, up(0.0)), (_VESSEL + 18.0, up(0.0)), "grid", dash="4 3")


def _field(canvas: Canvas, case: Case, up: Scale) -> Iterator[_Label]:
    """Collectors and the pipe runs below them."""
    words, say, loop = case.words, case.say, case.loop
    parts = case.result.content.parts
    shown = case.groups_by_height()[:MOST_GROUPS]
    width = 104.0 / len(shown)
    left, at = _STATION - 52.0, (_STATION, up(loop.top))
    reach = _LANE if len(shown) == 1 else _LANE + 12.0  # pipes pass beside the field
    for place, (index, group) in enumerate(shown):
        middle = left + (place + 0.5) * width
        y = up(group.height)
        canvas.line((_STATION - reach, y), (_STATION + reach, y), weight=1.2)  # what joins it to the pipes
        collector(canvas, (middle, y), min(width - 6.0, 64.0))
        count = f"\N{MULTIPLICATION SIGN}\N{NO-BREAK SPACE}{group.count}"
        more = f"{count} · {say(parts[index].content)} · {say(case.write.length(group.height))}"
        at = (middle + min(width - 6.0, 64.0) / 2.0, y)
        yield _Label(at, case.group_name(index), more)
    if len(loop.groups) > len(shown):
        rest = words("figure.more-groups", number=len(loop.groups) - len(shown))
        yield _Label(at, rest, words("figure.in-all", content=say(case.result.content.collectors)))
    drawn = {"flow": 0, "return": 0}
    knee = min(max(up(group.height) for _, group in shown), up(loop.station.height) - _KNEE)
    for index, branch in enumerate(loop.branches[:MOST_RUNS]):
        lane = drawn[branch.role]
        drawn[branch.role] = lane + 1
        side = 1.0 if branch.role == "flow" else -1.0
        start, end = _STATION + side * (reach - 6.0 * lane), _STATION + side * (18.0 - 5.0 * lane)
        points = _run(branch, up, (start, end), knee)
        canvas.path(points, weight=2.0, dash="" if branch.role == "flow" else "7 3")
        if lane == 0:
            (x1, y1), (x2, y2) = points[-2:]
            arrow = "down" if branch.role == "flow" else "up"
            canvas.sign(arrow, (x1 + 0.7 * (x2 - x1), y1 + 0.7 * (y2 - y1)), 3.6)
        content = parts[len(loop.groups) + index].content
        name = case.run_name(index)
        more = f"{say(content)} · {words('figure.long', length=say(case.write.length(branch.length)))}"
        half = len(points) // 2
        (x1, y1), (x2, y2) = points[half - 1], points[half]
        at = ((x1 + x2) / 2.0, (y1 + y2) / 2.0)
        yield _Label(at, name, more)
    if len(loop.branches) > MOST_RUNS:
        rest = words("figure.more-runs", number=len(loop.branches) - MOST_RUNS)
        yield _Label(at, rest, words("figure.in-all", content=say(case.result.content.pipes)))


def _run(branch: Branch, up: Scale, ends: tuple[float, float], knee: float) -> list[Point]:
    """A pipe run at the heights of its stretches: straight down beside the field, then slanting to the station."""
    start, end = ends
    last = up(branch.segments[-1].end_height)
    points = [(start, up(branch.segments[0].start_height))]
    for segment in branch.segments:
        y, (_, before) = up(segment.end_height), points[-1]
        if before < knee < y:
            points.append((start, knee))
        share = (y - knee) / (last - knee) if last > knee else 0.0
        points.append((start + (end - start) * min(max(share, 0.0), 1.0), y))
    points[-1] = (end, last)
    return points


def _plant(canvas: Canvas, case: Case, up: Scale) -> Iterator[_Label]:
    """Station, valve, vessel line, cooling vessel and vessel."""
    words, say, loop, write = case.words, case.say, case.loop, case.write
    held = {part.kind: part.content for part in case.result.content.parts}
    zero, at = up(0.0), up(loop.station.height)
    canvas.path(
        [(_STATION, at), (_VESSEL - 30.0, at), (_VESSEL - 30.0, zero), (_VESSEL, zero), (_VESSEL, zero + 8.0)]
    )
    station(canvas, (_STATION, at))
    more = f"{say(held['station'])} · {say(write.length(loop.station.height))}" if "station" in held else ""
    yield _Label((_STATION + 20.0, at), words("part.station"), more)
    valve = up(loop.relief.height)
    canvas.path([(_VESSEL - 30.0, zero), (_VESSEL - 30.0, valve)], weight=1.2)
    relief_valve(canvas, (_VESSEL - 30.0, valve))
    stamped = say(write.gauge(loop.relief.set_pressure))
    yield _Label(
        (_VESSEL - 21.0, valve - 7.0),
        words("part.relief-valve"),
        f"{stamped} · {say(write.length(loop.relief.height))}",
    )
    chosen = case.vessel
    if chosen is None:
        return
    cooling = None if chosen.cooling_vessel is None else chosen.cooling_vessel.content
    cooling = cooling or held.get("cooling-vessel")
    if cooling is not None:
        cooling_vessel(canvas, (_VESSEL, zero + 8.0))
        yield _Label((_VESSEL + 8.0, zero + 17.0), words("part.cooling-vessel"), say(cooling))
    top = zero + (28.0 if cooling is not None else 8.0)
    vessel(canvas, (_VESSEL, top))
    size = say(chosen.nominal_volume)
    line = held.get("vessel-line")
    more = f"{chosen.pieces} \N{MULTIPLICATION SIGN} {size}" if chosen.pieces > 1 else size
    if line is not None:
        more = f"{more} · {words('figure.line', content=say(line))}"
    yield _Label(
        (_VESSEL + 14.0, top + 20.0), words("part.vessel" if case.chosen else "figure.vessel-nearest"), more
    )


def _name(canvas: Canvas, labels: list[_Label], height: float) -> None:
    """Names at the right, as near to their parts as they can be without touching."""
    places = spread([label.at[1] for label in labels], _ROW, 26.0, height - 48.0)
    for label, y in zip(labels, places, strict=True):
        x, at = label.at
        canvas.path([(x, at), (_LABELS - 12.0, y), (_LABELS - 4.0, y)], "soft", weight=0.7)
        canvas.ring((x, at), 1.4, "solid", weight=0.5)
        room = WIDTH - _LABELS - 4.0
        size = LETTER if width_of(label.name) <= room else SMALL
        canvas.text((_LABELS, y - 1.0), fitted(label.name, room, size), size=size, bold=True)
        canvas.text((_LABELS, y + LETTER), fitted(label.more, room, SMALL), size=SMALL)
