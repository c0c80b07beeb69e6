"""Loops by seed, drawn from a distribution that is stated here with its reasons.

Why these shares (all own assumptions, from what is built): most loops are small and few are big, so 60 %
have up to 12 m2 of aperture, 30 % up to 60 m2 and 10 % up to 2,000 m2, each log-uniform. In 70 % the caller
knows emptying class and coefficients; in the others the service's own defaults stand (class poor; flat
plate 0.82 / 3.2 / 0.010, evacuated tube 0.75 / 1.2 / 0.006). Pipes take 0.8 to 8 m per m2, flow and return
together, uniform. Tubes follow from the flow. Relief valves are mostly chosen with some sense for the
static head, one in ten without, so that loops nobody can make hold are among them.

Every default that a caller leaves open is read from the library, so that these loops are what the service
sees. Must not live here: judgement, and anything that depends on a result.
"""

from random import Random
from typing import Literal

from calc.loops_parts import collector_groups, pipe_branches
from loopslack.calc.fluids.making import Fluid, glycol_by_volume, glycol_protecting_to, water
from loopslack.calc.model import (
    Criteria,
    Loop,
    Part,
    Precharge,
    Relief,
    Station,
    Sun,
    Temperatures,
)
from loopslack.library.defaults import default
from loopslack.physics.atmosphere import atmospheric_pressure
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
    groups = collector_groups(random, wanted, head, sun)
    station = Station(
        content=1.5 * LITRE + 0.25 * LITRE * wanted * random.uniform(0.5, 2.0),
        height=random.choice((0.0, 0.0, random.uniform(-1.0, 1.0))),
        steam_loss=random.uniform(20.0, 60.0) * wanted if random.random() < 0.08 else 0.0,
    )
    branches = pipe_branches(random, groups, station.height)
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
