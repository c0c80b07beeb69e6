"""Questions whose derivations are redone: every way to name tubes, fluids, areas and vessels, every regime.

Own scenarios around the committed example; each changes what its name says.
"""

import json
from collections.abc import Callable
from copy import deepcopy
from functools import cache
from typing import Any, NamedTuple

import msgspec

from loopslack.calc.derivation.book import Book
from loopslack.calc.derivation.whole import derive_check, derive_design
from loopslack.calc.design import Design
from loopslack.calc.existing import Checked, check
from loopslack.contract.answering import loop as answering
from loopslack.contract.answers.derivation import Derivation
from loopslack.contract.questions import operations as questions
from loopslack.contract.reading.derivation import ground_of
from loopslack.contract.reading.existing import read_check
from loopslack.contract.writing.derivation import derivation
from questions.wash_house import changed, least, wash_house

Plain = dict[str, Any]


def quantity(value: float, unit: str) -> Plain:
    return {"value": value, "unit": unit}


def with_runs(question: Plain, change: Callable[[Plain, int], None]) -> Plain:
    found = deepcopy(question)
    for number, run in enumerate(found["pipeRuns"]):
        change(run, number)
    return found


def stretches(*lengths: float, **members: Any) -> Callable[[Plain, int], None]:
    """Split every run into stretches of these lengths, the first outdoors."""

    def change(run: Plain, _: int) -> None:
        first = run["segments"][0]
        run["segments"] = [
            {**deepcopy(first), "length": quantity(length, "m"), **(members if k == 0 else {})}
            for k, length in enumerate(lengths)
        ]

    return change


def given(litres: float, **members: Any) -> Plain:
    """The wash house with one vessel that is there."""
    vessel = {"kind": "given", "nominalVolume": quantity(litres, "L"), "ratedPressure": quantity(10, "barg")}
    return changed(wash_house(), "/vessel", {**vessel, **members})


def two_groups(apart: bool) -> Plain:
    """A second, cooler group, lower down; with its own steam space or in the same."""
    found = wash_house()
    second = deepcopy(found["collectors"][0])
    second["id"] = "lean-to"
    second["count"] = 3
    second["coefficients"]["a1"] = quantity(4.4, "W/m2K")
    second["height"] = quantity(9, "m")
    found["collectors"][0]["height"] = quantity(11, "m")
    found["collectors"].append(second)
    if apart:
        found["collectors"][0]["steamSpace"], second["steamSpace"] = "roof", "lean-to"
        for run in found["pipeRuns"]:
            run["steamSpace"] = "roof"
        for role in ("flow", "return"):
            run = deepcopy(found["pipeRuns"][0])
            run.update(id=f"{role} of the lean-to", role=role, steamSpace="lean-to")
            found["pipeRuns"].append(run)
    return found


def shared_cooler() -> Plain:
    """Both spaces reach the station at low pressure; a cooler there takes the steam of both."""
    found = two_groups(apart=True)
    for run in found["pipeRuns"]:
        run["segments"][0]["length"] = quantity(9 if run["steamSpace"] == "roof" else 4, "m")
    found["station"]["steamCooler"] = quantity(900, "W")
    return found


def uneven() -> Plain:
    """The flow drops steeply at first, the return evenly: fronts at one height, not at one share."""
    found = with_runs(wash_house(), stretches(6, 17))
    found["pipeRuns"][0]["segments"][0]["endHeight"] = quantity(2, "m")
    found["pipeRuns"][1]["segments"] = found["pipeRuns"][1]["segments"][1:]
    return found


def own_fluid(boiling: Plain) -> Plain:
    points = [(-30, 1059), (0, 1045), (40, 1022), (80, 993), (120, 959), (160, 920), (190, 887)]
    return {
        "kind": "own",
        "name": "ready mix",
        "points": [
            {"temperature": quantity(t, "degC"), "density": quantity(rho, "kg/m3")} for t, rho in points
        ],
        "freezingPoint": quantity(-24, "degC"),
        "boiling": boiling,
    }


TABLE = {
    "kind": "table",
    "points": [
        {"temperature": quantity(t, "degC"), "pressure": quantity(p, "bara")}
        for t, p in ((20, 0.02), (60, 0.17), (100, 0.88), (140, 3.15), (170, 6.9), (200, 13.5), (210, 16.6))
    ],
}
LIKE = {"kind": "like", "glycol": "propylene-glycol", "share": quantity(41, "mass-percent")}

WEATHERED = {"kind": "weathered", "thickness": quantity(20, "mm"), "lossFactor": 1.4}


def gross() -> Plain:
    """Coefficients of a test on the gross area, and a stagnation measured in another sun."""
    found = wash_house()
    group = found["collectors"][0]
    group["coefficients"]["basis"] = "gross"
    group["grossArea"] = quantity(2.5, "m2")
    group["measuredStagnation"] = {
        "temperature": quantity(171, "degC"),
        "irradiance": quantity(930, "W/m2"),
        "ambient": quantity(26, "degC"),
    }
    return found


def stock(*sizes: float) -> Plain:
    """A stock list with acceptance volumes, a fixed precharge and a membrane limit of its own."""
    items = [
        {
            "id": f"EV-{size}",
            "nominalVolume": quantity(size, "L"),
            "ratedPressure": quantity(10, "barg"),
            "acceptanceVolume": quantity(0.55 * size, "L"),
            "deliveredPrecharge": quantity(1.8, "barg"),
            "prechargeAdjustable": False,
            "membraneLimit": quantity(80, "degC"),
        }
        for size in sizes
    ]
    return changed(wash_house(), "/vessel", {"kind": "stock", "items": items})


def high_site() -> Plain:
    found = changed(wash_house(), "/site/altitude", quantity(1400, "m"))
    found = changed(found, "/gauge/height", quantity(1.2, "m"))
    return changed(found, "/reliefValve/height", quantity(0.8, "m"))


def tight(acceptance: float) -> Plain:
    return given(100, acceptanceVolume=quantity(acceptance, "L"), fillPressure=quantity(2.1, "barg"))


def bore(run: Plain, number: int) -> None:
    tubes = (
        {"kind": "bore", "bore": quantity(25, "mm")},
        {"kind": "content", "contentPerLength": quantity(0.5, "L/m"), "outerDiameter": quantity(29, "mm")},
    )
    run["segments"][0]["tube"] = tubes[number]
    run["segments"][0]["insulation"] = WEATHERED if number else {"kind": "none"}


def checked(question: Plain, litres: float, **members: Any) -> Plain:
    """The same loop as a stagnation check."""
    found = {key: value for key, value in question.items() if key not in ("vessel", "coolingVessel")}
    return {
        **found,
        "vessel": {"nominalVolume": quantity(litres, "L"), "ratedPressure": quantity(10, "barg")},
        **members,
    }


DESIGNS: dict[str, Callable[[], Plain]] = {
    "the committed example": wash_house,
    "a first quote": least,
    "US units": lambda: changed(wash_house(), "/units", "us"),
    "two stretches, one outdoors and weathered": lambda: with_runs(
        wash_house(), stretches(9, 14, zone="outdoor", insulation=WEATHERED)
    ),
    "tubes by bore and by content, bare and weathered": lambda: with_runs(wash_house(), bore),
    "a high site with gauge and valve above the vessel": high_site,
    "a valve below the vessel": lambda: changed(wash_house(), "/reliefValve/height", quantity(-1.5, "m")),
    "a stated allowance": lambda: changed(
        wash_house(), "/reliefValve/openingAllowance", {"kind": "stated", "value": quantity(0.4, "bar")}
    ),
    "an allowance below the set tolerance": lambda: changed(
        changed(wash_house(), "/reliefValve/setPressure", quantity(16, "barg")),
        "/reliefValve/openingAllowance",
        {"kind": "rule", "rule": "five-psi"},
    ),
    "a top pressure that decides": lambda: changed(
        changed(wash_house(), "/criteria/topPressure", quantity(1.5, "barg")),
        "/precharge",
        {"kind": "stated", "pressure": quantity(1.6, "barg"), "temperature": quantity(15, "degC")},
    ),
    "an allowance by five psi": lambda: changed(
        wash_house(), "/reliefValve/openingAllowance", {"kind": "rule", "rule": "five-psi"}
    ),
    "coefficients on the gross area, stagnation measured elsewhere": gross,
    "protected to a temperature": lambda: changed(
        wash_house(),
        "/fluid",
        {
            "kind": "ethylene-glycol",
            "concentration": {"kind": "protect-to", "temperature": quantity(-25, "degC")},
        },
    ),
    "strength by mass": lambda: changed(
        wash_house(),
        "/fluid/concentration",
        {"kind": "by-mass", "share": quantity(45, "mass-percent")},
    ),
    "water in a mild place": lambda: changed(
        changed(wash_house(), "/fluid", {"kind": "water"}),
        "/site/coldestOutdoorTemperature",
        quantity(6, "degC"),
    ),
    "an own fluid by tables": lambda: changed(wash_house(), "/fluid", own_fluid(TABLE)),
    "an own fluid that boils like a known one": lambda: changed(wash_house(), "/fluid", own_fluid(LIKE)),
    "a site that freezes the fluid": lambda: changed(
        wash_house(), "/site/coldestOutdoorTemperature", quantity(-27, "degC")
    ),
    "two groups in one steam space": lambda: two_groups(apart=False),
    "two groups in steam spaces of their own": lambda: two_groups(apart=True),
    "a cooler shared by two steam spaces": shared_cooler,
    "runs of different courses": uneven,
    "a stock list with a fixed precharge": lambda: stock(80, 100, 140, 200),
    "an optimised precharge": lambda: changed(wash_house(), "/precharge", {"kind": "optimised"}),
    "a stated precharge": lambda: changed(
        wash_house(),
        "/precharge",
        {"kind": "stated", "pressure": quantity(1.9, "barg"), "temperature": quantity(18, "degC")},
    ),
    "a cooling vessel that is there": lambda: changed(
        wash_house(), "/coolingVessel", {"kind": "given", "content": quantity(20, "L")}
    ),
    "no cooling vessel": lambda: changed(wash_house(), "/coolingVessel", {"kind": "none"}),
    "two vessels in parallel": lambda: changed(stock(50), "/vesselsInParallel", 2),
    "a vessel whose valve opens": lambda: given(20),
    "a vessel filled as stated": lambda: given(100, fillPressure=quantity(2.2, "barg")),
    "a vessel whose membrane takes little": lambda: tight(30),
    "a cooler at the station": lambda: changed(
        changed(wash_house(), "/station/steamCooler", quantity(600, "W")),
        "/collectors/0/emptyingClass",
        "poor",
    ),
    "steam at the station": lambda: with_runs(
        changed(wash_house(), "/collectors/0/emptyingClass", "poor"), stretches(9)
    ),
    "an unknown check valve": lambda: changed(wash_house(), "/pipeRuns/1/steamAccess", "unknown"),
    "a closed return": lambda: changed(wash_house(), "/pipeRuns/1/steamAccess", "closed"),
    "a measured steam power": lambda: {
        **wash_house(),
        "collectors": [
            {k: v for k, v in wash_house()["collectors"][0].items() if k != "emptyingClass"}
            | {"measuredSteamPower": quantity(62, "W/m2")}
        ],
    },
    "a reserve of the caller's": lambda: changed(wash_house(), "/criteria/reserve", quantity(4, "L")),
    "a vessel on the discharge side of the pump": lambda: changed(wash_house(), "/pump/side", "discharge"),
    "every doubt at once": lambda: changed(wash_house(), "/doubtPolicy", "combined"),
    "a vessel outdoors": lambda: changed(wash_house(), "/vesselZone", "outdoor"),
    "a high valve and a loop that hardly boils": lambda: changed(
        wash_house(), "/reliefValve/setPressure", quantity(9.5, "barg")
    ),
}
CHECKS: dict[str, Callable[[], Plain]] = {
    "eighty litres": lambda: checked(wash_house(), 80),
    "eighty litres, filled as stated": lambda: checked(wash_house(), 80, fillPressure=quantity(1.9, "barg")),
    "a vessel that pins the collectors": lambda: changed(
        checked(wash_house(), 40, fillPressure=quantity(2.2, "barg")),
        "/reliefValve/setPressure",
        quantity(9, "barg"),
    ),
    "a vessel too large for the pipes": lambda: changed(
        checked(wash_house(), 300, fillPressure=quantity(2.0, "barg")),
        "/collectors/0/emptyingClass",
        "poor",
    ),
    "filled below the precharge": lambda: checked(wash_house(), 80, fillPressure=quantity(1.5, "barg")),
    "a cooling vessel that is there": lambda: checked(
        wash_house(), 100, coolingVessel={"kind": "given", "content": quantity(15, "L")}
    ),
    "hardly any boiling": lambda: changed(
        checked(wash_house(), 25, fillPressure=quantity(3.4, "barg")),
        "/reliefValve/setPressure",
        quantity(12, "barg"),
    ),
    "no boiling": lambda: changed(
        checked(wash_house(), 25, fillPressure=quantity(4.5, "barg")),
        "/reliefValve/setPressure",
        quantity(16, "barg"),
    ),
    "a membrane that is full when filled": lambda: checked(
        wash_house(),
        80,
        vessel={
            "nominalVolume": quantity(80, "L"),
            "ratedPressure": quantity(10, "barg"),
            "acceptanceVolume": quantity(1.2, "L"),
        },
    ),
}


class Case(NamedTuple):
    """A question with its answer and its derivation."""

    question: Plain
    answer: Plain
    found: Design | Checked
    book: Book
    derivation: Derivation
    printed: Plain


@cache
def design_case(name: str) -> Case:
    plain = DESIGNS[name]()
    question = msgspec.json.decode(json.dumps(plain), type=questions.LoopDesignQuestion)
    asked = answering.designed(question)
    reading, found = asked.reading, asked.design
    book = derive_design(found, ground_of(question, reading))
    return _case(plain, answering.design_loop(question), found, book, derivation(found, reading, question))


@cache
def check_case(name: str) -> Case:
    plain = CHECKS[name]()
    question = msgspec.json.decode(json.dumps(plain), type=questions.StagnationCheckQuestion)
    reading, vessel, fill, _ = read_check(question)
    found = check(reading.loop, vessel, question.vessels_in_parallel or 1, reading.policy, fill_pressure=fill)
    book = derive_check(found, ground_of(question, reading))
    return _case(
        plain, answering.check_stagnation(question), found, book, derivation(found, reading, question)
    )


def _case(plain: Plain, answer: object, found: Design | Checked, book: Book, derived: Derivation) -> Case:
    return Case(
        plain,
        json.loads(msgspec.json.encode(answer)),
        found,
        book,
        derived,
        json.loads(msgspec.json.encode(derived)),
    )


@cache
def sizing_case(name: str) -> Case:
    plain = DESIGNS[name]()
    question = msgspec.json.decode(json.dumps(plain), type=questions.VesselSizingQuestion)
    asked = answering.designed(question)
    reading, found = asked.reading, asked.design
    book = derive_design(found, ground_of(question, reading), sizing=True)
    return _case(plain, answering.size_vessel(question), found, book, derivation(found, reading, question))


CASES = [*(("design", name) for name in DESIGNS), *(("check", name) for name in CHECKS)]


def case(kind: str, name: str) -> Case:
    return design_case(name) if kind == "design" else check_case(name)
