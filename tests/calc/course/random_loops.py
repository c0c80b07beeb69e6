"""Loops and days at random, from one collector to a field of 800, all that the model allows. Nothing is real.

A sample runs with the other tests, 400 in ``all_random_loops``; ``python -m calc.course.random_loops SEED COUNT``
with ``tests`` and ``service`` on the path prints what it met.
"""

import sys
from collections import Counter
from math import isfinite, pi
from random import Random
from time import perf_counter
from typing import NamedTuple

from msgspec.structs import replace

from calc import reference
from calc.course.checks import check_step
from calc.course.quasi_static import at_rest, liquid_of
from loopslack.calc.charge import Charge
from loopslack.calc.course.assumptions import RESIDUAL_SHARE
from loopslack.calc.course.curve import COLUMNS, Curve
from loopslack.calc.course.lumped import Emptying, LumpedLoop, Start
from loopslack.calc.course.mapping import mapped
from loopslack.calc.course.march import Accuracy, March
from loopslack.calc.course.weather import ClearSky, StatedWeather, Weather
from loopslack.calc.fluids.making import glycol, water
from loopslack.calc.model import Loop, Relief, Station

HOUR = 3600.0
GRAVITY = 9.80665
# m2 and L/m2 per collector, efficiency, loss coefficients: low and high
TYPES = {
    "flat": (2.3, (0.4, 1.0), (0.70, 0.84), (3.0, 4.5), (0.008, 0.02)),
    "direct": (3.0, (1.5, 3.0), (0.60, 0.78), (0.8, 2.0), (0.003, 0.012)),
    "heat pipe": (3.0, (0.2, 0.5), (0.60, 0.75), (0.8, 2.0), (0.003, 0.012)),
}
TUBES = (
    (15, 1.0, 8),
    (22, 1.0, 25),
    (28, 1.5, 60),
    (35, 1.5, 120),
    (54, 2.0, 400),
    (88, 2.0, 1000),
    (108, 2.5, 1e9),
)


class RandomCase(NamedTuple):
    loop: LumpedLoop
    weather: Weather
    accuracy: Accuracy


class Found(NamedTuple):
    curve: Curve
    share_of_bound: float | None
    tries: int
    seconds: float


def random_loop(draw: Random) -> Loop:
    count = draw.choice((1, 2, 4, 8, 8, 20, 60, 200, 800))
    area, content, efficiency, linear, quadratic = TYPES[draw.choice(tuple(TYPES))]
    aperture = count * area
    gain = draw.uniform(*efficiency)
    losses = draw.uniform(*linear), draw.uniform(*quadratic)
    altitude = draw.choice((0.0, 0.0, draw.uniform(0, 2500)))
    atmosphere = 101325 * (1 - 2.25577e-5 * altitude) ** 5.25588
    head = draw.choice((0.0, draw.uniform(0, 15), draw.uniform(0, 40)))
    outer, wall, _ = next(tube for tube in TUBES if aperture <= tube[2])
    outer, wall = outer / 1000, wall / 1000
    branches = []
    for k in range(draw.choice((2, 2, 2, 3, 4))):
        insulation = draw.choice((0.0, outer, draw.uniform(0.01, 0.06)))
        branches.append(
            reference.run(
                f"run {k}",
                "flow" if k % 2 == 0 else "return",
                length=draw.uniform(3, 120 if aperture > 20 else 40),
                access="closed" if k > 0 and draw.random() < 0.3 else "open",
                area=pi / 4 * (outer - 2 * wall) ** 2,
                outer_diameter=outer,
                insulation=insulation,
                conductance=reference.conductance(outer, insulation),
                ambient=draw.uniform(278, 303),
                start_height=head,
                end_height=draw.choice((0.0, head * draw.random())),
            )
        )
    group = reference.group(
        count=count,
        aperture=aperture,
        content=aperture * draw.uniform(*content) / 1000,
        peak_efficiency=gain,
        linear_loss=losses[0],
        quadratic_loss=losses[1],
        stagnation_temperature=303.15 + reference.stagnation_rise(1000 * gain, *losses),
        height=head,
        emptying=draw.choice(("good", "fair", "poor")),
    )
    set_pressure = draw.choice((2.5e5, 3e5, 6e5, 6e5, 10e5))
    glycols = ("propylene-glycol", "ethylene-glycol")
    strong = glycol(draw.choice(glycols), draw.choice((0.2, 0.3, 0.43, 0.5, 0.6)))
    return reference.loop(
        fluid=draw.choice((water(), strong, strong, strong)),
        groups=(group,),
        branches=tuple(branches),
        station=Station(content=draw.uniform(1, 8) / 1000 * count**0.5, height=0.0),
        line_content=draw.choice((0.0, 0.0005)),
        cooling_content=draw.choice((0.0, 0.0, draw.uniform(0, 1) * group.content)),
        top=head,
        atmosphere=atmosphere,
        altitude=altitude,
        relief=Relief(
            set_pressure=set_pressure,
            opening_pressure=set_pressure - max(0.5e5, 0.1 * set_pressure),
            closing_pressure=set_pressure * (1 - draw.choice((0.05, 0.1, 0.2))),
            height=0.0,
            allowance_rule="en-12828",
        ),
    )


def random_charge(draw: Random, loop: Loop) -> Charge:
    displaced = loop.collector_content + 0.1 * loop.content
    nominal = displaced * draw.choice((0.15, 0.5, 1.0, 2.0, 4.0, 8.0)) * draw.uniform(0.7, 1.4)
    density = loop.fluid.density(288.15)
    column = density * GRAVITY * max(group.height for group in loop.groups)
    precharge = loop.atmosphere + column + draw.uniform(0.2e5, 1.0e5)
    fill = precharge + draw.uniform(0.1e5, 0.8e5)
    filled = nominal * (1 - precharge / fill)
    return Charge(nominal, precharge, 288.15, filled, filled * density, 293.15, 0.0)


def random_weather(draw: Random) -> Weather:
    sky = ClearSky(
        highest_irradiance=draw.uniform(500, 1150),
        mean_ambient=draw.uniform(283, 303),
        swing=draw.uniform(0, 8),
    )
    if draw.random() < 0.6:
        return sky
    step = draw.choice((600.0, 900.0, 3600.0))
    times = tuple(5 * HOUR + step * k for k in range(int(24 * HOUR / step) + 1))
    clear = [draw.choice((1.0, 1.0, 0.7, 0.2, 0.0)) for _ in times]
    suns = tuple(sky.irradiance(t) * share for t, share in zip(times, clear, strict=True))
    return StatedWeather(times=times, irradiances=suns, ambients=tuple(map(sky.ambient, times)))


def random_case(draw: Random) -> RandomCase:
    loop = random_loop(draw)
    charge = random_charge(draw, loop)
    lumped = mapped(loop, charge, vessels=draw.choice((1, 1, 3)), gas_follows=draw.random() < 0.3).loop
    emptying = Emptying(
        residual_share=draw.choice((*RESIDUAL_SHARE.values(), draw.uniform(0.02, 0.98))),
        reflux=draw.choice((0.0, 0.0, 0.5, 1.0)),
        wets_all=draw.random() < 0.2,
        concentrates=draw.random() < 0.8,
        steam_power=draw.choice((None, None, None, draw.uniform(40, 200))),
    )
    changes: dict[str, object] = {"emptying": emptying, "collector_capacity": draw.uniform(5000, 12000)}
    if draw.random() < 0.25:
        changes["relief"] = None
    if draw.random() < 0.3:
        changes["start"] = Start(
            time=draw.uniform(9, 14) * HOUR,
            collectors=draw.uniform(330, 385),
            pipes=draw.uniform(310, 365),
            station=draw.uniform(305, 360),
            vessel=draw.uniform(290, 310),
        )
    accuracy = Accuracy(cells=draw.choice((8, 12, 12, 20)), longest=draw.choice((60.0, 120.0, 180.0)))
    return RandomCase(replace(lumped, **changes), random_weather(draw), accuracy)


def bound_of(going: March, liquid) -> float:
    """The coupled balance for the liquid of an instant, at the day's worst weather, m3."""
    weather, start = going.weather, going.recorder.times[0]
    times = [start + (going.end - start) * k / 300 for k in range(301)]
    sun, ambient = max(map(weather.irradiance, times)), max(map(weather.ambient, times))
    return at_rest(going.plant, liquid, sun, ambient).volume


def checked(case: RandomCase) -> Found:
    """March a case to its end, asserting at every step what must hold."""
    begin = perf_counter()
    going = March(case.loop, case.weather, case.accuracy)
    best, liquid = 0.0, None
    while not going.done:
        if not going.advance():
            continue
        check_step(going)
        if going.state.volume > best:
            best, liquid = going.state.volume, liquid_of(going.state)
    curve = going.curve()
    seconds = perf_counter() - begin
    for name in ("time", "irradiance", "ambient", *COLUMNS):
        column = getattr(curve, name)
        assert len(column) == len(curve.time)
        assert all(map(isfinite, column)), name
    assert abs(curve.energy_residual) < 2e-3
    assert curve.mass_residual < 1e-12
    share = None
    driven_by_sun = not curve.flags & {"discharge", "void", "vessel-empty", "membrane-full"}
    if liquid is not None and driven_by_sun and curve.phases.boiling is not None:
        share = best / bound_of(going, liquid)
        assert share < 1.02
    return Found(curve, share, going.tries, seconds)


def main(seed: int = 7, count: int = 400) -> None:
    draw, found = Random(seed), []  # noqa: S311 - loops, not secrets
    for k in range(count):
        case = random_case(draw)
        try:
            found.append(checked(case))
        except BaseException:
            print(f"loop {k} of seed {seed}:", case)
            raise
    print(f"seed {seed}: {count} loops, none failed; {report(found)}")


def report(found: list[Found]) -> str:
    """What the loops were like and how far the books and bounds were used."""
    count = len(found)
    flags = Counter(flag for each in found for flag in each.curve.flags)
    seconds = sorted(each.seconds for each in found)
    energy = sorted(abs(each.curve.energy_residual) for each in found)
    shares = [each.share_of_bound for each in found if each.share_of_bound is not None]
    dry = sum(each.curve.phases.emptying is None for each in found)
    pipes = sum(each.curve.phases.boiling is not None for each in found)
    return "\n".join(
        (
            f"no steam {dry}, collectors only {count - dry - pipes}, pipes {pipes}",
            f"flags: {dict(sorted(flags.items()))}",
            f"gave up at the limit of steps: {sum(not each.curve.complete for each in found)}",
            f"mass {max(each.curve.mass_residual for each in found):.1e}",
            f"energy: median {energy[count // 2]:.1e}, worst {energy[-1]:.1e}",
            f"largest share of the bound {max(shares, default=0):.5f} of {len(shares)}",
            f"s a day: median {seconds[count // 2]:.3f}, p95 {seconds[int(count * 0.95)]:.3f}",
            f"worst {seconds[-1]:.3f}, all {sum(seconds):.0f}",
        )
    )


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))
