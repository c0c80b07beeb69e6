"""Work in the event loop lets others go on, and a design without a vessel does so between its candidates."""

import asyncio

import msgspec
import pytest

from load.bodies import design_question, encoded
from loopslack.api import turns
from loopslack.contract.answering.loop import design_loop, design_loop_in_turns
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.kernel.work import Work

DECODER = msgspec.json.Decoder(LoopDesignQuestion)


class Clock:
    """A clock that shows what it is told, so that nothing here hangs on how busy the machine is."""

    def __init__(self) -> None:
        self.now = 0.0

    def __call__(self) -> float:
        return self.now


def in_turns_beside_another(work: Work[str], clock: Clock) -> tuple[tuple[str, float], int]:
    """The result of work in a loop in which another task wants its turns, and how many it had meanwhile."""

    async def both() -> tuple[tuple[str, float], int]:
        seen = 0

        async def other() -> None:
            nonlocal seen
            while True:
                seen += 1
                clock.now += 0.5
                await asyncio.sleep(0)

        task = asyncio.create_task(other())
        found = await turns.in_turns(work)
        task.cancel()
        return found, seen

    return asyncio.run(both())


@pytest.mark.parametrize(
    ("seconds", "turns_of_others"), [(turns.TURN_SECONDS * 1.01, 7), (turns.TURN_SECONDS / 3.5, 1), (0.0, 0)]
)
def test_work_lets_others_go_on_as_soon_as_its_turn_is_over(
    seconds: float, turns_of_others: int, monkeypatch: pytest.MonkeyPatch
) -> None:
    clock = Clock()
    monkeypatch.setattr(turns, "perf_counter", clock)

    def steps() -> Work[str]:
        for _ in range(7):
            clock.now += seconds
            yield
        return "done"

    (answer, waited), seen = in_turns_beside_another(steps(), clock)
    assert answer == "done"
    assert seen == turns_of_others
    assert waited == pytest.approx(0.5 * seen)


def test_a_design_pauses_between_its_volumes_and_between_the_candidates_it_judges() -> None:
    pauses: dict[bool, list[int]] = {True: [], False: []}
    for seed in range(30):
        asked = DECODER.decode(encoded({**design_question(seed), "include": []}))
        work, count, answer = design_loop_in_turns(asked), 0, None
        while answer is None:
            try:
                next(work)
                count += 1
            except StopIteration as end:
                answer = end.value
        assert answer == design_loop(asked)
        pauses[answer.result.chosen_vessel is not None].append(count)
    # Reading, three volumes, the choice and the verdict; where nothing is chosen, the candidates that are judged too.
    assert min(pauses[True]) >= 6
    assert min(pauses[False]) >= 7
    assert max(pauses[False]) >= 12
