"""Searches that once did not end, or whose answer hung on what had been asked before."""

import pytest

from calc.loops import random_loop
from calc.reference import loop
from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Request, design
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import precharge
from loopslack.calc.sizing import mass_balance
from loopslack.calc.window import Bounds, Gas
from loopslack.library.vessels import preferred_vessels

BAR = 1e5
VOLUMES = (0.02, 0.1, 0.5, 1.0, 3.0, 3.75, 6.0, 10.0)
SERIES = tuple(
    Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=16 * BAR)
    for size in preferred_vessels()
)


def warm_bounds(analysis: Analysis, bounds: Bounds) -> dict[float, list[float]]:
    expelled = [analysis.case(s).final.expelled for s in analysis.singles if s.gas_follows]
    return {
        volume: [bounds._warm_mass(volume, analysis.final_pressure, one) for one in expelled]
        for volume in VOLUMES
    }


@pytest.mark.parametrize("seed", [6, 369, 449, 1788])
def test_the_bound_of_warm_gas_is_the_same_whatever_was_asked_before_and_grows_with_the_vessel(
    seed: int,
) -> None:
    analysis = Analysis(random_loop(seed))
    gas = Gas(1.0, precharge(analysis, 1.0), analysis.loop.temperatures.fill)
    bounds = Bounds(analysis, analysis.singles, gas)
    first, again = warm_bounds(analysis, bounds), warm_bounds(analysis, bounds)
    assert first == again
    assert any(first.values())
    assert sorted(first.values()) == list(first.values())


@pytest.mark.parametrize("jump", [0.0301234567, 0.2])
def test_a_slack_that_jumps_ends_the_search_on_the_side_that_has_a_window(
    jump: float, monkeypatch: pytest.MonkeyPatch
) -> None:
    calls = 0

    def at(self: object, nominal: float) -> float:
        nonlocal calls
        calls += 1
        return 3e4 if jump <= nominal < 40 * jump else -1e5

    monkeypatch.setattr(mass_balance._Slack, "at", at)
    analysis = Analysis(loop())
    monkeypatch.setattr(mass_balance._Slack, "least", lambda self: 0.01)
    found = mass_balance.feasible(analysis, analysis.singles)
    assert found is not None
    assert jump <= found.smallest < jump * (1 + 1e-6)
    assert 40 * jump * (1 - 1e-6) < found.largest < 40 * jump
    assert calls < 1000


def test_no_design_holds_without_a_vessel_whatever_may_be_added() -> None:
    holding = 0
    for seed in range(200):
        for cooling in ("size", "none"):
            found = design(random_loop(seed), Request(SERIES, 1, cooling, "single"))
            assert (found.judgement.verdict == "holds") == (found.chosen is not None), (seed, cooling)
            holding += found.chosen is not None
    assert holding > 20
