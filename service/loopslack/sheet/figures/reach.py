"""How far steam fills each pipe run in stagnation, to the scale of the longest run."""

from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, fitted, width_of
from loopslack.sheet.figures.marks import ROW
from loopslack.sheet.lines import Drawing

NAME = "steam-reach"
MOST_RUNS = 12
_STEP, _BAR = 38.0, 13.0


def steam_reach(case: Case) -> Drawing | None:
    """One bar a pipe run from the collectors to the station, filled with steam as far as it reaches."""
    base = case.stagnation("base")
    if base is None or not base.reach:
        return None
    words, say = case.words, case.say
    reached = case.reaches(base)
    shown = sorted(sorted(reached, key=lambda pair: -pair[1].reach.value)[:MOST_RUNS])
    worst = _worst(case)
    longest = max(reach.length.value for _, reach in shown)
    left, right = 6.0, WIDTH - 6.0
    top = 24.0
    canvas = Canvas(top + len(shown) * _STEP + (ROW if len(reached) > len(shown) else 0.0) + 2 * ROW + 8.0)
    canvas.text((left, 10.0), words("figure.from-collectors"), size=SMALL, kind="q")
    canvas.text((right, 10.0), words("figure.to-station"), "end", size=SMALL, kind="q")
    told = []
    for number, (run, reach) in enumerate(shown):
        y = top + number * _STEP
        length = (right - left) * reach.length.value / longest if longest else 0.0
        filled = (right - left) * reach.reach.value / longest if longest else 0.0
        numbers = words("figure.reach", reach=say(reach.reach), length=say(reach.length))
        name = fitted(case.run_name(run), right - left - width_of(numbers) - 12.0)
        canvas.text((left, y + 9.0), name)
        canvas.text((right, y + 9.0), numbers, "end")
        canvas.box(left, y + 14.0, length, _BAR, "water")
        canvas.box(left, y + 14.0, filled, _BAR)
        canvas.hatched(left, y + 14.0, filled, _BAR)
        if run in worst and longest:
            x = left + (right - left) * worst[run] / longest
            canvas.line((x, y + 11.0), (x, y + 14.0 + _BAR + 3.0), "stop", weight=2.2)
        told.append(f"{case.run_name(run)}: {numbers}")
    y = top + len(shown) * _STEP
    if len(reached) > len(shown):
        canvas.text(
            (left, y + 9.0), words("figure.more-runs", number=len(reached) - len(shown)), size=SMALL, kind="q"
        )
        y += ROW
    _key(canvas, case, y + 12.0, worst=bool(worst))
    title = words(f"figure.{NAME}.title")
    description = words(f"figure.{NAME}.description", runs="; ".join(told))
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


def _worst(case: Case) -> dict[int, float]:
    """The farthest steam reaches in each run under any doubt that counts."""
    found: dict[int, float] = {}
    for state in case.result.stagnation:
        if state.scenario in case.counted and state.scenario != "base":
            for run, reach in case.reaches(state):
                found[run] = max(found.get(run, 0.0), reach.reach.value)
    return found


def _key(canvas: Canvas, case: Case, base: float, *, worst: bool) -> None:
    canvas.box(6.0, base - 9.0, 22.0, 10.0)
    canvas.hatched(6.0, base - 9.0, 22.0, 10.0)
    canvas.text((34.0, base), case.words("figure.steam-base"), size=SMALL)
    canvas.box(206.0, base - 9.0, 22.0, 10.0, "water")
    canvas.text((234.0, base), case.words("figure.liquid"), size=SMALL)
    if worst:
        canvas.line((17.0, base + 6.0), (17.0, base + 19.0), "stop", weight=2.2)
        canvas.text((34.0, base + ROW), case.words("figure.steam-doubt"), size=SMALL)
