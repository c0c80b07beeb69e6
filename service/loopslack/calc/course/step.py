"""One implicit step: the root in the steam volume, and the relief valve around it.

Nothing is changed here: a step is tried, looked at by the march, and then accepted by ``transport`` or thrown
away.
"""

from collections.abc import Callable
from typing import Literal, NamedTuple

from loopslack.calc.course.balance import Balance
from loopslack.calc.course.lumped import ReliefValve
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.relief import passed
from loopslack.calc.course.state import State
from loopslack.calc.course.weather import Weather
from loopslack.kernel.roots import bracketed

Ending = Literal["steam", "no-steam", "overfull"]

_FIRST_STRIDE = 1e-5
_MOST_TRIALS = 200
_UNEVEN = 100.0  # between the residuals at the ends of a bracket
_NEGLIGIBLE = 1e-10  # of the filled mass: vapour that may stay unaccounted for when the root is taken


class Step(NamedTuple):
    """A solved step.

    ``ending`` says whether a steam volume balances, no steam is left, or steam fills all the pipes and
    presses on; ``absorber`` and ``liquid`` are temperatures (K), ``valve_open`` the valve's state at the end,
    ``surplus`` (kg) the vapour that reached the station.
    """

    balance: Balance
    ending: Ending
    absorber: float
    liquid: float
    evaporated: float
    condensed: float
    wall: float
    surplus: float
    valve_open: bool

    @property
    def steam_power(self) -> float:
        """What the collectors send out as steam, W/m2; negative when vapour condenses in them."""
        balance = self.balance
        if self.ending == "no-steam":
            return 0.0
        heat = self.evaporated * balance.collector.evaporation_heat
        return heat / (balance.plant.loop.aperture * balance.dt)


def step(plant: Plant, state: State, weather: Weather, dt: float) -> Step:
    """Try a step of ``dt`` seconds."""
    end = state.time + dt
    balance = Balance(plant, state, dt, weather.irradiance(end), weather.ambient(end))
    ending = _solve(balance)
    valve_open = False
    if plant.loop.relief is not None:
        ending, valve_open = _relieve(balance, plant.loop.relief, ending)
    collector = balance.collector
    if ending == "no-steam":
        warm = collector.warm(balance.geometric)
        return Step(balance, ending, warm, warm, collector.evaporated, 0.0, balance.dry_wall, 0.0, valve_open)
    surplus = -balance.missing if ending == "overfull" else 0.0
    # No more can condense than there is; the root leaves some millionths of a kilogram open.
    vapour = state.vapour + collector.evaporated - surplus
    return Step(
        balance,
        ending,
        collector.absorber,
        collector.boiling,
        collector.evaporated - min(0.0, vapour),
        min(balance.condensed, max(0.0, vapour)),
        balance.wall,
        surplus,
        valve_open,
    )


def _relieve(balance: Balance, valve: ReliefValve, ending: Ending) -> tuple[Ending, bool]:
    """Let liquid out if the valve opens or stands open; whether it still stands open at the end of the step.

    If the valve can pass in this step what it takes to fall to the closing pressure, it does so and shuts;
    else it passes what it can.
    """
    pressure = balance.vessel_pressure
    stays_open = balance.state.valve_open and pressure > valve.closing_pressure
    if not (stays_open or pressure > valve.set_pressure):
        return ending, False
    atmosphere = balance.plant.loop.atmosphere
    capacity = passed(valve, atmosphere, balance.vessel_density, pressure, balance.dt)
    balance.held_pressure = valve.closing_pressure
    _solve(balance)
    held = balance.vessel_mass
    balance.held_pressure = None
    balance.residual(balance.volume)
    needed = max(0.0, balance.vessel_mass - held)
    balance.discharge = min(needed, capacity)
    return _solve(balance), needed > capacity


def _solve(balance: Balance) -> Ending:
    """Put the balance at the root nearest to the old volume: while liquid returns there may be several."""
    highest = balance.highest
    least = balance.least_volume()
    start = max(least, min(balance.state.volume, highest))
    negligible = _NEGLIGIBLE * balance.plant.mass

    def residual(volume: float) -> float:
        missing = balance.residual(volume)
        return 0.0 if abs(missing) < negligible else missing

    here = residual(start)
    if here == 0.0 and start > least:
        return "steam"
    stride = max(_FIRST_STRIDE * highest, 1e-9)
    if here < 0.0:
        found = _upward(residual, start, here, highest, stride)
        if found is None:
            return "overfull"
    else:
        found = _downward(residual, start, here, least, stride)
        if found is None:
            return "no-steam"
    root = _root(residual, *found, tolerance=1e-13 * highest)
    if balance.volume != root:
        balance.residual(root)
    return "steam"


def _root(
    residual: Callable[[float], float],
    low: float,
    high: float,
    at_low: float,
    at_high: float,
    *,
    tolerance: float,
) -> float:
    """Volume at which the residual vanishes between two at which it has different signs.

    An empty vessel makes the residual a hockey stick, flat on one side and steep on the other. Bent so that both
    ends weigh alike it has the same root, which is found in a few trials there too.
    """
    scale = 4.0 * min(-at_low, at_high)
    if max(-at_low, at_high) < _UNEVEN * scale or scale == 0.0:
        return bracketed(residual, low, high, at_low, at_high, tolerance, _MOST_TRIALS).at

    def bent(volume: float) -> float:
        missing = residual(volume)
        return missing / (abs(missing) + scale)

    ends = at_low / (scale - at_low), at_high / (scale + at_high)
    return bracketed(bent, low, high, *ends, tolerance, _MOST_TRIALS).at


Bracket = tuple[float, float, float, float]


def _upward(
    residual: Callable[[float], float], low: float, at_low: float, highest: float, stride: float
) -> Bracket | None:
    """Bracket above a volume where steam is missing room; None if even the highest volume does not do."""
    while True:
        high = min(highest, low + stride)
        at_high = residual(high)
        if at_high >= 0.0:
            return low, high, at_low, at_high
        if high >= highest:
            return None
        low, at_low = high, at_high
        stride *= 4.0


def _downward(
    residual: Callable[[float], float], high: float, at_high: float, least: float, stride: float
) -> Bracket | None:
    """Bracket below a volume that the steam does not fill; None if it fills not even the least volume."""
    while high > least:
        low = max(least, high - stride)
        at_low = residual(low)
        if at_low < 0.0:
            return low, high, at_low, at_high
        high, at_high = low, at_low
        stride *= 4.0
    return None
