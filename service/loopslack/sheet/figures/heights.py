"""Pressure over height in each state, from the vessel connection to the highest point."""

from loopslack.contract.answers.loop import StagnationState
from loopslack.physics.statics import GRAVITY
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, Point, Scale, tick_labels, width_of
from loopslack.sheet.figures.fronts import front_height
from loopslack.sheet.figures.marks import SIGNS, Entry, key, key_height
from loopslack.sheet.lines import Drawing

NAME = "pressure-over-height"
_LEFT, _TOP, _HIGH = 44.0, 14.0, 232.0
_LEAST_RISE = 0.3  # m of height below which both ends of a line fall together and are drawn as one

_Line = tuple[str, list[Point], Entry]


def pressure_over_height(case: Case) -> Drawing | None:
    """One line a state, its ends marked; in stagnation the steam stands at one pressure from its front upwards."""
    lines = [*_liquid_lines(case), *_stagnation_lines(case)]
    if not lines:
        return None
    words, say, write = case.words, case.say, case.write
    limits = _limits(case)
    top = write.length(max(case.loop.top, _LEAST_RISE)).value
    pressures = [x for _, points, _ in lines for x, _ in points] + [x for x, _, _ in limits]
    low = min(0.0, *pressures)
    span = max(pressures) - low
    heads = (words("figure.at-vessel"), words("figure.at-top"))
    entries = [entry for _, _, entry in lines]
    bottom = _TOP + _HIGH
    canvas = Canvas(bottom + 42.0 + key_height(entries, heads=True))
    across = Scale(low, max(pressures) + 0.06 * span, _LEFT, WIDTH - 10.0)
    up = Scale(0.0, top, bottom - 22.0, _TOP + 22.0)
    _grid(canvas, case, across, up, bottom)
    for pressure, height, name in limits:
        _limit(canvas, across(pressure), up(height), name, above=height > 0)
    for state, points, entry in lines:
        sign, dash = SIGNS[state]
        sign = "cross" if entry.stop else sign
        drawn = [(across(x), up(y)) for x, y in points]
        canvas.path(drawn, weight=1.5, dash=dash)
        for end in (drawn[0], drawn[-1]):
            canvas.sign(sign, end, 3.8)
    key(canvas, bottom + 38.0, entries, heads)
    title = words(f"figure.{NAME}.title")
    told = "; ".join(f"{entry.name}: {', '.join(filter(None, entry.numbers))}" for entry in entries)
    description = words(f"figure.{NAME}.description", height=say(write.length(case.loop.top)), states=told)
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


def _liquid_lines(case: Case) -> list[_Line]:
    words, say = case.words, case.say
    top = case.write.length(max(case.loop.top, 0.0)).value
    found: list[_Line] = []
    for id in ("cold", "fill", "operating", "cut-off"):
        state = case.state(id)
        if state is None or state.vessel_pressure is None or state.top_pressure is None:
            continue
        entry = Entry(id, words(f"short.{id}"), (say(state.vessel_pressure), say(state.top_pressure)))
        found.append((id, [(state.vessel_pressure.value, 0.0), (state.top_pressure.value, top)], entry))
    return found


def _stagnation_lines(case: Case) -> list[_Line]:
    found: list[_Line] = []
    for sign, state in (("base", case.stagnation("base")), ("worst", case.worst_stagnation)):
        if state is None or state.vessel_pressure is None:
            continue
        opens = state.regime == "valve-opens"
        name = case.words("short.stagnation")
        if sign == "worst":
            name = f"{name}: {case.words(f'short.{state.scenario}')}"
        bound = "≥ " if state.lower_bound else ""
        entry = Entry(sign, name, (bound + case.say(state.vessel_pressure), ""), opens)
        found.append((sign, _hot_line(case, state, state.vessel_pressure.value), entry))
    return found


def _hot_line(case: Case, state: StagnationState, pressure: float) -> list[Point]:
    """Liquid up to the steam front, steam of one pressure above it; liquid all the way where nothing boils."""
    write, loop = case.write, case.loop
    front = front_height(case, state)
    density = loop.fluid.density(min(loop.temperatures.hot_liquid, loop.fluid.highest))
    reached = loop.top if front is None else max(0.0, min(front, loop.top))
    less = write.pressure_difference(density * GRAVITY * reached).value
    points = [(pressure, 0.0), (pressure - less, write.length(reached).value)]
    if front is not None and reached < loop.top:
        points.append((pressure - less, write.length(loop.top).value))
    return points


def _limits(case: Case) -> list[tuple[float, float, str]]:
    """The pressures that bound the lines: least at the top when cold, most at the vessel in stagnation."""
    words, say = case.words, case.say
    found = []
    least, most = case.check("top-pressure", "cold"), case.check("relief-valve", "base")
    top = case.write.length(max(case.loop.top, 0.0)).value
    if least is not None and least.limit is not None:
        found.append((least.limit.value, top, f"{words('figure.least')} {say.digits(least.limit)}"))
    if most is not None and most.limit is not None:
        found.append((most.limit.value, 0.0, f"{words('figure.most')} {say.digits(most.limit)}"))
    return found


def _limit(canvas: Canvas, x: float, y: float, name: str, *, above: bool) -> None:
    """A short bar across the height it counts at, named beside it."""
    canvas.line((x, y - 9.0), (x, y + 9.0), "stop", weight=2.6)
    room = width_of(name, SMALL)
    start = min(max(x - room / 2.0, _LEFT + 3.0), WIDTH - 12.0 - room)
    canvas.text((start, y - 12.0 if above else y + 18.0), name, size=SMALL, kind="stop-t")


def _grid(canvas: Canvas, case: Case, across: Scale, up: Scale, bottom: float) -> None:
    say, words = case.say, case.words
    right = WIDTH - 10.0
    for tick, label in tick_labels(across.ticks(8)):
        canvas.line((across(tick), _TOP), (across(tick), bottom), "grid")
        canvas.text((across(tick), bottom + 14.0), say.plain(label), "middle", size=SMALL)
    for tick, label in tick_labels(up.ticks(6)):
        canvas.line((_LEFT - 4.0, up(tick)), (_LEFT, up(tick)))
        canvas.text((_LEFT - 6.0, up(tick) + 3.5), say.plain(label), "end", size=SMALL)
    canvas.line((_LEFT, bottom), (right, bottom), weight=1.2)
    canvas.line((_LEFT, _TOP), (_LEFT, bottom), weight=1.2)
    pressure, length = case.write.gauge(0.0).unit, case.write.length(0.0).unit
    canvas.text(
        (right, bottom + 28.0), f"{words('axis.pressure')}, {say.unit(pressure)}", "end", size=SMALL, kind="q"
    )
    canvas.text((2.0, 9.0), f"{words('axis.height')}, {say.unit(length)}", size=SMALL, kind="q")
