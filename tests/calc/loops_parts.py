"""Collectors and pipes of a random loop. The distribution and its reasons stand in ``loops``."""

from math import pi, sqrt
from random import Random
from typing import Literal

from loopslack.calc.model import Branch, Build, CollectorGroup, Segment, SteamAccess, Sun
from loopslack.library.defaults import default
from loopslack.library.tubes import Tube, tube_standards
from loopslack.physics.collector import stagnation_temperature
from loopslack.physics.heat_loss import pipe_conductance

LITRE, ZERO = 1e-3, 273.15
RELATIVE_CONTENT = {"flat-plate": (0.4, 1.0), "direct": (1.5, 3.0), "heat-pipe": (0.2, 0.5)}


def collector_groups(random: Random, wanted: float, head: float, sun: Sun) -> tuple[CollectorGroup, ...]:
    """One group mostly; in bigger loops several, in one steam space or apart."""
    count = random.choice((1, 1, 2, 3)) if wanted > 12 else random.choice((1, 1, 1, 1, 1, 2))
    apart = head > 2 and random.random() < 0.5
    return tuple(
        _group(
            random,
            f"group {number + 1}",
            wanted / count,
            head if number == 0 or head <= 2 else max(1.0, head - random.uniform(0.0, 3.0)),
            sun,
            number if apart else 0,
        )
        for number in range(count)
    )


def _group(random: Random, name: str, wanted: float, height: float, sun: Sun, space: int) -> CollectorGroup:
    kind = random.choice(("flat-plate",) * 7 + ("direct", "direct", "heat-pipe"))
    flat = kind == "flat-plate"
    count = max(1, round(wanted / random.uniform(1.8, 2.6)))
    emptying: Literal["good", "fair", "poor", "measured"] = "poor"
    type_: Build = "flat-plate" if flat else "evacuated-tube-direct"
    efficiency, linear, quadratic = (
        default(f"{name_}-{type_}").si for name_ in ("optical-efficiency", "linear-loss", "quadratic-loss")
    )
    powers = {word: default(f"steam-power-{type_}-{word}").si for word in ("good", "fair", "poor")}
    if random.random() < 0.7:
        emptying = random.choice(("good", "fair", "fair", "poor"))
        if flat:
            efficiency, linear, quadratic = (
                random.uniform(0.70, 0.82),
                random.uniform(3.0, 4.5),
                random.uniform(0.008, 0.018),
            )
        else:
            efficiency, linear, quadratic = (
                random.uniform(0.60, 0.75),
                random.uniform(0.8, 1.8),
                random.uniform(0.003, 0.009),
            )
    power = powers[emptying]
    worse = {"good": powers["fair"], "fair": powers["poor"]}.get(emptying)
    if random.random() < 0.05:
        emptying, power = "measured", random.uniform(0.4, 1.0) * powers["poor"]
        worse = power * default("doubt-measured-steam-power").si
    stagnation = stagnation_temperature(efficiency, sun.irradiance, linear, quadratic, sun.ambient)
    measured = random.random() < 0.1
    return CollectorGroup(
        name=name,
        build=type_,
        count=count,
        aperture=wanted,
        content=wanted * random.uniform(*RELATIVE_CONTENT[kind]) * LITRE,
        peak_efficiency=efficiency,
        linear_loss=linear,
        quadratic_loss=quadratic,
        stagnation_temperature=stagnation + (random.uniform(0.0, 12.0) if measured else 0.0),
        measured_stagnation=measured,
        emptying=emptying,
        steam_power=power,
        worse_steam_power=worse,
        height=height,
        space=space,
    )


def pipe_branches(random: Random, groups: tuple[CollectorGroup, ...], end: float) -> tuple[Branch, ...]:
    """A flow and a return for every steam space; now and then a second flow to the same station."""
    access_of_return: SteamAccess = random.choice(("open", "open", "closed", "unknown", "unknown"))
    per_area = random.uniform(0.8, 8.0)
    found = []
    for space in sorted({group.space for group in groups}):
        area = sum(group.aperture for group in groups if group.space == space)
        start = max(group.height for group in groups if group.space == space)
        lines: list[tuple[Literal["flow", "return"], SteamAccess, float]] = [
            ("flow", random.choice(("open", "open", "open", "unknown")), 0.5),
            ("return", access_of_return, 0.5),
        ]
        if random.random() < 0.1:
            lines = [("flow", "open", 0.25), ("flow", "open", 0.25), ("return", access_of_return, 0.5)]
        for number, (role, access, share) in enumerate(lines):
            parallel = sum(1 for line in lines if line[0] == role)
            bore = _tube(random, area / parallel)
            length = max(1.0, per_area * area * share)
            segments = _segments(random, bore, length, start, end)
            name = f"{role} {space + 1}.{number + 1}"
            found.append(Branch(name=name, role=role, access=access, segments=segments, space=space))
    return tuple(found)


def _tube(random: Random, area: float) -> Tube:
    """The smallest tube that carries 15 to 45 L/h per m2 at no more than 0.4 to 0.9 m/s."""
    flow = random.uniform(15.0, 45.0) * area * LITRE / 3600
    bore = max(0.010, sqrt(4 * flow / (pi * random.uniform(0.4, 0.9))))
    standards = tube_standards()
    for standard in ("en-1057", "en-10220"):
        for tube in sorted(standards[standard].tubes.values(), key=lambda tube: tube.bore):
            if tube.bore >= bore:
                return tube
    return tube


def _segments(random: Random, tube: Tube, length: float, start: float, end: float) -> tuple[Segment, ...]:
    """One or two stretches: outdoors first, then inside; sometimes over a crest."""
    pieces = random.choice((1, 1, 2))
    insulation = random.choice((1.0, 1.0, 0.7, 0.5)) * tube.outer_diameter
    if random.random() < 0.04:
        insulation = 0.0
    conductivity = random.choice((0.040, 0.040, 0.045))
    conductance = pipe_conductance(tube.outer_diameter, insulation, conductivity, 10.0)
    middle = start + (end - start) * random.uniform(0.1, 0.6)
    crest = start + random.uniform(0.2, 1.0) if pieces == 2 and random.random() < 0.15 else None
    heights = [start, end] if pieces == 1 else [start, middle if crest is None else crest, end]
    share = random.uniform(0.1, 0.6)
    lengths = [length] if pieces == 1 else [length * share, length * (1 - share)]
    outdoor_first = random.random() < 0.6
    return tuple(
        Segment(
            name=f"stretch {number + 1}",
            length=lengths[number],
            area=tube.content,
            outer_diameter=tube.outer_diameter,
            insulation=insulation,
            conductivity=conductivity,
            conductance=conductance,
            ambient=ZERO + (30 if outdoor_first and number == 0 else 20),
            start_height=heights[number],
            end_height=heights[number + 1],
            outdoor=outdoor_first and number == 0,
        )
        for number in range(pieces)
    )
