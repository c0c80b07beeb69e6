"""Fluids against published values: see ``published/fluids.toml``."""

import pytest

from published.fluid_checks import Check, checks, computed


@pytest.mark.parametrize("check", checks(), ids=str)
def test_a_published_value_is_reproduced(check: Check) -> None:
    assert computed(check) == pytest.approx(check.expected, abs=check.within), check.source


def test_every_check_names_its_source_and_how_it_was_seen() -> None:
    for check in checks():
        assert check.source
        assert check.seen in {"read", "read-second-hand"}
        assert check.within > 0


def test_the_same_check_is_not_counted_twice() -> None:
    names = [str(check) + check.source for check in checks()]
    assert len(names) == len(set(names))
