"""The books of a day: what the loop holds, and the energy that crossed its boundary. They steer nothing."""

from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State
from loopslack.calc.course.step import Step


class Books:
    """Energies in J since the start.

    ``sun`` absorbed, losses, ``discharged`` with liquid, and what steam brought to the station: taken by a
    cooler there (``cooled``) or ``unspent``.
    """

    __slots__ = ("collector", "cooled", "discharged", "pipe", "start", "sun", "tank", "unspent", "worst_mass")

    def __init__(self, plant: Plant, state: State) -> None:
        self.sun = self.collector = self.pipe = self.tank = self.discharged = 0.0
        self.cooled = self.unspent = self.worst_mass = 0.0
        self.start = stored(plant, state)

    def step(self, plant: Plant, taken: Step) -> None:
        """Book sun, collector loss, loss of the steam zone and steam at the station."""
        loop, balance = plant.loop, taken.balance
        collector, dt = balance.collector, balance.dt
        rise = taken.absorber - collector.ambient
        self.sun += loop.aperture * collector.sun * dt
        self.collector += loop.aperture * dt * rise * (loop.linear_loss + loop.quadratic_loss * abs(rise))
        conductance, warmth = balance.steam_loss
        self.pipe += dt * (conductance * taken.wall - warmth)
        surplus = taken.surplus * balance.latent
        cooled = min(surplus, loop.station_loss * dt)
        self.cooled += cooled
        self.unspent += surplus - cooled

    def liquid(
        self, plant: Plant, temperatures: list[float], place: float, dt: float, discharge: float
    ) -> None:
        """Book the losses of liquid in pipes and tanks, and the heat that left through the valve."""
        grid = plant.grid
        for j in range(min(int(place), grid.cells), grid.cells):
            wet = min(1.0, j + 1 - place)
            self.pipe += dt * wet * (grid.conductance[j] * temperatures[j] - grid.warmth[j])
        for tank, at in zip(plant.tanks, temperatures[grid.cells :], strict=True):
            self.tank += dt * tank.conductance * (at - tank.ambient)
        self.discharged += discharge * plant.tables.heat_capacity * temperatures[-1]

    def sums(self) -> dict[str, float]:
        """Energies (J) by name."""
        return {
            "sun": self.sun,
            "collector": self.collector,
            "pipe": self.pipe,
            "tank": self.tank,
            "discharged": self.discharged,
            "cooled": self.cooled,
            "unspent": self.unspent,
        }

    def residual(self, plant: Plant, state: State) -> float:
        """Energy unaccounted for as a share of the sun absorbed."""
        gone = self.collector + self.pipe + self.tank + self.discharged + self.cooled + self.unspent
        return (self.sun - gone - (stored(plant, state) - self.start)) / max(self.sun, 1.0)


def stored(plant: Plant, state: State) -> float:
    """Heat the loop holds, J above 0 K, of one heat capacity throughout; vapour saturated."""
    loop, grid, cp = plant.loop, plant.grid, plant.tables.heat_capacity
    heat = loop.aperture * plant.bare_capacity * state.absorber + state.left * cp * state.liquid
    heat += state.vapour * (cp * state.steam + state.latent)
    heat += grid.at(grid.capacity_to, state.place) * state.wall
    for j, capacity in enumerate(grid.capacity):
        wet = min(1.0, max(0.0, j + 1 - state.place))
        heat += (state.masses[j] * cp + capacity * wet) * state.temperatures[j]
    for j, tank in enumerate(plant.tanks, grid.cells):
        heat += (state.masses[j] * cp + tank.capacity) * state.temperatures[j]
    return heat
