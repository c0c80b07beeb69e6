"""What happens when the relief valve opens: what leaves, where the valve shuts, and what is left once it is cold.

The valve lets liquid out until the pressure at it has fallen to where it shuts. That pressure fixes the vessel and
the steam, so what the loop can still hold follows without trial, and what it held before less that is gone. The
states without steam are then run again with what is left. Nothing here opens a valve: whether it opens is the
equilibrium's to say.
"""

from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.balance import Extent
from loopslack.calc.model import Loop
from loopslack.calc.scenarios import Scenario
from loopslack.calc.stagnation import charge_of, stagnation
from loopslack.calc.states import LiquidState, StateId
from loopslack.calc.window import Gas
from loopslack.kernel.roots import bracketed
from loopslack.physics.statics import GRAVITY


class Left(NamedTuple):
    """A state of the loop after the discharge: volumes m3, pressures Pa absolute at vessel and highest point.

    ``liquid`` below zero is what the vessel lacks; pressures are then None, for the loop is no longer under
    pressure and sucks air wherever it can. So is a pressure at the highest point that would lie below vacuum.
    """

    id: StateId
    liquid: float
    pressure: float | None
    top_pressure: float | None
    sucks_air: bool


class Discharge(NamedTuple):
    """What leaves through the valve under one scenario.

    ``mass`` (kg), ``volume`` as hot liquid (m3); ``closing_pressure`` of the vessel (Pa absolute) and the liquid
    it then holds (m3). ``at_least``: steam reaches the station, so more leaves. ``steam``: steam can stand at the
    valve, which then vents it. ``stays_open``: the valve would shut only below the atmosphere, so the loop empties
    itself until nothing presses any more. ``refill`` (m3 at the fill temperature) leads back to the filling.
    """

    scenario: str
    mass: float
    volume: float
    closing_pressure: float
    vessel_liquid: float
    steam: bool
    at_least: bool
    stays_open: bool
    left: float
    fill: Left
    cold: Left
    refill: float

    @property
    def sucks_air(self) -> bool:
        """Whether the loop draws air once it has cooled."""
        return self.fill.sucks_air or self.cold.sucks_air


def discharge(
    analysis: Analysis, gas: Gas, mass: float, scenario: Scenario, *, recommended: float | None = None
) -> Discharge | None:
    """The discharge of a vessel filled with ``mass`` kg under a scenario; None where the valve stays shut.

    ``recommended`` is the mass (kg) to refill to, the present one if absent. The largest blowdown the valve may
    have is counted, so more is lost here than by a valve that shuts early. Raises ``OutOfRange`` where the fluid is
    not known.
    """
    before = stagnation(analysis, scenario, gas, mass)
    if before.regime != "valve-opens":
        return None
    loop = analysis.loop
    pressure, stays_open = closing_pressure(loop)
    extent = analysis.case(scenario).balance.at_pressure(pressure)
    held, temperature = _held(analysis, gas, mass, pressure, gas_follows=scenario.gas_follows)
    held = min(held, gas.acceptance)
    density = analysis.fluid.density(temperature if scenario.gas_follows else loop.temperatures.vessel_room)
    left = density * (held - analysis.allowance) - extent.expelled
    # A vessel that was nearly empty may hold more than it did; then nothing leaves.
    lost = max(0.0, mass - left)
    left = mass - lost
    states = analysis.states
    target = mass if recommended is None else recommended
    return Discharge(
        scenario.id,
        lost,
        lost / analysis.fluid.density(loop.temperatures.hot_liquid),
        pressure,
        held,
        steam_at_valve(loop, extent),
        extent.unspent > 0,
        stays_open,
        left,
        _left(analysis, gas, left, states.fill),
        _left(analysis, gas, left, states.cold),
        max(0.0, target - left) / states.fill.vessel_density,
    )


def closing_pressure(loop: Loop) -> tuple[float, bool]:
    """Vessel pressure (Pa absolute) at which the valve has shut, and whether that is only the atmosphere.

    The column between vessel and valve counts with the lighter liquid above the vessel and the heavier below it, as
    for the opening: both give the lower pressure, at which more has left.
    """
    relief, temperatures = loop.relief, loop.temperatures
    density = loop.fluid.density(temperatures.hot_liquid if relief.height > 0 else temperatures.fill)
    at_valve = max(0.0, relief.closing_pressure)
    return loop.atmosphere + at_valve + density * GRAVITY * relief.height, relief.closing_pressure <= 0


def steam_at_valve(loop: Loop, extent: Extent) -> bool:
    """Whether steam can stand at the valve: it reaches the station, or its front has sunk to the valve's height.

    Only the valve's height is known, not which pipe it sits on, so a front at its height counts as at the valve.
    """
    if extent.unspent > 0:
        return True
    return any(
        steam.boiling and steam.power > 0 and steam.height <= loop.relief.height for steam in extent.spaces
    )


def _held(
    analysis: Analysis, gas: Gas, mass: float, pressure: float, *, gas_follows: bool
) -> tuple[float, float]:
    """Liquid (m3) in the vessel at a pressure (Pa), and the temperature (K) of its gas; never below nothing."""
    charge = charge_of(analysis, gas, mass)
    if not gas_follows:
        return max(0.0, charge.room_at(pressure, charge.room)), charge.room

    def excess(temperature: float) -> float:
        held = max(0.0, charge.room_at(pressure, temperature))
        return analysis.mix.temperature(charge.filled, held) - temperature

    low, high = charge.room, max(charge.room, analysis.mix.hot)
    # Warmer gas leaves less room for the hot liquid that warms it, so the excess only falls.
    at_low, at_high = excess(low), excess(high)
    if at_low <= 0 or at_high >= 0:
        temperature = low if at_low <= 0 else high
    else:
        temperature = bracketed(excess, low, high, at_low, at_high, 1e-10).at
    return max(0.0, charge.room_at(pressure, temperature)), temperature


def _left(analysis: Analysis, gas: Gas, mass: float, state: LiquidState) -> Left:
    """A state without steam with ``mass`` kg in the vessel by the books; negative means that the loop lacks it."""
    liquid = state.held(mass)
    if not 0 < liquid < gas.nominal:
        return Left(state.id, liquid, None, None, liquid <= 0)
    pressure = gas.precharge * gas.nominal / (gas.nominal - liquid) * state.vessel / gas.temperature
    top = pressure - state.column
    return Left(state.id, liquid, pressure, top if top > 0 else None, top < analysis.loop.atmosphere)
