"""Where no vessel does: which one an answer shows, what it says against each, and what it does not hand out."""

import json
from typing import Any

import msgspec
import pytest

from calc.reference import BAR, loop
from loopslack.calc import nearest as nearest_module
from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Request, design
from loopslack.calc.judge import required
from loopslack.calc.model import Vessel
from loopslack.calc.nearest import Asked, judged, nearest
from loopslack.calc.reasons import Reason
from loopslack.calc.selection import Refusal
from loopslack.calc.sizing.volumes import size
from loopslack.contract.answering.loop import design_loop, size_vessel
from loopslack.contract.questions.operations import LoopDesignQuestion, VesselSizingQuestion
from loopslack.kernel import kinds
from loopslack.kernel.work import finished
from questions.wash_house import wash_house

Plain = dict[str, Any]
LITRES = (12, 18, 25, 35, 50, 80)
NO_WINDOW = (Reason("no-window", kinds.PRESSURE_DIFFERENCE, None, None, None),)


def small_loop(**changes: Any) -> Plain:
    """Three collectors, runs whose check valves nobody placed, and a stock list."""
    asked = wash_house()
    asked["fluid"]["concentration"]["share"]["value"] = 46
    asked["collectors"][0]["count"] = 3
    for run in asked["pipeRuns"]:
        run.pop("steamAccess", None)
        run["segments"][0]["length"]["value"] = 12
        run["segments"][0]["tube"]["size"] = "18x1"
    asked["vessel"] = {
        "kind": "stock",
        "items": [
            {
                "id": f"V{litres}",
                "nominalVolume": {"value": litres, "unit": "L"},
                "ratedPressure": {"value": 10, "unit": "barg"},
                "acceptanceVolume": {"value": 0.8 * litres, "unit": "L"},
            }
            for litres in LITRES
        ],
    }
    return asked | changes


def answer(asked: Plain) -> Plain:
    question = msgspec.convert(asked, LoopDesignQuestion)
    return json.loads(msgspec.json.encode(design_loop(question)))


@pytest.fixture(scope="module")
def unknown() -> Plain:
    return answer(small_loop())


def core_failures(result: Plain) -> list[tuple[str, str]]:
    return [
        (check["code"], check["scenario"])
        for check in result["checks"]
        if check["group"] == "core" and check["verdict"] != "holds" and check["scenario"] != "all-doubts"
    ]


def test_the_vessel_shown_is_the_smallest_that_fails_nothing_but_what_every_vessel_fails(
    unknown: Plain,
) -> None:
    result = unknown["result"]
    assert result["nearestVessel"]["id"] == "V35"
    assert core_failures(result) == [
        ("steam-at-station", "closed-branch"),
        ("fill-window", "required-doubts"),
    ]


@pytest.mark.parametrize("litres", [12, 18, 25])
def test_no_other_candidate_fails_less_than_the_one_shown(unknown: Plain, litres: int) -> None:
    asked = small_loop()
    asked["vessel"]["items"] = [one for one in asked["vessel"]["items"] if one["id"] == f"V{litres}"]
    alone = answer(asked)["result"]
    assert alone["nearestVessel"]["id"] == f"V{litres}"
    assert len(core_failures(alone)) >= len(core_failures(unknown["result"]))


def test_vessels_too_small_are_told_so_although_no_volume_survives_every_doubt(unknown: Plain) -> None:
    result = unknown["result"]
    assert "recommended" not in result["volumes"]
    smallest = result["volumes"]["base"]["smallest"]["value"]
    told = {one["id"]: one["reasons"] for one in result["selection"]["refused"]}
    assert set(told) == {f"V{litres}" for litres in LITRES}
    for litres in LITRES:
        reasons = {reason["code"]: reason for reason in told[f"V{litres}"]}
        assert "unspent-power" in reasons
        if litres < smallest:
            assert reasons["nominal-volume"]["limit"]["value"] >= smallest
    for litres in (35, 50, 80):
        assert [reason["code"] for reason in told[f"V{litres}"]] == ["unspent-power"]


def test_the_steam_power_left_over_is_one_number_in_reason_check_and_advisory(unknown: Plain) -> None:
    result = unknown["result"]
    check = next(
        c for c in result["checks"] if c["code"] == "steam-at-station" and c["scenario"] == "closed-branch"
    )
    advisory = next(a for a in unknown["advisories"] if a["code"] == "steam-at-station")
    assert advisory["parameters"]["value"] == check["value"]
    for refused in result["selection"]["refused"]:
        reason = next(reason for reason in refused["reasons"] if reason["code"] == "unspent-power")
        assert reason["value"] == reason["shortBy"] == check["value"]


def test_a_cooler_of_the_power_a_reason_is_short_by_settles_it(unknown: Plain) -> None:
    short = unknown["result"]["selection"]["refused"][0]["reasons"][0]["shortBy"]
    asked = small_loop()
    asked["station"]["steamCooler"] = {"value": short["value"] + 1, "unit": short["unit"]}
    result = answer(asked)["result"]
    assert "recommended" in result["volumes"]
    codes = {reason["code"] for one in result["selection"]["refused"] for reason in one["reasons"]}
    assert "unspent-power" not in codes


def test_no_settings_and_no_window_are_handed_out_where_no_fill_pressure_keeps_every_check(
    unknown: Plain,
) -> None:
    assert "settings" not in unknown["result"]
    assert "window" not in unknown["result"]
    sizing = small_loop()
    sizing.pop("include", None)
    sized = json.loads(msgspec.json.encode(size_vessel(msgspec.convert(sizing, VesselSizingQuestion))))
    assert "window" not in sized["result"]
    assert sized["result"]["nearestVessel"] == unknown["result"]["nearestVessel"]


def test_a_window_shown_passes_the_check_of_the_window_that_counts() -> None:
    result = answer(wash_house())["result"]
    check = next(c for c in result["checks"] if c["scenario"] == "required-doubts")
    assert result["window"]["width"] == check["value"]
    assert result["settings"]["window"] == result["window"]


def test_a_vessel_with_too_low_a_rating_alone_is_filled_for_every_doubt() -> None:
    candidates = (Vessel(id="weak", nominal_volume=0.5, rated_pressure=3 * BAR),)
    found = design(loop(), Request(candidates, 1, "size", "single"))
    assert found.chosen is None
    assert found.shown.counted
    counted = [one for one in found.judgement.failing if one.core and one.state != "all-doubts"]
    assert [check.code for check in counted] == ["part-protected"]


@pytest.mark.parametrize("volumes", [200, 8])
def test_of_a_long_list_some_eight_kinds_are_judged(monkeypatch: pytest.MonkeyPatch, volumes: int) -> None:
    counted = []

    def counting(*given: Any) -> Any:
        counted.append(given)
        return judged(*given)

    monkeypatch.setattr(nearest_module, "judged", counting)
    analysis = Analysis(loop())
    stock = [Vessel(id=f"{k}", nominal_volume=0.01 + 0.0005 * k) for k in range(volumes)]
    asked = Asked(analysis, "single", "size", None)
    found = finished(nearest(asked, [Refusal(vessel, 1, NO_WINDOW) for vessel in stock for _ in range(2)]))
    assert len(counted) <= 9
    if volumes <= 8:
        assert len(counted) == volumes
    assert found.vessel in stock


def test_among_equals_the_one_with_fewer_reasons_and_then_the_first_in_rank_is_shown() -> None:
    analysis = Analysis(loop())
    sized = size(analysis, required(analysis, "single"), "size", analysis.loop.criteria.membrane_limit)
    assert sized is not None
    asked = Asked(analysis, "single", "size", None)
    one, other = (
        Vessel(id=name, nominal_volume=factor * sized.smallest) for name, factor in (("a", 1.2), ("b", 1.3))
    )
    few, more = NO_WINDOW, 2 * NO_WINDOW
    assert finished(nearest(asked, [Refusal(one, 1, few), Refusal(other, 1, few)])).vessel is one
    assert finished(nearest(asked, [Refusal(other, 1, few), Refusal(one, 1, few)])).vessel is other
    assert finished(nearest(asked, [Refusal(one, 1, more), Refusal(other, 1, few)])).vessel is other


def test_a_loop_without_a_return_run_is_warned_of() -> None:
    asked = wash_house()
    assert "no-return-run" not in {one["code"] for one in answer(asked)["advisories"]}
    asked["pipeRuns"] = [run | {"role": "flow"} for run in asked["pipeRuns"]]
    warned = next(one for one in answer(asked)["advisories"] if one["code"] == "no-return-run")
    assert warned["severity"] == "warning"


def test_the_note_on_robustness_points_at_a_volume_only_where_there_is_one() -> None:
    told = set()
    for metres in (18, 23):
        asked = wash_house()
        for run in asked["pipeRuns"]:
            run["segments"][0]["length"]["value"] = metres
        found = answer(asked)
        for advisory in found["advisories"]:
            if advisory["code"] == "not-robust":
                robust = "robust" in found["result"]["volumes"]
                told.add(robust)
                assert ("`volumes.robust`" in advisory["remedy"]) == robust
    assert told == {True, False}
