"""What the loop is like at one instant, and how it starts. Only ``transport`` changes it."""

from loopslack.calc.course.plant import Plant

_MIDDLE_BOILING = 423.15  # K; where the glycol's vapour pressure is taken before anything has boiled


class State:
    """One instant of a loop. Temperatures in K, masses in kg, volumes in m3, pressures in Pa.

    ``absorber`` and ``liquid`` are temperatures, ``left`` the liquid in the collectors and ``glycol`` the
    glycol in it; ``volume`` of steam in collectors and pipes, ``place`` of its front, ``vapour`` its mass,
    ``wall`` the temperature of the pipe it fills, ``boiling`` that of the liquid left. ``temperatures`` and
    ``masses`` run over the cells and then the tanks, the vessel last.
    """

    __slots__ = (
        "absorber",
        "boiling",
        "collector_pressure",
        "discharged",
        "glycol",
        "latent",
        "left",
        "liquid",
        "masses",
        "place",
        "steam",
        "steam_power",
        "temperatures",
        "time",
        "valve_open",
        "vapour",
        "vapour_density",
        "vessel_pressure",
        "volume",
        "wall",
    )

    def __init__(self, plant: Plant, time: float, ambient: float) -> None:
        loop, grid, tables, start = plant.loop, plant.grid, plant.tables, plant.loop.start
        self.time = time
        self.absorber = self.liquid = ambient if start.collectors is None else start.collectors
        self.temperatures = [
            (warmth / conductance if start.pipes is None else start.pipes)
            for warmth, conductance in zip(grid.warmth, grid.conductance, strict=True)
        ]
        self.temperatures += [
            (tank.ambient if start.station is None else start.station) for tank in loop.reservoirs
        ]
        self.temperatures.append(loop.vessel.body.ambient if start.vessel is None else start.vessel)
        contents = grid.content + [tank.content for tank in loop.reservoirs]
        self.left = loop.collector_content * tables.density(self.liquid)
        self.glycol = self.left * tables.strength
        self.masses = [
            content * tables.density(at) for content, at in zip(contents, self.temperatures, strict=False)
        ]
        self.masses.append(plant.mass - self.left - sum(self.masses))
        self.volume = self.place = self.vapour = self.discharged = self.steam_power = 0.0
        self.valve_open = False
        self.wall = self.temperatures[0]
        self.boiling = _MIDDLE_BOILING
        self.vessel_pressure = plant.vessel_pressure(self.vessel_liquid(plant), self.temperatures[-1])
        self.collector_pressure = self.vessel_pressure - plant.column(self.temperatures)
        self.steam, self.vapour_density, self.latent, _ = tables.saturation(self.collector_pressure)

    @property
    def strength(self) -> float:
        """Mass fraction of glycol in the liquid left in the collectors; 0 when they are dry."""
        return self.glycol / self.left if self.left > 0.0 else 0.0

    def vessel_liquid(self, plant: Plant) -> float:
        """Liquid in the vessel, m3; a little below zero when the vessel is empty."""
        return self.masses[-1] / plant.tables.density(self.temperatures[-1])

    def mass(self) -> float:
        """All liquid and vapour, and what the valve let out, kg."""
        return self.left + self.vapour + sum(self.masses) + self.discharged
