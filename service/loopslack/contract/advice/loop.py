"""Advisories: what a caller must know about this loop, each with its numbers, in a sentence, and what to do.

Codes are stable; a translation builds its own sentence from code and parameters. A failing core check that counts
towards the verdict is always a ``stop``: no failed check may read like a pass.
"""

from collections.abc import Iterator

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit
from loopslack.calc.judge import JOINT, required
from loopslack.calc.judgement import Check, DoubtPolicy, Judgement
from loopslack.calc.model import Branch
from loopslack.calc.scenarios import BASE
from loopslack.contract.advice.saying import advisory, said
from loopslack.contract.advice.words import FAILING, STATES, WITHOUT_NUMBER
from loopslack.contract.answers.shared import Advisory, AnyQuantity, Severity
from loopslack.contract.writing.quantities import System
from loopslack.contract.writing.shared import any_quantity
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind

_HIGH_SITE = 1000.0  # m, from where the design sun should be the site's own hottest hour (own assumption)
_HIGH_SUN = 1100.0  # W/m2 asked for there (own assumption)
# What to do for a loop that survives all doubts, by whether the answer shows a volume that does; None if it shows none.
_ROBUST = {
    True: "See `volumes.robust`, or ask with `doubtPolicy` `combined`.",
    False: "No nominal volume does: `designLoop` with `include` `remedies` tells what cooler would let one.",
    None: "Ask with `doubtPolicy` `combined`.",
}


class Advisor:
    """Collects the advisories of one judged vessel.

    ``robust_volume`` says whether the answer shows a volume that survives all doubts; None where it shows none ever.
    """

    def __init__(
        self,
        fitted: Fit,
        judgement: Judgement,
        policy: DoubtPolicy,
        system: System,
        *,
        robust_volume: bool | None = None,
    ) -> None:
        self.analysis: Analysis = fitted.analysis
        self.fitted, self.judgement, self.policy, self.system = fitted, judgement, policy, system
        self.atmosphere = self.analysis.loop.atmosphere
        self.robust_volume = robust_volume

    def all(self) -> list[Advisory]:
        """Every advisory, gravest first."""
        order: dict[Severity, int] = {"stop": 0, "warning": 1, "note": 2}
        return sorted(
            [*self._failing(), *self._unknown(), *self._loop(), *self._steam()],
            key=lambda advisory: order[advisory.severity],
        )

    def _failing(self) -> Iterator[Advisory]:
        counted = {scenario.id for scenario in required(self.analysis, self.policy)} | {JOINT}
        told: set[tuple[str, str]] = set()
        for check in self.judgement.failing:
            stagnation = check.state in self.judgement.stagnation
            counts = not stagnation or check.state in counted
            severity: Severity = "note"
            if check.core and counts:
                severity = "stop"
            elif not check.core and counts:
                severity = "warning"
            # A doubt that fails like the base case says nothing new.
            doubted = (stagnation or check.state == JOINT) and check.state != BASE.id
            if doubted and (check.code, BASE.id) in told:
                continue
            told.add((check.code, check.state))
            yield self._of(check, severity)

    def _of(self, check: Check, severity: Severity) -> Advisory:
        sentence, remedy = FAILING[check.code]
        parameters = {}
        if check.value is not None:
            parameters["value"] = self._quantity(check.value, check.kind)
        if check.limit is not None:
            parameters["limit"] = self._quantity(check.limit, check.kind)
        if check.margin is not None:
            parameters["margin"] = self._margin(check.margin, check.kind)
        if "value" not in parameters or check.reason in WITHOUT_NUMBER:
            text = WITHOUT_NUMBER.get(check.reason, "the check does not hold")
        else:
            shown = {name: said(quantity) for name, quantity in parameters.items()}
            text = sentence.format(subject=check.subject, **shown)
        return Advisory(
            severity=severity,
            code=check.code,
            message=f"{STATES.get(check.state, check.state)}: {text}.",
            remedy=remedy,
            parameters=parameters,
            subject=check.subject or None,
            scenario=check.state,
        )

    def _unknown(self) -> Iterator[Advisory]:
        for scenario, reason in self.judgement.refused.items():
            yield Advisory(
                severity="stop",
                code="not-assessed",
                message=f"{STATES[scenario]}: not computed. {reason}",
                remedy="Bring the loop into the range of the fluid's properties.",
                parameters={},
                subject=scenario,
            )

    def _loop(self) -> Iterator[Advisory]:
        loop = self.analysis.loop
        if self.analysis.states.cold.frozen:
            yield self._say(
                "stop",
                "freezes",
                "The fluid freezes at {freezing}, above the coldest outdoor temperature of {minimum}.",
                "Use more glycol. Nothing about the cold state is a pass.",
                freezing=(loop.fluid.freezing_point, kinds.TEMPERATURE),
                minimum=(loop.temperatures.site_minimum, kinds.TEMPERATURE),
            )
        if self.policy == "none":
            yield self._say(
                "warning",
                "doubts-left-out",
                "The doubts were left out, so this design is favourable only.",
                "Ask with `doubtPolicy` `single`.",
            )
        elif not self.judgement.robust and self.judgement.verdict == "holds":
            yield self._say(
                "note",
                "not-robust",
                "The design survives each doubt alone but not all of them at once.",
                _ROBUST[self.robust_volume],
            )
        if all(branch.role != "return" for branch in loop.branches):
            yield self._say(
                "warning",
                "no-return-run",
                "No pipe run has the role `return`: its liquid, and the pipe it offers to steam, are left out.",
                "State every pipe run between collectors and station, each with its `role`.",
            )
        if loop.altitude > _HIGH_SITE and loop.sun.irradiance < _HIGH_SUN:
            yield self._say(
                "note",
                "high-site-sun",
                "At {altitude} the sun can be stronger than the {irradiance} designed for.",
                "State the design sun as 1100 W/m2 with the air of the site's hottest hour.",
                altitude=(loop.altitude, kinds.LENGTH),
                irradiance=(loop.sun.irradiance, kinds.IRRADIANCE),
            )

    def _steam(self) -> Iterator[Advisory]:
        """What the steam does to glycol, solder, membrane and crests."""
        loop = self.analysis.loop
        result = self.judgement.stagnation.get(BASE.id)
        if result is None:
            return
        extent = result.extent
        membrane = self.fitted.vessel.membrane_limit or loop.criteria.membrane_limit
        if result.last_temperature > membrane >= result.mixed_temperature:
            yield self._say(
                "warning",
                "hot-liquid-arrives",
                "The liquid that arrives last in the vessel has {temperature}, mixed it has {mixed}.",
                "Enter the vessel so that liquid mixes, and place the cooling vessel before it.",
                temperature=(result.last_temperature, kinds.TEMPERATURE),
                mixed=(result.mixed_temperature, kinds.TEMPERATURE),
            )
        spaces = self.analysis.case(BASE).balance.spaces
        lowest = min(
            (steam.height for steam in extent.spaces if steam.boiling and steam.pipe > 0), default=0.0
        )
        if lowest < 0:
            yield self._say(
                "warning",
                "front-below-vessel",
                "Steam reaches down to {height}, below the vessel connection, and may rise to the membrane.",
                "Connect the vessel below the lowest steam front.",
                height=(lowest, kinds.LENGTH),
            )
        if any(not space.path.falling for space in spaces):
            yield self._say(
                "note",
                "rising-pipe",
                "A pipe run rises away from the collectors; of several equilibria the one with most steam is shown.",
                "Let the runs fall from the collectors to the station.",
            )
        soldered = [
            branch.name
            for space, steam in zip(spaces, extent.spaces, strict=True)
            for branch, reach in zip(space.path.branches, space.path.reach(steam.place), strict=True)
            if _soldered(branch, reach)
        ]
        if soldered:
            yield self._say(
                "warning",
                "soft-solder",
                f"Steam reaches soft-soldered joints in {', '.join(soldered)}.",
                "Braze, press or weld every joint within the reach of steam.",
            )

    def _quantity(self, si: float, kind: Kind) -> AnyQuantity:
        if kind is kinds.ABSOLUTE_PRESSURE:
            return any_quantity(si - self.atmosphere, kinds.GAUGE_PRESSURE, self.system)
        return any_quantity(si, kind, self.system)

    def _margin(self, si: float, kind: Kind) -> AnyQuantity:
        if kind in (kinds.ABSOLUTE_PRESSURE, kinds.GAUGE_PRESSURE):
            kind = kinds.PRESSURE_DIFFERENCE
        elif kind is kinds.TEMPERATURE:
            kind = kinds.TEMPERATURE_DIFFERENCE
        return any_quantity(si, kind, self.system)

    def _say(
        self, severity: Severity, code: str, message: str, remedy: str, **numbers: tuple[float, Kind]
    ) -> Advisory:
        return advisory(severity, code, message, remedy, numbers, self.system)


def _soldered(branch: Branch, reach: float) -> bool:
    """Whether steam over a reach touches a soft-soldered segment."""
    done = 0.0
    for segment in branch.segments:
        if segment.soft_solder and reach > done:
            return True
        done += segment.length
    return False
