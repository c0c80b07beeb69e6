"""Questions at the ends of what is accepted: no answer may be impossible, and none may contradict another.

``hunt.py`` beside it asks as many more as there is time for.
"""

import pytest

from calc.extreme.hunt import asked

FIRST, COUNT, PARTS = 0, 160, 4


@pytest.mark.parametrize("part", range(PARTS))
def test_questions_at_the_ends_of_every_range_get_possible_answers_that_agree(part: int) -> None:
    outcomes = set()
    for seed in range(FIRST + part, FIRST + COUNT, PARTS):
        found = asked(seed)
        assert found.wrong == [], seed
        outcomes.add(found.outcome.split(":")[-1].strip())
    assert {"holds", "does-not-hold"} <= outcomes
