"""Random loops that fail, mended: sixty here, a thousand by ``thousand.py``."""

import pytest

from calc.remedies.thousand import Tally, tally


@pytest.fixture(scope="module")
def sixty() -> Tally:
    return tally(60)


def test_every_remedy_offered_makes_its_loop_hold(sixty):
    assert sixty.broken == []


def test_most_failing_loops_can_be_mended(sixty, capsys):
    with capsys.disabled():
        print("", *sixty.lines(), sep="\n")
    assert sixty.outcomes["single"] >= 30
    assert sixty.outcomes["none"] <= 10
    assert sum(sixty.outcomes[name] for name in ("single", "pair", "none")) == sixty.failing
