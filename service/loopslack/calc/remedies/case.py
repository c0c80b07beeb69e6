"""A case is a loop with what is asked of it; a remedy turns one case into another. What happens to it: ``bench``.

Two kinds stand side by side: a loop whose vessel is still to be chosen from candidates, and a loop with a vessel that
is there. Frozen, so that a remedy never changes the case it was sought for.
"""

from collections.abc import Sequence
from math import inf, log
from typing import Literal, NamedTuple

from msgspec import Struct

from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Design, Request
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import DoubtPolicy, Judgement
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.sizing.volumes import CoolingMode

Strength = Literal["by-mass", "by-volume", "protect-to"]
"""How the strength of a glycol is stated: a share, or the temperature (K) down to which no ice forms."""

_MOST_CANDIDATES = 40
_STEP = log(1.1)


class Case(Struct, frozen=True, kw_only=True):
    """A loop and what is asked of it.

    With ``existing`` the only candidate is the vessel that is there, ``pieces`` of it, filled to ``fill_pressure``
    (Pa absolute), with ``mass`` kg, or as recommended. Without, up to ``pieces`` of one candidate are chosen;
    ``thinned`` says that ``candidates`` stand for a longer list. ``strength`` is how another mixture is to be stated.
    """

    loop: Loop
    policy: DoubtPolicy
    candidates: tuple[Vessel, ...]
    pieces: int = 1
    existing: bool = False
    cooling: CoolingMode = "given"
    accept_without_boiling: bool = False
    fill_pressure: float | None = None
    mass: float | None = None
    thinned: bool = False
    strength: Strength = "by-mass"

    @property
    def request(self) -> Request:
        """What is asked beside the loop, as a design wants it."""
        return Request(
            self.candidates,
            self.pieces,
            self.cooling,
            self.policy,
            self.accept_without_boiling,
            self.fill_pressure,
        )

    @property
    def filled(self) -> bool:
        """Whether the filling is stated."""
        return self.fill_pressure is not None or self.mass is not None


class Outcome(NamedTuple):
    """A case tried in full: whether it holds under its policy, and with which vessel."""

    holds: bool
    fitted: Fit | None = None
    judgement: Judgement | None = None


def case_of_design(design: Design) -> Case:
    """The case of a design: any candidate may be chosen."""
    request = design.request
    candidates = thinned(request.candidates)
    return Case(
        loop=design.loop,
        policy=request.policy,
        candidates=candidates,
        pieces=request.most_in_parallel,
        cooling=request.cooling,
        accept_without_boiling=request.accept_without_boiling,
        fill_pressure=request.fill_pressure,
        thinned=len(candidates) < len(request.candidates),
    )


def thinned(candidates: Sequence[Vessel]) -> tuple[Vessel, ...]:
    """At most some forty candidates: of those within a tenth of a size the one that refuses least.

    That a loop holds with one of them is true of the whole list; which one a design takes from it is not.
    """
    if len(candidates) <= _MOST_CANDIDATES:
        return tuple(candidates)
    best: dict[int, tuple[tuple[float, ...], Vessel]] = {}
    for vessel in candidates:
        worth = (
            float(vessel.precharge_adjustable or vessel.delivered_precharge is None),
            inf if vessel.rated_pressure is None else vessel.rated_pressure,
            1.0 if vessel.acceptance_volume is None else vessel.acceptance_volume / vessel.nominal_volume,
        )
        size = round(log(vessel.nominal_volume) / _STEP)
        if size not in best or best[size][0] < worth:
            best[size] = worth, vessel
    return tuple(vessel for _, vessel in best.values())


def case_of_vessel(
    loop: Loop,
    vessel: Vessel,
    pieces: int,
    policy: DoubtPolicy,
    *,
    fill_pressure: float | None = None,
    mass: float | None = None,
    accept_without_boiling: bool = False,
) -> Case:
    """The case of a vessel that is there, filled to a pressure (Pa absolute), with a mass (kg), or as recommended."""
    return Case(
        loop=loop,
        policy=policy,
        candidates=(vessel,),
        pieces=pieces,
        existing=True,
        accept_without_boiling=accept_without_boiling,
        fill_pressure=fill_pressure,
        mass=mass,
    )


def analysed(case: Case) -> Analysis:
    """The loop of a case at its final pressure; raises ``CalculationError`` where a state has no density."""
    return Analysis(case.loop)
