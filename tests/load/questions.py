"""The questions the figures are made with, sorted by what comes of them, and the answers that are right.

A corpus is drawn once per run: consecutive seeds, asked in process. Must not live here: time.
"""

from __future__ import annotations

import json
from collections import Counter
from dataclasses import dataclass
from typing import Any

import msgspec

from load.bodies import design_question, encoded
from loopslack.contract.answering import loop as answering
from loopslack.contract.encoding import encoded as encoded_answer
from loopslack.contract.questions import operations as questions
from loopslack.kernel.errors import CalculationError

DECODER = msgspec.json.Decoder(questions.LoopDesignQuestion)


@dataclass(frozen=True)
class Corpus:
    """Questions as sent, their answers in the same order, and how many had which verdict."""

    bodies: list[bytes]
    answers: dict[bytes, bytes]
    holding: list[bytes]
    verdicts: Counter[str]

    def right(self, body: bytes, answer: bytes) -> bool:
        """Whether a served answer is the one computed here."""
        return self.answers[body] == answer


def drawn(count: int, holding: int, *, include: list[str] | None = None) -> Corpus:
    """Draw seeds until there are enough questions, and enough whose design holds, which may take more seeds.

    A question that cannot be answered (a loop outside the range of the fluid's data) is left out and counted.
    """
    answers: dict[bytes, bytes] = {}
    held: list[bytes] = []
    bodies: list[bytes] = []
    verdicts: Counter[str] = Counter()
    seed = 0
    while len(bodies) < count or (len(held) < holding and seed < 40 * holding):
        question = design_question(seed)
        if include is not None:
            question["include"] = include
        body = encoded(question)
        seed += 1
        try:
            answer = answered(body)
        except CalculationError:
            verdicts["refused"] += 1
            continue
        verdict = json.loads(answer)["result"]["verdict"]
        verdicts[verdict] += 1
        if len(bodies) < count:
            bodies.append(body)
            answers[body] = answer
        if verdict == "holds" and len(held) < holding:
            held.append(body)
            answers[body] = answer
    return Corpus(bodies, answers, held, verdicts)


def answered(body: bytes) -> bytes:
    """The answer to one body, computed in this process."""
    told: Any = answering.design_loop(DECODER.decode(body))
    return told if isinstance(told, bytes) else encoded_answer(told)
