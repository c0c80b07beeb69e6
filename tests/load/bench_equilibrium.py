"""What an equilibrium costs, by kind of loop: ``PYTHONPATH=tests:service python -m load.bench_equilibrium [LOOPS]``.

Prints microseconds, typical and worst, and their ratio to the typical loop of one collector group; "first" asks of a
loop for the first time, "next" with another vessel, as a search does. Best of several rounds; fails when one costs
more than allowed.
"""

from __future__ import annotations

import sys
from time import perf_counter
from typing import NamedTuple

from msgspec.structs import replace

from calc.loops import random_loop
from calc.test_states_of_rest import charged
from loopslack.calc.balance import Balance, Mixing, mixing
from loopslack.calc.charge import Charge
from loopslack.calc.equilibrium import equilibrium
from loopslack.calc.scenarios import BASE
from loopslack.kernel.errors import CalculationError

LOOPS, ROUNDS, AGAIN = 1200, 5, 40
SIZES = (0.6, 1.0, 1.5, 2.5, 4.0)
TYPICAL, WORST = 100.0, 1000.0  # microseconds allowed
ONE_GROUP = "one group"


class Cost(NamedTuple):
    """Microseconds of the first and of the next equilibrium, and which loop and size they are of."""

    first: float
    following: float
    seed: int
    size: float
    regime: str


def main(loops: int = LOOPS) -> int:
    found: dict[str, list[Cost]] = {}
    for seed in range(loops):
        for size in SIZES:
            case = charged(random_loop(seed), size)
            if case is None:
                continue
            analysis, balance, charge = case
            cost = _cost(balance, charge, mixing(balance.loop), analysis.final_pressure, seed, size)
            if cost is not None:
                found.setdefault(_kind(balance), []).append(cost)
    unit = _middle([cost.first for cost in found[ONE_GROUP]])
    print(f"{'':34}{'loops':>7}{'first':>8}{'worst':>8}{'next':>8}{'worst':>8}   ratios to {unit:.0f} us")
    failed = False
    for kind, costs in sorted(found.items()):
        first, following = [c.first for c in costs], [c.following for c in costs]
        row = (_middle(first), max(first), _middle(following), max(following))
        failed |= max(row) > WORST
        ratios = " ".join(f"{value / unit:6.1f}" for value in row)
        print(f"{kind:34}{len(costs):7d}" + "".join(f"{value:8.0f}" for value in row) + f"   {ratios}")
        for worst in sorted(costs, key=lambda c: -max(c.first, c.following))[:3]:
            print(
                f"    seed {worst.seed}, size {worst.size}: {worst.first:.0f}, {worst.following:.0f}, {worst.regime}"
            )
    typical = _middle([cost.first for costs in found.values() for cost in costs])
    failed |= typical > TYPICAL
    print(f"all kinds, typical: {typical:.0f} us")
    print(f"allowed: {TYPICAL:g} us typical, {WORST:g} us worst: {'FAILED' if failed else 'kept'}")
    return int(failed)


def _kind(balance: Balance) -> str:
    rising = not all(space.path.falling for space in balance.spaces)
    if len(balance.spaces) > 1:
        return "several spaces, rising runs" if rising else "several spaces"
    if rising:
        return "one space, rising runs"
    return ONE_GROUP if len(balance.loop.groups) == 1 else "one space, several groups"


def _cost(
    balance: Balance, charge: Charge, mix: Mixing, opening: float, seed: int, size: float
) -> Cost | None:
    other = replace(
        charge, nominal=1.05 * charge.nominal, filled=1.05 * charge.filled, mass=1.05 * charge.mass
    )
    first = following = float("inf")
    for number in range(AGAIN):
        if number >= ROUNDS and max(first, following) <= WORST:
            break  # beyond that only what another program may have delayed
        fresh = Balance(balance.loop, BASE)
        try:
            began = perf_counter()
            state = equilibrium(fresh, charge, mix, gas_follows=False, opening=opening)
            first = min(first, 1e6 * (perf_counter() - began))
            limit = fresh.at_pressure(opening)
            began = perf_counter()
            equilibrium(fresh, other, mix, gas_follows=False, opening=opening, limit=limit)
            following = min(following, 1e6 * (perf_counter() - began))
        except CalculationError:
            return None
    return Cost(first, following, seed, size, state.regime)


def _middle(values: list[float]) -> float:
    return sorted(values)[len(values) // 2]


if __name__ == "__main__":
    sys.exit(main(*(int(word) for word in sys.argv[1:2])))
