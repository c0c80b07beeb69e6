"""Writes contents, states, stagnation, windows and vessels in the caller's units.

Rounding happens here and nowhere else; every verdict has been taken before.
"""

from math import inf, isfinite
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.checks import pressure_to_withstand
from loopslack.calc.equilibrium import Equilibrium
from loopslack.calc.fit import Fit
from loopslack.calc.judge import worst
from loopslack.calc.judgement import Check as CheckResult
from loopslack.calc.judgement import Judgement, StateResult
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.scenarios import DOUBT_IDS, Scenario
from loopslack.contract.answers import loop as out
from loopslack.contract.answers.shared import Check, CheckVerdict
from loopslack.contract.quantity import Pressure, Price
from loopslack.contract.reading.reader import Assumed
from loopslack.contract.writing.quantities import Writer
from loopslack.contract.writing.shared import optional_quantity
from loopslack.kernel import kinds

_NO_RANGE = 1e-12  # m3

COOLING_PLACE = (
    "In the line before the expansion vessel, uninsulated, entered from the top, "
    "so that its cool liquid goes first."
)


class Pressures:
    """Writes absolute pressures as gauge readings on the site, the way the trade speaks of them."""

    def __init__(self, write: Writer, atmosphere: float) -> None:
        self._gauge = write.gauge
        self._atmosphere = atmosphere

    def __call__(self, absolute: float) -> Pressure:
        """A pressure."""
        return self._gauge(absolute - self._atmosphere)

    def optional(self, absolute: float | None) -> Pressure | None:
        """A pressure that may not be defined, as none below vacuum is."""
        return None if absolute is None or not 0 < absolute < inf else self(absolute)


class Held(NamedTuple):
    """What one part holds (m3), where that was stated or assumed, and of how many pieces it is."""

    kind: out.PartKind
    name: str
    content: float
    pointer: str = ""
    pieces: int = 1


def held_by(loop: Loop) -> list[Held]:
    """The parts of a loop."""
    found = [
        Held("collectors", group.name, group.content, f"/collectors/{index}/content", group.count)
        for index, group in enumerate(loop.groups)
    ]
    found += [Held("pipe-run", branch.name, branch.content) for branch in loop.branches]
    found.append(Held("station", "station", loop.station.content, "/station/content"))
    found.append(Held("vessel-line", "vessel line", loop.line_content, "/vesselLine/content"))
    if loop.cooling_content > 0:
        found.append(Held("cooling-vessel", "cooling vessel", loop.cooling_content))
    return found


def content(parts: list[Held], write: Writer, assumed: tuple[Assumed, ...]) -> out.LoopContent:
    """Contents by part, with the range of every part whose content was assumed for one piece of it."""
    volume = write.volume
    ranges = {entry.pointer: (entry.low, entry.high) for entry in assumed if entry.si is not None}
    rows: list[out.PartContent] = []
    low = high = 0.0
    for part in parts:
        found = ranges.get(part.pointer)
        least = part.content if found is None else found[0] * part.pieces
        most = part.content if found is None else found[1] * part.pieces
        low, high = low + min(least, part.content), high + max(most, part.content)
        rows.append(
            out.PartContent(
                kind=part.kind,
                name=part.name,
                content=volume(part.content),
                low=None if found is None else volume(least),
                high=None if found is None else volume(most),
            )
        )
    total = sum(part.content for part in parts)
    ranged = abs(high - low) > _NO_RANGE
    return out.LoopContent(
        total=volume(total),
        low=volume(low) if ranged else None,
        high=volume(high) if ranged else None,
        collectors=volume(sum(part.content for part in parts if part.kind == "collectors")),
        pipes=volume(sum(part.content for part in parts if part.kind == "pipe-run")),
        parts=rows,
    )


def window(fitted: Fit, write: Writer, pressure: Pressures) -> out.FillWindow | None:
    """The fill window of all that counts towards the verdict; none where no filling keeps it."""
    found = fitted.window
    if (
        not fitted.counted
        or not (isfinite(found.lower) and isfinite(found.upper))
        or found.upper <= found.lower
    ):
        return None
    return out.FillWindow(
        temperature=write.temperature(found.temperature),
        lower=pressure(found.lower),
        recommended=pressure(found.recommended),
        upper=pressure(found.upper),
        width=write.pressure_difference(found.width),
        wide_enough=found.wide_enough,
        lower_set_by=found.lower_bound.code,
        upper_set_by=found.upper_bound.code,
        lower_under=found.lower_bound.scenario,
        upper_under=found.upper_bound.scenario,
    )


def liquid_state(found: StateResult, write: Writer, pressure: Pressures) -> out.LiquidState:
    """A state without steam."""
    return out.LiquidState(
        id=found.id,
        vessel_liquid=write.volume(found.liquid),
        vessel_pressure=pressure.optional(found.pressure),
        top_pressure=pressure.optional(found.top_pressure),
        gauge_reading=pressure.optional(found.gauge_pressure),
        vessel_temperature=write.temperature(found.vessel_temperature),
        frozen=True if found.frozen else None,
    )


def stagnation(
    analysis: Analysis, judgement: Judgement, write: Writer, pressure: Pressures
) -> list[out.StagnationState]:
    """Stagnation under every scenario that could be computed."""
    found = []
    for scenario in analysis.every:
        result = judgement.stagnation.get(scenario.id)
        if result is not None:
            own = [check for check in judgement.checks if check.state == scenario.id]
            verdict = worst(own)
            defined = not any(c.code == "relief-valve" and c.verdict == "not-assessed" for c in own)
            found.append(_stagnation(analysis, scenario, result, verdict, write, pressure, defined=defined))
    return found


def _stagnation(
    analysis: Analysis,
    scenario: Scenario,
    result: Equilibrium,
    verdict: CheckVerdict,
    write: Writer,
    pressure: Pressures,
    *,
    defined: bool,
) -> out.StagnationState:
    spaces = analysis.case(scenario).balance.spaces
    extent = result.extent
    reach = [
        out.SteamReach(pipe_run=branch.name, reach=write.length(length), length=write.length(branch.length))
        for space, steam in zip(spaces, extent.spaces, strict=True)
        for branch, length in zip(space.path.branches, space.path.reach(steam.place), strict=True)
    ]
    return out.StagnationState(
        scenario=scenario.id,  # type: ignore[arg-type]  # the register of scenarios is closed
        verdict=verdict,
        regime=result.regime,
        # An empty or full vessel has no pressure; what its gas would show says nothing about the loop.
        vessel_pressure=pressure.optional(result.pressure) if defined else None,
        lower_bound=True if result.bound else None,
        steam_temperature=write.temperature(max(steam.temperature for steam in extent.spaces)),
        stagnation_temperature=write.temperature(max(space.hottest for space in spaces)),
        steam_power=write.power(sum(steam.power for steam in extent.spaces)),
        steam_volume=write.volume(extent.steam_volume),
        reach=reach,
        unspent_power=write.power(extent.unspent),
        vessel_liquid=write.volume(result.liquid),
        gas_temperature=write.temperature(result.gas_temperature),
        mixed_temperature=write.temperature(result.mixed_temperature),
        last_arriving_temperature=write.temperature(result.last_temperature),
    )


def check(found: CheckResult, writing: Writer, atmosphere: float) -> Check:
    """A check; pressures are written as gauge readings, margins as differences."""
    system = writing.system
    kind, value, limit = found.kind, found.value, found.limit
    margin_kind = kind
    if kind is kinds.ABSOLUTE_PRESSURE:
        kind, margin_kind = kinds.GAUGE_PRESSURE, kinds.PRESSURE_DIFFERENCE
        value = None if value is None else value - atmosphere
        limit = None if limit is None else limit - atmosphere
    elif kind is kinds.GAUGE_PRESSURE:
        margin_kind = kinds.PRESSURE_DIFFERENCE
    elif kind is kinds.TEMPERATURE:
        margin_kind = kinds.TEMPERATURE_DIFFERENCE
    return Check(
        code=found.code,
        verdict=found.verdict,
        group="core" if found.core else "confirm",
        scenario=found.state,
        value=optional_quantity(value, kind, system),
        limit=optional_quantity(limit, kind, system),
        margin=optional_quantity(found.margin, margin_kind, system),
        subject=found.subject or None,
        reason=found.reason or None,
        at_least=True if found.at_least else None,
    )


def doubts(loop: Loop, judgement: Judgement) -> list[out.Doubt]:
    """Every doubt in its order."""
    meanings = {
        "warm-gas": "Gas and liquid in the vessel as warm as the liquid that arrives, mixed.",
        "hotter-stagnation": f"Collectors {loop.criteria.stagnation_doubt:g} K hotter in stagnation than stated.",
        "worse-emptying": "The next worse emptying class, or a quarter more steam than measured.",
        "closed-branch": "Pipe runs whose check valve nobody placed are closed to steam.",
    }
    return [
        out.Doubt(id=id, verdict=judgement.doubts[id], meaning=meanings[id])  # type: ignore[arg-type]  # as above
        for id in DOUBT_IDS
    ]


def vessel(found: Fit, write: Writer, *, own_cooling: bool = True) -> out.VesselResult:
    """A vessel with the cooling vessel it needs: never one without the other."""
    article: Vessel = found.vessel
    pieces = found.pieces
    cooling = None
    if own_cooling and found.cooling > 0:
        needed = pressure_to_withstand(found.analysis, found.analysis.loop.relief, 0.0)
        cooling = out.CoolingVesselResult(
            content=write.volume(found.cooling),
            least_rated_pressure=write.gauge(needed),
            place=COOLING_PLACE,
        )
    return out.VesselResult(
        id=article.id,
        pieces=pieces,
        nominal_volume=write.volume(article.nominal_volume),
        total_nominal_volume=write.volume(article.nominal_volume * pieces),
        rated_pressure=None if article.rated_pressure is None else write.gauge(article.rated_pressure),
        acceptance_volume=None
        if article.acceptance_volume is None
        else write.volume(article.acceptance_volume),
        price=None
        if article.price is None
        else Price(amount=round(article.price * pieces, 2), currency=article.currency),
        cooling_vessel=cooling,
    )
