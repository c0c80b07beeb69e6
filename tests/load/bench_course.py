"""What a day without flow costs: ``PYTHONPATH=tests:service python -m load.bench_course``.

Prints milliseconds for the tables of a fluid, one course by cells and steps, the answer with its envelope, and the
longest slice between two pauses; fails when one costs more than allowed. Best of several rounds.
"""

from __future__ import annotations

import sys
from collections.abc import Callable
from time import perf_counter

from calc.course.cases import case, course, lumped
from loopslack.calc.course.envelope import day_course
from loopslack.calc.course.march import Accuracy
from loopslack.calc.course.properties import FluidTables
from loopslack.calc.course.weather import ClearSky
from loopslack.calc.fluids.making import glycol
from loopslack.kernel.work import finished

ROUNDS = 7
CURVE, SLICE = 150.0, 10.0  # milliseconds allowed
GRIDS = ((12, 120.0), (12, 60.0), (20, 120.0), (20, 60.0), (40, 20.0))


def best(work: Callable[[], object], rounds: int = ROUNDS) -> float:
    """Milliseconds of the fastest round."""
    times = []
    for _ in range(rounds):
        begin = perf_counter()
        work()
        times.append(perf_counter() - begin)
    return 1e3 * min(times)


def slices() -> list[float]:
    """Milliseconds of every slice of one answer."""
    found, work = [], day_course(case(), ClearSky())
    while True:
        begin = perf_counter()
        try:
            next(work)
        except StopIteration:
            return found
        found.append(1e3 * (perf_counter() - begin))


def main() -> int:
    fluid = glycol("propylene-glycol", 0.43)
    print(f"tables of a fluid        {best(lambda: FluidTables(fluid)):7.1f} ms")
    one = 0.0
    for cells, longest in GRIDS:
        accuracy = Accuracy(cells=cells, longest=longest, most_steps=20_000)
        curve = course(lumped(), accuracy=accuracy)
        cost = best(
            lambda accuracy=accuracy: course(lumped(), accuracy=accuracy), 3 if cells > 20 else ROUNDS
        )
        one = one or cost
        steam, reach = curve.largest["steam_volume"].value * 1e3, curve.largest["reach"].value
        print(
            f"course, {cells} cells, {longest:3.0f} s  {cost:7.1f} ms  {curve.steps:5d} steps  "
            f"{steam:.3f} L  {reach:.3f} m"
        )
    print(f"answer with envelope     {best(lambda: finished(day_course(case(), ClearSky())), 3):7.1f} ms")
    longest_slice = min(max(slices()) for _ in range(ROUNDS))
    print(f"longest slice            {longest_slice:7.1f} ms")
    failed = one > CURVE or longest_slice > SLICE
    print(
        f"allowed: {CURVE:g} ms a course of 12 cells, {SLICE:g} ms a slice: {'FAILED' if failed else 'kept'}"
    )
    return int(failed)


if __name__ == "__main__":
    sys.exit(main())
