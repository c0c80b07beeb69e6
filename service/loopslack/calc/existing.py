"""A vessel that is there already, or that somebody insists on: judged as it is charged and filled."""

from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit, fit, plain_fit
from loopslack.calc.judge import judge, required
from loopslack.calc.judgement import DoubtPolicy, Judgement
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bounds
from loopslack.kernel.errors import CalculationError


class Checked(NamedTuple):
    """A judged vessel, its fit and the mass (kg) it is filled with."""

    fitted: Fit
    mass: float
    judgement: Judgement

    @property
    def fill_pressure(self) -> float:
        """Fill pressure (Pa absolute) at the fill temperature."""
        gas = self.fitted.gas
        bounds = Bounds(self.fitted.analysis, (), gas)
        return bounds.pressure(gas.nominal, self.mass, self.fitted.analysis.loop.temperatures.fill)


def check(
    loop: Loop,
    vessel: Vessel,
    pieces: int,
    policy: DoubtPolicy,
    *,
    fill_pressure: float | None = None,
    mass: float | None = None,
) -> Checked:
    """Judge ``pieces`` equal vessels filled to a pressure (Pa absolute), with a mass (kg), or as recommended.

    Raises ``CalculationError`` where a liquid state lies outside the fluid's range.
    """
    analysis = Analysis(loop)
    fitted = best_window(analysis, required(analysis, policy), vessel, pieces)
    if mass is None:
        mass = fitted.mass if fill_pressure is None else fitted.mass_at(fill_pressure)
    limit = loop.criteria.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit
    return Checked(
        fitted, mass, judge(analysis, vessel, fitted.gas, mass, policy=policy, membrane_limit=limit)
    )


def best_window(analysis: Analysis, scenarios: tuple[Scenario, ...], vessel: Vessel, pieces: int) -> Fit:
    """The fit with the window of all scenarios, or of the base case where there is none: the best it can have."""
    limit = analysis.loop.criteria.membrane_limit
    try:
        fitted = fit(analysis, scenarios, vessel, pieces, "given", limit)
    except CalculationError:
        fitted = None
    if fitted is not None and fitted.window.usable:
        return fitted
    return plain_fit(analysis, vessel, pieces)
