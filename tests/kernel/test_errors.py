"""What goes wrong is said in the caller's words and survives the way between processes."""

import pickle

import pytest

from loopslack.kernel import errors
from loopslack.kernel.errors import CalculationError, Refusals

ONE_OF_A_KIND = [
    kind
    for kind in vars(errors).values()
    if isinstance(kind, type) and issubclass(kind, CalculationError) and kind is not Refusals
]


def made(kind: type[CalculationError], code: str = "") -> CalculationError:
    return kind(
        "The set pressure is 17 bar.",
        remedy="Take 16 bar.",
        pointer="/reliefValve/setPressure",
        code=code,
        facts={"number": 17e5, "known": ["a", "b"]},
    )


@pytest.mark.parametrize("protocol", range(pickle.HIGHEST_PROTOCOL + 1))
@pytest.mark.parametrize("code", ["", "set-pressure-too-high"])
@pytest.mark.parametrize("kind", ONE_OF_A_KIND, ids=lambda kind: kind.__name__)
def test_an_error_survives_pickling_whole(kind: type[CalculationError], code: str, protocol: int) -> None:
    error = made(kind, code)
    again = pickle.loads(pickle.dumps(error, protocol))  # noqa: S301 - our own bytes
    assert type(again) is kind
    assert vars(again) == vars(error)
    assert str(again) == str(error) == error.message


def test_several_refusals_survive_pickling_in_order() -> None:
    several = Refusals(iter([made(errors.OutOfRange), made(errors.Contradiction, "two-heights")]))
    again = pickle.loads(pickle.dumps(several))  # noqa: S301 - our own bytes
    assert [type(error) for error in again.errors] == [errors.OutOfRange, errors.Contradiction]
    assert [error.code for error in again.errors] == ["out-of-range", "two-heights"]
    assert [error.pointer for error in again.errors] == ["/reliefValve/setPressure"] * 2
    assert again.message == several.message


def test_every_kind_of_error_has_a_code_of_its_own_in_kebab_case() -> None:
    codes = [kind.code for kind in [*ONE_OF_A_KIND, Refusals]]
    assert len(set(codes)) == len(codes) >= 6
    assert all(set(code) <= set("abcdefghijklmnopqrstuvwxyz-") for code in codes)


def test_a_stated_code_stands_before_the_code_of_the_kind() -> None:
    assert made(errors.Missing).code == "missing"
    assert made(errors.Missing, "no-vessel").code == "no-vessel"


def test_facts_are_a_copy_that_a_caller_cannot_change_from_outside() -> None:
    facts: dict[str, object] = {"number": 1}
    error = CalculationError("m", remedy="r", facts=facts)
    facts["number"] = 2
    assert error.facts == {"number": 1}
