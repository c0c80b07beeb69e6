"""The register of laws: papers beside plain functions, ranges enforced, derivations kept."""

import math
from typing import Any

import pytest

from loopslack.kernel import equation as register
from loopslack.kernel.citations import DERIVED, Cite
from loopslack.kernel.equation import Range, equation, fingerprint, papers
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import AREA, LENGTH, RATIO, Area, Coefficients, Length, Ratio
from loopslack.kernel.value import Computed, Given, Value


@pytest.fixture(autouse=True)
def _own_register(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(register, "EQUATIONS", {})


def square(side: Length) -> Area:
    """Area of a square."""
    return Area(side * side)


def enter(**extra: Any) -> object:
    return equation("square", law="A = s^2", source=DERIVED, **extra)(square)


def test_a_function_is_returned_as_it_was() -> None:
    assert enter() is square
    assert papers(square).law == "A = s^2"
    assert papers(square).arguments == {"side": LENGTH}
    assert papers(square).kind is AREA


def test_two_laws_cannot_have_one_name() -> None:
    enter()
    with pytest.raises(ValueError, match="defined twice"):
        enter()


def test_a_derivation_remembers_law_and_inputs() -> None:
    enter()
    side = Value(3.0, LENGTH, "side of the yard", Given("/side"))
    area = papers(square).derive("area of the yard", side=side)
    assert (area.si, area.kind, area.name) == (9.0, AREA, "area of the yard")
    assert area.origin == Computed("square", {"side": side})
    assert papers(square).derive(side=side).name == "square"


@pytest.mark.parametrize("side", [0.999, 2.001, math.nan, math.inf, -math.inf])
def test_an_input_outside_the_range_is_refused_and_never_clamped(side: float) -> None:
    enter(valid={"side": Range(1.0, 2.0)})
    with pytest.raises(OutOfRange) as refused:
        papers(square).derive(side=Value(side, LENGTH, "side", Given()))
    assert refused.value.facts["rule"] == "square"
    assert refused.value.facts["low"] == 1.0
    assert refused.value.facts["high"] == 2.0
    assert "side" in refused.value.message
    assert refused.value.remedy


@pytest.mark.parametrize("side", [1.0, 1.5, 2.0])
def test_a_range_is_closed(side: float) -> None:
    enter(valid={"side": Range(1.0, 2.0)})
    assert papers(square).derive(side=Value(side, LENGTH, "side", Given())).si == side * side


def test_an_outcome_outside_the_range_is_refused() -> None:
    enter(yields=Range(0.0, 4.0))
    with pytest.raises(OutOfRange, match="square is 9"):
        papers(square).derive(side=Value(3.0, LENGTH, "side", Given()))


def test_an_infinite_outcome_is_refused_even_without_a_range() -> None:
    enter()
    with pytest.raises(OutOfRange):
        papers(square).derive(side=Value(1e200, LENGTH, "side", Given()))


def test_a_missing_or_unknown_input_is_an_error_of_ours() -> None:
    enter()
    with pytest.raises(TypeError):
        papers(square).derive()
    with pytest.raises(KeyError):
        papers(square).derive(width=Value(1.0, LENGTH, "width", Given()))


def test_fitted_numbers_are_no_values_and_have_no_kind() -> None:
    def line(x: Ratio, coefficients: Coefficients) -> Ratio:
        return Ratio(coefficients[0] + coefficients[1] * x)

    equation("line", law="y = c0 + c1 x", source=DERIVED)(line)
    law = papers(line)
    assert (law.coefficients, law.arguments) == (("coefficients",), {"x": RATIO})
    given = Value(2.0, RATIO, "x", Given())
    assert law.derive("y", {"coefficients": Coefficients((1.0, 3.0))}, x=given).si == 7.0


def test_the_fingerprint_changes_with_a_law_a_source_or_a_line_of_code() -> None:
    def longer(side: Length) -> Area:
        return Area(side**2)

    seen = [fingerprint()]
    for law, source, function in (
        ("A = s^2", DERIVED, square),
        ("A = s * s", DERIVED, square),
        ("A = s^2", Cite("elsewhere", "read"), square),
        ("A = s^2", DERIVED, longer),
    ):
        register.EQUATIONS.clear()
        equation("square", law=law, source=source)(function)
        seen.append(fingerprint())
        assert fingerprint() == seen[-1]
    assert len(set(seen)) == 5
    assert all(len(mark) == 12 for mark in seen)
