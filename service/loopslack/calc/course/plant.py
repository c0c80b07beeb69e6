"""A lumped loop made ready for marching: filled, with its constants worked out, and its state at the start.

The vessel's pressure law stands here because it must be continued beyond an empty and a full vessel. No
balance and no stepping.
"""

from math import exp, log

from msgspec.structs import replace

from loopslack.calc.course.grid import Grid
from loopslack.calc.course.lumped import LumpedLoop
from loopslack.calc.course.properties import tables_of
from loopslack.physics.statics import GRAVITY

# Own assumptions: what the numerics need where the physics ends.
_LEAST_CAPACITY = 1500.0  # J/m2K of absorber and glass without liquid
_EMPTY_SHARE = 5e-4  # of the nominal volume: liquid missing that lets the pressure fall by a factor e
_LEAST_PRESSURE = 1000.0  # Pa
_STOP_PRESSURE = 60e5  # Pa; beyond, the membrane rests on the wall
_STOP_STIFFNESS = 1e9  # Pa per nominal volume


class Plant:
    """Constants of one loop; see ``LumpedLoop`` for what they come from.

    ``mass`` (kg) is what the loop was filled with, ``full`` (kg) what the collectors hold at 90 degC,
    ``residue`` (kg) what steam cannot push out, ``bare_capacity`` (J/m2K) the absorber's without liquid.
    """

    __slots__ = (
        "bare_capacity",
        "full",
        "gas_precharge",
        "grid",
        "loop",
        "mass",
        "residue",
        "tables",
        "tanks",
    )

    def __init__(self, loop: LumpedLoop, cells: int) -> None:
        tables = self.tables = tables_of(loop.fluid)
        self.loop = loop
        self.grid = Grid(loop.pipe, cells)
        vessel = loop.vessel
        content = loop.collector_content + loop.pipe.content[-1] + sum(t.content for t in loop.reservoirs)
        self.mass = tables.density(vessel.fill_temperature) * (content + vessel.filled)
        self.full = loop.collector_content * tables.density(363.15)
        self.bare_capacity = max(
            _LEAST_CAPACITY, loop.collector_capacity - self.full * tables.heat_capacity / loop.aperture
        )
        self.residue = loop.emptying.residual_share * self.full
        constant = vessel.gas_temperature
        self.gas_precharge = vessel.precharge / vessel.precharge_temperature * (constant or 1.0)
        # The law of an empty vessel runs a little below nothing; the shell is made heavier by as much liquid, some
        # thousandths of a full vessel, so that its heat stays positive.
        least = self.vessel_liquid(_LEAST_PRESSURE, vessel.fill_temperature)
        spare = -1.5 * least * tables.density(vessel.fill_temperature) * tables.heat_capacity
        self.tanks = (*loop.reservoirs, replace(vessel.body, capacity=vessel.body.capacity + spare))

    def vessel_pressure(self, liquid: float, temperature: float) -> float:
        """Pressure (Pa) of the vessel with so much liquid (m3), its liquid at a temperature (K).

        Rises for every argument: an empty vessel loses its pressure within a twentieth of a per cent of its
        volume, a full one is a rigid stop. Both continuations exist so that a root exists; both are flagged
        by the march.
        """
        volume = self.loop.vessel.nominal_volume
        precharge = self._precharge(temperature)
        if liquid <= 0.0:
            return max(precharge * exp(max(liquid / (_EMPTY_SHARE * volume), -60.0)), _LEAST_PRESSURE)
        stop = max(_STOP_PRESSURE, 2.0 * precharge)
        highest = volume * (1.0 - precharge / stop)
        if liquid < highest:
            return precharge * volume / (volume - liquid)
        return stop + (liquid - highest) / volume * _STOP_STIFFNESS

    def rests(self, pressure: float) -> bool:
        """Whether a pressure (Pa) is so high that the membrane rests on the wall, where none is to be believed."""
        return pressure >= max(_STOP_PRESSURE, 2.0 * self.loop.vessel.precharge)

    def vessel_liquid(self, pressure: float, temperature: float) -> float:
        """Liquid (m3) in the vessel at a pressure (Pa): the inverse, a little below 0 for an empty vessel."""
        precharge, volume = self._precharge(temperature), self.loop.vessel.nominal_volume
        if pressure <= precharge:
            return _EMPTY_SHARE * volume * log(pressure / precharge)
        return volume * (1.0 - precharge / pressure)

    def least_vessel_liquid(self, temperature: float) -> float:
        """Liquid (m3, negative) at which the continued pressure law has reached its floor."""
        return self.vessel_liquid(_LEAST_PRESSURE, temperature)

    def column(self, temperatures: list[float], place: float = 0.0) -> float:
        """Pressure (Pa) of the liquid between a front and the vessel, of the pipe's mean density."""
        grid, density = self.grid, self.tables.density
        mass = sum(content * density(at) for content, at in zip(grid.content, temperatures, strict=False))
        return mass / grid.content_to[-1] * GRAVITY * grid.at(grid.height_at, place)

    def _precharge(self, temperature: float) -> float:
        return self.gas_precharge * (temperature if self.loop.vessel.gas_temperature is None else 1.0)
