"""The cooler that would let a vessel survive all doubts at once, where no vessel does."""

from typing import NamedTuple

from msgspec.structs import replace

from loopslack.calc.design import Design
from loopslack.calc.model import Vessel
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case, case_of_design
from loopslack.calc.remedies.heat import StagnationCooler, unspent_power
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.work import Work


class RobustCooler(NamedTuple):
    """A stagnation cooler of ``power`` W in all, of which ``present`` are there, and the volume (m3) it makes robust.

    ``unspent`` (W) is what all doubts at once leave at the station at the final pressure without it.
    """

    power: float
    present: float
    unspent: float
    volume: float


def cooler_for_robust(design: Design) -> Work[RobustCooler | None]:
    """The smallest cooler with which a robust volume exists; None where one exists already or no cooler helps."""
    if design.volumes.robust is not None:
        return None
    case = replace(case_of_design(design), policy="combined", fill_pressure=None)
    boundless = _boundless(case)
    bench = Bench()
    try:
        unspent = unspent_power(case)
    except CalculationError:
        return None
    found = yield from StagnationCooler().search(boundless, bench)
    if found is None:
        return None
    sized = bench.sized(found.case)
    yield
    if sized is None:
        return None
    return RobustCooler(found.amount, case.loop.station.steam_loss, unspent, sized.smallest)


def _boundless(case: Case) -> Case:
    """The case with vessels of every size to choose from, of which none limits it."""
    content = case.loop.content
    sizes = tuple(Vessel(id=f"size {k}", nominal_volume=content * 1.25**k / 2) for k in range(20))
    return replace(case, candidates=sizes, pieces=1, thinned=False)
