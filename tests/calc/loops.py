"""Loops by seed, drawn from a distribution that is stated here with its reasons and not tuned to results.

Why these shares (all own assumptions, from what is built): most loops are small and few are big, so 60 %
have up to 12 m2 of aperture, 30 % up to 60 m2 and 10 % up to 2,000 m2, each log-uniform. In 70 % the caller
knows emptying class and coefficients; in the others the service's own defaults stand (class poor; flat
plate 0.82 / 3.2 / 0.010, evacuated tube 0.75 / 1.2 / 0.006). Pipes take 0.8 to 8 m per m2, flow and return
together, uniform. Tubes follow from the flow. Relief valves are mostly chosen with some sense for the
static head, one in ten without, so that loops nobody can make hold are among them.

Every default that a caller leaves open is read from the library, so that these loops are what the service
sees. Must not live here: judgement, and anything that depends on a result.
"""

from math import pi, sqrt
from random import Random
from typing import Literal

from loopslack.calc.fluid import Fluid, glycol_by_volume, glycol_protecting_to, water
from loopslack.calc.model import (
    Branch,
    CollectorGroup,
    Criteria,
    Loop,
    Part,
    Precharge,
    Relief,
    Segment,
    Station,
    SteamAccess,
    Sun,
    Temperatures,
)
from loopslack.library.defaults import default
from loopslack.library.tubes import Tube, tube_standards
from loopslack.physics.atmosphere import atmospheric_pressure
from loopslack.physics.collector import stagnation_temperature
from loopslack.physics.heat_loss import pipe_conductance
from loopslack.physics.relief import allowance_en_12828, allowance_ten_percent, blowdown_liquid

Stratum = Literal["up-to-12-m2", "up-to-60-m2", "up-to-2000-m2"]

# share of the loops, least and largest aperture, m2
STRATA: dict[Stratum, tuple[float, float, float]] = {
    "up-to-12-m2": (0.6, 2.0, 12.0),
    "up-to-60-m2": (0.3, 12.0, 60.0),
    "up-to-2000-m2": (0.1, 60.0, 2000.0),
}
BAR, LITRE, ZERO = 1e5, 1e-3, 273.15
SET_PRESSURES = (2.5, 3.0, 4.0, 6.0, 8.0, 10.0)
RELATIVE_CONTENT = {"flat-plate": (0.4, 1.0), "direct": (1.5, 3.0), "heat-pipe": (0.2, 0.5)}


def stratum(seed: int) -> Stratum:
    """Which stratum of aperture the loop of a seed belongs to."""
    drawn = _random(seed).random()
    for name, (share, _, _) in STRATA.items():
        if drawn < share:
            return name
        drawn -= share
    return "up-to-2000-m2"


def random_loop(seed: int) -> Loop:
    """The loop of a seed: complete, in SI, as the calculation gets it."""
    random = _random(seed)
    random.random()  # that one chose the stratum
    _, least, largest = STRATA[stratum(seed)]
    wanted = _log_uniform(random, least, largest)
    altitude = random.uniform(0.0, 600.0) if random.random() < 0.85 else random.uniform(600.0, 2800.0)
    atmosphere = atmospheric_pressure(altitude)
    sun = Sun(irradiance=1000.0, ambient=ZERO + 30)
    if random.random() < 0.15:
        sun = Sun(irradiance=1100.0, ambient=ZERO + random.choice((35, 40)))
    head = _head(random, wanted)
    groups = _groups(random, wanted, head, sun)
    station = Station(
        content=1.5 * LITRE + 0.25 * LITRE * wanted * random.uniform(0.5, 2.0),
        height=random.choice((0.0, 0.0, random.uniform(-1.0, 1.0))),
        steam_loss=random.uniform(20.0, 60.0) * wanted if random.random() < 0.08 else 0.0,
    )
    branches = _branches(random, groups, station.height)
    top = max(0.0, head, *(s.start_height for b in branches for s in b.segments))
    temperatures = _temperatures(random)
    fluid, temperatures = _fluid(random, temperatures)
    relief = _relief(random, head)
    return Loop(
        fluid=fluid,
        groups=groups,
        branches=branches,
        station=station,
        line_content=random.uniform(0.1, 1.0) * LITRE + 0.01 * LITRE * wanted,
        cooling_content=0.0,
        top=top,
        vessel_outdoor=random.random() < 0.05,
        pump_height=0.0,
        pump_head=random.choice((0.0, 0.0, random.uniform(0.2, 0.8) * BAR)),
        pump_side="suction" if random.random() < 0.8 else "discharge",
        gauge_height=random.choice((0.0, 0.0, random.uniform(-0.5, 1.5))),
        atmosphere=atmosphere,
        altitude=altitude,
        relief=relief,
        parts=(Part(name="collectors", height=head, rated_pressure=random.choice((10.0, 10.0, 6.0)) * BAR),),
        temperatures=temperatures,
        sun=sun,
        criteria=CRITERIA,
        precharge=_precharge(random, atmosphere, head, temperatures),
    )


def _random(seed: int) -> Random:
    return Random(f"loop {seed}")  # noqa: S311 - loops, not secrets


def _log_uniform(random: Random, low: float, high: float) -> float:
    return float(low * (high / low) ** random.random())


CRITERIA = Criteria(
    reserve=None,
    top_pressure=default("minimum-top-pressure").si,
    window_width=default("fill-window-width").si,
    fill_above_precharge=default("fill-above-precharge").si,
    window_step=default("fill-above-lower-bound").si,
    boiling_margin=default("boiling-margin").si,
    membrane_limit=default("membrane-limit").si,
    freeze_margin=default("freezing-margin").si,
    fluid_allowance=default("fluid-data-allowance").si,
    degradation_limit=default("degradation-temperature").si,
    stagnation_doubt=default("doubt-stagnation-shift").si,
    net_positive_suction=None,
)


def _head(random: Random, aperture: float) -> float:
    """Collectors above the vessel, m: on roofs, on the ground, sometimes below a vessel in the attic."""
    if random.random() < 0.04:
        return random.uniform(-4.0, 0.0)
    if aperture > 60 and random.random() < 0.4:
        return random.uniform(0.5, 6.0)
    return random.uniform(2.0, 12.0) if random.random() < 0.75 else random.uniform(12.0, 35.0)


def _groups(random: Random, wanted: float, head: float, sun: Sun) -> tuple[CollectorGroup, ...]:
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


def _group(  # noqa: PLR0917 - all of it drawn
    random: Random, name: str, wanted: float, height: float, sun: Sun, space: int
) -> CollectorGroup:
    kind = random.choice(("flat-plate",) * 7 + ("direct", "direct", "heat-pipe"))
    flat = kind == "flat-plate"
    count = max(1, round(wanted / random.uniform(1.8, 2.6)))
    emptying: Literal["good", "fair", "poor", "measured"] = "poor"
    type_ = "flat-plate" if flat else "evacuated-tube-direct"
    efficiency, linear, quadratic = (
        default(f"{name_}-{type_}").si for name_ in ("optical-efficiency", "linear-loss", "quadratic-loss")
    )
    powers = {word: default(f"steam-power-{type_}-{word}").si for word in ("good", "fair", "poor")}
    if random.random() < 0.7:
        emptying = random.choice(("good", "fair", "fair", "poor"))
        if flat:
            efficiency, linear, quadratic = (
                random.uniform(0.70, 0.82), random.uniform(3.0, 4.5), random.uniform(0.008, 0.018)
            )  # fmt: skip
        else:
            efficiency, linear, quadratic = (
                random.uniform(0.60, 0.75), random.uniform(0.8, 1.8), random.uniform(0.003, 0.009)
            )  # fmt: skip
    power = powers[emptying]
    worse = {"good": powers["fair"], "fair": powers["poor"]}.get(emptying)
    if random.random() < 0.05:
        emptying, power = "measured", random.uniform(0.4, 1.0) * powers["poor"]
        worse = power * default("doubt-measured-steam-power").si
    stagnation = stagnation_temperature(efficiency, sun.irradiance, linear, quadratic, sun.ambient)
    measured = random.random() < 0.1
    return CollectorGroup(
        name=name,
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


def _branches(random: Random, groups: tuple[CollectorGroup, ...], end: float) -> tuple[Branch, ...]:
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


def _temperatures(random: Random) -> Temperatures:
    back = random.choice((40.0, 40.0, random.uniform(25.0, 55.0)))
    return Temperatures(
        fill=ZERO + random.choice((15.0, 15.0, random.uniform(5.0, 30.0))),
        site_minimum=ZERO + random.uniform(-24.0, 0.0),
        indoor_cold=ZERO + 5,
        vessel_room=ZERO + random.choice((20.0, 20.0, random.uniform(15.0, 32.0))),
        vessel_cold=ZERO + 5,
        flow=ZERO + max(back + 10, random.choice((80.0, 80.0, random.uniform(60.0, 95.0)))),
        back=ZERO + back,
        cut_off=ZERO + random.choice((120.0, 120.0, 110.0, 130.0)),
        hot_liquid=ZERO + 120,
    )


def _fluid(random: Random, temperatures: Temperatures) -> tuple[Fluid, Temperatures]:
    """Mostly as strong as the site asks, some a round strength that may not do, some water in mild places."""
    drawn = random.random()
    kind: Literal["propylene-glycol", "ethylene-glycol"] = (
        "propylene-glycol" if random.random() < 0.85 else "ethylene-glycol"
    )
    if drawn < 0.08:
        mild = random.uniform(6.0, 12.0)
        return water(), Temperatures(
            **{name: getattr(temperatures, name) for name in Temperatures.__struct_fields__}
            | {"site_minimum": ZERO + mild}
        )
    if drawn < 0.3:
        return glycol_by_volume(kind, random.choice((0.40, 0.42, 0.45, 0.50))), temperatures
    margin = default("freezing-margin").si + random.uniform(0.0, 4.0)
    return glycol_protecting_to(kind, temperatures.site_minimum, margin), temperatures


def _relief(random: Random, head: float) -> Relief:
    sensible = [gauge for gauge in SET_PRESSURES if gauge >= 0.1 * max(head, 0.0) + 1.5]
    gauge = random.choice(sensible[:3] or [10.0]) if random.random() < 0.9 else random.choice(SET_PRESSURES)
    pressure = gauge * BAR
    rule, allowance = "en-12828", allowance_en_12828(pressure)
    if random.random() < 0.1:
        rule, allowance = "ten-percent", allowance_ten_percent(pressure)
    return Relief(
        set_pressure=pressure,
        opening_pressure=pressure - allowance,
        closing_pressure=pressure - blowdown_liquid(pressure),
        height=random.choice((0.0, 0.0, 0.0, random.uniform(-1.0, 1.5))),
        allowance_rule=rule,
    )


def _precharge(random: Random, atmosphere: float, head: float, temperatures: Temperatures) -> Precharge:
    drawn = random.random()
    if drawn < 0.75:
        return Precharge(kind="rule")
    if drawn < 0.9:
        return Precharge(kind="optimised")
    pressure = atmosphere + 0.1 * BAR * max(head, 0.0) + random.uniform(0.4, 1.0) * BAR
    return Precharge(kind="stated", pressure=pressure, temperature=temperatures.fill)
