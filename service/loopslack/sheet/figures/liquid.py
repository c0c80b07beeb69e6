"""Pressure in the vessel against the liquid it holds, with every state on its curve and the limits around them."""

from itertools import pairwise

from loopslack.contract.answers.loop import StagnationState
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, Scale, tick_labels, width_of
from loopslack.sheet.figures.marks import SIGNS, Entry, key, key_height
from loopslack.sheet.lines import Drawing

NAME = "pressure-over-liquid"
_LEFT, _TOP, _HIGH = 44.0, 14.0, 236.0
_POINTS = 60
_SAME = 1e-9


class _Curve:
    """Boyle's law through one point of the answer, in the units of the answer."""

    def __init__(self, nominal: float, atmosphere: float, liquid: float, pressure: float) -> None:
        self._nominal, self._atmosphere = nominal, atmosphere
        self._constant = (pressure + atmosphere) * (nominal - liquid)

    def __call__(self, liquid: float) -> float:
        return self._constant / (self._nominal - liquid) - self._atmosphere

    def liquid_at(self, pressure: float) -> float:
        """The liquid held at a pressure."""
        return self._nominal - self._constant / (pressure + self._atmosphere)


def pressure_over_liquid(case: Case) -> Drawing | None:
    """The vessel as a curve, its states, the reserve, and where the relief valve may open."""
    vessel = case.vessel
    points = _points(case)
    if vessel is None or not points:
        return None
    nominal = vessel.total_nominal_volume.value
    loop, write = case.loop, case.write
    atmosphere = write.gauge(loop.atmosphere).value
    opening = case.check("relief-valve", "base")
    stamped = write.gauge(loop.relief.set_pressure)
    final = opening.limit if opening is not None else None
    least = min(0.0, *(pressure for _, _, pressure, _ in points))
    most = max(stamped.value, *(pressure for _, _, pressure, _ in points)) * 1.1
    entries = [entry for _, _, _, entry in points]
    bottom = _TOP + _HIGH
    canvas = Canvas(bottom + 40.0 + key_height(entries))
    across = Scale(0.0, nominal, _LEFT, WIDTH - 10.0)
    up = Scale(least, most, bottom, _TOP)
    _grid(canvas, case, across, up, bottom)
    heavy = _curves(canvas, points, nominal, atmosphere, across, up)
    _limits(canvas, case, heavy, across, up)
    for state, liquid, pressure, entry in points:
        if entry.stop:
            canvas.sign("cross", (across(heavy.liquid_at(pressure)), up(pressure)), 4.2)
        else:
            canvas.sign(SIGNS[state][0], (across(liquid), up(pressure)), 4.2)
    key(canvas, bottom + 38.0, entries)
    words = case.words
    title = words(f"figure.{NAME}.title")
    told = "; ".join(f"{entry.name} {' '.join(entry.numbers)}" for entry in entries)
    description = words(
        f"figure.{NAME}.description",
        vessel=case.say(vessel.total_nominal_volume),
        states=told,
        set=case.say(stamped),
        final=case.say(final),
    )
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


_Point = tuple[str, float, float, Entry]


def _points(case: Case) -> list[_Point]:
    """The states that have a pressure, coldest first, each with its line of the key."""
    words, say = case.words, case.say
    found: list[_Point] = []
    for id in ("cold", "fill", "operating", "cut-off"):
        state = case.state(id)
        if state is not None and state.vessel_pressure is not None:
            entry = Entry(id, words(f"short.{id}"), (say(state.vessel_liquid), say(state.vessel_pressure)))
            found.append((id, state.vessel_liquid.value, state.vessel_pressure.value, entry))
    worst = case.worst_stagnation
    for sign, stagnation in (("base", case.stagnation("base")), ("worst", worst)):
        if stagnation is not None and stagnation.vessel_pressure is not None:
            entry = _stagnation(case, sign, stagnation)
            found.append((sign, stagnation.vessel_liquid.value, stagnation.vessel_pressure.value, entry))
    return found


def _stagnation(case: Case, sign: str, state: StagnationState) -> Entry:
    words, say = case.words, case.say
    name = words("short.stagnation")
    if sign == "worst":
        name = f"{name}: {words(f'short.{state.scenario}')}"
    opens = state.regime == "valve-opens"
    if opens:
        name = f"{name} \N{EN DASH} {words('figure.opens')}"
    pressure = say(state.vessel_pressure)
    return Entry(
        sign, name, (say(state.vessel_liquid), f"≥ {pressure}" if state.lower_bound else pressure), opens
    )


def _grid(canvas: Canvas, case: Case, across: Scale, up: Scale, bottom: float) -> None:
    say, words = case.say, case.words
    right = WIDTH - 10.0
    vessel = case.vessel
    unit = vessel.total_nominal_volume.unit if vessel is not None else ""
    for tick, label in tick_labels(up.ticks(8)):
        canvas.line((_LEFT, up(tick)), (right, up(tick)), "grid")
        canvas.text((_LEFT - 5.0, up(tick) + 3.5), say.plain(label), "end", size=SMALL)
    for tick, label in tick_labels(across.ticks(8)):
        canvas.line((across(tick), bottom), (across(tick), bottom + 4.0), "ink")
        shown = say.plain(label)
        # A long number at the end of the scale is moved inwards, or the paper's edge cuts it.
        place = min(across(tick), WIDTH - 0.5 * width_of(shown, SMALL))
        canvas.text((place, bottom + 14.0), shown, "middle", size=SMALL)
    canvas.line((_LEFT, bottom), (right, bottom), weight=1.2)
    canvas.line((_LEFT, _TOP), (_LEFT, bottom), weight=1.2)
    canvas.text(
        (right, bottom + 28.0),
        f"{words('axis.vessel-liquid')}, {say.unit(unit)}",
        "end",
        size=SMALL,
        kind="q",
    )
    pressure = case.write.gauge(0.0).unit
    canvas.text((2.0, 9.0), f"{words('axis.vessel-pressure')}, {say.unit(pressure)}", size=SMALL, kind="q")


def _curves(
    canvas: Canvas, points: list[_Point], nominal: float, atmosphere: float, across: Scale, up: Scale
) -> _Curve:
    """The curve through the coldest state lightly, that of stagnation heavily, for what lies within the drawing.

    The heavy one is given back. A state in which the valve opens lies on no curve: the warmest other one stands in.
    """
    within = [point for point in points if not point[3].stop and point[1] < nominal]
    if not within:
        within = points[:1]
    heavy = next((point for point in within if point[0] == "base"), within[-1])
    drawn: list[_Curve] = []
    for point, kind, weight, dash in ((within[0], "soft", 0.8, "3 2"), (heavy, "ink", 2.0, "")):
        curve = _Curve(nominal, atmosphere, min(point[1], 0.99 * nominal), point[2])
        start = max(0.0, curve.liquid_at(up.low)) if up.low + atmosphere > 0 else 0.0
        end = curve.liquid_at(up.high)
        steps = [start + (end - start) * k / _POINTS for k in range(_POINTS + 1)]
        canvas.path([(across(liquid), up(curve(liquid))) for liquid in steps], kind, weight=weight, dash=dash)
        drawn.append(curve)
    return drawn[-1]


def _limits(canvas: Canvas, case: Case, curve: _Curve, across: Scale, up: Scale) -> None:
    """Set pressure and opening pressure across, named on the side of the curve that has more room."""
    words, say = case.words, case.say
    stamped = case.write.gauge(case.loop.relief.set_pressure)
    opening = case.check("relief-valve", "base")
    lines = [(stamped.value, f"{words('figure.set-pressure')} {say(stamped)}", "")]
    if (
        opening is not None
        and opening.limit is not None
        and abs(opening.limit.value - stamped.value) > _SAME * stamped.value
    ):
        lines.append((opening.limit.value, f"{words('figure.may-open')} {say(opening.limit)}", "6 3"))
    lines.sort(reverse=True)
    places = [up(value) for value, _, _ in lines]
    bases = [place - 4.0 for place in places]
    for k, (above, below) in enumerate(pairwise(places)):
        if below - above < SMALL + 5.0:
            bases[k + 1] = below + 11.0
    right = WIDTH - 10.0
    for (value, name, dash), place, base in zip(lines, places, bases, strict=True):
        canvas.line((_LEFT, place), (right, place), "stop", weight=1.6, dash=dash)
        met = across(max(0.0, curve.liquid_at(value)))
        if met - _LEFT >= right - met:
            canvas.text((_LEFT + 5.0, base), name, size=SMALL, kind="stop-t")
        else:
            canvas.text((right - 3.0, base), name, "end", size=SMALL, kind="stop-t")
    _uprights(canvas, case, across, up)


def _uprights(canvas: Canvas, case: Case, across: Scale, up: Scale) -> None:
    """Reserve and acceptance volume as upright lines, named at their feet, where the curves never come."""
    words, say, vessel = case.words, case.say, case.vessel
    bottom, taken = up(up.low), _LEFT
    reserve = case.check("reserve", "cold")
    if reserve is not None and reserve.limit is not None and 0 < reserve.limit.value < across.high:
        x = across(reserve.limit.value)
        name = f"{words('figure.reserve')} {say(reserve.limit)}"
        canvas.line((x, bottom), (x, bottom - 90.0), "soft", dash="2 2")
        canvas.text((x + 4.0, bottom - 4.0), name, size=SMALL, kind="q")
        taken = x + 4.0 + width_of(name, SMALL)
    if vessel is None or vessel.acceptance_volume is None:
        return
    accepted = vessel.acceptance_volume.value * vessel.pieces
    if accepted < across.high:
        x = across(accepted)
        name = words("figure.acceptance")
        room = width_of(name, SMALL)
        base = bottom - (4.0 if x - 4.0 - room > taken + 6.0 else 16.0)
        canvas.line((x, bottom), (x, _TOP), "stop", weight=1.2, dash="2 2")
        canvas.text((x - 4.0, base), name, "end", size=SMALL, kind="stop-t")
