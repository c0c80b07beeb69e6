"""The shape of a drawn loop before its members are stirred: steam spaces, groups, runs over crests or straight, fluid.

Half of them and more are shaped with some sense, so that vessels that hold are among the answers.
"""

from random import Random
from typing import Any

Data = dict[str, Any]


def q(value: float, unit: str) -> Data:
    return {"value": value, "unit": unit}


def vessel(random: Random, *, choice: bool) -> Data:
    there = {"nominalVolume": q(10 ** random.uniform(1, 3.5), "L"), "ratedPressure": q(16, "barg")}
    if not choice:
        return there
    drawn = random.random()
    if drawn < 0.6:
        return {"kind": "series", "ratedPressure": q(16, "barg")}
    if drawn < 0.8:
        return {"kind": "given", **there}
    items = [
        {
            "id": f"EV-{k}",
            "nominalVolume": q(10 ** random.uniform(0.5, 4), "L"),
            "ratedPressure": q(16, "barg"),
        }
        for k in range(random.randint(1, 8))
    ]
    return {"kind": "stock", "items": items}


def loop(random: Random) -> Data:
    head = random.choice((11.0, random.uniform(1, 30), random.uniform(-15, 3), random.uniform(-150, 150)))
    if random.random() < 0.7:
        head = abs(head) if abs(head) < 40 else 11.0
    sensible = random.random() < 0.7
    if sensible:
        head = random.uniform(2, 15)
    spaces = random.choice((1, 1, 1, 2, 3))
    groups, runs = [], []
    for space in range(spaces):
        height = head if space == 0 else head + random.choice((0.0, random.uniform(-4, 4)))
        for number in range(random.choice((1, 1, 1, 2))):
            own = height if number == 0 or random.random() < 0.5 else height + random.uniform(-2, 2)
            groups.append(_group(random, own, space if spaces > 1 else None, sensible=sensible))
        roles = ("flow", "return", "flow") if random.random() < 0.1 else ("flow", "return")
        own_space = space if spaces > 1 else None
        runs += [_run(random, role, height, own_space, sensible=sensible) for role in roles]
    valve = random.choice((6, 8, 10)) if sensible else random.choice((2.5, 3, 4, 6, 10, 16))
    return {
        "site": {"coldestOutdoorTemperature": q(random.choice((-16, -5, 2)), "degC")},
        "collectors": groups,
        "pipeRuns": runs,
        "fluid": _fluid(random),
        "staticHeight": q(head, "m"),
        "reliefValve": {"setPressure": q(valve, "barg")},
        "station": {"ratedPressure": q(16, "barg")}
        | ({"steamCooler": q(10 ** random.uniform(1, 4), "W")} if random.random() < 0.3 else {}),
        "include": [],
    }


def _group(random: Random, height: float, space: int | None, *, sensible: bool) -> Data:
    flats = ("flat-plate",) * (8 if sensible else 2)
    type_ = random.choice((*flats, "evacuated-tube-direct", "evacuated-tube-heat-pipe"))
    found: Data = {
        "count": random.choice((2, 5, 5, 8) if sensible else (1, 8, 40)),
        "area": q(2.3, "m2"),
        "areaBasis": "aperture",
        "type": type_,
        "ratedPressure": q(16, "barg"),
        "height": q(height, "m"),
    }
    if random.random() < 0.8:
        found["emptyingClass"] = random.choice(("good",) * (6 if sensible else 1) + ("fair", "poor"))
    if random.random() < 0.8:
        flat = type_ == "flat-plate"
        found["coefficients"] = {
            "eta0": 0.79 if flat else 0.65,
            "a1": q(3.7 if flat else 1.2, "W/m2K"),
            "a2": q(0.014 if flat else 0.006, "W/m2K2"),
            "basis": "aperture",
        }
        found["content"] = q(1.7, "L")
    if space is not None:
        found["steamSpace"] = f"space {space}"
    return found


def _run(random: Random, role: str, start: float, space: int | None, *, sensible: bool) -> Data:
    segments, here = [], start
    for number in range(random.choice((1, 1, 2, 3))):
        segment: Data = {
            "length": q(10 ** (random.uniform(1.2, 1.8) if sensible else random.uniform(0, 2)), "m"),
            "tube": {
                "kind": "standard",
                "standard": "en-1057",
                "size": random.choice(("22x1", "28x1.5", "54x2")),
            },
        }
        if random.random() < 0.25 or (number and random.random() < 0.3):
            here += random.choice((-2.0, 0.0, 1.0, random.uniform(-5, 5)))
            segment["endHeight"] = q(here, "m")
        segments.append(segment)
    if random.random() < 0.9:
        segments[-1].pop("endHeight", None)
    found: Data = {"role": role, "segments": segments}
    if random.random() < 0.8:
        found["steamAccess"] = random.choice(("open", "open", "closed", "unknown"))
    if space is not None:
        found["steamSpace"] = f"space {space}"
    return found


def _fluid(random: Random) -> Data:
    kind = random.choice(("propylene-glycol",) * 4 + ("ethylene-glycol", "water", "own"))
    if kind == "water":
        return {"kind": "water"}
    if kind == "own":
        points = [(-30, 1060), (0, 1045), (40, 1022), (90, 985), (150, 925), (215, 850)]
        return {
            "kind": "own",
            "name": "ready mix",
            "points": [{"temperature": q(t, "degC"), "density": q(d, "kg/m3")} for t, d in points],
            "freezingPoint": q(-25, "degC"),
            "boiling": {"kind": "like", "glycol": "propylene-glycol", "share": q(40, "mass-percent")},
        }
    share = random.choice((1.0, 25.0, 40.0, 42.0, 50.0, 60.0))
    concentration = random.choice(
        (
            {"kind": "by-volume", "share": q(share, "volume-percent")},
            {"kind": "by-mass", "share": q(share, "mass-percent")},
            {"kind": "protect-to", "temperature": q(random.choice((-1.0, -21.0, -25.0, -45.0)), "degC")},
        )
    )
    return {"kind": kind, "concentration": concentration}
