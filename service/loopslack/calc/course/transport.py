"""Accept a step: liquid flows where continuity sends it and carries its heat along, by one tridiagonal solve.

Masses of the cells follow from the front and the old densities, flows from the masses, temperatures from an
implicit upwind balance of liquid and wall together. Mass is kept by construction; glycol too, since what is
outside the collectors is the difference. Nothing decides here whether the step was any good.
"""

from loopslack.calc.course.books import Books
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.relief import spilled
from loopslack.calc.course.state import State
from loopslack.calc.course.step import Step

_STRONGEST = 0.98  # mass fraction of glycol at which the residue stays a liquid
_NOTHING = 1e-6  # J/K; a cell without liquid, wall or flow


def accept(plant: Plant, state: State, taken: Step, books: Books) -> None:
    """Change the state to the end of a step and book what crossed the boundary."""
    balance, dt = taken.balance, taken.balance.dt
    place, cells = balance.place, plant.grid.cells
    steaming = taken.ending != "no-steam"
    refluxed = plant.loop.emptying.reflux * taken.condensed
    poured = taken.condensed - refluxed + taken.surplus
    pushed = state.left - balance.geometric + (0.0 if steaming else state.vapour)
    left = balance.geometric - (taken.evaporated if steaming else 0.0) + refluxed
    masses, flows = _flows(plant, state, taken, poured + pushed)
    masses.append(state.masses[-1] + flows[-1] - balance.discharge)
    warmed = _temperatures(plant, state, taken, masses, flows, poured=poured, pushed=pushed)
    spill = spilled(plant, masses[-1], warmed[-1], gone=balance.discharge, dt=dt)
    masses[-1] -= spill
    discharged = balance.discharge + spill
    books.liquid(plant, warmed, place, dt, discharged)
    books.step(plant, taken)
    for j in range(min(int(place), cells)):
        warmed[j] = taken.wall
    liquid = taken.liquid
    if left > 0.0:
        # Condensate that ran back, and the difference between the temperature at which liquid drawn back was
        # taken to come in the balance and the one at which it left its cell.
        liquid += refluxed * (balance.steam - liquid) / left
        if pushed < 0.0:
            liquid -= pushed * (warmed[0] - state.temperatures[0]) / left
    state.glycol = _glycol(plant, state, taken, pushed, left)
    vapour = state.vapour + taken.evaporated - taken.condensed - taken.surplus
    state.vapour = max(0.0, vapour) if steaming else 0.0
    state.left, state.volume, state.place = left, balance.volume, place
    state.masses, state.temperatures = masses, warmed
    state.discharged += discharged
    state.absorber, state.liquid = taken.absorber, liquid
    state.wall = taken.wall if place > 0.0 else warmed[0]
    state.steam, state.latent, state.vapour_density = balance.steam, balance.latent, balance.vapour_density
    state.collector_pressure, state.boiling = balance.collector_pressure, balance.collector.boiling
    state.vessel_pressure = plant.vessel_pressure(state.vessel_liquid(plant), warmed[-1])
    state.valve_open, state.steam_power = taken.valve_open or spill > 0.0, taken.steam_power
    state.time += dt


def _glycol(plant: Plant, state: State, taken: Step, pushed: float, left: float) -> float:
    """Glycol left in the collectors: liquid leaves at their strength, comes back at that of all the rest."""
    collector = taken.balance.collector
    if not collector.follows_strength:
        return left * plant.tables.strength
    strength = collector.outside_strength if pushed < 0.0 else min(_STRONGEST, state.strength)
    return max(0.0, min(state.glycol - pushed * strength, _STRONGEST * left))


def _flows(plant: Plant, state: State, taken: Step, source: float) -> tuple[list[float], list[float]]:
    """Masses of all parts but the vessel, and the flow (kg) into each part from the one before it."""
    balance, grid = taken.balance, plant.grid
    front = min(int(balance.place), grid.cells - 1)
    mass_to = balance.mass_to
    masses = [0.0] * front
    masses.append((mass_to[front + 1] - mass_to[front]) * max(0.0, front + 1 - balance.place))
    masses += [mass_to[j + 1] - mass_to[j] for j in range(front + 1, grid.cells)]
    masses += balance.tank_masses
    flows = [0.0]
    for j, mass in enumerate(masses):
        flows.append(flows[-1] + state.masses[j] - mass + (source if j == front else 0.0))
    return masses, flows


def _temperatures(
    plant: Plant,
    state: State,
    taken: Step,
    masses: list[float],
    flows: list[float],
    *,
    poured: float,
    pushed: float,
) -> list[float]:
    """Temperatures of all parts, K: implicit, upwind, eliminated from the collectors to the vessel."""
    balance, cp = taken.balance, plant.tables.heat_capacity
    inert, held = _held(plant, state, taken, masses)
    front = min(int(balance.place), plant.grid.cells - 1)
    held[front] += cp * (poured * balance.steam + max(0.0, pushed) * taken.liquid)
    # Liquid drawn back into the collectors leaves at the new temperature of the first cell, discharge at the
    # vessel's.
    inert[0] += cp * max(0.0, -pushed)
    inert[-1] += cp * balance.discharge
    diagonal, right, upper = [], [], []
    center, value, above = 1.0, 0.0, 0.0
    for j, incoming in enumerate(flows):
        lower = cp * incoming if incoming > 0.0 else 0.0
        outgoing = cp * flows[j + 1] if j < len(masses) - 1 else 0.0
        share = lower / center
        value = held[j] + share * value
        center = inert[j] + max(0.0, outgoing) + max(0.0, -cp * incoming) - share * above
        above = max(0.0, -outgoing)
        if center < _NOTHING:
            center, value, above = 1.0, taken.wall, 0.0
        diagonal.append(center)
        right.append(value)
        upper.append(above)
    found = [0.0] * len(masses)
    behind = 0.0
    for j in range(len(masses) - 1, -1, -1):
        behind = found[j] = (right[j] + upper[j] * behind) / diagonal[j]
    return found


def _held(plant: Plant, state: State, taken: Step, masses: list[float]) -> tuple[list[float], list[float]]:
    """Heat capacity with the loss of the step (J/K) and heat held with the ambient's gain (J), per part."""
    grid, cp, dt, place = plant.grid, plant.tables.heat_capacity, taken.balance.dt, taken.balance.place
    inert, held = [], []
    for j, capacity in enumerate(grid.capacity):
        wet = min(1.0, max(0.0, j + 1 - place))
        was_wet = min(1.0, max(0.0, j + 1 - state.place))
        stayed = min(wet, was_wet)
        loss = dt * wet
        inert.append(masses[j] * cp + capacity * wet + loss * grid.conductance[j])
        heat = (state.masses[j] * cp + capacity * stayed) * state.temperatures[j]
        held.append(heat + capacity * (wet - stayed) * state.wall + loss * grid.warmth[j])
    for j, tank in enumerate(plant.tanks, grid.cells):
        inert.append(masses[j] * cp + tank.capacity + dt * tank.conductance)
        heat = (state.masses[j] * cp + tank.capacity) * state.temperatures[j]
        held.append(heat + dt * tank.conductance * tank.ambient)
    return inert, held
