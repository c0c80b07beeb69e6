"""The coupled balance of the lumped loop at rest: what the day must reach, and what it must stay below.

Written from the balance, not from the step: sun for ever, walls hot, the absorber giving all its bound (or a cap),
condensate back where it came from. Liquid left in the collectors, liquid outside and their temperatures are given.
"""

from typing import NamedTuple

from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State

GRAVITY = 9.80665


class Rest(NamedTuple):
    volume: float
    reach: float
    vessel_pressure: float


class Liquid(NamedTuple):
    """What is given: kg left in the collectors, their temperature, temperatures of cells and tanks, kg discharged."""

    left: float
    temperature: float
    temperatures: list[float]
    discharged: float


def liquid_of(state: State) -> Liquid:
    return Liquid(state.left, state.liquid, list(state.temperatures), state.discharged)


def at_rest(
    plant: Plant, liquid: Liquid, irradiance: float, ambient: float, cap: float | None = None
) -> Rest:
    loop, grid, tables = plant.loop, plant.grid, plant.tables
    temperatures = liquid.temperatures
    masses = [c * tables.density(t) for c, t in zip(grid.content, temperatures, strict=False)]
    column = sum(masses) / grid.content_to[-1] * GRAVITY
    tanks = sum(
        tank.content * tables.density(t)
        for tank, t in zip(loop.reservoirs, temperatures[grid.cells :], strict=False)
    )
    dense = tables.density(liquid.temperature)
    gap = loop.collector_content - liquid.left / dense

    def state(volume: float) -> tuple[float, float, float, float]:
        """Place of the front, vessel pressure, steam temperature, power spare (W) at a steam volume."""
        place = grid.place(volume - gap)
        covered = sum(m * min(1.0, max(0.0, place - j)) for j, m in enumerate(masses))
        kept = liquid.left if volume >= gap else (loop.collector_content - volume) * dense
        held = plant.mass - liquid.discharged - kept - (sum(masses) - covered) - tanks
        vapour = 0.0
        for _ in range(6):
            in_vessel = (held - vapour * volume) / tables.density(temperatures[-1])
            pressure = plant.vessel_pressure(in_vessel, temperatures[-1])
            top = max(pressure - column * grid.at(grid.height_at, place), 1000.0)
            steam, vapour, _latent, _reference = tables.saturation(top)
        rise = steam - ambient
        bound = loop.peak_efficiency * irradiance - rise * (
            loop.linear_loss + loop.quadratic_loss * abs(rise)
        )
        power = bound if cap is None else min(bound, cap)
        loss = grid.at(grid.conductance_to, place) * steam - grid.at(grid.warmth_to, place)
        return place, pressure, steam, power * loop.aperture - loss

    low, high = 0.0, gap + grid.content_to[-1]
    for _ in range(100):
        middle = 0.5 * (low + high)
        if state(middle)[3] > 0:
            low = middle
        else:
            high = middle
    place, pressure, _steam, _spare = state(low)
    return Rest(low, grid.at(grid.reach_at, place), pressure)
