"""Random loops that do not hold, and what becomes of them after every remedy offered.

    python tests/calc/remedies/thousand.py [COUNT]

goes on until so many failing loops are done (1,000 unless stated), prints the counts, and fails if a single remedy
did not make its loop hold. Every loop is sought for with its vessel still to be chosen; every fourth again with a
vessel that is there.
"""

import sys
from collections import Counter
from pathlib import Path
from random import Random
from typing import NamedTuple

if __name__ == "__main__":
    sys.path.insert(0, str(Path(__file__).parents[2]))

from msgspec.structs import replace

from calc.loops import random_loop
from loopslack.calc.design import Design, Request, design
from loopslack.calc.existing import check
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.remedies.bench import MOST_FULL, MOST_QUICK
from loopslack.calc.remedies.case import Case, case_of_design, case_of_vessel
from loopslack.calc.remedies.changes import changed
from loopslack.calc.remedies.seek import Remedies, remedies_for_design, remedies_for_vessel
from loopslack.kernel.work import finished
from loopslack.library.vessels import preferred_vessels

SERIES = tuple(Vessel(id=size.id, nominal_volume=size.nominal_volume) for size in preferred_vessels())


class Tally(NamedTuple):
    """What became of failing loops."""

    failing: int
    outcomes: Counter[str]
    codes: Counter[str]
    broken: list[str]
    evaluations: list[int]

    def lines(self) -> list[str]:
        """For a reader."""
        counts = sorted(self.evaluations)
        return [
            f"{self.failing} failing cases: {dict(self.outcomes)}",
            f"offered: {dict(self.codes.most_common())}",
            f"trials: median {counts[len(counts) // 2]}, most {counts[-1]}",
            f"remedies that did not make their loop hold: {len(self.broken)}",
        ]


def tally(wanted: int, *, first: int = 0) -> Tally:
    """Seek and try, from the loop of a seed on, until so many failing cases are done."""
    found = Tally(0, Counter(), Counter(), [], [])
    failing, seed = 0, first
    while failing < wanted:
        loop = random_loop(seed)
        asked = design(loop, Request(SERIES, 1, "size", "single"))
        if asked.judgement.verdict != "holds" or asked.chosen is None:
            failing += 1
            _note(found, f"loop {seed}", case_of_design(asked), finished(remedies_for_design(asked)))
        if seed % 4 == 0 and failing < wanted:
            failing += _with_vessel(found, seed, asked)
        seed += 1
    return found._replace(failing=failing)


def _with_vessel(found: Tally, seed: int, asked: Design) -> int:
    """The same loop with a vessel that is there; 1 if that fails."""
    random = Random(f"vessel {seed}")  # noqa: S311 - vessels, not secrets
    loop = replace(asked.loop, cooling_content=0.0)
    recommended = asked.volumes.recommended
    size = loop.content * random.uniform(0.3, 5) if recommended is None else recommended.smallest
    size *= random.choice((0.4, 0.8, 1.0, 1.3, 2.0))
    vessel = Vessel(
        id="there",
        nominal_volume=size,
        rated_pressure=random.choice((None, 6e5, 10e5)),
        acceptance_volume=random.choice((None, None, 0.6 * size)),
    )
    fill = asked.shown.window.recommended + random.uniform(-0.5, 0.5) * 1e5
    stated = fill if random.random() < 0.5 and 1e5 < fill < 30e5 else None
    sought = finished(remedies_for_vessel(loop, vessel, 1, "single", fill_pressure=stated))
    if not sought.needed:
        return 0
    case = case_of_vessel(loop, vessel, 1, "single", fill_pressure=stated)
    _note(found, f"vessel {seed}", case, sought)
    return 1


def _note(found: Tally, name: str, case: Case, sought: Remedies) -> None:
    found.outcomes["single" if sought.single else "none" if sought.pair is None else "pair"] += 1
    if not sought.complete:
        found.outcomes["cut short"] += 1
    found.evaluations.append(sought.evaluations)
    if sought.evaluations > MOST_QUICK + MOST_FULL + 1:
        found.broken.append(f"{name}: {sought.evaluations} trials")
    offers = [(one.code, one.changes) for one in sought.single]
    if sought.pair is not None:
        offers.append(("+".join(one.code for one in sought.pair), sought.pair.changes))
    for code, changes in offers:
        found.codes[code] += 1
        if not holds(changed(case, changes)):
            found.broken.append(f"{name}: {code}")


def holds(case: Case) -> bool:
    """Whether a design or a check of the case holds, asked from scratch."""
    if not case.existing:
        asked = design(case.loop, case.request)
        return asked.judgement.verdict == "holds" and asked.chosen is not None
    return _check(case.loop, case).judgement.verdict == "holds"


def _check(loop: Loop, case: Case):
    vessel = case.candidates[0]
    return check(loop, vessel, case.pieces, case.policy, fill_pressure=case.fill_pressure, mass=case.mass)


if __name__ == "__main__":
    done = tally(int(sys.argv[1]) if len(sys.argv) > 1 else 1000)
    print(*done.lines(), *done.broken, sep="\n")
    sys.exit(1 if done.broken else 0)
