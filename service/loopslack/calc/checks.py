"""The checks of a charged vessel, each a few lines: value, limit, margin.

A check compares; it solves nothing. Which checks decide the verdict, and under which doubts, is ``judge``'s.
"""

from collections.abc import Iterator
from math import isfinite

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis, SteamCase
from loopslack.calc.equilibrium import ROUNDING, Equilibrium
from loopslack.calc.judgement import Check, CheckCode, CheckVerdict, StateResult
from loopslack.calc.model import Part, Relief
from loopslack.calc.scenarios import BASE
from loopslack.calc.states import LiquidState
from loopslack.calc.window import FillLaw, Window
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import Kind
from loopslack.physics.statics import GRAVITY

PRESSURE, DIFFERENCE = kinds.ABSOLUTE_PRESSURE, kinds.PRESSURE_DIFFERENCE


def compare(
    code: CheckCode,
    state: str,
    kind: Kind,
    value: float,
    limit: float,
    *,
    at_most: bool,
    subject: str = "",
    at_least: bool = False,
    scale: float = 0.0,
) -> Check:
    """A core check of a value against a limit; the solvers' rounding is not a failure.

    ``scale`` is a size the value's rounding goes with, where value and limit are both small.
    """
    margin = limit - value if at_most else value - limit
    holds = margin >= -ROUNDING * max(abs(limit), scale)
    if holds and margin < 0:
        margin = 0.0
    verdict: CheckVerdict = "holds" if holds else "does-not-hold"
    return Check(code, True, state, verdict, kind, value, limit, margin, subject, "", at_least)


def relief_valve(analysis: Analysis, state: str, pressure: float, *, at_least: bool) -> Check:
    """Vessel pressure in stagnation against the valve's lowest opening pressure, carried to the vessel."""
    limit = analysis.final_pressure
    return compare("relief-valve", state, PRESSURE, pressure, limit, at_most=True, at_least=at_least)


def acceptance(state: str, found: Equilibrium, accepted: float, nominal: float) -> Check:
    """Liquid held in stagnation against what the membrane takes."""
    limit = min(accepted, nominal)
    return compare("acceptance", state, kinds.VOLUME, found.liquid, limit, at_most=True)


def membrane(state: str, found: Equilibrium, limit: float) -> Check:
    """Mixed temperature in the vessel against the membrane's limit."""
    return compare(
        "membrane-temperature", state, kinds.TEMPERATURE, found.mixed_temperature, limit, at_most=True
    )


def steam_at_station(analysis: Analysis, state: str, found: Equilibrium) -> Check:
    """Steam power left when the branches are full, beyond what the station is said to take.

    It is a difference of powers as large as the sun's on the field, and its rounding goes with that.
    """
    loop = analysis.loop
    sun = loop.sun.irradiance * loop.aperture
    unspent = found.extent.unspent
    return compare("steam-at-station", state, kinds.POWER, unspent, 0.0, at_most=True, scale=sun)


def steam_reach(state: str, case: SteamCase, found: Equilibrium, at_station: CheckVerdict) -> Check | None:
    """The pipe run with least liquid left before the steam: its reach against its length. Told, not decisive.

    What decides is the steam power left over, since a front may well stand at the end of a run; where that check
    (``at_station``) does not hold, the front would be beyond it.
    """
    spare = [
        (branch.length - reach, reach, branch)
        for space, steam in zip(case.balance.spaces, found.extent.spaces, strict=True)
        for branch, reach in zip(space.path.branches, space.path.reach(steam.place), strict=True)
    ]
    if not spare:
        return None
    # Runs alike differ by rounding only: the first of them, whatever the solver left.
    _, reach, branch = min(spare, key=lambda row: round(row[0], 6))
    check = compare(
        "steam-reach", state, kinds.LENGTH, reach, branch.length, at_most=True, subject=branch.name
    )
    if at_station == "does-not-hold":
        return replace(check, core=False, verdict=at_station, at_least=True)
    return replace(check, core=False)


def degradation(analysis: Analysis, state: str, found: Equilibrium) -> Check | None:
    """Hottest liquid beside the steam against the temperature above which glycol degrades; none for water."""
    loop = analysis.loop
    if loop.fluid.kind == "water":
        return None
    hottest = max(space.temperature for space in found.extent.spaces)
    limit = loop.criteria.degradation_limit
    check = compare("glycol-degradation", state, kinds.TEMPERATURE, hottest, limit, at_most=True)
    return replace(check, core=False)


def reserve(law: FillLaw, cold: LiquidState, mass: float, nominal: float) -> Check:
    """Liquid left in the vessel when cold against the reserve; below nought is what an empty one lacks."""
    held = cold.held(mass)
    check = compare("reserve", "cold", kinds.VOLUME, held, law.reserve(nominal), at_most=False)
    return replace(check, reason="vessel-empty") if held < 0 else check


def top_pressure(analysis: Analysis, cold: StateResult) -> Check:
    """Pressure at the highest point when cold; where there is none to show it fails."""
    loop = analysis.loop
    limit = loop.atmosphere + loop.criteria.top_pressure
    if cold.top_pressure is None:
        reason = cold.reason or "below-vacuum"
        return Check("top-pressure", True, "cold", "does-not-hold", PRESSURE, None, limit, reason=reason)
    return compare("top-pressure", "cold", PRESSURE, cold.top_pressure, limit, at_most=False)


def cut_off(analysis: Analysis, state: StateResult) -> Check:
    """Vessel pressure at the pump's cut-off temperature against what keeps the top from boiling."""
    limit = analysis.cut_off_pressure
    if state.pressure is None:
        return Check(
            "boiling-at-cut-off",
            True,
            "cut-off",
            "does-not-hold",
            PRESSURE,
            None,
            limit,
            reason=state.reason,
        )
    return compare("boiling-at-cut-off", "cut-off", PRESSURE, state.pressure, limit, at_most=False)


def freezing(analysis: Analysis) -> Check:
    """Freezing point against the site minimum less the margin."""
    loop = analysis.loop
    limit = loop.temperatures.site_minimum - loop.criteria.freeze_margin
    point = loop.fluid.freezing_point
    return compare("freezing", "cold", kinds.TEMPERATURE, point, limit, at_most=True)


def fill_window(analysis: Analysis, window: Window, filled: float | None, state: str) -> Check:
    """Width of the window against what an installer can hit; a fill outside it fails whatever the width."""
    limit = analysis.loop.criteria.window_width
    width = window.width
    if not isfinite(width):
        return Check("fill-window", True, state, "does-not-hold", DIFFERENCE, None, limit, reason="no-window")
    check = compare("fill-window", state, DIFFERENCE, width, limit, at_most=False)
    if check.verdict == "does-not-hold":
        return check
    if filled is None or not window.lower <= filled * (1 + ROUNDING) <= window.upper * (1 + 2 * ROUNDING):
        return replace(check, verdict="does-not-hold", reason="fill-outside-window")
    if not window.wide_enough:
        return replace(check, verdict="does-not-hold", reason="too-close-to-precharge")
    return check


def protected(analysis: Analysis, part: Part) -> Check:
    """Rating of a part against the valve's set pressure, carried to the part's height by the heavier liquid."""
    loop = analysis.loop
    needed = pressure_to_withstand(analysis, loop.relief, part.height)
    if part.rated_pressure is None:
        return Check(
            "part-rating",
            False,
            "fill",
            "not-assessed",
            kinds.GAUGE_PRESSURE,
            None,
            needed,
            subject=part.name,
            reason="rating-not-stated",
        )
    return compare(
        "part-protected",
        "fill",
        kinds.GAUGE_PRESSURE,
        needed,
        part.rated_pressure,
        at_most=True,
        subject=part.name,
    )


def pressure_to_withstand(analysis: Analysis, relief: Relief, height: float) -> float:
    """Gauge pressure (Pa) at a height while the valve stands at its set pressure."""
    drop = relief.height - height
    temperatures, fluid = analysis.loop.temperatures, analysis.fluid
    density = fluid.density(temperatures.fill if drop > 0 else temperatures.hot_liquid)
    return relief.set_pressure + density * GRAVITY * drop


def without_boiling(nominal: float, least: float) -> Check:
    """Nominal volume against the least that a loop is given which relies on its collectors not boiling, m3."""
    return compare("volume-without-boiling", BASE.id, kinds.NOMINAL_VOLUME, nominal, least, at_most=False)


def construction(analysis: Analysis) -> Iterator[Check]:
    """What is built so that no vessel makes it sound; each fault is a check that fails."""
    for fault in analysis.loop.faults:
        yield Check("construction", True, "fill", "does-not-hold", kinds.RATIO, subject=fault, reason=fault)


def part_temperatures(analysis: Analysis) -> Iterator[Check]:
    """Stated highest temperatures against the pump's cut-off temperature, the hottest a running pump brings."""
    hottest = analysis.loop.temperatures.cut_off
    for part in analysis.loop.parts:
        if part.highest_temperature is not None:
            yield compare(
                "part-temperature",
                "cut-off",
                kinds.TEMPERATURE,
                hottest,
                part.highest_temperature,
                at_most=True,
                subject=part.name,
            )


def suction(analysis: Analysis, state: StateResult) -> Check:
    """Pressure at the pump inlet above the bubble pressure against a stated net positive suction head."""
    loop = analysis.loop
    needed = loop.criteria.net_positive_suction
    if needed is None:
        return Check(
            "net-positive-suction", False, "cut-off", "not-assessed", DIFFERENCE, reason="head-not-stated"
        )
    reason, inlet = state.reason, None
    if state.pressure is not None:
        density = analysis.fluid.density(loop.temperatures.back)
        inlet = state.pressure - density * GRAVITY * loop.pump_height
        inlet -= loop.pump_head if loop.pump_side == "discharge" else 0.0
        reason = "below-vacuum"
    if inlet is None or inlet <= 0:
        return Check(
            "net-positive-suction",
            False,
            "cut-off",
            "does-not-hold",
            DIFFERENCE,
            None,
            needed,
            reason=reason,
        )
    try:
        spare = inlet - analysis.fluid.bubble_pressure(loop.temperatures.back)
    except CalculationError as error:
        return Check(
            "net-positive-suction",
            False,
            "cut-off",
            "not-assessed",
            DIFFERENCE,
            None,
            needed,
            reason=str(error),
        )
    check = compare("net-positive-suction", "cut-off", DIFFERENCE, spare, needed, at_most=False)
    return replace(check, core=False)
