"""Writes an audit in the caller's units."""

from loopslack.calc.audit.states import Explanation, State
from loopslack.calc.audit.whole import READING, Audit
from loopslack.contract.answers import audit as out
from loopslack.contract.quantity import Pressure
from loopslack.contract.writing import loop as write_loop
from loopslack.contract.writing.quantities import Writer


class AuditWriter:
    """Writes the parts of one audit; ``reading`` is the gauge's, Pa absolute, ``temperature`` the loop's then, K."""

    def __init__(
        self, found: Audit, reading: float, temperature: float, write: Writer, atmosphere: float
    ) -> None:
        self.found, self.write, self.reading, self.temperature = found, write, reading, temperature
        self.pressure = write_loop.Pressures(write, atmosphere)

    def finding(self) -> out.GaugeFinding:
        """What the gauge says."""
        found, write = self.found, self.write
        return out.GaugeFinding(
            reading=self.pressure(self.reading),
            temperature=write.temperature(self.temperature),
            expected=self.pressure.optional(found.expected),
            difference=None if found.difference is None else write.pressure_difference(found.difference),
            readable=write.pressure_difference(READING),
            reference=found.reference,
            precharge_set=self.pressure(found.set_up.precharge),
            precharge_set_by=found.set_by,
            explains=found.explains,
            certainty=found.certainty,
            deciding_measurement=self._deciding(),
            explanations=[self._explanation(way) for way in found.explanations],
        )

    def standing(self, state: State) -> out.VesselStanding:
        """A way the vessel may stand."""
        write, gas = self.write, state.gas
        cold = next(found for found in state.judgement.states if found.id == "cold")
        return out.VesselStanding(
            verdict=state.judgement.verdict,
            precharge=self.pressure(gas.precharge * self.temperature / gas.temperature),
            vessel_liquid=write.volume(state.held.liquid),
            vessel_empty=True if state.held.empty else None,
            liquid_missing=write.volume(state.missing),
            precharge_lost=write.pressure_difference(state.lost),
            cold_reserve=write.volume(cold.liquid),
        )

    def filling(self) -> out.FillingToday:
        """Where the filling lies in the window of today."""
        (lower, upper), write, reading = self.found.today, self.write, self.reading
        return out.FillingToday(
            position=self.found.position,
            reading=self.pressure(reading),
            lower=self.pressure.optional(lower),
            upper=self.pressure.optional(upper),
            above_lower=None if lower is None else write.pressure_difference(reading - lower),
            below_upper=None if upper is None else write.pressure_difference(upper - reading),
        )

    def set_instead(self) -> out.SetInstead:
        """What to set."""
        target, write = self.found.target, self.write
        gas, empty = target.gas, self.found.shown.held.empty
        return out.SetInstead(
            verdict=target.judgement.verdict,
            keep_precharge=target.keeps_precharge,
            precharge=self.pressure(gas.precharge * self.temperature / gas.temperature),
            fill_pressure=self.pressure.optional(target.pressure),
            temperature=write.temperature(self.temperature),
            add=None if target.add is None else write.volume(target.add),
            at_least=True if empty and target.add is not None else None,
            window=write_loop.window(target.fitted, write, self.pressure),
            smallest_volume=None if target.smallest is None else write.volume(target.smallest),
        )

    def _explanation(self, way: Explanation) -> out.ReadingExplanation:
        state = way.state
        return out.ReadingExplanation(
            cause=way.cause,
            possible=state is not None,
            meaning=self._meaning(way),
            standing=None if state is None else self.standing(state),
            isolated_reading=self.pressure.optional(way.isolated),
            refill=None if way.refill is None else self.write.volume(way.refill),
        )

    def _meaning(self, way: Explanation) -> str:
        state = way.state
        if state is None:
            return "No precharge explains the reading with the liquid as it was filled."
        if way.cause == "precharge":
            amount = self.write.pressure_difference(abs(state.lost))
            change = "below" if state.lost >= 0 else "above"
            return (
                f"With the liquid as it was filled, the precharge is {amount.value:.4g} {amount.unit} {change} what it "
                f"was set to, {self._said(self.pressure(state.gas.precharge))}."
            )
        missing = self.write.volume(abs(state.missing))
        shown = f"{missing.value:.4g} {missing.unit}"
        if way.at_least:
            return f"With the precharge as it was set, the vessel is empty: at least {shown} are missing."
        word = "are missing" if state.missing >= 0 else "are too much"
        return f"With the precharge as it was set, {shown} {word}."

    def _deciding(self) -> str | None:
        liquid, gas = self.found.explanations
        if self.found.certainty == "shown" or liquid.isolated is None or gas.isolated is None:
            return None
        if self.found.explains == "neither":
            return None
        return (
            "Isolate and drain the vessel and measure its precharge: "
            f"{self._said(self.pressure(liquid.isolated))} would show that liquid has changed, "
            f"{self._said(self.pressure(gas.isolated))} that gas has."
        )

    @staticmethod
    def _said(quantity: Pressure) -> str:
        return f"{quantity.value:.4g} {quantity.unit}"
