"""What an audit advises beside the failing checks: what the gauge says, what to do about it, in order.

Codes are stable; a translation builds its own sentence from code and parameters. The failing checks of the vessel as it
stands are ``advice``'s.
"""

from collections.abc import Iterator

from loopslack.calc.audit.whole import READING, Audit
from loopslack.contract.advice.saying import advisory, written
from loopslack.contract.answers.audit import AuditAction
from loopslack.contract.answers.shared import Advisory, Severity
from loopslack.contract.writing.quantities import System
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind

_ADVISORIES: dict[str, tuple[Severity, str, str]] = {
    "reading-undecided": (
        "warning",
        "The gauge shows {reading} where {expected} is due: lost liquid and lost gas would both explain it.",
        "Measure the precharge with the vessel isolated and drained.",
    ),
    "liquid-missing": (
        "warning",
        "{missing} of liquid is missing from the loop.",
        "Find where it went before topping up.",
    ),
    "liquid-too-much": (
        "warning",
        "The loop holds {surplus} of liquid more than it was filled with.",
        "Drain it, and find out who or what topped it up: automatic make-up has no place on a glycol loop.",
    ),
    "precharge-lost": (
        "warning",
        "The vessel has lost {lost} of its precharge.",
        "Set the precharge again; if it is lost once more within a year, replace the vessel.",
    ),
    "precharge-high": (
        "warning",
        "The precharge is {surplus} higher than it was set.",
        "Let the surplus out with the vessel drained.",
    ),
    "vessel-empty": (
        "warning",
        "The reading lies below the precharge: the vessel is empty, and the loop may draw air when it cools.",
        "Fill the loop before it is used in the cold.",
    ),
    "vessel-too-small": (
        "stop",
        "No precharge and no filling makes this vessel hold; {smallest} would.",
        "Replace the vessel, or ask for remedies in a stagnation check.",
    ),
    "no-vessel-holds": (
        "stop",
        "No precharge and no filling makes this vessel hold, nor would another size.",
        "Ask for remedies in a stagnation check: the loop itself has to change.",
    ),
    "precharge-not-known": (
        "note",
        "Nobody stated what the precharge is or was; it was taken as {precharge}.",
        "Measure it, or state the record of the commissioning.",
    ),
}
_ACTIONS = {
    "measure-precharge": (
        "Isolate and drain the vessel and measure its precharge: about {liquid} means that liquid was lost, about "
        "{gas} that gas was lost."
    ),
    "measure-precharge-only": "Isolate and drain the vessel and measure its precharge: it should show {liquid}.",
    "watch-refill": (
        "Or top up with a measure and watch the gauge: it comes back to {expected} after {refillLiquid} if liquid was "
        "lost, after {refillGas} if gas was lost."
    ),
    "leave": "Leave precharge and filling as they are.",
    "set-precharge": "With the vessel isolated and drained, set the precharge to {precharge} at {temperature}.",
    "fill": "Fill until the gauge shows {fill} at {temperature}.",
    "add": "Add {add}, until the gauge shows {fill} at {temperature}.",
    "drain": "Drain {drain}, until the gauge shows {fill} at {temperature}.",
    "replace-vessel": "Replace the vessel by one of at least {smallest} nominal volume.",
    "change-loop": "Have the loop designed again: no vessel alone makes it hold.",
    "note-reading": "Note pressure and temperature of the loop on its card, and read the gauge again in a month.",
}


class AuditAdvisor:
    """Collects what an audit advises."""

    def __init__(
        self, found: Audit, reading: float, temperature: float, atmosphere: float, system: System
    ) -> None:
        self.found, self.system, self.atmosphere = found, system, atmosphere
        self.reading, self.temperature = reading, temperature

    def advisories(self) -> Iterator[Advisory]:
        """What the gauge says, and whether the vessel can hold at all."""
        found, shown = self.found, self.found.shown
        if found.explains == "open":
            expected = self.reading if found.expected is None else found.expected
            yield self._advisory(
                "reading-undecided", reading=self._gauge(self.reading), expected=self._gauge(expected)
            )
        if found.explains in ("liquid", "both"):
            missing = shown.missing
            if missing >= 0:
                yield self._advisory("liquid-missing", missing=(missing, kinds.VOLUME))
            else:
                yield self._advisory("liquid-too-much", surplus=(-missing, kinds.VOLUME))
        if found.explains in ("precharge", "both"):
            lost = shown.lost
            if lost >= 0:
                yield self._advisory("precharge-lost", lost=(lost, kinds.PRESSURE_DIFFERENCE))
            else:
                yield self._advisory("precharge-high", surplus=(-lost, kinds.PRESSURE_DIFFERENCE))
        if shown.held.empty:
            yield self._advisory("vessel-empty")
        target = found.target
        if not target.holds and target.smallest is not None:
            yield self._advisory("vessel-too-small", smallest=(target.smallest, kinds.VOLUME))
        elif not target.holds:
            yield self._advisory("no-vessel-holds")
        if found.certainty != "shown" and found.set_by != "record":
            yield self._advisory("precharge-not-known", precharge=self._gauge(found.set_up.precharge))

    def actions(self) -> Iterator[AuditAction]:
        """What to do, in order."""
        found, target = self.found, self.found.target
        if found.explains == "open" or (found.certainty == "open" and found.set_by != "record"):
            yield from self._measure()
        if found.position == "inside" and found.explains != "open" and self._good():
            yield self._action("leave")
        else:
            yield from self._set()
        if not target.holds and target.smallest is not None:
            yield self._action("replace-vessel", smallest=(target.smallest, kinds.VOLUME))
        elif not target.holds:
            yield self._action("change-loop")
        yield self._action("note-reading")

    def _good(self) -> bool:
        return self.found.shown.judgement.verdict == "holds"

    def _measure(self) -> Iterator[AuditAction]:
        """The measurements that decide between the explanations."""
        liquid, gas = self.found.explanations
        if liquid.isolated is None:
            return
        if gas.isolated is None or abs(gas.isolated - liquid.isolated) <= READING:
            yield self._action("measure-precharge-only", liquid=self._gauge(liquid.isolated))
            return
        yield self._action(
            "measure-precharge", liquid=self._gauge(liquid.isolated), gas=self._gauge(gas.isolated)
        )
        # An empty vessel takes more than it shows, so the litres then tell nothing.
        told = not liquid.at_least and liquid.refill is not None and gas.refill is not None
        if self.found.expected is not None and told:
            yield self._action(
                "watch-refill",
                expected=self._gauge(self.found.expected),
                refillLiquid=(liquid.refill or 0.0, kinds.VOLUME),
                refillGas=(gas.refill or 0.0, kinds.VOLUME),
            )

    def _set(self) -> Iterator[AuditAction]:
        """Precharge and filling."""
        target = self.found.target
        today = (self.temperature, kinds.TEMPERATURE)
        if not target.keeps_precharge:
            precharge = target.gas.precharge * self.temperature / target.gas.temperature
            yield self._action("set-precharge", precharge=self._gauge(precharge), temperature=today)
        if target.pressure is None:
            return
        fill = self._gauge(target.pressure)
        if not target.keeps_precharge or target.add is None:
            yield self._action("fill", fill=fill, temperature=today)
        elif target.add >= 0:
            yield self._action("add", add=(target.add, kinds.VOLUME), fill=fill, temperature=today)
        else:
            yield self._action("drain", drain=(-target.add, kinds.VOLUME), fill=fill, temperature=today)

    def _gauge(self, absolute: float) -> tuple[float, Kind]:
        return absolute - self.atmosphere, kinds.GAUGE_PRESSURE

    def _advisory(self, code: str, **numbers: tuple[float, Kind]) -> Advisory:
        severity, message, remedy = _ADVISORIES[code]
        return advisory(severity, code, message, remedy, numbers, self.system)

    def _action(self, code: str, **numbers: tuple[float, Kind]) -> AuditAction:
        parameters, shown = written(numbers, self.system)
        return AuditAction(code=code, message=_ACTIONS[code].format(**shown), parameters=parameters)
