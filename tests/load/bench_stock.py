"""What a long stock list costs: a design that chooses from 5,000 articles beside one that chooses from 50.

    PYTHONPATH=service:tests python tests/load/bench_stock.py

Prints milliseconds of processor time, the least of some rounds, and their ratio, which should stay at 3 or below. The
stock is invented: sizes of several series, with acceptance volumes, delivered precharges that cannot always be changed,
and prices.
"""

from math import inf
from random import Random
from time import process_time

from calc.reference import BAR, group, loop
from loopslack.calc.design import Request, design
from loopslack.calc.model import Vessel

LITRES = (8, 12, 18, 25, 33, 40, 50, 60, 80, 100, 120, 140, 150, 180, 200, 250, 300, 400, 500, 600, 800, 1000)
BOUND = 3.0
ROUNDS = 20


def stock(items: int) -> tuple[Vessel, ...]:
    random = Random(items)  # noqa: S311 - an invented list, not a secret
    found = []
    for index in range(items):
        litres = random.choice(LITRES) * random.choice((1.0, 1.0, 0.98, 1.02))
        found.append(
            Vessel(
                id=f"article {index}",
                nominal_volume=litres / 1000,
                rated_pressure=random.choice((3.0, 6.0, 10.0)) * BAR,
                acceptance_volume=random.choice((None, litres * 0.5 / 1000, litres * 0.7 / 1000)),
                delivered_precharge=random.choice((1.5, 2.5, 4.0)) * BAR,
                precharge_adjustable=random.random() < 0.95,
                price=round(20 + 1.4 * litres + random.uniform(0, 30), 2),
                currency="EUR",
            )
        )
    return tuple(found)


def milliseconds(*lengths: int) -> list[float]:
    """Processor time of a design for each length of list, the least of some rounds taken in turn."""
    asked = loop(groups=(group(emptying="good", steam_power=50.0, worse_steam_power=80.0),))
    lists = [stock(items) for items in lengths]
    least = [inf] * len(lists)
    for _ in range(ROUNDS):
        for place, candidates in enumerate(lists):
            began = process_time()
            design(asked, Request(candidates, 1, "size", "single"))
            least[place] = min(least[place], (process_time() - began) * 1e3)
    return least


def main() -> int:
    few, many = milliseconds(50, 5000)
    ratio = many / few
    print(f"50 articles {few:.1f} ms, 5,000 articles {many:.1f} ms, ratio {ratio:.2f} (bound {BOUND:g})")
    return 0 if ratio <= BOUND else 1


if __name__ == "__main__":
    raise SystemExit(main())
