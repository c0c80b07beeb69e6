"""No number of the fluids may change unnoticed.

Every literal of the laws and every coefficient of the library is nudged by a thousandth; a check must break.
What may change unnoticed stands in a list with the reason.
"""

import ast
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import msgspec
import pytest
from scipy.interpolate import PchipInterpolator

import loopslack.physics
from loopslack.kernel import equation as register
from loopslack.library.fluids import GlycolData, glycol_data, water_data
from published.fluid_digits import Code, laws
from published.nudge import nudged, numbers
from published.printed_fluids import digits, stored

PHYSICS = Path(loopslack.physics.__file__).parent
KINDS = ("propylene-glycol", "ethylene-glycol")
CLOSE = 5e-9  # one Newton step of the bubble pressure leaves up to 1.5e-9

DIGITS = stored()

RANGES = {
    "water": {("temperature", 273.15, 488.15)},
    "mixture": {
        ("temperature", 233.15, 473.15),
        ("temperature", 233.15, 398.15),
        ("mass_fraction", 0.0, 0.63),
        ("mass_fraction", 0.0, 0.6),
    },
    "mixture_vapour": {("temperature", 278.15, 485.15), ("mass_fraction", 0.0, 0.63)},
}

# Uneven; with turns, a flat end, chords of opposite sign and size at an end, and numbers near nought.
RISING = (
    [(0.0, 0.0), (1.0, 5.0), (3.0, 6.0), (4.0, 6.5), (9.0, 12.0)],
    [(0.0, 0.0), (0.5, 0.2), (3.0, 9.0), (5.0, 9.5)],
    [(0.0, 0.0), (1.0, 0.01), (3.0, 0.025), (4.0, 0.03)],
)
CURVES = (
    *RISING,
    [(0.0, 2.0), (4.0, 2.5), (4.6, 0.0), (6.0, 0.1), (7.0, 0.0)],
    [(0.0, 0.0), (1.0, 1.0), (2.0, 1.0 - 3.003), (3.0, -2.5), (4.0, -4.0)],
    [(0.0, 0.0), (1.0, 0.005), (2.0, 0.05), (3.0, 0.06), (4.0, 0.0)],
)

UNNOTICED = {
    "mixture_vapour": {
        "1.0 in `expanded = ideal * (1.0 + k * steam) + glycol`": "moves the start of Newton's step, not its end",
    },
    "own_fluid": {
        "1e-12 in `close = 1e-12 * (self.ys[-1] - self.ys[0])`": "a tolerance far below anything reported",
        "0.5 in `h = step if low < step < high else 0.5 * (low + high)`": "any point of the bracket serves",
        "2 in `slope = b + h * (2 * c + 3 * h * d)`": "the steps end only where the value is met",
        "3 in `slope = b + h * (2 * c + 3 * h * d)`": "the steps end only where the value is met",
        "0 in `step = h - excess / slope if slope > 0 else low`": "without a Newton step the bracket is halved",
        "0.0 in `if chord_near * chord_far <= 0.0 and abs(slope) > 3 * abs(chord_near):`": (
            "with both chords of one sign the slope stays below twice the chord"
        ),
    },
}


CASES = [(module, n) for module in (*RANGES, "own_fluid") for n in numbers(PHYSICS / f"{module}.py")]


def agrees(code: Code) -> bool:
    return all(
        code.answer(key) == pytest.approx(value, rel=CLOSE, abs=1e-12) for key, value in DIGITS.items()
    )


def curve_agrees(curve_of: Any) -> bool:
    """Whether a version of the curve is the one of scipy, and its inverse an inverse."""
    for table in CURVES:
        curve, other = curve_of(table), PchipInterpolator(*zip(*table, strict=True))
        span = table[-1][0]
        for share in (0.05, 0.3, 0.5, 0.7, 0.95):
            if curve.at(share * span) != pytest.approx(float(other(share * span)), rel=1e-9, abs=1e-12):
                return False
        ends = curve.at(-1e-9), curve.at(span + 1e-9)
        if ends != pytest.approx((table[0][1], table[-1][1]), abs=1e-7):
            return False
    for table in RISING:
        curve = curve_of(table)
        for share in (1e-6, 0.1, 0.45, 0.9):
            y = share * table[-1][1]
            if curve.at(curve.inverse(y)) != pytest.approx(y, rel=1e-9, abs=1e-11 * table[-1][1]):
                return False
    line = curve_of([(1.0, 5.0), (3.0, 9.0)])
    return line.at(2.0) == 7.0 and line.inverse(7.0) == pytest.approx(2.0, rel=1e-12)


def executed(
    tree: ast.AST, module: str, monkeypatch: pytest.MonkeyPatch
) -> tuple[dict[str, Any], set[tuple]]:
    """The names of a changed module, and the ranges its papers state."""
    papers: dict[str, Any] = {}
    monkeypatch.setattr(register, "EQUATIONS", papers)
    monkeypatch.setattr(register, "_PAPERS", {})
    names: dict[str, Any] = {"__name__": f"nudged_{module}"}
    exec(compile(tree, f"{module}.py", "exec"), names)  # noqa: S102 - our own text
    ranges = {
        (argument, stated.low, stated.high)
        for entry in papers.values()
        for argument, stated in entry.valid.items()
    }
    return names, ranges


def holds(names: dict[str, Any], ranges: set[tuple], module: str) -> bool:
    if module == "own_fluid":
        return curve_agrees(names["MonotoneCurve"])
    return ranges == RANGES[module] and agrees(Code(**{module: laws(names)}))


def test_the_digits_are_those_of_the_printed_laws() -> None:
    assert digits() == pytest.approx(DIGITS, rel=1e-14)


def test_the_code_gives_the_digits_of_the_printed_laws() -> None:
    code = Code()
    for key, value in DIGITS.items():
        assert code.answer(key) == pytest.approx(value, rel=CLOSE), key


@pytest.mark.parametrize("module", [*RANGES, "own_fluid"])
def test_nothing_is_noticed_without_a_nudge(module: str, monkeypatch: pytest.MonkeyPatch) -> None:
    tree = ast.parse((PHYSICS / f"{module}.py").read_text(encoding="utf-8"))
    assert holds(*executed(tree, module, monkeypatch), module)


@pytest.mark.parametrize(("module", "n"), CASES)
def test_a_nudged_number_is_noticed(module: str, n: int, monkeypatch: pytest.MonkeyPatch) -> None:
    tree, place = nudged(PHYSICS / f"{module}.py", n)
    try:
        unnoticed = holds(*executed(tree, module, monkeypatch), module)
    except (TypeError, ValueError, IndexError, ZeroDivisionError):
        unnoticed = False
    assert unnoticed == (place in UNNOTICED.get(module, {})), place


def test_the_list_of_what_may_change_names_only_numbers_that_exist() -> None:
    for module, places in UNNOTICED.items():
        text = (PHYSICS / f"{module}.py").read_text(encoding="utf-8")
        for place, reason in places.items():
            assert place.split("`")[1] in text
            assert reason


def changed_data(data: msgspec.Struct) -> Iterator[tuple[str, msgspec.Struct]]:
    for field in data.__struct_fields__:
        value = getattr(data, field)
        if isinstance(value, float):
            yield field, msgspec.structs.replace(data, **{field: value * 1.001})
        elif isinstance(value, tuple):
            for n, coefficient in enumerate(value):
                changed = (*value[:n], coefficient * 1.001 or 0.001, *value[n + 1 :])
                yield f"{field}[{n}]", msgspec.structs.replace(data, **{field: changed})


@pytest.mark.parametrize(("name", "data"), list(changed_data(water_data())))
def test_a_nudged_coefficient_of_water_is_noticed(name: str, data: Any) -> None:
    assert not agrees(Code(water_end=data)), name


@pytest.mark.parametrize(
    ("kind", "name", "data"), [(kind, *case) for kind in KINDS for case in changed_data(glycol_data(kind))]
)
def test_a_nudged_coefficient_of_a_glycol_is_noticed(kind: str, name: str, data: GlycolData) -> None:
    assert not agrees(Code(glycols={kind: data})), name
