"""The cooling vessel: the smallest content that keeps the membrane at or below its limit.

It stands uninsulated in the line before the expansion vessel, so that its own cool liquid arrives first. Its
content also takes part in the balance, so a vessel and its cooling vessel are found together.
"""

from collections.abc import Callable, Sequence
from math import inf

from msgspec import Struct

from loopslack.calc.analysis import Analysis
from loopslack.calc.balance import Mixing
from loopslack.calc.extents import Extents
from loopslack.calc.scenarios import Scenario
from loopslack.calc.stagnation import charge_of, stagnation
from loopslack.calc.window import Bound, Bounds, Gas, Window
from loopslack.kernel.roots import bracketed, met_from_below

_MOST = 1e3  # m3: no cooling vessel is sought beyond
_COARSE = 3200  # pressures of the grid of looks that a first look at the membrane takes together
_TOLERANCE = 1e-7  # of a content or a mass; the answer is then moved to the safe side by as much


class Charged(Struct, frozen=True, gc=False):
    """A loop (with its cooling vessel), its gas side, and the least mass (kg) it may be filled with."""

    analysis: Analysis
    gas: Gas
    least: float


def hottest(charged: Charged, scenarios: Sequence[Scenario]) -> tuple[float, Scenario]:
    """Highest mixed temperature (K) in the vessel at its least filling, and under which scenario.

    The least filling is the worst: less cool liquid, less pressure, more steam.
    """
    found = [
        (stagnation(charged.analysis, scenario, charged.gas, charged.least).mixed_temperature, scenario)
        for scenario in scenarios
    ]
    return max(found, key=lambda pair: pair[0])


def spare(charged: Charged, scenario: Scenario, limit: float) -> float:
    """Mass (kg) a loop may push out more until the vessel mixes to ``limit`` K; negative where it is hotter.

    The vessel as it is when just that warm fixes its pressure, and that the steam: no equilibrium is solved. Only
    where pipes rise may a loop rest in several states at one pressure, and the equilibrium tells which.
    """
    analysis = charged.analysis
    filled = max(charged.least / analysis.states.fill.vessel_density, 0.0)
    held = _held_at(analysis.mix, filled, limit)
    return inf if held == inf else _until(charged, scenario, held, limit)


def surely_cool(
    charged: Charged, scenarios: Sequence[Scenario], limit: float, extents: Extents, *, closely: bool
) -> bool:
    """Whether looks on a grid already show that no scenario heats the membrane beyond ``limit`` K.

    A vessel that holds the liquid it mixes to the limit with stands at a pressure at which the loop pushes out less
    than that takes. ``closely`` looks again on the finest grid. False says only that an exact look is needed.
    """
    analysis, gas, mass = charged.analysis, charged.gas, charged.least
    if limit <= analysis.mix.room or mass < 0:
        return False
    charge = charge_of(analysis, gas, mass)
    held = _held_at(analysis.mix, charge.filled, limit)
    if held == inf:
        return True
    grids = (_COARSE, 1) if closely else (_COARSE,)
    for follows in (False, True):
        warm = limit if follows else charge.room
        pressure = charge.pressure_holding(held, warm)
        left = (held - charge.allowance) * analysis.fluid.density(warm) - mass
        for scenario in scenarios:
            if scenario.gas_follows is follows and all(
                extents.at_most(scenario, pressure, coarse) > left for coarse in grids
            ):
                return False
    return True


def most_held(charged: Charged, scenarios: Sequence[Scenario], extents: Extents) -> float:
    """Most liquid (m3) the vessel holds under any of some scenarios that keep its gas at the room's temperature."""
    analysis, most = charged.analysis, 0.0
    charge = charge_of(analysis, charged.gas, charged.least)
    # The one that pushes out most at the valve's pressure is likely to anywhere; of the others one look tells.
    for scenario in sorted(scenarios, key=lambda s: -analysis.case(s).final.expelled):
        if most:
            left = (most - charge.allowance) * analysis.room_density - charged.least
            if extents.at_most(scenario, charge.pressure_holding(most, charge.room), _COARSE) <= left:
                continue
        if not most or _until(charged, scenario, most, analysis.loop.temperatures.vessel_room) < 0:
            most = max(most, stagnation(analysis, scenario, charged.gas, charged.least).liquid)
    return most


def _until(charged: Charged, scenario: Scenario, held: float, warm: float) -> float:
    """Mass (kg) a loop may push out more until the vessel holds ``held`` m3, at ``warm`` K if its gas follows."""
    analysis, gas, mass = charged.analysis, charged.gas, charged.least
    charge = charge_of(analysis, gas, mass)
    case = analysis.case(scenario)
    density = analysis.fluid.density(warm) if scenario.gas_follows else analysis.room_density
    spaces = case.balance.spaces
    if len(spaces) == 1 and not spaces[0].path.falling:
        return (held - stagnation(analysis, scenario, gas, mass).liquid) * density
    pressure = charge.pressure_holding(held, warm if scenario.gas_follows else charge.room)
    # The valve is shut at every filling asked for, so no more is pushed out than at its pressure.
    steam = case.final if pressure >= analysis.final_pressure else case.balance.at_pressure(pressure)
    return (held - charge.allowance) * density - mass - steam.expelled


def _held_at(mix: Mixing, filled: float, limit: float) -> float:
    """Liquid (m3) with which a vessel that had ``filled`` m3 mixes to ``limit`` K; infinite if it never does."""
    cool = filled + mix.cool
    returned = cool * (mix.back - mix.room)
    if mix.back > limit and returned < (mix.back - limit) * (cool + mix.back_volume):
        return returned / (mix.back - limit)
    if mix.hot <= limit:
        return inf
    return (cool * (mix.hot - mix.room) + mix.back_volume * (mix.hot - mix.back)) / (mix.hot - limit)


def smallest_content(
    charge: Callable[[float], Charged | None], scenarios: Sequence[Scenario], limit: float
) -> float | None:
    """Smallest cooling content (m3) with which no scenario heats the membrane beyond ``limit`` K; None if none does.

    ``charge`` gives the loop with a cooling vessel of a content, with the vessel that then belongs to it, or None
    where no vessel fits.
    """
    known: dict[float, Charged | None] = {}

    def charged_with(content: float) -> Charged | None:
        if content not in known:
            known[content] = charge(content)
        return known[content]

    content: float | None = 0.0
    while content is not None:
        charged = charged_with(content)
        if charged is None:
            return None
        mix = charged.analysis.mix
        if limit <= mix.room:
            return content if hottest(charged, scenarios)[0] <= limit else None
        left, worst = _least_spare(charged, scenarios, limit)
        if left >= 0:
            return content
        # Cool liquid in place of as much hot: right but for what the content itself changes in the balance.
        step = -left / charged.analysis.room_density * (mix.hot - limit) / max(mix.hot - mix.room, 1.0)
        content = _content_for(charged_with, worst, limit, (content, left), max(1e-6, step))
    return None


def _least_spare(charged: Charged, scenarios: Sequence[Scenario], limit: float) -> tuple[float, Scenario]:
    """See ``spare``, under the scenario that leaves least."""
    return min(((spare(charged, s, limit), s) for s in scenarios), key=lambda pair: pair[0])


def _content_for(
    charge: Callable[[float], Charged | None],
    scenario: Scenario,
    limit: float,
    start: tuple[float, float],
    step: float,
) -> float | None:
    """Content (m3) with which one scenario just keeps the limit; ``start`` is a content and what it spares (kg).

    It is looked for a ``step`` (m3) beyond.
    """
    low, at_low = start

    def spared(content: float) -> float:
        if content == low:
            return at_low
        charged = charge(content)
        if charged is None:
            raise _NoVessel
        return spare(charged, scenario, limit)

    try:
        met = met_from_below(spared, low, low + step, -at_low / step, _TOLERANCE, highest=_MOST)
    except _NoVessel:
        return None
    return None if met is None else met.at


def membrane_bound(
    analysis: Analysis, scenarios: Sequence[Scenario], gas: Gas, lower: Bound, upper: Bound, limit: float
) -> Bound:
    """The lower bound on the filling (kg), raised until no scenario heats the membrane beyond ``limit`` K.

    A mass above ``upper`` means that no filling does.
    """
    while True:
        left, worst = _least_spare(Charged(analysis, gas, lower.mass), scenarios, limit)
        if left >= 0:
            return lower
        most = spare(Charged(analysis, gas, upper.mass), worst, limit)
        if most < 0:
            # How far off as a temperature, so that a search for a vessel sees a slope.
            excess = hottest(Charged(analysis, gas, upper.mass), (worst,))[0] - limit
            return Bound("membrane-temperature", worst.id, upper.mass * (1 + max(excess, 0.0) / limit) + 1e-9)
        mass = _filling_for(analysis, worst, gas, limit, (lower.mass, upper.mass, left, most))
        raised = mass * (1 + 2 * _TOLERANCE)
        if raised <= lower.mass:
            raised = lower.mass + _TOLERANCE * upper.mass
        lower = Bound("membrane-temperature", worst.id, raised)


def _filling_for(
    analysis: Analysis, scenario: Scenario, gas: Gas, limit: float, ends: tuple[float, float, float, float]
) -> float:
    """Filling (kg) with which one scenario just keeps the limit; ``ends`` are two fillings and what they spare."""

    def spared(mass: float) -> float:
        return spare(Charged(analysis, gas, mass), scenario, limit)

    return bracketed(spared, *ends, _TOLERANCE * ends[1]).at


def cool_window(analysis: Analysis, scenarios: Sequence[Scenario], gas: Gas, membrane_limit: float) -> Window:
    """The fill window at the fill temperature in which no scenario heats the membrane beyond its limit (K)."""
    bounds = Bounds(analysis, scenarios, gas)
    lower, upper = bounds.masses(gas.nominal, gas.acceptance)
    if 0 <= lower.mass < upper.mass:
        lower = membrane_bound(analysis, scenarios, gas, lower, upper, membrane_limit)
    return bounds.window_between(gas.nominal, lower, upper, analysis.loop.temperatures.fill)


class _NoVessel(Exception):
    """No vessel fits a loop with this cooling content."""
