"""Draws and asks question after question and tells what went wrong.

python tests/calc/extreme/hunt.py [FIRST [COUNT]]
"""

import sys
import traceback
from collections import Counter
from pathlib import Path
from time import process_time

if __name__ == "__main__":
    sys.path.insert(0, str(Path(__file__).parents[2]))

from calc.extreme.asking import Asked, ask
from calc.extreme.drawing import question, seeded
from calc.extreme.shapes import Data
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from loopslack.contract.questions.operations import (
    LoopDesignQuestion,
    StagnationCheckQuestion,
    VesselSizingQuestion,
)

KINDS: tuple[type, ...] = (
    *(LoopDesignQuestion,) * 8,
    *(StagnationCheckQuestion,) * 6,
    *(VesselSizingQuestion,) * 2,
    *(VesselAuditQuestion,) * 3,
    StagnationCourseQuestion,
)


def drawn(seed: int) -> tuple[type, Data]:
    """The question of a seed with its type."""
    random = seeded(seed)
    kind = random.choice(KINDS)
    return kind, question(random, kind)


def asked(seed: int) -> Asked:
    """What came of the question of a seed; an exception is something wrong like any other."""
    kind, data = drawn(seed)
    try:
        found = ask(data, kind)
    except Exception as error:  # noqa: BLE001 - whatever it is, it has to be told
        where = traceback.extract_tb(error.__traceback__)[-1]
        return Asked("exception", [f"{error!r} in {where.filename}:{where.lineno}"])
    return found._replace(outcome=f"{kind.__name__}: {found.outcome}")


def hunt(first: int, count: int) -> int:
    """Ask so many questions; how many had something wrong."""
    outcomes: Counter[str] = Counter()
    slowest: list[tuple[float, int]] = []
    bad = 0
    for seed in range(first, first + count):
        began = process_time()
        found = asked(seed)
        slowest = sorted([*slowest, (process_time() - began, seed)], reverse=True)[:5]
        outcomes[found.outcome] += 1
        if found.wrong:
            bad += 1
            print(seed, found.outcome, *found.wrong[:4], sep="\n    ", flush=True)
    for outcome, times in outcomes.most_common():
        print(f"{times:6d}  {outcome}")
    print("slowest:", ", ".join(f"{seconds:.2f} s ({seed})" for seconds, seed in slowest))
    return bad


if __name__ == "__main__":
    first, count = (int(sys.argv[k]) if len(sys.argv) > k else default for k, default in ((1, 0), (2, 1000)))
    sys.exit(1 if hunt(first, count) else 0)
