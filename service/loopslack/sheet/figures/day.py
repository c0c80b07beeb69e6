"""A day without flow as a band of its phases over the hours of the day."""

from loopslack.contract.answers.course import CoursePhases
from loopslack.contract.quantity import TimeSpan
from loopslack.sheet.case import Case
from loopslack.sheet.drawing import SMALL, WIDTH, Canvas, Scale, fitted
from loopslack.sheet.lines import Drawing

NAME = "day-course"
_PHASES = ("start", "emptying", "boiling", "receding", "refilling")
_HOURS = {"min": 1 / 60, "h": 1.0, "s": 1 / 3600}
_LEFT, _RIGHT, _TOP, _ROW = 150.0, WIDTH - 10.0, 8.0, 26.0


def hours(time: TimeSpan) -> float:
    """Hours since midnight."""
    return time.value * _HOURS[time.unit]


def clock(time: TimeSpan | None) -> str:
    """The time of day a clock would show."""
    if time is None:
        return "\N{EN DASH}"
    minutes = round(hours(time) * 60)
    return f"{minutes // 60:d}:{minutes % 60:02d}"


def day_course(case: Case) -> Drawing | None:
    """Each phase as a bar from its beginning to that of the next."""
    course = case.answer.course
    if course is None:
        return None
    words = case.words
    spans = list(_spans(course.phases))
    bottom = _TOP + len(spans) * _ROW
    canvas = Canvas(bottom + 34.0)
    first, last = hours(course.phases.start), max(end for _, _, end in spans)
    across = Scale(first, max(last, first + 1.0), _LEFT, _RIGHT)
    for tick in across.ticks(9):
        canvas.line((across(tick), _TOP), (across(tick), bottom), "grid")
        canvas.text((across(tick), bottom + 13.0), f"{tick:g}", "middle", size=SMALL)
    canvas.text((_RIGHT, bottom + 27.0), words("axis.hour"), "end", size=SMALL, kind="q")
    told = []
    for number, (phase, begin, end) in enumerate(spans):
        y = _TOP + number * _ROW
        canvas.text((6.0, y + 16.0), fitted(words(f"phase.{phase}"), _LEFT - 12.0, SMALL), size=SMALL)
        width = across(end) - across(begin)
        canvas.box(
            across(begin), y + 6.0, width, 14.0, "paper" if phase in {"boiling", "receding"} else "water"
        )
        if phase in {"boiling", "receding"}:
            canvas.hatched(across(begin), y + 6.0, width, 14.0)
        told.append(f"{words(f'phase.{phase}')} {clock(getattr(course.phases, phase))}")
    title = words(f"figure.{NAME}.title")
    description = words(f"figure.{NAME}.description", phases="; ".join(told), end=clock(course.phases.end))
    return Drawing(NAME, canvas.svg(NAME, title, description), title, description)


def _spans(phases: CoursePhases) -> list[tuple[str, float, float]]:
    begun = [(name, hours(time)) for name in _PHASES if (time := getattr(phases, name)) is not None]
    end = hours(phases.end) if phases.end is not None else max(24.0, begun[-1][1] + 1.0)
    ends = [*(time for _, time in begun[1:]), end]
    return [(name, begin, end) for (name, begin), end in zip(begun, ends, strict=True)]
