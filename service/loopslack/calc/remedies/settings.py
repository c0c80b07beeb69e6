"""Measures that need no part: filling, precharge, cut-off temperature of the pump, strength of the glycol."""

from math import ceil, floor

from msgspec.structs import replace

from loopslack.calc.fit import best_fit
from loopslack.calc.fluids.base import ZERO_CELSIUS
from loopslack.calc.fluids.making import glycol, strength_protecting_to
from loopslack.calc.judge import required
from loopslack.calc.precharge import gas_of
from loopslack.calc.remedies.case import Case, Outcome, Strength, analysed
from loopslack.calc.remedies.changes import Change, mixture
from loopslack.calc.remedies.measure import Found, Measure, Option
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import Kind
from loopslack.library.fluids import GlycolKind

_PRESSURE_STEP = 1e3  # Pa: a hundredth of a bar, what a good gauge shows
_PRECHARGE_STEPS = (0.1e5, 0.3e5, 0.6e5, 1.0e5, 1.5e5, 2.2e5, 3.0e5)
_ABOVE_FLOW = 10.0  # K a cut-off stays above the design flow, or the loop stops in operation (own assumption)
_SHARE_STEP = 1e-3  # a tenth of a per cent
_PROTECTION_STEP = 0.5  # K
_KINDS: dict[Strength, Kind] = {
    "by-mass": kinds.MASS_FRACTION,
    "by-volume": kinds.VOLUME_FRACTION,
    "protect-to": kinds.TEMPERATURE,
}
_LARGEST_SHARE = 0.6


class FillPressure(Measure):
    """Fill to another pressure: the nearest that keeps its distance from both ends of the window."""

    code = "fill-pressure"
    rank = 2
    refills = False
    kind = kinds.ABSOLUTE_PRESSURE

    def options(self, case: Case) -> list[Option]:
        """The one fill pressure, where a filling is stated and the window of the vessel takes another."""
        if not case.filled or len(case.candidates) != 1:
            return []
        try:
            analysis = analysed(case)
            fitted = best_fit(
                analysis, required(analysis, case.policy), case.candidates[0], case.pieces, "given"
            )
        except CalculationError:
            return []
        window, criteria = fitted.window, case.loop.criteria
        if not window.wide_enough:
            return []
        base = fitted.gas.precharge * window.temperature / fitted.gas.temperature
        low = max(window.lower + criteria.window_step, base + criteria.fill_above_precharge)
        high = window.upper - criteria.window_step
        present = self.present(case)
        atmosphere = case.loop.atmosphere
        # To the hundredth of a bar inside the window; it is wide enough to hold one.
        lowest = atmosphere + ceil((low - atmosphere) / _PRESSURE_STEP) * _PRESSURE_STEP
        highest = atmosphere + floor((high - atmosphere) / _PRESSURE_STEP) * _PRESSURE_STEP
        return [Option(lowest if present is None or present < low or lowest >= highest else highest)]

    def probes(self, case: Case) -> list[tuple[Change, ...]]:
        """Filled as whatever else is changed would have it."""
        return [(Change("fill-pressure"),)] if case.filled and len(case.candidates) == 1 else []

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A new fill pressure."""
        return (Change("fill-pressure", amount),)

    def present(self, case: Case) -> float | None:
        """The stated fill pressure; that of a stated mass in the vessel."""
        if case.mass is None or not case.existing:
            return case.fill_pressure
        analysis = analysed(case)
        gas = gas_of(analysis, case.candidates[0], case.pieces)
        held = case.mass / analysis.states.fill.vessel_density
        if not 0 <= held < gas.nominal:
            return None
        fill = case.loop.temperatures.fill
        return gas.precharge * gas.nominal / (gas.nominal - held) * fill / gas.temperature


class PrechargePressure(Measure):
    """Charge the gas to another pressure, higher or lower, whichever is nearer."""

    code = "precharge"
    rank = 3
    any_value = True
    finest = _PRESSURE_STEP
    kind = kinds.ABSOLUTE_PRESSURE

    def options(self, case: Case) -> list[Option]:
        """Pressures on both sides of the present one, nearest first."""
        if not any(v.precharge_adjustable or v.delivered_precharge is None for v in case.candidates):
            return []
        try:
            present = self.present(case)
        except CalculationError:
            return []
        lowest, highest = case.loop.atmosphere, case.loop.relief.opening_pressure + case.loop.atmosphere
        found, below, above = [], present, present
        for step in _PRECHARGE_STEPS:
            if present - step > lowest:
                found.append(Option(present - step, below))
                below = present - step
            if present + step < highest:
                found.append(Option(present + step, above))
                above = present + step
        return found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A new precharge."""
        return (Change("precharge", amount),)

    def present(self, case: Case) -> float:
        """The precharge of the present, or of the smallest, vessel."""
        vessel = min(case.candidates, key=lambda v: v.nominal_volume)
        return gas_of(analysed(case), replace(vessel, precharge_adjustable=True), case.pieces).precharge

    def rounded(self, case: Case, amount: float, away_from: float) -> float:
        """Away from the present to a hundredth of a bar of what a gauge on site shows."""
        gauge = (amount - case.loop.atmosphere) / _PRESSURE_STEP
        steps = ceil(gauge + 1e-2) if amount > away_from else floor(gauge - 1e-2)
        return case.loop.atmosphere + steps * _PRESSURE_STEP


class CutOff(Measure):
    """Stop the pump at a lower temperature."""

    code = "cut-off"
    rank = 4
    any_value = True
    finest = 1.0
    refills = False
    kind = kinds.TEMPERATURE

    def options(self, case: Case) -> list[Option]:
        """The lowest cut-off that leaves the design flow alone; the smallest step down is solved for."""
        temperatures = case.loop.temperatures
        lowest = ceil(temperatures.flow + _ABOVE_FLOW - ZERO_CELSIUS) + ZERO_CELSIUS
        return [Option(lowest, temperatures.cut_off)] if lowest < temperatures.cut_off else []

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A new cut-off."""
        return (Change("cut-off", amount),)

    def present(self, case: Case) -> float:
        """The present cut-off, K."""
        return case.loop.temperatures.cut_off

    def rounded(self, case: Case, amount: float, away_from: float) -> float:  # noqa: ARG002 - one signature for all measures
        """Down to whole degrees Celsius, as controllers have it."""
        return floor(amount - ZERO_CELSIUS + 1e-6) + ZERO_CELSIUS


class StrongerGlycol(Measure):
    """As much glycol as the site asks for."""

    code = "stronger-glycol"
    rank = 5
    kind = kinds.MASS_FRACTION

    def options(self, case: Case) -> list[Option]:
        """The weakest mixture that freezes late enough, as it is stated, where the present fluid does not."""
        loop = case.loop
        wanted = loop.temperatures.site_minimum - loop.criteria.freeze_margin
        if loop.fluid.kind == "own" or loop.fluid.freezing_point <= wanted:
            return []
        try:
            amount = _stated(case, wanted)
            share = mixture(_kind_of(case), case.strength, amount).mass_fraction
        except CalculationError:
            return []
        return [Option(amount)] if share <= _LARGEST_SHARE else []

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """A new mixture."""
        return (Change("glycol", amount, glycol=_kind_of(case), strength=case.strength),)

    def present(self, case: Case) -> float:
        """The present strength, as it is stated."""
        fluid = case.loop.fluid
        if case.strength == "protect-to":
            return fluid.freezing_point
        return fluid.volume_fraction if case.strength == "by-volume" else fluid.mass_fraction

    def found(self, case: Case, amount: float, outcome: Outcome) -> Found:
        """The amount is of the kind in which the strength is stated."""
        return super().found(case, amount, outcome)._replace(kind=_KINDS[case.strength])


def _stated(case: Case, wanted: float) -> float:
    """A strength that freezes at no more than ``wanted`` (K), moved to the safe side to what can be mixed."""
    share = strength_protecting_to(_kind_of(case), wanted)
    if case.strength == "protect-to":
        celsius = floor((wanted - ZERO_CELSIUS) / _PROTECTION_STEP + 1e-6) * _PROTECTION_STEP
        return celsius + ZERO_CELSIUS
    if case.strength == "by-volume":
        share = glycol(_kind_of(case), share).volume_fraction
    return ceil((share + 1e-6) / _SHARE_STEP) * _SHARE_STEP


def _kind_of(case: Case) -> GlycolKind:
    """The glycol of the loop; the one that is no poison for a loop of water."""
    return "ethylene-glycol" if case.loop.fluid.kind == "ethylene-glycol" else "propylene-glycol"
