"""What to set on an existing vessel instead: its precharge and its filling, and whether it then holds.

The precharge as it stands is kept where a filling exists with which the vessel holds; else, or where gas was lost, the
one it was set to comes first, then the one by rule. Where none holds, the vessel that would is named.
"""

from typing import NamedTuple

from loopslack.calc.audit.gauge import column, liquid_of, pressure_of
from loopslack.calc.audit.states import WORSE, Bench, State
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.precharge import gas_of
from loopslack.calc.sizing.volumes import size
from loopslack.calc.window import Gas
from loopslack.kernel.errors import CalculationError


class Target(NamedTuple):
    """What to set: a gas, a filling, what the gauge shows today with it (Pa absolute), and how that judges.

    ``holds`` is whether that is good enough. ``add`` is the liquid (m3) to add, negative to drain, beyond what loop and
    vessel hold as shown; None where that is not known before a measurement. ``smallest`` (m3) is the vessel that would
    hold where this one does not, None where none would or none is needed.
    """

    keeps_precharge: bool
    gas: Gas
    mass: float
    pressure: float | None
    add: float | None
    fitted: Fit
    judgement: Judgement
    holds: bool
    smallest: float | None


def set_instead(
    bench: Bench, shown: State, set_up: Gas, temperature: float, *, known: bool, gas_changed: bool
) -> Target:
    """Find what to set; ``known`` says that the vessel is known to stand as shown."""
    standing = shown.gas if known else set_up
    candidates = [standing]
    if bench.vessel.precharge_adjustable:
        others = [set_up, gas_of(bench.analysis, bench.vessel, bench.pieces)]
        candidates = [*others, standing] if gas_changed else [standing, *others]
    best: tuple[Gas, Fit, Judgement] | None = None
    for gas in dict.fromkeys(candidates):
        fitted = bench.fit(gas)
        judgement = bench.judged(fitted, fitted.mass)
        if best is None or WORSE[judgement.verdict] < WORSE[best[2].verdict]:
            best = gas, fitted, judgement
        if bench.holds(judgement):
            break
    gas, fitted, judgement = best  # type: ignore[misc]  # there is always one candidate
    holds = bench.holds(judgement)
    mass = fitted.mass
    at_vessel = pressure_of(bench.analysis, gas, mass, temperature)
    return Target(
        keeps_precharge=known and gas == shown.gas,
        gas=gas,
        mass=mass,
        pressure=None if at_vessel is None else at_vessel - column(bench.analysis, temperature),
        add=liquid_of(bench.analysis, mass, temperature) - shown.held.liquid if known else None,
        fitted=fitted,
        judgement=judgement,
        holds=holds,
        smallest=None if holds else _smallest(bench),
    )


def _smallest(bench: Bench) -> float | None:
    """The smallest vessel (m3) that holds in this loop with the cooling vessel it has; None where none does."""
    try:
        found = size(
            bench.analysis,
            bench.scenarios,
            "given",
            bench.membrane_limit,
            accept_without_boiling=bench.accept_without_boiling,
        )
    except CalculationError:
        return None
    return None if found is None else found.smallest
