"""The search itself: its pauses, its bounds, and which way its amounts move."""

import pytest
from msgspec.structs import replace

from calc.reference import ATMOSPHERE, BAR, group, loop, run
from calc.remedies.thousand import SERIES
from loopslack.calc.design import Request, design
from loopslack.calc.model import Vessel
from loopslack.calc.remedies.bench import MOST_FULL, MOST_QUICK, Bench
from loopslack.calc.remedies.case import case_of_design, case_of_vessel, thinned
from loopslack.calc.remedies.changes import Change, bared, changed, lengthened, valve_set_to
from loopslack.calc.remedies.heat import StagnationCooler
from loopslack.calc.remedies.pipes import BarePipe, ExtraPipe
from loopslack.calc.remedies.seek import remedies
from loopslack.kernel.work import finished


def case_of(loop_, policy="single"):
    return case_of_design(design(loop_, Request(SERIES, 1, "size", policy)))


def poor(power, **changes):
    return loop(groups=(group(emptying="poor", steam_power=power, worse_steam_power=None),), **changes)


def amount(measure, loop_):
    found = finished(measure.search(case_of(loop_), Bench()))
    return None if found is None else found.amount


def test_the_search_pauses_after_every_trial():
    bench = Bench()
    work = remedies(case_of(poor(120.0)), bench)
    before, pauses = 0, 0
    for _ in work:
        assert bench.evaluations - before <= 1
        before = bench.evaluations
        pauses += 1
    assert pauses >= bench.evaluations
    assert bench.evaluations > 30


def test_the_same_case_gives_the_same_remedies():
    one, other = (finished(remedies(case_of(poor(120.0)), Bench())) for _ in range(2))
    assert [(f.code, f.amount, f.changes) for f in one.single] == [
        (f.code, f.amount, f.changes) for f in other.single
    ]
    assert one[2:] == other[2:]


def test_a_search_cut_short_says_so_and_offers_only_what_it_tried_in_full():
    found = finished(remedies(case_of(poor(120.0)), Bench(most_quick=25)))
    assert not found.complete
    assert found.evaluations <= 25 + MOST_FULL
    for one in found.single:
        assert one.outcome.holds
    whole = finished(remedies(case_of(poor(120.0)), Bench()))
    assert whole.complete
    assert whole.evaluations < MOST_QUICK + MOST_FULL


@pytest.mark.parametrize("measure", [StagnationCooler(), ExtraPipe(), BarePipe()])
def test_more_steam_asks_for_more(measure):
    amounts = [amount(measure, poor(power)) for power in (100.0, 110.0, 120.0)]
    assert amounts == sorted(amounts)
    assert amounts[0] < amounts[-1]


@pytest.mark.parametrize("measure", [StagnationCooler(), BarePipe()])
def test_more_pipe_and_a_higher_valve_ask_for_less(measure):
    longer = poor(120.0, branches=(run("flow", "flow", 25.0), run("return", "return", 25.0)))
    assert amount(measure, longer) < amount(measure, poor(120.0))
    higher = poor(120.0, relief=valve_set_to(loop().relief, 6.5 * BAR))
    assert amount(measure, higher) < amount(measure, poor(120.0))


def test_a_cooler_that_is_there_counts():
    bare = amount(StagnationCooler(), poor(120.0))
    some = poor(120.0, station=replace(loop().station, steam_loss=300.0))
    assert amount(StagnationCooler(), some) == pytest.approx(bare, rel=0.01)


def test_changes_leave_the_case_they_start_from_as_it_was():
    case = case_of(poor(120.0))
    before = case.loop
    changed(
        case, (Change("steam-cooler", 500.0), Change("extra-pipe", 3.0), Change("bare-pipe", 5.0, place=1))
    )
    assert case.loop is before
    assert case.loop.station.steam_loss == 0
    assert case.loop.branches[0].length == 23


def test_baring_a_run_keeps_its_length_content_and_heights():
    branch = run("flow", "flow")
    crest = replace(branch.segments[0], length=5.0, end_height=12.0)
    rest = replace(branch.segments[0], length=18.0, start_height=12.0)
    two = replace(branch, segments=(crest, rest))
    for metres in (0.0, 4.0, 18.0, 20.0, 23.0, 40.0):
        found = bared(two, metres)
        assert found.length == pytest.approx(23)
        assert found.content == pytest.approx(two.content)
        assert found.segments[0].start_height == 11
        assert found.segments[-1].end_height == 0
        assert sum(s.length for s in found.segments if s.insulation == 0) == pytest.approx(min(metres, 23))
        for before, after in zip(found.segments, found.segments[1:], strict=False):
            assert before.end_height == pytest.approx(after.start_height)
    assert lengthened(two, 4.0).length == 27


def test_a_long_stock_is_thinned_to_what_refuses_least():
    stock = [
        Vessel(
            id=f"{k}", nominal_volume=(20 + 0.01 * k) * 1e-3, rated_pressure=rating, acceptance_volume=0.01
        )
        for k in range(3000)
        for rating in ([10 * BAR] if k % 7 == 0 else [3 * BAR])
    ]
    few = thinned(stock)
    assert len(few) <= 12
    assert all(vessel.rated_pressure == 10 * BAR for vessel in few)
    assert thinned(few) == few


def test_the_filling_stays_where_a_new_one_is_not_part_of_the_work():
    vessel = Vessel(id="there", nominal_volume=0.16)
    case = case_of_vessel(loop(), vessel, 1, "single", fill_pressure=ATMOSPHERE + 1.3 * BAR)
    found = finished(remedies(case, Bench()))
    codes = {one.code: one for one in found.single}
    assert "fill-pressure" in codes
    for code, one in codes.items():
        if code != "fill-pressure":
            assert one.case.fill_pressure == case.fill_pressure


def test_work_that_opens_the_loop_ends_with_the_recommended_filling():
    vessel = Vessel(id="there", nominal_volume=0.05)
    case = case_of_vessel(loop(), vessel, 1, "single", fill_pressure=ATMOSPHERE + 1.92 * BAR)
    found = finished(remedies(case, Bench()))
    codes = {one.code: one for one in found.single}
    assert "fill-pressure" not in codes
    assert codes["vessel"].case.fill_pressure is None
    assert Change("fill-pressure") in codes["vessel"].changes
