"""Which inputs move the recommended nominal volume: each moved alone over its range, the rest as they are.

A large effect says where a measurement pays. Moving one at a time hides what two do together; a range that lets no
vessel hold at one end counts as the largest effect of all.
"""

from collections.abc import Sequence
from math import inf

from msgspec import Struct

from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import ROUNDING
from loopslack.calc.judge import required
from loopslack.calc.judgement import DoubtPolicy
from loopslack.calc.levers.collectors import collector_levers
from loopslack.calc.levers.lever import Lever
from loopslack.calc.levers.pipes import pipe_levers
from loopslack.calc.levers.plant import plant_levers
from loopslack.calc.model import Loop
from loopslack.calc.sizing.volumes import CoolingMode, size
from loopslack.kernel.errors import CalculationError


class Asked(Struct, frozen=True, kw_only=True):
    """How a recommended volume is asked for."""

    policy: DoubtPolicy = "single"
    cooling: CoolingMode = "size"
    accept_without_boiling: bool = False


class Moved(Struct, frozen=True, kw_only=True):
    """An input at one end of its range: its number and the nominal volume (m3), None where no vessel holds.

    ``reason`` says why where the loop could not even be sized, such as a property beyond its range.
    """

    number: float
    nominal_volume: float | None
    reason: str = ""


class Effect(Struct, frozen=True, kw_only=True):
    """What an input does to the recommended volume over its range, against the volume at its present number."""

    lever: Lever
    present: float | None
    at_low: Moved
    at_high: Moved

    @property
    def change(self) -> float:
        """Largest change of the nominal volume, m3; infinite where it decides whether a vessel holds at all."""
        return max(_distance(self.present, end.nominal_volume) for end in (self.at_low, self.at_high))

    @property
    def decides(self) -> bool:
        """Whether a vessel holds at one number of the range and none at another."""
        return self.change == inf


def levers(loop: Loop) -> tuple[Lever, ...]:
    """Every input of a loop that has a range, in the order collectors, pipes, plant."""
    found = (*collector_levers(loop), *pipe_levers(loop), *plant_levers(loop))
    return tuple(lever for lever in found if lever.low < lever.high)


def sensitivity(
    loop: Loop, asked: Asked | None = None, moving: Sequence[Lever] | None = None
) -> tuple[Effect, ...]:
    """The effects of inputs on the recommended nominal volume, the largest first.

    ``moving`` are all levers of the loop unless given. Inputs that decide whether any vessel holds stand first, then
    by the largest change of volume, equal ones in the order of the levers.
    """
    how = asked or Asked()
    present = recommended_volume(loop, how, loop.sun.irradiance).nominal_volume
    effects = [
        Effect(
            lever=lever,
            present=present,
            at_low=_moved(loop, lever, lever.low, how, present),
            at_high=_moved(loop, lever, lever.high, how, present),
        )
        for lever in (levers(loop) if moving is None else moving)
    ]
    return tuple(sorted(effects, key=lambda effect: -effect.change))


def recommended_volume(loop: Loop, asked: Asked, number: float) -> Moved:
    """The recommended volume of a loop whose input stands at ``number``."""
    try:
        analysis = Analysis(loop)
        sized = size(
            analysis,
            required(analysis, asked.policy),
            asked.cooling,
            loop.criteria.membrane_limit,
            accept_without_boiling=asked.accept_without_boiling,
        )
    except CalculationError as error:
        return Moved(number=number, nominal_volume=None, reason=str(error))
    return Moved(number=number, nominal_volume=None if sized is None else sized.smallest)


def _moved(loop: Loop, lever: Lever, number: float, asked: Asked, present: float | None) -> Moved:
    if number == lever.value:
        return Moved(number=number, nominal_volume=present)
    try:
        changed = lever.moved(loop, number)
    except CalculationError as error:
        return Moved(number=number, nominal_volume=None, reason=str(error))
    return recommended_volume(changed, asked, number)


def _distance(one: float | None, other: float | None) -> float:
    if one is None or other is None:
        return 0.0 if one is other else inf
    change = abs(one - other)
    return change if change > ROUNDING * max(one, other) else 0.0
