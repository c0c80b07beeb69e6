"""What the relief valve passes. It lets out liquid at the vessel; when it opens and shuts is read off pressures."""

from math import sqrt

from loopslack.calc.course.lumped import ReliefValve
from loopslack.calc.course.plant import Plant

_LEAST_HEAD = 1e3  # Pa over the atmosphere, so that an open valve passes something


def passed(valve: ReliefValve, atmosphere: float, density: float, pressure: float, dt: float) -> float:
    """Liquid (kg) the valve can pass in ``dt`` seconds at a pressure (Pa): outflow through its effective area."""
    head = max(_LEAST_HEAD, pressure - atmosphere)
    return valve.flow_area * sqrt(2.0 * density * head) * dt


def spilled(plant: Plant, held: float, temperature: float, *, gone: float, dt: float) -> float:
    """Liquid (kg) that leaves a vessel at the end of a step because it stands above the set pressure.

    Hot liquid that has just arrived swells in the vessel; the step could not know. ``held`` kg are in the vessel at
    its new temperature (K), ``gone`` kg have left in the step already. The pressure falls to the set pressure only;
    the valve then stands open, and the next step, in which the steam expands, takes it down to where it shuts.
    """
    valve = plant.loop.relief
    if valve is None:
        return 0.0
    density = plant.tables.density(temperature)
    pressure = plant.vessel_pressure(held / density, temperature)
    if pressure <= valve.set_pressure:
        return 0.0
    needed = held - plant.vessel_liquid(valve.set_pressure, temperature) * density
    able = max(0.0, passed(valve, plant.loop.atmosphere, density, pressure, dt) - gone)
    return max(0.0, min(needed, able))
