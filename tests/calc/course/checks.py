"""What must hold at the end of every step of every march."""


def check_step(going) -> None:
    """Mass, glycol, volumes and signs at the end of a step."""
    plant, state = going.plant, going.state
    loop, grid = plant.loop, plant.grid
    assert abs(state.mass() / plant.mass - 1) < 1e-12
    assert 0 <= state.glycol <= 0.98 * state.left + 1e-12
    assert 0 <= state.volume <= (loop.collector_content + grid.content_to[-1]) * (1 + 1e-12)
    assert 0 <= state.place <= grid.cells
    assert state.left >= 0
    assert state.vapour >= 0
    assert state.masses[-1] >= -0.015 * plant.tables.density(293.15) * loop.vessel.nominal_volume
    assert all(mass >= 0 for mass in state.masses[:-1])
    guarded = loop.relief is not None and "start-above-set" not in going.chronicle.flags
    if guarded and state.vessel_pressure > 1.1 * loop.relief.set_pressure:
        # Only a valve that stands open and passes all it can may see more than a tenth above its set pressure.
        assert state.valve_open
        assert "valve-overloaded" in going.chronicle.flags
