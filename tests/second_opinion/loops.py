"""Random loops by seed, for comparing two solvers on many cases.

Lives here: `random_case`, `random_cases`; `WORKED_LOOPS` are the named ones of `worked_loops`. All figures
are own assumptions that span what is built, deliberately including loops nobody should build. Must not live
here: judgement.
"""

from __future__ import annotations

from collections.abc import Iterator
from random import Random
from typing import Literal

from .case import GRAVITY, Branch, Case, Group, Segment, atmosphere, celsius
from .path import SteamPath
from .states import liquid_of
from .worked_loops import WORKED_LOOPS

__all__ = ["WORKED_LOOPS", "any_open_pipe_rises", "displaced_volume", "random_case", "random_cases"]

BAR, LITRE, MILLIMETRE = 1e5, 1e-3, 1e-3
# outside diameter and wall, mm: usual copper and thin steel tubes
TUBES = (
    (15, 1.0),
    (18, 1.0),
    (22, 1.0),
    (28, 1.5),
    (35, 1.5),
    (42, 1.5),
    (54, 2.0),
    (76.1, 2.0),
    (88.9, 2.0),
    (108, 2.5),
)


def any_open_pipe_rises(case: Case) -> bool:
    """Whether several balances are possible, so that solvers may rightly differ in how they sweep them."""
    return any(SteamPath(case, space).rises for space in case.spaces)


def displaced_volume(case: Case) -> float:
    """Roughly what stagnation pushes out, m3: collectors, half the open pipes, a tenth of the rest."""
    open_pipes = sum(branch.content for branch in case.branches if branch.open)
    return case.collector_content + 0.5 * open_pipes + 0.1 * (case.content - case.collector_content)


def _group(random: Random, collectors: int, height: float, space: int, evacuated: bool) -> Group:
    area = collectors * random.uniform(1.8, 2.8)
    if evacuated:
        eta0, a1, a2 = random.uniform(0.60, 0.76), random.uniform(0.8, 1.8), random.uniform(0.003, 0.009)
        litres, classes = random.choice([(0.2, 0.5), (1.5, 3.0)]), (100.0, 150.0, 200.0)
    else:
        eta0, a1, a2 = random.uniform(0.72, 0.83), random.uniform(3.0, 4.6), random.uniform(0.008, 0.018)
        litres, classes = (0.4, 1.0), (50.0, 80.0, 120.0)
    group = Group(
        area=area,
        eta0=eta0,
        a1=a1,
        a2=a2,
        class_power=random.choice(classes),
        content=area * random.uniform(*litres) * LITRE,
        height=height,
        space=space,
    )
    if random.random() < 0.15:
        computed = group.stagnation(1000.0, celsius(30.0), 0.0)
        return Group(**{**vars(group), "measured_stagnation": computed + random.uniform(-10.0, 20.0)})
    return group


def _tube(random: Random, area: float) -> tuple[float, float]:
    """Bore and outer diameter that suit a collector area, one size off either way."""
    fitting = next((i for i, (outer, _) in enumerate(TUBES) if outer >= 9.0 * area**0.38), len(TUBES) - 1)
    outer, wall = TUBES[min(max(fitting + random.choice((-1, 0, 0, 1)), 0), len(TUBES) - 1)]
    return (outer - 2.0 * wall) * MILLIMETRE, outer * MILLIMETRE


def _heights(random: Random, start: float, end: float, pieces: int) -> list[float | None]:
    """End heights: mostly none, else a falling profile, sometimes with a level stretch or a crest."""
    if pieces == 1 or random.random() < 0.5 or start <= end:
        return [None] * pieces
    heights: list[float | None] = [
        *sorted((random.uniform(end, start) for _ in range(pieces - 1)), reverse=True),
        end,
    ]
    kind = random.random()
    if kind < 0.25:
        heights[0] = start
    elif kind < 0.45:
        heights[0] = start + random.uniform(0.2, 2.0)
    return heights


def _branch(
    random: Random, role: Literal["flow", "return"], space: int, area: float, start: float, end: float
) -> Branch:
    bore, outer = _tube(random, area)
    pieces = random.choice((1, 1, 2, 3))
    length = random.uniform(3.0, 120.0) if random.random() < 0.7 else random.uniform(3.0, 30.0)
    cuts = [random.uniform(0.5, 1.5) for _ in range(pieces)]
    segments = []
    for share, height in zip(cuts, _heights(random, start, end, pieces), strict=True):
        outdoor = random.random() < 0.4
        segments.append(
            Segment(
                length=length * share / sum(cuts),
                bore=bore,
                outer=outer,
                insulation=0.0 if random.random() < 0.12 else random.uniform(0.009, 0.05),
                conductivity=random.uniform(0.035, 0.055),
                film=random.choice((8.0, 10.0, 12.0)),
                ambient=celsius(random.uniform(5.0, 40.0) if outdoor else random.uniform(15.0, 30.0)),
                end_height=height,
                outdoor=outdoor,
            )
        )
    return Branch(segments=segments, role=role, space=space, open=random.random() < 0.85)


def _roles(random: Random, spaces: int) -> list[tuple[int, Literal["flow", "return"]]]:
    """One to four branches, at least one for each steam space."""
    count = random.choice((1, 2, 2, 2, 3, 4))
    places: list[tuple[int, Literal["flow", "return"]]] = []
    for index in range(max(count, spaces)):
        role: Literal["flow", "return"] = "flow" if (index // spaces) % 2 == 0 else "return"
        places.append((index % spaces, role))
    return places


def random_case(seed: int) -> Case:
    """The loop of a seed. Always filled above its precharge, always with a relief valve."""
    random = Random(seed)  # noqa: S311 - loops, not secrets
    altitude = random.choice((0.0, 0.0, random.uniform(0.0, 2500.0)))
    air = atmosphere(altitude)
    spaces = random.choice((1, 1, 1, 2))
    head = random.uniform(2.0, 40.0) if random.random() < 0.85 else random.uniform(-5.0, 2.0)
    heights = [head, max(1.0, head - random.uniform(0.0, 6.0)) if head > 2.0 else head]
    station = random.choice((0.0, 0.0, random.uniform(-1.0, 1.0)))
    rising = head <= station
    if rising:  # open pipes that rise away from the collectors are told for one steam space only
        spaces = 1
    collectors = round(800 ** random.random())
    counts = [random.choice((1, 1, 2, 3))] if spaces == 1 else random.choice(([1, 1], [2, 1]))
    groups = []
    for space, count in enumerate(counts):
        for _ in range(count):
            number = max(1, round(collectors / sum(counts) * random.uniform(0.6, 1.4)))
            groups.append(_group(random, number, heights[space], space, random.random() < 0.35))
    branches = []
    for space, role in _roles(random, spaces):
        area = sum(group.area for group in groups if group.space == space)
        branches.append(_branch(random, role, space, area, heights[space], station))
    if len(groups) > 1 and spaces > 1:
        branches = [_without_crest(branch, heights[branch.space]) for branch in branches]
    return _conditioned(random, groups, branches, head, station, altitude, air)


def _without_crest(branch: Branch, start: float) -> Branch:
    segments = [
        Segment(**{**vars(s), "end_height": None if s.end_height is None else min(s.end_height, start)})
        for s in branch.segments
    ]
    return Branch(segments=segments, role=branch.role, space=branch.space, open=branch.open)


def _conditioned(
    random: Random,
    groups: list[Group],
    branches: list[Branch],
    head: float,
    station: float,
    altitude: float,
    air: float,
) -> Case:
    kind: Literal["water", "PG", "EG"] = random.choice(("water", "PG", "PG", "PG", "EG", "EG"))
    pipes = sum(branch.content for branch in branches)
    fill_temperature = celsius(random.uniform(5.0, 25.0))
    margin = random.uniform(0.3, 1.2) if random.random() < 0.9 else random.uniform(1.0, 4.0)
    precharge = air + 1000.0 * GRAVITY * max(head, 0.0) + margin * BAR
    fill_pressure = precharge * 1.03 + random.uniform(0.1, 1.0) * BAR
    ratings = [
        gauge
        for gauge in (3.0, 4.0, 6.0, 8.0, 10.0, 12.0)
        if gauge * BAR * 0.9 + air > fill_pressure + 0.8 * BAR
    ]
    case = Case(
        groups=groups,
        branches=branches,
        vessel=1.0,
        precharge=precharge,
        fill_pressure=fill_pressure,
        station_content=random.uniform(0.5, 3.0) * LITRE + 0.2 * pipes * random.random(),
        vessel_line_content=random.uniform(0.1, 1.0) * LITRE,
        cooling_vessel_content=random.choice((0.0, 0.0, 0.15)) * (pipes + 10.0 * LITRE),
        opening_pressure=0.9 * max(random.choice(ratings), random.choice(ratings)) * BAR + air,
        station_height=station,
        altitude=altitude,
        fluid=kind,
        glycol_mass_fraction=0.0 if kind == "water" else round(random.uniform(0.15, 0.58), 2),
        precharge_temperature=random.choice((fill_temperature, celsius(20.0))),
        fill_temperature=fill_temperature,
        room_temperature=celsius(random.uniform(10.0, 30.0)),
        sun=random.choice((1000.0, 1000.0, 1100.0)),
        ambient=celsius(random.choice((30.0, 30.0, 35.0, 40.0))),
        gas=random.choice(("isothermal", "isothermal", "mixed")),
        stagnation_shift=random.choice((0.0, 0.0, 15.0)),
        allowance=random.choice((0.0, 0.005)),
        operating_flow=celsius(random.uniform(55.0, 95.0)),
    )
    freezing = liquid_of(case).freezing_point
    volume = displaced_volume(case) * 0.5 * 16.0 ** random.random()
    return case.but(vessel=volume, site_minimum=max(freezing + 2.0, celsius(random.uniform(-30.0, 5.0))))


def random_cases(count: int, seed: int = 0) -> Iterator[Case]:
    """Loops of consecutive seeds."""
    return (random_case(seed + index) for index in range(count))
