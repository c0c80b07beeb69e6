"""The balance of one implicit step as a function of one unknown: the steam volume at its end.

``Balance.residual`` is the vapour that the volume holds less the vapour that the step supplies. All the rest
of the step follows explicitly and can be read off after the last evaluation. No root finding, no valve, no
flow of liquid.
"""

from bisect import bisect_right

from loopslack.calc.course.collector import Collector
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State
from loopslack.physics.statics import GRAVITY

_LEAST_PRESSURE = 1000.0  # Pa


class Balance:
    """One step of a state.

    ``highest`` (m3) is collectors and pipes full of steam. ``discharge`` (kg) and ``held_pressure`` (Pa) are
    set by the relief valve. After ``residual``: ``place`` of the front, ``geometric`` liquid in the
    collectors before evaporation (kg), pressures (Pa), ``steam`` and ``wall`` temperature (K), ``dry_wall``
    the wall's without condensation, ``vapour_density``, ``latent`` heat, ``condensed`` (kg), ``steam_loss``
    (W/K and W) of the zone, and ``missing`` (kg), the residual itself.
    """

    __slots__ = (
        "collector",
        "collector_pressure",
        "column",
        "condensed",
        "discharge",
        "dry_wall",
        "dt",
        "free",
        "geometric",
        "heat_to",
        "held_pressure",
        "highest",
        "latent",
        "mass_to",
        "missing",
        "place",
        "plant",
        "state",
        "steam",
        "steam_loss",
        "tank_masses",
        "vapour_density",
        "vessel_density",
        "vessel_mass",
        "vessel_pressure",
        "volume",
        "wall",
        "wall_heat",
    )

    def __init__(self, plant: Plant, state: State, dt: float, irradiance: float, ambient: float) -> None:
        self.plant, self.state, self.dt = plant, state, dt
        self.collector = Collector(plant, state, dt, irradiance, ambient)
        self.discharge, self.held_pressure = 0.0, None
        grid, density, temperatures = plant.grid, plant.tables.density, state.temperatures
        mass = heat = 0.0
        self.mass_to, self.heat_to = [0.0], [0.0]
        for content, capacity, at in zip(grid.content, grid.capacity, temperatures, strict=False):
            mass += content * density(at)
            heat += capacity * at
            self.mass_to.append(mass)
            self.heat_to.append(heat)
        self.highest = self.collector.gap + grid.content_to[-1]
        self.column = mass / grid.content_to[-1] * GRAVITY
        self.tank_masses = [
            tank.content * density(at)
            for tank, at in zip(plant.loop.reservoirs, temperatures[grid.cells :], strict=False)
        ]
        self.vessel_density = density(temperatures[-1])
        # Mass that collectors, steam space and vessel share while the whole pipe is full of liquid.
        self.free = plant.mass - state.discharged - sum(self.tank_masses) - mass
        self.wall_heat = grid.at(self.heat_to, state.place)

    held_pressure: float | None

    def residual(self, volume: float) -> float:
        """Vapour the volume (m3) holds at its pressure less the vapour the step supplies, kg."""
        plant, state, collector, grid = self.plant, self.state, self.collector, self.plant.grid
        self.volume = volume
        if volume <= collector.gap:
            place = 0.0
            geometric = (plant.loop.collector_content - volume) * collector.density
        else:
            place = grid.place(volume - collector.gap)
            geometric = collector.hold
        self.place, self.geometric = place, geometric
        i = min(int(place), grid.cells - 1)
        share = place - i
        filled = self.mass_to[i] + share * (self.mass_to[i + 1] - self.mass_to[i])
        pressure = self.held_pressure
        if pressure is None:
            # Vapour counts with the density of the step's start: it is a thousandth of the vessel's content.
            vapour = state.vapour_density * volume if state.vapour > 0.0 else 0.0
            self.vessel_mass = self.free - self.discharge - geometric + filled - vapour
            pressure = plant.vessel_pressure(self.vessel_mass / self.vessel_density, state.temperatures[-1])
        else:
            self.vessel_mass = plant.vessel_liquid(pressure, state.temperatures[-1]) * self.vessel_density
        self.vessel_pressure = pressure
        height = grid.height_at[i] + share * (grid.height_at[i + 1] - grid.height_at[i])
        self.collector_pressure = pressure = max(pressure - self.column * height, _LEAST_PRESSURE)
        self.steam, self.vapour_density, self.latent, reference = plant.tables.saturation(pressure)
        collector.boil(geometric, self.steam, pressure, self.latent, reference)
        self._condense(i, share)
        self.missing = self.vapour_density * volume - (state.vapour + collector.evaporated - self.condensed)
        return self.missing

    def _condense(self, i: int, share: float) -> None:
        """Wall of the steam zone, of one temperature: warmed to the steam's by condensing, or only cooling.

        What the old zone keeps and the cold wall newly covered bring their heat along.
        """
        grid, place, dt = self.plant.grid, self.place, self.dt
        conductance = grid.conductance_to[i] + share * (grid.conductance_to[i + 1] - grid.conductance_to[i])
        warmth = grid.warmth_to[i] + share * (grid.warmth_to[i + 1] - grid.warmth_to[i])
        capacity = grid.capacity_to[i] + share * (grid.capacity_to[i + 1] - grid.capacity_to[i])
        self.steam_loss = conductance, warmth
        held = grid.at(grid.capacity_to, min(place, self.state.place)) * self.state.wall
        if place > self.state.place:
            held += self.heat_to[i] + share * (self.heat_to[i + 1] - self.heat_to[i]) - self.wall_heat
        inert = capacity + dt * conductance
        held += dt * warmth
        self.condensed = 0.0
        self.wall = self.dry_wall = held / inert if inert > 0.0 else self.steam
        if self.wall < self.steam:
            self.condensed = (inert * self.steam - held) / self.latent
            self.wall = self.steam

    def least_volume(self) -> float:
        """Smallest volume (m3) that the liquid left does not fill: 0 until much has been discharged."""
        if self.held_pressure is not None:
            return 0.0
        plant, collector = self.plant, self.collector
        full = plant.loop.collector_content * collector.density
        least = plant.least_vessel_liquid(self.state.temperatures[-1]) * self.vessel_density
        need = full - self.free + self.discharge + least
        if need <= 0.0:
            return 0.0
        if need <= collector.gap * collector.density:
            return need / collector.density
        need = min(need - collector.gap * collector.density, self.mass_to[-1] * 0.9999)
        i = min(bisect_right(self.mass_to, need) - 1, plant.grid.cells - 1)
        share = (need - self.mass_to[i]) / (self.mass_to[i + 1] - self.mass_to[i])
        return collector.gap + plant.grid.at(plant.grid.content_to, i + share)
