"""What a design costs in one process, in units of a bare decode and encode of the same bytes.

The unit is taken on the same core in the same run: read the question's bytes into structs, write the answer's
structs as bytes, compute nothing.
"""

from __future__ import annotations

import cProfile
import io
import pstats
import time
from collections.abc import Callable

import msgspec

from load.outcome import Figure, Run, at_most
from load.questions import DECODER, answered, drawn
from loopslack.contract.answers.operations import LoopDesignAnswer

EVERYTHING = ["rules", "remedies", "sensitivity", "course", "derivation"]
ANSWER = msgspec.json.Decoder(LoopDesignAnswer)
ENCODE = msgspec.json.Encoder().encode


def figures(run: Run) -> list[Figure]:
    """Units per design for holding loops, for all loops, with derivation and with everything."""
    corpus = run.corpus
    repeats = 2 if run.short else 4
    table = []
    holding = corpus.holding or corpus.bodies[:1]
    unit, design = sums(holding, corpus.answers, repeats)
    table.append(at_most("in process, holding loops", design / unit, 6.0, "U"))
    if not table[-1].met:
        run.profiles.append(profile(holding))
    table.append(Figure("in process, holding loops", f"{design / len(holding) * 1e3:.2f} ms"))
    table.append(Figure("the unit U, holding loops", f"{unit / len(holding) * 1e6:.1f} us"))
    unit, design = sums(corpus.bodies, corpus.answers, repeats)
    table.append(at_most("in process, all loops", design / unit, 6.0, "U"))
    table.append(Figure("designs per second and core", f"{len(corpus.bodies) / design:.0f} /s"))
    parts: list[tuple[str, list[str] | None, float | None]] = [
        ("derivation", ["derivation"], 25.0),
        ("what the service adds by default", None, None),
        ("everything", EVERYTHING, None),
    ]
    for name, include, bound in parts:
        costly = drawn(4 if run.short else 12, 0, include=include)
        unit, design = sums(costly.bodies, costly.answers, 1)
        label = f"in process, with {name}"
        table.append(
            at_most(label, design / unit, bound, "U") if bound else Figure(label, f"{design / unit:.0f} U")
        )
    return table


def sums(bodies: list[bytes], answers: dict[bytes, bytes], repeats: int) -> tuple[float, float]:
    """Seconds for a bare decode and encode of all bodies, and for designing them all; the best of some repeats."""
    unit = design = 0.0
    for body in bodies:
        structs = ANSWER.decode(answers[body])

        def bare(body: bytes = body, structs: LoopDesignAnswer = structs) -> object:
            return DECODER.decode(body), ENCODE(structs)

        def designed(body: bytes = body) -> object:
            return answered(body)

        unit += best(bare, 5 * repeats)
        design += best(designed, repeats)
    return unit, design


def best(action: Callable[[], object], repeats: int) -> float:
    """The shortest processor time of some repeats."""
    shortest = float("inf")
    for _ in range(repeats):
        began = time.process_time_ns()
        action()
        shortest = min(shortest, (time.process_time_ns() - began) / 1e9)
    return shortest


def profile(bodies: list[bytes]) -> str:
    """Where the time of these designs goes."""
    profiler = cProfile.Profile()
    profiler.enable()
    for body in bodies:
        answered(body)
    profiler.disable()
    text = io.StringIO()
    pstats.Stats(profiler, stream=text).strip_dirs().sort_stats("tottime").print_stats(18)
    return f"Profile of {len(bodies)} holding designs:\n" + text.getvalue().strip()
