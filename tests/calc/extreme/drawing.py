"""Questions over the whole range that each member accepts, drawn by seed: most members usual, some at an end.

A loop is first given a shape (steam spaces, groups, runs over crests or straight), then its members are stirred:
each quantity, number, word and optional part with the question's own rate, half of the quantities to an end of their
range. A low rate leaves loops that can be built but for one or two odd numbers; a high one leaves little that could.
Must not live here: what an answer has to satisfy.
"""

from copy import deepcopy
from random import Random
from types import NoneType
from typing import Annotated, Any, Literal, get_args, get_origin

from msgspec import Meta, Struct
from msgspec.structs import fields

from calc.extreme.shapes import Data, loop, q, vessel
from conformance.members import bare, options, variant
from loopslack.contract.quantity import Price, Quantity

EXTRAS = ("rules", "remedies", "sensitivity", "course", "derivation")
RATES = (0.0, 0.02, 0.05, 0.05, 0.12, 0.12, 0.3)

# Tables and names that only make sense as a whole are left as the shape has them.
LEFT_ALONE = {"points", "boiling", "name", "id", "steamSpace", "include", "rules", "units", "items", "size"}
SELDOM = {
    "openOrDrainBack",
    "automaticMakeUp",
    "galvanisedParts",
    "acceptWithoutBoiling",
    "areaBasis",
    "basis",
    "apertureArea",
    "grossArea",
    "absorberArea",
    "outerDiameter",
}


def seeded(seed: int | str) -> Random:
    return Random(f"extreme {seed}")  # noqa: S311 - questions, not secrets


def question(random: Random, kind: type[Struct]) -> Data:
    """A question of a type, by a generator of random numbers."""
    rate = random.choice(RATES)
    data = loop(random)
    kinds = {field.encode_name: options(field.type) for field in fields(kind)}
    if "gaugeReading" in kinds:
        data["gaugeReading"] = {"pressure": q(random.uniform(0.5, 4), "barg"), "temperature": q(18, "degC")}
    data["vessel"] = vessel(random, choice=len(kinds["vessel"]) > 1)
    if random.random() < 0.2:
        data["units"] = "us"
    if random.random() < 0.15:
        data["include"] = random.sample(EXTRAS, random.randint(1, 3))
        if len(kinds["vessel"]) == 1:
            data["include"] = [extra for extra in data["include"] if extra not in ("rules", "sensitivity")]
    return _made_consistent(random, stirred(random, kind, data, rate))


def _made_consistent(random: Random, data: Data) -> Data:
    """Take away what only contradicts itself, so that most questions get an answer."""
    for group in data["collectors"]:
        if "measuredSteamPower" in group and random.random() < 0.9:
            group.pop("emptyingClass", None)
    if random.random() < 0.95:
        data["staticHeight"] = random.choice(data["collectors"])["height"]
    return data


def stirred(random: Random, struct: type[Struct], data: Data, rate: float) -> Data:
    """A copy of a part with some of its members at other places of their range."""
    found = deepcopy(data)
    for field in fields(struct):
        name = field.encode_name
        if name in LEFT_ALONE:
            continue
        chance = rate * (0.1 if name in SELDOM else 1.0)
        value, choices = found.get(name), options(field.type)
        if value is None:
            if not field.required and random.random() < chance * 0.6:
                drawn = _made(random, field.type, choices)
                if drawn is not None:
                    found[name] = drawn
        elif isinstance(value, list):
            if all(isinstance(item, dict) for item in value):
                found[name] = [stirred(random, variant(choices, item), item, rate) for item in value]
        elif isinstance(value, dict) and not _is_quantity(choices):
            if len(choices) > 1 and random.random() < chance * 0.5:
                found[name] = _made(random, field.type, choices) or value
            else:
                found[name] = stirred(random, variant(choices, value), value, rate)
        elif random.random() < chance:
            drawn = _leaf(random, field.type)
            found[name] = value if drawn is None else drawn
    return found


def _is_quantity(choices: list[Any]) -> bool:
    return all(isinstance(kind, type) and issubclass(kind, Quantity) for kind in choices)


def _made(random: Random, annotation: Any, choices: list[Any]) -> Any:
    """A member that was absent: a leaf, or a part with what it requires."""
    parts = [
        c for c in choices if isinstance(c, type) and issubclass(c, Struct) and not issubclass(c, Quantity)
    ]
    if not parts:
        return _leaf(random, annotation)
    kind = random.choice(parts)
    if kind is Price or get_origin(bare(annotation)) is list or _list_in(annotation):
        return None
    found: Data = {}
    config = kind.__struct_config__
    if config.tag_field:
        found[config.tag_field] = config.tag
    for field in fields(kind):
        if field.required:
            drawn = (
                _example(field.type)
                if random.random() < 0.5
                else _made(random, field.type, options(field.type))
            )
            if drawn is None:
                drawn = _example(field.type)
            if drawn is None:
                return None
            found[field.encode_name] = drawn
    return stirred(random, kind, found, 0.3)


def _list_in(annotation: Any) -> bool:
    annotation = bare(annotation)
    return get_origin(annotation) is list or any(
        _list_in(part) for part in get_args(annotation) if part is not NoneType and not isinstance(part, str)
    )


def _metas(annotation: Any) -> list[Meta]:
    found = []
    while get_origin(annotation) is Annotated:
        annotation, *extras = get_args(annotation)
        found += [extra for extra in extras if isinstance(extra, Meta)]
    for part in get_args(annotation):
        if get_origin(part) is Annotated:
            found += _metas(part)
    return found


def _example(annotation: Any) -> Any:
    for meta in _metas(annotation):
        if meta.examples:
            return deepcopy(meta.examples[0])
    drawn = options(annotation)[0]
    if get_origin(drawn) is Literal:
        return get_args(drawn)[0]
    return None


def _leaf(random: Random, annotation: Any) -> Any:
    """A quantity, number, word or flag within its range; half of them at an end."""
    kind = options(annotation)[0]
    if get_origin(kind) is Literal:
        return random.choice(get_args(kind))
    if kind is bool:
        return random.random() < 0.5
    for meta in _metas(annotation):
        if meta.extra and "low" in meta.extra:
            return q(_number(random, meta.extra["low"], meta.extra["high"]), meta.extra["unit"])
        if meta.ge is not None and meta.le is not None:
            drawn = _number(random, meta.ge, meta.le)
            return round(drawn) if kind is int else drawn
    return None


def _number(random: Random, low: float, high: float) -> float:
    drawn = random.random()
    if drawn < 0.25:
        return low
    if drawn < 0.5:
        return high
    if low > 0 and high / low > 20:
        return float(low * (high / low) ** random.random())
    if low == 0 and high > 10:
        return float(high ** random.random() - 1.0) if random.random() < 0.7 else random.uniform(0, high)
    return random.uniform(low, high)
