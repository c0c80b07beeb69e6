"""One change for every member of a design question: within range, alone, and with an effect that a user would expect.

``CHANGES`` holds, per base question, pointers with the new value. ``WITHOUT_EFFECT`` is reviewed by hand: members
that may change without changing the answer, each with the reason.
"""

import json
from copy import deepcopy
from pathlib import Path
from typing import Any

EXAMPLE = Path(__file__).parents[2] / "openapi" / "examples" / "loop-design.json"


def q(value: float, unit: str) -> dict[str, Any]:
    return {"value": value, "unit": unit}


def _base() -> dict[str, Any]:
    return json.loads(EXAMPLE.read_text(encoding="utf-8"))


def _with(**members: Any) -> dict[str, Any]:
    return _base() | members


def _segments(**members: Any) -> list[dict[str, Any]]:
    runs = deepcopy(_base()["pipeRuns"])
    for run in runs:
        run["segments"][0] |= members
    return runs


def _collectors(**members: Any) -> list[dict[str, Any]]:
    group = {k: v for k, v in (_base()["collectors"][0] | members).items() if v is not None}
    return [group]


STOCK = {
    "kind": "stock",
    "items": [
        {
            "id": f"E{litres}",
            "nominalVolume": q(litres, "L"),
            "ratedPressure": q(10, "barg"),
            "acceptanceVolume": q(litres * 0.6, "L"),
            "deliveredPrecharge": q(1.9, "barg"),
            "prechargeAdjustable": False,
            "membraneLimit": q(70, "degC"),
            "price": {"amount": 100 + litres, "currency": "EUR"},
        }
        for litres in (80, 100, 140)
    ],
}
GIVEN = {
    "kind": "given",
    "id": "there",
    "nominalVolume": q(100, "L"),
    "ratedPressure": q(10, "barg"),
    "acceptanceVolume": q(70, "L"),
    "deliveredPrecharge": q(1.8, "barg"),
    "prechargeAdjustable": False,
    "membraneLimit": q(70, "degC"),
    "price": {"amount": 200, "currency": "EUR"},
    "fillPressure": q(2.1, "barg"),
}
OWN = {
    "kind": "own",
    "name": "mix of our store",
    "points": [
        {"temperature": q(t, "degC"), "density": q(rho, "kg/m3")}
        for t, rho in ((-20, 1055), (20, 1036), (80, 998), (140, 943), (190, 890))
    ],
    "freezingPoint": q(-24, "degC"),
    "boiling": {"kind": "like", "glycol": "propylene-glycol", "share": q(43, "mass-percent")},
    "heatCapacity": [
        {"temperature": q(t, "degC"), "heatCapacity": q(c, "kJ/kgK")}
        for t, c in ((0, 3.6), (90, 3.9), (160, 4.1))
    ],
}
BOILING = {
    "kind": "table",
    "points": [
        {"temperature": q(t, "degC"), "pressure": q(p, "bara")}
        for t, p in ((60, 0.18), (100, 0.88), (140, 3.15), (180, 8.8), (205, 15.0))
    ],
}
TOLERANCES = {
    "pipeLength": q(10, "percent"),
    "collectorContent": q(10, "percent"),
    "insulationConductivity": q(25, "percent"),
    "steamPower": q(25, "percent"),
    "stagnationTemperature": q(10, "K"),
    "staticHeight": q(1, "m"),
    "fillPressure": q(0.1, "bar"),
    "precharge": q(0.1, "bar"),
}
CRITERIA = {
    "reserve": q(4, "L"),
    "topPressure": q(0.5, "barg"),
    "windowWidth": q(0.3, "bar"),
    "fillAbovePrecharge": q(0.3, "bar"),
    "windowEdgeDistance": q(0.1, "bar"),
    "boilingMargin": q(0.3, "bar"),
    "membraneLimit": q(70, "degC"),
    "freezeMargin": q(5, "K"),
    "fluidAllowance": q(0.5, "percent"),
    "degradationLimit": q(165, "degC"),
    "stagnationDoubt": q(15, "K"),
}
TEMPERATURES = {
    "fill": q(15, "degC"),
    "indoorCold": q(5, "degC"),
    "vesselRoom": q(20, "degC"),
    "flowPipe": q(80, "degC"),
    "returnPipe": q(40, "degC"),
    "cutOff": q(120, "degC"),
    "hotLiquid": q(120, "degC"),
}
SPACES = _with(
    collectors=[
        _base()["collectors"][0] | {"id": "east", "count": 4, "steamSpace": "east", "height": q(11, "m")},
        _base()["collectors"][0] | {"id": "west", "count": 4, "steamSpace": "west", "height": q(9, "m")},
    ],
    pipeRuns=[
        _base()["pipeRuns"][0] | {"id": f"{role} {side}", "role": role, "steamSpace": side}
        for side in ("east", "west")
        for role in ("flow", "return")
    ],
)
MEASURED = _with(
    collectors=_collectors(
        emptyingClass=None,
        measuredSteamPower=q(60, "W/m2"),
        measuredStagnation={
            "temperature": q(180, "degC"),
            "irradiance": q(1000, "W/m2"),
            "ambient": q(30, "degC"),
        },
    )
)

# (base question, pointer, new value)
Change = tuple[dict[str, Any], str, Any]


def changes() -> list[Change]:
    base = _base()
    found: list[Change] = [
        (base, "/site/coldestOutdoorTemperature", q(-14, "degC")),
        (base, "/site/altitude", q(600, "m")),
        (base, "/collectors/0/id", "north roof"),
        (base, "/collectors/0/count", 9),
        (base, "/collectors/0/area", q(2.4, "m2")),
        (base, "/collectors/0/content", q(1.9, "L")),
        (base, "/collectors/0/emptyingClass", "fair"),
        (base, "/collectors/0/ratedPressure", q(8, "barg")),
        (base, "/collectors/0/coefficients/eta0", 0.75),
        (base, "/collectors/0/coefficients/a1", q(3.5, "W/m2K")),
        (base, "/collectors/0/coefficients/a2", q(0.012, "W/m2K2")),
        (
            _with(collectors=_collectors(coefficients=None)),
            "/collectors/0/type",
            "evacuated-tube-direct",
        ),
        (MEASURED, "/collectors/0/measuredSteamPower", q(70, "W/m2")),
        (MEASURED, "/collectors/0/measuredStagnation/temperature", q(190, "degC")),
        (MEASURED, "/collectors/0/measuredStagnation/irradiance", q(900, "W/m2")),
        (MEASURED, "/collectors/0/measuredStagnation/ambient", q(20, "degC")),
        (base, "/pipeRuns/0/id", "hot line"),
        (base, "/pipeRuns/0/role", "return"),
        (base, "/pipeRuns/0/steamAccess", "closed"),
        (base, "/pipeRuns/0/segments/0/length", q(26, "m")),
        (base, "/pipeRuns/0/segments/0/zone", "outdoor"),
        (base, "/pipeRuns/0/segments/0/ambient", q(25, "degC")),
        (base, "/pipeRuns/0/segments/0/softSolder", True),
        (base, "/pipeRuns/0/segments/0/tube/size", "22x1"),
        (base, "/pipeRuns/0/segments/0/tube", {"kind": "standard", "standard": "astm-b88-l", "size": "1"}),
        (base, "/pipeRuns/0/segments/0/insulation/thickness", q(25, "mm")),
        (base, "/pipeRuns/0/segments/0/insulation/conductivity", q(0.035, "W/mK")),
        (base, "/pipeRuns/0/segments/0/insulation", {"kind": "none"}),
        (SPACES, "/collectors/1/height", q(8, "m")),
        (base, "/fluid/concentration/share", q(45, "volume-percent")),
        (base, "/fluid", {"kind": "water"}),
        (base, "/fluid", {"kind": "ethylene-glycol", "concentration": base["fluid"]["concentration"]}),
        (base, "/staticHeight", q(10, "m")),
        (base, "/highestPoint", q(12, "m")),
        (base, "/reliefValve/setPressure", q(6.5, "barg")),
        (base, "/reliefValve/height", q(1, "m")),
        (base, "/reliefValve/nominalSize", "DN20"),
        (base, "/station/content", q(8, "L")),
        (base, "/station/zone", "outdoor"),
        (base, "/station/ratedPressure", q(8, "barg")),
        (base, "/station/highestTemperature", q(140, "degC")),
        (_with(collectors=_collectors(emptyingClass="fair")), "/station/steamCooler", q(400, "W")),
        (base, "/vesselLine/content", q(1.5, "L")),
        (base, "/pump/height", q(1, "m")),
        (base, "/pump/side", "discharge"),
        (_with(pump=base["pump"] | {"side": "discharge"}), "/pump/head", q(0.6, "bar")),
        (base, "/pump/netPositiveSuction", q(3, "mH2O")),
        (base, "/gauge/height", q(1.5, "m")),
        (base, "/vesselZone", "outdoor"),
        (base, "/construction", {"automaticMakeUp": True}),
        (_with(construction={"automaticMakeUp": False}), "/construction/automaticMakeUp", True),
        (_with(construction={"galvanisedParts": False}), "/construction/galvanisedParts", True),
        (base, "/vessel/ratedPressure", q(8, "barg")),
        (base, "/coolingVessel", {"kind": "none"}),
        (base, "/coolingVessel", {"kind": "given", "content": q(6, "L")}),
        (base, "/units", "us"),
        (base, "/doubtPolicy", "combined"),
        (base, "/include", ["rules"]),
        (_with(include=["rules"]), "/rules", ["en-12977"]),
        (_with(vessel=STOCK), "/vesselsInParallel", 2),
        (base, "/precharge", {"kind": "optimised"}),
        (base, "/designSun", {"irradiance": q(1100, "W/m2"), "ambient": q(30, "degC")}),
    ]
    sun = _with(designSun={"irradiance": q(1000, "W/m2"), "ambient": q(30, "degC")})
    found += [
        (sun, "/designSun/irradiance", q(1050, "W/m2")),
        (sun, "/designSun/ambient", q(33, "degC")),
    ]
    stated = _with(precharge={"kind": "stated", "pressure": q(1.8, "barg"), "temperature": q(15, "degC")})
    found += [
        (stated, "/precharge/pressure", q(1.9, "barg")),
        (stated, "/precharge/temperature", q(20, "degC")),
        (stated, "/precharge", {"kind": "rule"}),
    ]
    allowance = _with(
        reliefValve=base["reliefValve"] | {"openingAllowance": {"kind": "rule", "rule": "en-12828"}}
    )
    found += [
        (allowance, "/reliefValve/openingAllowance/rule", "five-psi"),
        (allowance, "/reliefValve/openingAllowance", {"kind": "stated", "value": q(0.5, "bar")}),
    ]
    own_allowance = _with(
        reliefValve=base["reliefValve"] | {"openingAllowance": {"kind": "stated", "value": q(0.5, "bar")}}
    )
    found.append((own_allowance, "/reliefValve/openingAllowance/value", q(0.7, "bar")))
    blowdown = _with(
        vessel={"kind": "given", "nominalVolume": q(30, "L"), "ratedPressure": q(10, "barg")},
        coolingVessel={"kind": "none"},
    )
    found.append((blowdown, "/reliefValve/blowdown", q(0.9, "bar")))
    for tube, pointer, value in (
        ({"kind": "bore", "bore": q(25, "mm"), "outerDiameter": q(28, "mm")}, "bore", q(24, "mm")),
        ({"kind": "bore", "bore": q(25, "mm"), "outerDiameter": q(28, "mm")}, "outerDiameter", q(29, "mm")),
        (
            {"kind": "content", "contentPerLength": q(0.49, "L/m"), "outerDiameter": q(28, "mm")},
            "contentPerLength",
            q(0.45, "L/m"),
        ),
        (
            {"kind": "content", "contentPerLength": q(0.49, "L/m"), "outerDiameter": q(28, "mm")},
            "outerDiameter",
            q(30, "mm"),
        ),
    ):
        found.append((_with(pipeRuns=_segments(tube=tube)), f"/pipeRuns/0/segments/0/tube/{pointer}", value))
        found.append((base, "/pipeRuns/0/segments/0/tube", tube | {pointer: value}))
    weathered = _with(
        pipeRuns=_segments(
            insulation={
                "kind": "weathered",
                "thickness": q(20, "mm"),
                "conductivity": q(0.04, "W/mK"),
                "lossFactor": 1.3,
            }
        )
    )
    found += [
        (weathered, "/pipeRuns/0/segments/0/insulation/thickness", q(25, "mm")),
        (weathered, "/pipeRuns/0/segments/0/insulation/conductivity", q(0.035, "W/mK")),
        (weathered, "/pipeRuns/0/segments/0/insulation/lossFactor", 1.6),
        (
            base,
            "/pipeRuns/0/segments/0/insulation",
            weathered["pipeRuns"][0]["segments"][0]["insulation"],
        ),
        (
            _with(pipeRuns=_segments(insulation={"kind": "none"})),
            "/pipeRuns/0/segments/0/insulation",
            {"kind": "insulated", "thickness": q(20, "mm")},
        ),
    ]
    two = deepcopy(base)
    for run in two["pipeRuns"]:
        run["segments"] = [
            run["segments"][0] | {"length": q(10, "m"), "endHeight": q(8, "m")},
            run["segments"][0] | {"length": q(13, "m")},
        ]
    found.append((two, "/pipeRuns/0/segments/0/endHeight", q(4, "m")))
    mass = _with(
        fluid={
            "kind": "propylene-glycol",
            "concentration": {"kind": "by-mass", "share": q(43, "mass-percent")},
        }
    )
    found += [
        (mass, "/fluid/concentration/share", q(46, "mass-percent")),
        (mass, "/fluid/concentration", {"kind": "protect-to", "temperature": q(-25, "degC")}),
        (mass, "/fluid/concentration", base["fluid"]["concentration"] | {"share": q(45, "volume-percent")}),
        (
            _with(
                fluid={
                    "kind": "propylene-glycol",
                    "concentration": {"kind": "protect-to", "temperature": q(-25, "degC")},
                }
            ),
            "/fluid/concentration/temperature",
            q(-28, "degC"),
        ),
        (_with(fluid={"kind": "water"}), "/fluid", base["fluid"]),
        (_with(fluid=OWN), "/fluid/freezingPoint", q(-22, "degC")),
        (_with(fluid=OWN), "/fluid/points/3/density", q(946, "kg/m3")),
        (_with(fluid=OWN), "/fluid/points/3/temperature", q(142, "degC")),
        (_with(fluid=OWN), "/fluid/boiling/share", q(40, "mass-percent")),
        (_with(fluid=OWN), "/fluid/boiling/glycol", "ethylene-glycol"),
        (_with(fluid=OWN), "/fluid/boiling", BOILING),
        (_with(fluid=OWN | {"boiling": BOILING}), "/fluid/boiling/points/3/pressure", q(8.6, "bara")),
        (_with(fluid=OWN | {"boiling": BOILING}), "/fluid/boiling/points/3/temperature", q(181, "degC")),
        (_with(fluid=OWN | {"boiling": BOILING}), "/fluid/boiling", OWN["boiling"]),
        (_with(fluid=OWN, include=["course"]), "/fluid/heatCapacity/1/heatCapacity", q(3.7, "kJ/kgK")),
        (_with(fluid=OWN, include=["course"]), "/fluid/heatCapacity/1/temperature", q(70, "degC")),
        (base, "/fluid", OWN),
    ]
    gross = _with(
        collectors=_collectors(
            area=q(2.5, "m2"),
            areaBasis="gross",
            apertureArea=q(2.3, "m2"),
            coefficients=base["collectors"][0]["coefficients"] | {"basis": "gross"},
        )
    )
    absorber = _with(
        collectors=_collectors(
            absorberArea=q(2.2, "m2"),
            coefficients=base["collectors"][0]["coefficients"] | {"basis": "absorber"},
        )
    )
    aperture_and_gross = _with(collectors=_collectors(grossArea=q(2.5, "m2")))
    found += [
        (gross, "/collectors/0/apertureArea", q(2.25, "m2")),
        (absorber, "/collectors/0/absorberArea", q(2.25, "m2")),
        (aperture_and_gross, "/collectors/0/coefficients/basis", "gross"),
        (
            _with(
                collectors=_collectors(
                    grossArea=q(2.5, "m2"),
                    coefficients=base["collectors"][0]["coefficients"] | {"basis": "gross"},
                )
            ),
            "/collectors/0/grossArea",
            q(2.6, "m2"),
        ),
    ]
    found += [
        (_with(vessel=STOCK), f"/vessel/items/{item}/{member}", value)
        for item, member, value in (
            (1, "id", "another"),
            (0, "nominalVolume", q(90, "L")),
            (1, "ratedPressure", q(5, "barg")),
            (1, "acceptanceVolume", q(15, "L")),
            (0, "deliveredPrecharge", q(2.1, "barg")),
            (0, "prechargeAdjustable", True),
            (0, "membraneLimit", q(60, "degC")),
            (2, "price", {"amount": 50, "currency": "EUR"}),
        )
    ]
    found += [
        (_with(vessel=GIVEN), f"/vessel/{member}", value)
        for member, value in (
            ("id", "another"),
            ("nominalVolume", q(110, "L")),
            ("ratedPressure", q(8, "barg")),
            ("acceptanceVolume", q(60, "L")),
            ("deliveredPrecharge", q(1.9, "barg")),
            ("prechargeAdjustable", True),
            ("membraneLimit", q(65, "degC")),
            ("price", {"amount": 250, "currency": "EUR"}),
            ("fillPressure", q(2.2, "barg")),
        )
    ]
    found += [
        (base, "/vessel", STOCK),
        (base, "/vessel", GIVEN),
        (_with(vessel=GIVEN), "/vessel", {"kind": "series", "ratedPressure": q(10, "barg")}),
        (_with(coolingVessel={"kind": "none"}), "/coolingVessel", {"kind": "size"}),
        (
            _with(coolingVessel={"kind": "given", "content": q(6, "L"), "ratedPressure": q(10, "barg")}),
            "/coolingVessel/content",
            q(7, "L"),
        ),
        (
            _with(coolingVessel={"kind": "given", "content": q(6, "L"), "ratedPressure": q(10, "barg")}),
            "/coolingVessel/ratedPressure",
            q(6.5, "barg"),
        ),
    ]
    part = _with(
        parts=[
            {
                "name": "valve set",
                "height": q(5, "m"),
                "ratedPressure": q(10, "barg"),
                "highestTemperature": q(150, "degC"),
            }
        ]
    )
    found += [
        (part, "/parts/0/name", "manifold"),
        (part, "/parts/0/height", q(6, "m")),
        (part, "/parts/0/ratedPressure", q(8, "barg")),
        (part, "/parts/0/highestTemperature", q(110, "degC")),
    ]
    found += [
        (_with(criteria=CRITERIA), f"/criteria/{member}", value)
        for member, value in (
            ("reserve", q(10, "L")),
            ("topPressure", q(0.7, "barg")),
            ("windowWidth", q(0.35, "bar")),
            ("fillAbovePrecharge", q(0.45, "bar")),
            ("windowEdgeDistance", q(0.15, "bar")),
            ("boilingMargin", q(0.2, "bar")),
            ("membraneLimit", q(65, "degC")),
            ("freezeMargin", q(6, "K")),
            ("fluidAllowance", q(0.8, "percent")),
            ("degradationLimit", q(150, "degC")),
            ("stagnationDoubt", q(20, "K")),
        )
    ]
    found += [
        (_with(temperatures=TEMPERATURES), f"/temperatures/{member}", value)
        for member, value in (
            ("fill", q(12, "degC")),
            ("indoorCold", q(8, "degC")),
            ("vesselRoom", q(24, "degC")),
            ("flowPipe", q(75, "degC")),
            ("returnPipe", q(45, "degC")),
            ("cutOff", q(115, "degC")),
            ("hotLiquid", q(115, "degC")),
        )
    ]
    found += [
        (_with(tolerances=TOLERANCES), f"/tolerances/{member}", q(stated["value"] * 1.5, stated["unit"]))
        for member, stated in TOLERANCES.items()
    ]
    return found


WITHOUT_EFFECT = {
    "Construction.openOrDrainBack": "Refuses the question; tested with the refusals.",
    "CollectorGroup.areaBasis": "Says which of the areas `area` is; alone it contradicts them.",
    "CollectorGroup.steamSpace": "A label: which groups share steam, not what it is called.",
    "PipeRun.steamSpace": "A label: which runs belong to which groups, not what it is called.",
    "OwnFluid.name": "A name for the reader; echoed on the sheet only.",
    "LoopDesignQuestion.acceptWithoutBoiling": "Matters only to loops that do not boil; tested with one of those.",
    "Station.height": "The runs end there: moved with them in the tests of reading.",
}
