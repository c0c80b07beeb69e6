"""Every solution is put back into the equations, summed segment by segment, the fronts slice by slice."""

from __future__ import annotations

from math import pi

import pytest

from .case import GRAVITY, Branch, Case, Segment
from .loops import WORKED_LOOPS, random_case
from .stagnation import Stagnation, stagnation
from .states import liquid_of

SLICES = 300


def _balanced() -> list[tuple[str, Case, Stagnation]]:
    named = list(WORKED_LOOPS.items()) + [(f"seed {seed}", random_case(seed)) for seed in range(100)]
    solved = [(name, case, stagnation(case)) for name, case in named]
    return [s for s in solved if s[2].vessel_pressure is not None and s[2].regime_if_shut != "beyond-range"]


BALANCED = _balanced()
each_balance = pytest.mark.parametrize(
    ("case", "found"), [s[1:] for s in BALANCED], ids=[s[0] for s in BALANCED]
)


def _heights(case: Case, branch: Branch) -> list[tuple[Segment, float, float]]:
    """Segment, height of its start and of its end, worked out apart from the steam path's own reading."""
    ends = [segment.end_height for segment in branch.segments]
    if ends[-1] is None:
        ends[-1] = case.station_height
    rows, height, index = [], case.space_height(branch.space), 0
    while index < len(ends):
        stop = next(k for k in range(index, len(ends)) if ends[k] is not None)
        run = branch.segments[index : stop + 1]
        slope = ((ends[stop] or 0.0) - height) / sum(segment.length for segment in run)
        for segment in run:
            rows.append((segment, height, height + slope * segment.length))
            height += slope * segment.length
        index = stop + 1
    return rows


def _slices(case: Case, branch: Branch) -> list[tuple[float, float, float, Segment]]:
    """Length to the middle of the slice, its thickness, its height, its segment."""
    rows, start = [], 0.0
    for segment, above, below in _heights(case, branch):
        thickness = segment.length / SLICES
        for k in range(SLICES):
            share = (k + 0.5) / SLICES
            rows.append((start + share * segment.length, thickness, above + share * (below - above), segment))
        start += segment.length
    return rows


def _branches(case: Case, found: Stagnation, space: int) -> list[tuple[Branch, float]]:
    return [(b, r) for b, r in zip(case.branches, found.reaches, strict=True) if b.space == space]


@each_balance
def test_each_front_has_the_pressure_of_the_vessel_less_the_column_and_boils_there(
    case: Case, found: Stagnation
) -> None:
    liquid = liquid_of(case)
    assert found.vessel_pressure is not None
    for place in range(len(case.spaces)):
        column = liquid.density(case.hot_liquid) * GRAVITY * found.front_elevations[place]
        assert found.front_pressures[place] == pytest.approx(found.vessel_pressure - column, rel=1e-12)
        boiling = liquid.boiling_temperature(found.front_pressures[place])
        assert found.boiling_temperatures[place] == pytest.approx(boiling, abs=1e-9)


@each_balance
def test_vessel_liquid_and_pressure_obey_boyle(case: Case, found: Stagnation) -> None:
    gas_at_start = case.precharge * case.vessel / case.precharge_temperature
    assert found.vessel_pressure is not None
    gas = found.vessel_pressure * (case.vessel - found.vessel_liquid) / found.vessel_temperature
    assert gas == pytest.approx(gas_at_start, rel=1e-12)


@each_balance
def test_steam_power_is_spent_in_the_pipes_or_reported_as_unspent(case: Case, found: Stagnation) -> None:
    unspent = 0.0
    for place, space in enumerate(case.spaces):
        boiling = found.boiling_temperatures[place]
        power = sum(
            g.area * q for g, q in zip(case.groups, found.steam_powers, strict=True) if g.space == space
        )
        lost, full = 0.0, True
        for branch, reach in _branches(case, found, space):
            start = 0.0
            for segment in branch.segments:
                part = min(max(reach - start, 0.0), segment.length)
                lost += segment.loss_coefficient * (boiling - segment.ambient) * part
                start += segment.length
            full = full and (not branch.open or reach >= branch.length * (1.0 - 1e-9))
        left = power - lost
        assert left >= -1e-6 * max(1.0, power)
        assert full or left <= 1e-6 * max(1.0, power)
        unspent += max(0.0, left)
    assert found.unspent == pytest.approx(unspent, abs=1e-5 * max(1.0, unspent))


@each_balance
def test_each_group_is_in_the_regime_its_boiling_temperature_says(case: Case, found: Stagnation) -> None:
    assert sum(regime == "pinned" for regime in found.group_regimes) <= 1
    rows = zip(
        case.groups, found.group_regimes, found.stagnation_temperatures, found.steam_powers, strict=True
    )
    for group, regime, limit, power in rows:
        boiling = found.boiling_temperatures[case.spaces.index(group.space)]
        if regime == "emptied":
            share = group.loss(boiling, case.ambient) / group.loss(limit, case.ambient)
            bound = group.eta0 * case.sun * (1.0 - share)
            assert boiling < limit + 1e-9
            assert power == pytest.approx(min(group.class_power, bound), abs=1e-6)
        else:
            assert power == 0.0
            assert boiling >= limit - 1e-6
        if regime == "pinned":
            assert boiling == pytest.approx(limit, abs=1e-6)


@each_balance
def test_the_mass_of_the_loop_is_all_there(case: Case, found: Stagnation) -> None:
    liquid = liquid_of(case)
    hot = liquid.density(case.hot_liquid)
    filled_mass = liquid.density(case.fill_temperature) * (case.content + case.liquid_at_filling)
    held = hot * (case.station_content + case.vessel_line_content + case.cooling_vessel_content)
    held += liquid.density(found.vessel_temperature) * (found.vessel_liquid - case.allowance * case.content)
    steam_volume = 0.0
    for place, space in enumerate(case.spaces):
        steam = liquid.steam_density(found.boiling_temperatures[place])
        for branch, reach in _branches(case, found, space):
            in_pipe, start = 0.0, 0.0
            for segment in branch.segments:
                in_pipe += pi / 4.0 * segment.bore**2 * min(max(reach - start, 0.0), segment.length)
                start += segment.length
            steam_volume += in_pipe
            held += in_pipe * steam + (branch.content - in_pipe) * hot
    rows = sorted(zip(found.group_regimes, case.groups, found.stagnation_temperatures, strict=True), key=str)
    for regime, group, limit in sorted(rows, key=lambda row: row[0] == "pinned"):
        steam = liquid.steam_density(found.boiling_temperatures[case.spaces.index(group.space)])
        emptied = {"emptied": group.content, "liquid": 0.0, "pinned": found.steam_volume - steam_volume}[
            regime
        ]
        assert -1e-12 <= emptied <= group.content * (1.0 + 1e-9)
        steam_volume += emptied
        held += emptied * steam
        if emptied < group.content:
            held += (group.content - emptied) * liquid.density(limit)
    assert steam_volume == pytest.approx(found.steam_volume, rel=1e-9, abs=1e-12)
    assert held == pytest.approx(filled_mass, rel=1e-9)
    assert found.mass_error < 1e-9


@each_balance
def test_everything_a_front_has_passed_lies_above_it_or_behind_something_that_does(
    case: Case, found: Stagnation
) -> None:
    """Lowest height met so far: no filled slice may be lower than the front, no unfilled one higher.

    Where the front stands in a crest or on a rising pipe its own height counts for pressure, so only the
    first half holds for the branches that stand there.
    """
    for place, space in enumerate(case.spaces):
        front = found.front_elevations[place]
        for branch, reach in _branches(case, found, space):
            if not branch.open:
                assert reach == 0.0
                continue
            slices = _slices(case, branch)
            coarse = max(abs(below - above) for _, above, below in _heights(case, branch)) / SLICES
            lowest = case.space_height(space)
            for middle, thickness, height, _ in slices:
                lowest = min(lowest, height)
                if middle + thickness < reach:
                    assert lowest >= min(front, case.space_height(space)) - 2.0 * coarse - 1e-9
                elif middle - thickness > reach:
                    assert lowest <= front + 2.0 * coarse + 1e-9
