"""Questions whose loops do not hold, one reason each: the wash house gone wrong."""

from copy import deepcopy
from typing import Any

from questions.wash_house import changed, least, wash_house

Q = dict[str, Any]


def _with(question: Q, *members: tuple[str, object]) -> Q:
    for pointer, value in members:
        question = changed(question, pointer, value)
    return question


def _bar(value: float) -> Q:
    return {"value": value, "unit": "barg"}


def _split(question: Q) -> Q:
    """Each run in two stretches over a crest, with no height stated but the crest's."""
    found = deepcopy(question)
    for run in found["pipeRuns"]:
        first = run["segments"][0]
        second = deepcopy(first)
        first["length"], second["length"] = {"value": 6, "unit": "m"}, {"value": 17, "unit": "m"}
        run["segments"] = [first, second]
    return found


def _two_roofs(question: Q) -> Q:
    found = deepcopy(question)
    south, north = found["collectors"][0], deepcopy(found["collectors"][0])
    south["count"], north["count"] = 5, 3
    north["id"], north["height"] = "north roof", {"value": 9, "unit": "m"}
    south["steamSpace"], north["steamSpace"] = "south", "north"
    found["collectors"] = [south, north]
    found["pipeRuns"] = [
        deepcopy(run) | {"id": f"{run['id']} {space}", "steamSpace": space}
        for space in ("south", "north")
        for run in found["pipeRuns"]
    ]
    return found


FAIR = ("/collectors/0/emptyingClass", "fair")
POOR = ("/collectors/0/emptyingClass", "poor")


def designs() -> dict[str, Q]:
    """Design questions that do not hold, by what is wrong."""
    house = wash_house()
    stock = [
        {"id": f"EV-{size}", "nominalVolume": {"value": size, "unit": "L"}, "ratedPressure": _bar(10)}
        for size in (18, 25, 35)
    ]
    weak = [item | {"nominalVolume": {"value": 200, "unit": "L"}, "ratedPressure": _bar(3)} for item in stock]
    return {
        "reference under all doubts": _with(house, FAIR, ("/doubtPolicy", "combined")),
        "poor emptying": _with(house, POOR),
        "low valve": _with(house, FAIR, ("/reliefValve/setPressure", _bar(4))),
        "too weak a mixture": _with(house, ("/site/coldestOutdoorTemperature/value", -28)),
        "too weak a mixture by mass": _with(
            house,
            ("/site/coldestOutdoorTemperature/value", -28),
            ("/fluid/concentration", {"kind": "by-mass", "share": {"value": 43, "unit": "mass-percent"}}),
        ),
        "too weak a mixture by protection": _with(
            house,
            ("/site/coldestOutdoorTemperature/value", -28),
            ("/fluid/concentration", {"kind": "protect-to", "temperature": {"value": -25, "unit": "degC"}}),
        ),
        "no glycol": _with(
            house, ("/site/coldestOutdoorTemperature/value", -10), ("/fluid", {"kind": "water"})
        ),
        "weak collectors": _with(house, ("/collectors/0/ratedPressure", _bar(4))),
        "weak listed part": _with(
            house,
            ("/parts", [{"name": "vent", "height": {"value": 11, "unit": "m"}, "ratedPressure": _bar(4.5)}]),
        ),
        "small stock": _with(house, FAIR, ("/vessel", {"kind": "stock", "items": stock})),
        "weak stock": _with(house, FAIR, ("/vessel", {"kind": "stock", "items": weak})),
        "weak series": _with(house, FAIR, ("/vessel", {"kind": "series", "ratedPressure": _bar(4)})),
        "small vessel": _with(
            house, FAIR, ("/vessel", {"kind": "given", "nominalVolume": {"value": 50, "unit": "L"}})
        ),
        "wrong filling": _with(
            house,
            (
                "/vessel",
                {"kind": "given", "nominalVolume": {"value": 160, "unit": "L"}, "fillPressure": _bar(1.3)},
            ),
        ),
        "shut return": _with(house, POOR, ("/pipeRuns/1/steamAccess", "closed")),
        "unknown check valve": _with(
            house, FAIR, ("/pipeRuns/1/steamAccess", "unknown"), ("/reliefValve/setPressure", _bar(5))
        ),
        "check valve to look at": _with(
            house, FAIR, ("/pipeRuns/1/steamAccess", "unknown"), ("/reliefValve/setPressure", _bar(5.5))
        ),
        "check valve to move": _with(house, FAIR, ("/pipeRuns/1/steamAccess", "closed")),
        "freezing and an unknown check valve": _with(
            house,
            FAIR,
            ("/site/coldestOutdoorTemperature/value", -28),
            ("/pipeRuns/1/steamAccess", "unknown"),
            ("/reliefValve/setPressure", _bar(5)),
        ),
        "high precharge": _with(house, FAIR, ("/precharge", {"kind": "stated", "pressure": _bar(4.2)})),
        "late cut-off": _with(house, ("/station/highestTemperature", {"value": 110, "unit": "degC"})),
        "no cooling vessel": _with(
            house,
            FAIR,
            ("/vessel", {"kind": "given", "nominalVolume": {"value": 100, "unit": "L"}}),
            ("/coolingVessel", {"kind": "none"}),
        ),
        "two stretches": _with(_split(house), POOR),
        "two roofs": _with(
            _two_roofs(house),
            POOR,
            ("/collectors/1/emptyingClass", "poor"),
            ("/pipeRuns/1/steamAccess", "closed"),
            ("/pipeRuns/3/steamAccess", "closed"),
        ),
        "first quote": least(),
        "weathered, in the mountains, in other units": _with(
            house,
            POOR,
            ("/units", "us"),
            ("/site/altitude", {"value": 6800, "unit": "ft"}),
            ("/reliefValve/setPressure", {"value": 75, "unit": "psig"}),
            ("/pipeRuns/0/segments/0/insulation", {"kind": "weathered"}),
        ),
        "freezing and steam": _with(house, POOR, ("/site/coldestOutdoorTemperature/value", -28)),
    }


def checks() -> dict[str, Q]:
    """Stagnation checks that do not hold, by what is wrong."""
    house = wash_house()
    for member in ("vessel", "coolingVessel"):
        house.pop(member)
    vessel = {"id": "EV", "nominalVolume": {"value": 100, "unit": "L"}, "ratedPressure": _bar(10)}
    fair = _with(house, FAIR, ("/vessel", vessel))
    small = _with(fair, ("/vessel/nominalVolume/value", 50))
    return {
        "small vessel": small,
        "small vessel, stated filling": _with(small, ("/fillPressure", _bar(1.92))),
        "low filling": _with(fair, ("/fillPressure", _bar(1.5)), ("/vessel/nominalVolume/value", 160)),
        "high filling": _with(fair, ("/fillPressure", _bar(3.8)), ("/vessel/nominalVolume/value", 160)),
        "hot membrane": fair,
        "small membrane": _with(fair, ("/vessel/acceptanceVolume", {"value": 35, "unit": "L"})),
        "delivered precharge": _with(
            fair,
            ("/vessel/deliveredPrecharge", _bar(3)),
            ("/vessel/prechargeAdjustable", False),
        ),
        "weak vessel": _with(fair, ("/vessel/ratedPressure", _bar(4)), ("/vessel/nominalVolume/value", 160)),
        "poor emptying": _with(fair, POOR, ("/vessel/nominalVolume/value", 200)),
        "three in parallel, in other units": _with(
            small,
            ("/vesselsInParallel", 3),
            ("/vessel/nominalVolume", {"value": 6, "unit": "gal_us"}),
            ("/units", "us"),
        ),
        "present cooling vessel too small": _with(
            fair, ("/coolingVessel", {"kind": "given", "content": {"value": 0.5, "unit": "L"}})
        ),
    }
