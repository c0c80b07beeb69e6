"""The search: every measure alone, then pairs, all within a bounded number of trials and with pauses in between."""

from collections.abc import Sequence
from typing import NamedTuple

from loopslack.calc.design import Design
from loopslack.calc.judgement import DoubtPolicy
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case, case_of_design, case_of_vessel
from loopslack.calc.remedies.heat import Emptying, StagnationCooler, better_emptying
from loopslack.calc.remedies.measure import Found, Measure
from loopslack.calc.remedies.pairs import Pair, smallest_pair
from loopslack.calc.remedies.pipes import BarePipe, BareRun, ExtraPipe, LookAtRun, OpenRun
from loopslack.calc.remedies.settings import CutOff, FillPressure, PrechargePressure, StrongerGlycol
from loopslack.calc.remedies.valve import HigherValve, LowerValve, PartRatings
from loopslack.calc.remedies.vessels import CoolingVessel, OtherVessel
from loopslack.kernel.work import Work


class Remedies(NamedTuple):
    """What would make a case hold: single measures by rank, or the smallest pair where none helps alone.

    ``complete`` is False where the work allowed was used up before everything was tried. With ``needed`` False the
    case holds as it is.
    """

    single: tuple[Found, ...]
    pair: Pair | None
    emptying: Emptying | None
    needed: bool
    complete: bool
    evaluations: int
    full_evaluations: int


def measures(stock: Sequence[Vessel] = (), *, keep_filling: bool = False) -> tuple[Measure, ...]:
    """Every measure but the filling, by how small the intervention is.

    The order is the rank: a look at a valve before anything is touched, settings an installer changes (filling,
    precharge, cut-off) before the fluid, then vessels, valve and parts that are exchanged, a check valve that is moved,
    a cooler that is added, and last work on the pipes (own assumption, from what each takes in hours and in new parts).
    With ``keep_filling`` work that opens the loop ends with the stated filling, else with the recommended one.
    """
    return (
        LookAtRun(keep_filling=keep_filling),
        PrechargePressure(keep_filling=keep_filling),
        CutOff(keep_filling=keep_filling),
        StrongerGlycol(keep_filling=keep_filling),
        OtherVessel(stock, keep_filling=keep_filling),
        CoolingVessel(keep_filling=keep_filling),
        HigherValve(keep_filling=keep_filling),
        LowerValve(keep_filling=keep_filling),
        PartRatings(keep_filling=keep_filling),
        OpenRun(keep_filling=keep_filling),
        StagnationCooler(keep_filling=keep_filling),
        BarePipe(keep_filling=keep_filling),
        BareRun(keep_filling=keep_filling),
        ExtraPipe(keep_filling=keep_filling),
    )


def remedies(case: Case, bench: Bench, stock: Sequence[Vessel] = ()) -> Work[Remedies]:
    """Seek what makes a case hold, pausing after every trial."""
    present = bench.outcome(case)
    yield
    if present.holds:
        return _result((), None, None, bench, needed=False)
    filling = yield from FillPressure().search(case, bench)
    single: list[Found] = [] if filling is None else [filling]
    # Where another filling is enough, nothing may be offered that helps only because it ends with a new one.
    every = measures(stock, keep_filling=filling is not None)
    for measure in every:
        found = yield from measure.search(case, bench)
        if found is not None:
            single.append(found)
    emptying = yield from better_emptying(case, bench)
    pair = None
    if not single:
        ranked = sorted((FillPressure(), *every), key=lambda measure: measure.rank)
        pair = yield from smallest_pair(case, ranked, bench)
    single.sort(key=lambda found: found.rank)
    return _result(tuple(single), pair, emptying, bench, needed=True)


def _result(
    single: tuple[Found, ...], pair: Pair | None, emptying: Emptying | None, bench: Bench, *, needed: bool
) -> Remedies:
    return Remedies(single, pair, emptying, needed, not bench.spent, bench.evaluations, bench.full)


def remedies_for_design(design: Design) -> Work[Remedies]:
    """What would make a loop hold whose vessel is still to be chosen."""
    return remedies(case_of_design(design), Bench())


def remedies_for_vessel(
    loop: Loop,
    vessel: Vessel,
    pieces: int,
    policy: DoubtPolicy,
    *,
    fill_pressure: float | None = None,
    mass: float | None = None,
    stock: Sequence[Vessel] = (),
) -> Work[Remedies]:
    """What would make a loop hold with the vessel that is there.

    It is filled to a pressure (Pa absolute), with a mass (kg), or as recommended; another vessel is sought in
    ``stock``, or among the preferred sizes.
    """
    case = case_of_vessel(loop, vessel, pieces, policy, fill_pressure=fill_pressure, mass=mass)
    return remedies(case, Bench(), stock)
