"""A vessel that is there already, or that somebody insists on: judged as it is charged and filled."""

from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit, best_fit
from loopslack.calc.judge import judge, required
from loopslack.calc.judgement import DoubtPolicy, Judgement
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.window import FillLaw


class Checked(NamedTuple):
    """A judged vessel, its fit and the mass (kg) it is filled with."""

    fitted: Fit
    mass: float
    judgement: Judgement

    @property
    def fill_pressure(self) -> float:
        """Fill pressure (Pa absolute) at the fill temperature."""
        gas = self.fitted.gas
        bounds = FillLaw(self.fitted.analysis, gas)
        return bounds.pressure(gas.nominal, self.mass, self.fitted.analysis.loop.temperatures.fill)


def check(
    loop: Loop,
    vessel: Vessel,
    pieces: int,
    policy: DoubtPolicy,
    *,
    fill_pressure: float | None = None,
    mass: float | None = None,
    accept_without_boiling: bool = False,
) -> Checked:
    """Judge ``pieces`` equal vessels filled to a pressure (Pa absolute), with a mass (kg), or as recommended.

    Raises ``CalculationError`` where a liquid state lies outside the fluid's range.
    """
    analysis = Analysis(loop)
    fitted = best_fit(analysis, required(analysis, policy), vessel, pieces, "given")
    if mass is None:
        mass = fitted.mass if fill_pressure is None else fitted.mass_at(fill_pressure)
    limit = loop.criteria.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit
    judgement = judge(
        analysis,
        vessel,
        fitted.gas,
        mass,
        policy=policy,
        membrane_limit=limit,
        accept_without_boiling=accept_without_boiling,
    )
    return Checked(fitted, mass, judgement)
