"""How numbers are written: rounded once, as the trade does, in the language, with their unit."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.contract.answers.shared import AnyQuantity
from loopslack.sheet.numerals import MINUS, numerals, rounded

EN, DE = numerals("en"), numerals("de")


def q(value: float, unit: str) -> AnyQuantity:
    return AnyQuantity(value=value, unit=unit)


@pytest.mark.parametrize(
    ("value", "unit", "shown"),
    [
        (2.05782, "barg", "2.06"),
        (6, "barg", "6.00"),
        (2.055, "barg", "2.06"),  # halves away from nought, not to the even digit
        (78.3, "psig", "78.3"),
        (26.02, "psig", "26.0"),
        (205.78, "kPag", "206"),
        (60.2721, "degC", "60.3"),
        (70.0, "degC", "70"),
        (-23.4692, "degC", "-23.5"),
        (77.9753, "L", "78"),
        (12.5, "L", "12.5"),
        (107.147, "L", "107"),
        (1234.5, "L", "1230"),
        (0.478123, "L", "0.48"),
        (0.0049, "L", "0.005"),
        (13.5451, "m", "13.5"),
        (23.0, "m", "23"),
        (28.0, "mm", "28"),
        (1472.4, "W", "1470"),
        (0.0, "W", "0"),
        (0.0, "barg", "0.00"),
        (0.014, "W/m2K2", "0.014"),
    ],
)
def test_a_number_is_rounded_as_the_trade_does(value: float, unit: str, shown: str) -> None:
    assert rounded(value, unit) == shown


@given(
    st.floats(min_value=1e-9, max_value=1e6),
    st.sampled_from(["bar", "psi", "kPa", "K", "delta_degF", "L", "gal_us", "W", "BTU/h", "m", "ft", "m2"]),
)
def test_a_negative_margin_never_reads_as_nought(size: float, unit: str) -> None:
    shown = EN.signed(q(-size, unit))
    assert shown.startswith(MINUS)
    assert any(digit in "123456789" for digit in shown.split("\u00a0")[0])


@given(st.floats(min_value=-1e5, max_value=1e5), st.sampled_from(["barg", "degC", "L", "m", "W", "psi"]))
def test_what_is_shown_lies_within_half_a_place_of_the_number(value: float, unit: str) -> None:
    shown = float(rounded(value, unit))
    finest = {"barg": 0.01, "degC": 0.1, "m": 0.1, "psi": 0.1, "L": 0.01, "W": 0.1}[unit]
    place = max(finest, abs(value) * 0.01) if unit in {"L", "W"} else finest
    assert abs(shown - value) <= 0.5 * place * (1 + 1e-9) or abs(value) < place


def test_a_language_has_its_own_decimal_sign_and_units() -> None:
    assert EN(q(2.05782, "barg")) == "2.06\u00a0bar(g)"
    assert DE(q(2.05782, "barg")) == "2,06\u00a0bar(ü)"
    assert DE(q(-0.825519, "bar")) == "\u22120,83\u00a0bar"
    assert EN(q(12345.0, "W")) == "12\u202f300\u00a0W"
    assert EN(q(0.05, "1")) == "5\u00a0%"
    assert EN(q(1.5, "1")) == "1.5"
    assert EN(None) == "\u2013"


def test_a_stated_number_keeps_every_digit() -> None:
    assert EN.stated(q(0.014, "W/m2K2")) == "0.014\u00a0W/(m²·K²)"
    assert EN.stated(q(41.8717, "volume-percent")) == "41.8717\u00a0%\u00a0(vol.)"
    assert EN.stated(q(1e-7, "bar")) == "0.0000001\u00a0bar"


@pytest.mark.parametrize(
    ("value", "unit", "shown"),
    [
        (2.27374e-13, "W", "0\u00a0W"),
        (-6.98492e-15, "bar", "0\u00a0bar"),
        (-1.1e-6, "K", "0\u00a0K"),
        (0.0, "bar", "0\u00a0bar"),
        (0.0000489, "BTU/h/ft2/degF2", "0.0000489\u00a0BTU/(h·ft²·°F²)"),
        (2.05782, "barg", "2.05782\u00a0bar(g)"),
        (1e-7, "1", "0.0000001"),  # a share is no residue
    ],
)
def test_what_a_root_leaves_over_is_nought_with_its_unit(value: float, unit: str, shown: str) -> None:
    assert EN.derived(q(value, unit)) == shown


def test_a_thickness_is_told_in_millimetres_or_inches() -> None:
    assert EN.thin(q(0.054, "m")) == "54\u00a0mm"
    assert EN.thin(q(0.0833333, "ft")) == "1\u00a0in"
    assert DE.thin_between(q(0.0275, "m"), q(0.1, "m")) == "27,5 bis 100\u00a0mm"
