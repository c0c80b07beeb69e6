"""Sizing as bars: the published rules side by side, the walk between them, and what moves the volume."""

from loopslack.contract.answers.sizing import RuleComparison, SensitivityRow, WalkStep
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, Scale, fitted, tick_labels, width_of
from loopslack.sheet.lines import Drawing
from loopslack.sheet.sections.sizing_names import (
    by_weight,
    input_name,
    input_range,
    rule_short,
    rule_title,
    step_name,
)

MOST_INPUTS = 10
_LEFT, _RIGHT = 6.0, WIDTH - 6.0
_TIGHT = 8.4  # the smallest lettering, for units as long as those of the United States
_KEY = 14.0  # height of a line of the key
_SIGNS: dict[str, str] = {
    "holds": "disc",
    "favourable-only": "up",
    "does-not-hold": "cross",
    "not-assessed": "ring",
}
_NOTHING = 1e-9  # share of the volume within which a step is the solvers' own rounding


def rules(case: Case) -> Drawing | None:
    """One bar a rule, marked whether its vessel would hold in this loop."""
    answered = [rule for rule in case.answer.rules or [] if rule.nominal_volume is not None]
    if not answered:
        return None
    words, say = case.words, case.say
    step, top = 30.0, 6.0
    shown = [verdict for verdict in _SIGNS if any(rule.verdict == verdict for rule in answered)]
    canvas = Canvas(top + len(answered) * step + 10.0 + _KEY * len(shown))
    room = _RIGHT - _LEFT - 96.0
    most = max(_volume(rule) for rule in answered)
    told = []
    for number, rule in enumerate(answered):
        y = top + number * step
        verdict = words(f"figure.rule-{rule.verdict}")
        canvas.text((_LEFT, y + 9.0), fitted(rule_short(case, rule), _RIGHT - _LEFT, SMALL), size=SMALL)
        width = room * _volume(rule) / most
        own = rule.rule == "mass-balance"
        canvas.box(_LEFT, y + 13.0, width, 10.0, "solid" if own else "water")
        x = _LEFT + width + 9.0
        canvas.sign(_SIGNS[rule.verdict], (x, y + 18.0), 3.6)
        canvas.text((x + 9.0, y + 22.0), say(rule.nominal_volume), bold=own)
        told.append(f"{rule_title(case, rule)}: {say(rule.nominal_volume)}, {verdict}")
    for number, verdict in enumerate(shown):
        y = top + len(answered) * step + 12.0 + number * _KEY
        canvas.sign(_SIGNS[verdict], (_LEFT + 5.0, y - 4.0), 3.6)
        canvas.text((_LEFT + 14.0, y), words(f"figure.rule-{verdict}"), size=SMALL)
    title = words("figure.rules.title")
    description = words("figure.rules.description", rules="; ".join(told))
    return Drawing("rules", canvas.svg("rules", title, description), title, description)


def _volume(rule: RuleComparison) -> float:
    return 0.0 if rule.nominal_volume is None else rule.nominal_volume.value


def moving(step: WalkStep) -> bool:
    """Whether a step changes the volume by more than rounding."""
    return abs(step.change.value) > _NOTHING * max(step.before.value, step.after.value)


def walk(case: Case) -> Drawing | None:
    """A bar a step, hanging between the volume before and after it."""
    found = case.answer.walk
    if found is None:
        return None
    words, say = case.words, case.say
    steps = [step for step in found.steps if moving(step)]
    row, top = 20.0, 6.0
    canvas = Canvas(top + (len(steps) + 2) * row + 26.0)
    left, right = 168.0, _RIGHT - 62.0
    volumes = [found.start_volume.value, found.end_volume.value, *(s.before.value for s in steps)]
    across = Scale(0.0, max(volumes) * 1.02, left, right)
    bottom = top + (len(steps) + 2) * row
    _ticks(canvas, case, across, top, bottom, found.start_volume.unit)
    _whole(
        canvas,
        across,
        top,
        fitted(words(f"rule.{found.start}.short"), left - 12.0, SMALL),
        found.start_volume.value,
        say(found.start_volume),
    )
    told = []
    for number, step in enumerate(steps, 1):
        y = top + number * row
        low, high = sorted((across(step.before.value), across(step.after.value)))
        canvas.text((_LEFT, y + 12.0), fitted(step_name(case, step), left - 12.0, SMALL), size=SMALL)
        canvas.box(low, y + 4.0, max(high - low, 1.0), 11.0, "water" if step.change.value > 0 else "paper")
        canvas.line(
            (across(step.after.value), y + 4.0), (across(step.after.value), y + row + 4.0), "soft", dash="2 2"
        )
        canvas.text((_RIGHT, y + 13.0), say.signed(step.change), "end", size=SMALL)
        told.append(f"{step_name(case, step)} {say.signed(step.change)}")
    y = top + (len(steps) + 1) * row
    _whole(
        canvas,
        across,
        y,
        fitted(words(f"rule.{found.end}.short"), left - 12.0, SMALL),
        found.end_volume.value,
        say(found.end_volume),
    )
    title = words("figure.walk.title")
    description = words(
        "figure.walk.description",
        start=say(found.start_volume),
        end=say(found.end_volume),
        steps="; ".join(told),
    )
    return Drawing("walk", canvas.svg("walk", title, description), title, description)


def _whole(canvas: Canvas, across: Scale, y: float, name: str, volume: float, shown: str) -> None:
    """A bar from nought: where the walk starts and where it ends."""
    canvas.text((_LEFT, y + 12.0), name, size=SMALL, bold=True)
    canvas.box(across(0.0), y + 4.0, across(volume) - across(0.0), 11.0, "solid")
    canvas.text((_RIGHT, y + 13.0), shown, "end", size=SMALL, bold=True)


def _ticks(canvas: Canvas, case: Case, across: Scale, top: float, bottom: float, unit: str) -> None:
    for tick, label in tick_labels(across.ticks(6)):
        canvas.line((across(tick), top), (across(tick), bottom), "grid")
        canvas.text((across(tick), bottom + 12.0), case.say.plain(label), "middle", size=SMALL)
    canvas.text((_RIGHT, bottom + 12.0), case.say.unit(unit), "end", size=SMALL, kind="q")


def sensitivity(case: Case) -> Drawing | None:
    """The recommended volume with one input at a time at either end of its range."""
    found = case.answer.sensitivity
    sized = case.result.volumes.recommended
    if found is None or sized is None:
        return None
    rows = [row for row in by_weight(found.inputs) if _ends(row)][:MOST_INPUTS]
    if not rows:
        return None
    words, say = case.words, case.say
    step, top = 32.0, 8.0
    bottom = top + len(rows) * step
    canvas = Canvas(bottom + 40.0)
    every = [volume for row in rows for volume in _ends(row)] + [sized.smallest.value]
    low, high = min(every), max(every)
    spare = 0.06 * (high - low) or 1.0
    across = Scale(max(0.0, low - spare), high + spare, 30.0, _RIGHT - 24.0)
    _ticks(canvas, case, across, top, bottom, sized.smallest.unit)
    centre = across(sized.smallest.value)
    told = []
    for number, row in enumerate(rows):
        y = top + number * step
        ends = _ends(row)
        start, end = across(min(ends)), across(max(ends))
        name, ranged = input_name(case, row.input), f": {_range(case, row)}"
        size = SMALL if width_of(name + ranged, SMALL) <= _RIGHT - _LEFT else _TIGHT
        name = fitted(name, _RIGHT - _LEFT - width_of(ranged, size), size) + ranged
        canvas.box(_LEFT, y, width_of(name, size) + 4.0, 12.0, "blank", weight=0.0)
        canvas.text((_LEFT, y + 9.0), name, size=size)
        canvas.box(min(start, centre), y + 14.0, max(end, centre) - min(start, centre), 9.0, "water")
        canvas.line((centre, y + 12.5), (centre, y + 24.5), weight=2.4)
        if row.decides:
            canvas.sign("cross", (across(across.high) + 12.0, y + 18.5), 3.6)
        told.append(f"{input_name(case, row.input)}: {_range(case, row)}")
    canvas.text(
        (_LEFT, bottom + 32.0), words("figure.recommended-volume", volume=say(sized.smallest)), size=SMALL
    )
    if any(row.decides for row in rows):
        text = words("figure.decides")
        canvas.sign("cross", (_RIGHT - width_of(text, SMALL) - 10.0, bottom + 28.5), 3.6)
        canvas.text((_RIGHT, bottom + 32.0), text, "end", size=SMALL)
    title = words("figure.sensitivity.title")
    description = words("figure.sensitivity.description", inputs="; ".join(told))
    return Drawing("sensitivity", canvas.svg("sensitivity", title, description), title, description)


def _ends(row: SensitivityRow) -> list[float]:
    return [end.nominal_volume.value for end in (row.low, row.high) if end.nominal_volume is not None]


def _range(case: Case, row: SensitivityRow) -> str:
    return input_range(case, row.input, row.low.value, row.high.value)
