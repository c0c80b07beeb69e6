"""The default answer: one course, and how far it may lie off, since what decides it is assumed.

The one course takes the stated emptying class, or fair. The envelope runs over good and poor emptying, each
without reflux of condensate and with all of it, and takes the one course in. It is a range of assumptions,
not a confidence interval, and it is no design case: that stays the coupled balance.
"""

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.course.assumptions import RESIDUAL_SHARE, Assumption, EmptyingClass
from loopslack.calc.course.chronicle import Flag, Phases
from loopslack.calc.course.curve import COLUMNS, Curve
from loopslack.calc.course.lumped import LumpedLoop
from loopslack.calc.course.mapping import Mapped
from loopslack.calc.course.march import Accuracy, marching
from loopslack.calc.course.weather import Weather
from loopslack.kernel.work import Work

_CORNERS: tuple[tuple[EmptyingClass, float], ...] = (
    ("good", 0.0),
    ("good", 1.0),
    ("poor", 0.0),
    ("poor", 1.0),
)
_DATED = ("emptying", "boiling", "receding", "refilling", "end")


class Band(Struct, frozen=True, kw_only=True):
    """Lowest and highest value of a column at each time of the course."""

    low: tuple[float, ...]
    high: tuple[float, ...]


class Span(Struct, frozen=True, kw_only=True):
    """Lowest and highest of a single number; ``always`` is False where some courses do not have it at all."""

    low: float
    high: float
    always: bool = True


class Corner(Struct, frozen=True, kw_only=True):
    """One course of the envelope and the assumptions it was computed with."""

    residual_share: float
    reflux: float
    curve: Curve


class DayCourse(Struct, frozen=True, kw_only=True):
    """The course of a day without flow and its envelope.

    ``bands`` by column of ``Curve``, as long as the shortest course; ``largest`` the spans of the largest
    values and ``phases`` those of the instants (s after midnight), without those that no course has.
    ``flags`` are those of any course, ``certain_flags`` those of all. ``complete`` is False as soon as one
    course ends early.
    """

    curve: Curve
    corners: tuple[Corner, ...]
    bands: dict[str, Band]
    largest: dict[str, Span]
    phases: dict[str, Span]
    discharged: Span
    flags: frozenset[Flag]
    certain_flags: frozenset[Flag]
    complete: bool
    assumptions: tuple[Assumption, ...]


def day_course(
    case: Mapped, weather: Weather, accuracy: Accuracy | None = None, *, interval: float = 60.0
) -> Work[DayCourse]:
    """Course and envelope of a mapped loop, pausing every few milliseconds; see ``march.finished``.

    Rows every ``interval`` seconds. Raises ``Contradiction`` for a start outside the weather,
    ``NotApplicable`` for liquid that is frozen at the start.
    """
    curve = yield from marching(case.loop, weather, accuracy, interval=interval)
    corners = []
    for emptying, reflux in _CORNERS:
        share = RESIDUAL_SHARE[emptying]
        found = yield from marching(_varied(case.loop, share, reflux), weather, accuracy, interval=interval)
        corners.append(Corner(residual_share=share, reflux=reflux, curve=found))
    curves = [curve, *(corner.curve for corner in corners)]
    bands = {}
    for name in COLUMNS:
        bands[name] = _band([getattr(each, name) for each in curves])
        yield
    return DayCourse(
        curve=curve,
        corners=tuple(corners),
        bands=bands,
        largest={name: _span([each.largest[name].value for each in curves]) for name in curve.largest},
        phases=_dates([each.phases for each in curves]),
        discharged=_span([each.discharged[-1] for each in curves]),
        flags=frozenset().union(*(each.flags for each in curves)),
        certain_flags=curve.flags.intersection(*(each.flags for each in curves)),
        complete=all(each.complete for each in curves),
        assumptions=case.assumptions,
    )


def _varied(loop: LumpedLoop, residual_share: float, reflux: float) -> LumpedLoop:
    emptying = replace(loop.emptying, residual_share=residual_share, reflux=reflux)
    return replace(loop, emptying=emptying)


def _band(columns: list[tuple[float, ...]]) -> Band:
    rows = list(zip(*columns, strict=False))  # an incomplete course ends the band
    return Band(low=tuple(min(row) for row in rows), high=tuple(max(row) for row in rows))


def _span(values: list[float]) -> Span:
    return Span(low=min(values), high=max(values))


def _dates(phases: list[Phases]) -> dict[str, Span]:
    spans = {}
    for name in _DATED:
        times = [at for each in phases if (at := getattr(each, name)) is not None]
        if times:
            spans[name] = Span(low=min(times), high=max(times), always=len(times) == len(phases))
    return spans
