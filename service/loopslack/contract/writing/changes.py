"""Writes the changes of a remedy as changes of the question that was asked.

The question that follows must read into the loop that was judged, so heights that would be interpolated anew are
pinned, and what depends on the length of a list is told before the list grows.
"""

from collections.abc import Callable, Iterator, Sequence
from math import ceil, floor, log10
from typing import Literal, NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.checks import pressure_to_withstand
from loopslack.calc.model import Branch, Loop, Vessel
from loopslack.calc.remedies.case import Strength
from loopslack.calc.remedies.changes import SHORTEST, VESSEL, Change, ChangeId
from loopslack.contract.answers.remedies import QuestionChange
from loopslack.contract.answers.shared import AnyQuantity
from loopslack.contract.writing.quantities import System
from loopslack.contract.writing.shared import any_quantity
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import from_si

_RATING_STEP = 0.5e5
_STRENGTHS: dict[Strength, tuple[str, Kind]] = {
    "by-mass": ("share", kinds.MASS_FRACTION),
    "by-volume": ("share", kinds.VOLUME_FRACTION),
    "protect-to": ("temperature", kinds.TEMPERATURE),
}


class Asked(NamedTuple):
    """The question a remedy changes: a design or a check of a vessel that is there.

    ``stock`` is how many vessels the question lists, 0 for a series or a single vessel.
    """

    question: Literal["design", "check"]
    stock: int = 0


def question_changes(
    changes: Sequence[Change], loop: Loop, changed_loop: Loop, asked: Asked, system: System
) -> list[QuestionChange]:
    """The changes of a case as changes of the question; ``loop`` is the one asked about."""
    told = _Told(loop, changed_loop, asked, system)
    return [step for change in changes for step in told.write[change.id](change)]


class _Told:
    """One function per change."""

    def __init__(self, loop: Loop, changed_loop: Loop, asked: Asked, system: System) -> None:
        self.loop, self.changed_loop, self.asked, self.system = loop, changed_loop, asked, system
        self.write: dict[ChangeId, Callable[[Change], Iterator[QuestionChange]]] = {
            "fill-pressure": self._fill,
            "precharge": self._precharge,
            "cut-off": lambda c: self._one("/temperatures/cutOff", c.value, kinds.TEMPERATURE),
            "glycol": self._glycol,
            "vessel": self._vessel,
            "cooling-vessel": self._cooling,
            "relief-set-pressure": self._relief,
            "rated-pressure": self._rating,
            "steam-cooler": lambda c: self._one("/station/steamCooler", c.value, kinds.POWER),
            "steam-access": lambda c: iter([_word(f"/pipeRuns/{c.place}/steamAccess", "open")]),
            "bare-pipe": self._bare,
            "extra-pipe": self._extra,
        }

    def _one(self, field: str, si: float, kind: Kind) -> Iterator[QuestionChange]:
        yield _value(field, any_quantity(si, kind, self.system))

    def _absolute(self, field: str, absolute: float) -> QuestionChange:
        """An absolute pressure as a gauge reading on site."""
        return _value(field, any_quantity(absolute - self.loop.atmosphere, kinds.GAUGE_PRESSURE, self.system))

    def _fill(self, change: Change) -> Iterator[QuestionChange]:
        field = "/fillPressure" if self.asked.question == "check" else "/vessel/fillPressure"
        yield self._absolute(field, change.value) if change.value else _remove(field)

    def _precharge(self, change: Change) -> Iterator[QuestionChange]:
        yield _remove("/precharge")
        yield _word("/precharge/kind", "stated")
        yield self._absolute("/precharge/pressure", change.value)
        temperature = self.loop.precharge.temperature
        if temperature is not None:
            yield from self._one("/precharge/temperature", temperature, kinds.TEMPERATURE)

    def _glycol(self, change: Change) -> Iterator[QuestionChange]:
        """Stated as it was; only a loop of water gets another fluid."""
        if change.glycol != self.loop.fluid.kind:
            yield _remove("/fluid")
            yield _word("/fluid/kind", change.glycol or "propylene-glycol")
            yield _word("/fluid/concentration/kind", change.strength)
        member, kind = _STRENGTHS[change.strength]
        yield from self._one(f"/fluid/concentration/{member}", change.value, kind)

    def _vessel(self, change: Change) -> Iterator[QuestionChange]:
        vessel: Vessel = change.vessels[0]
        yield _remove("/vessel")
        if self.asked.question == "design":
            yield _word("/vessel/kind", "given")
        yield _word("/vessel/id", vessel.id)
        yield from self._one("/vessel/nominalVolume", vessel.nominal_volume, kinds.NOMINAL_VOLUME)
        if vessel.rated_pressure is not None:
            yield _value("/vessel/ratedPressure", self._up(vessel.rated_pressure))
        if vessel.acceptance_volume is not None:
            yield from self._one("/vessel/acceptanceVolume", vessel.acceptance_volume, kinds.VOLUME)
        if vessel.membrane_limit is not None:
            yield from self._one("/vessel/membraneLimit", vessel.membrane_limit, kinds.TEMPERATURE)
        yield QuestionChange(action="set", field="/vesselsInParallel", number=change.pieces)

    def _cooling(self, change: Change) -> Iterator[QuestionChange]:
        """A cooling vessel with the rating that the valve asks of it."""
        needed = pressure_to_withstand(Analysis(self.changed_loop), self.changed_loop.relief, 0.0)
        yield _remove("/coolingVessel")
        yield _word("/coolingVessel/kind", "given")
        yield from self._one("/coolingVessel/content", change.value, kinds.VOLUME)
        yield _value("/coolingVessel/ratedPressure", self._up(ceil(needed / _RATING_STEP) * _RATING_STEP))

    def _relief(self, change: Change) -> Iterator[QuestionChange]:
        yield _value("/reliefValve/setPressure", self._down(change.value))

    def _rating(self, change: Change) -> Iterator[QuestionChange]:
        fields = [self.loop.parts[change.place].pointer]
        if change.place == VESSEL:
            fields = [f"/vessel/items/{k}/ratedPressure" for k in range(self.asked.stock)]
            fields = fields or ["/vessel/ratedPressure"]
        for field in fields:
            yield _value(field, self._up(change.value))

    def _bare(self, change: Change) -> Iterator[QuestionChange]:
        """From the station's end, so that no stretch told later has moved."""
        branch, run = self.loop.branches[change.place], f"/pipeRuns/{change.place}/segments"
        left = change.value
        pinned = False
        for k in range(len(branch.segments) - 1, -1, -1):
            if left <= SHORTEST:
                break
            segment = branch.segments[k]
            stretch = k
            if left < segment.length - SHORTEST:
                if not pinned:
                    yield from self._pinned(branch, run)
                    pinned = True
                share = 1 - left / segment.length
                middle = segment.start_height + share * (segment.end_height - segment.start_height)
                yield QuestionChange(action="repeat", field=f"{run}/{k}")
                yield from self._one(f"{run}/{k}/length", segment.length - left, kinds.LENGTH)
                yield from self._one(f"{run}/{k}/endHeight", middle, kinds.LENGTH)
                stretch = k + 1
                yield from self._one(f"{run}/{stretch}/length", left, kinds.LENGTH)
            yield _remove(f"{run}/{stretch}/insulation")
            yield _word(f"{run}/{stretch}/insulation/kind", "none")
            left -= segment.length

    def _extra(self, change: Change) -> Iterator[QuestionChange]:
        branch, run = self.loop.branches[change.place], f"/pipeRuns/{change.place}/segments"
        last = len(branch.segments) - 1
        yield from self._pinned(branch, run)
        yield from self._one(
            f"{run}/{last}/length", branch.segments[last].length + change.value, kinds.LENGTH
        )

    def _pinned(self, branch: Branch, run: str) -> Iterator[QuestionChange]:
        """Heights of all stretches but the last, which other lengths would move if they were not stated."""
        for k, segment in enumerate(branch.segments[:-1]):
            yield from self._one(f"{run}/{k}/endHeight", segment.end_height, kinds.LENGTH)

    def _up(self, si: float) -> AnyQuantity:
        """A rating in the caller's unit, rounded so that it is not less."""
        return _rounded(si, self.system, ceil)

    def _down(self, si: float) -> AnyQuantity:
        """A set pressure in the caller's unit, rounded so that no part sees more."""
        return _rounded(si, self.system, floor)


def _rounded(si: float, system: System, way: Callable[[float], int]) -> AnyQuantity:
    """A gauge pressure to six digits one way; what binary numbers leave out does not count."""
    kind = kinds.GAUGE_PRESSURE
    quantity = any_quantity(si, kind, system)
    exact = from_si(si, quantity.unit, kind)
    step = 10.0 ** (floor(log10(exact)) - 5)
    steps = round(exact / step)
    if abs(exact / step - steps) > 1e-6:
        steps = way(exact / step)
    return AnyQuantity(value=float(f"{steps * step:.6g}"), unit=quantity.unit)


def _value(field: str, value: AnyQuantity) -> QuestionChange:
    return QuestionChange(action="set", field=field, value=value)


def _word(field: str, word: str) -> QuestionChange:
    return QuestionChange(action="set", field=field, word=word)


def _remove(field: str) -> QuestionChange:
    return QuestionChange(action="remove", field=field)
