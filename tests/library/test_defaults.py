"""What is assumed when nothing is stated."""

import ast
from pathlib import Path

import pytest

import loopslack
from loopslack.kernel.value import Assumed
from loopslack.library.defaults import (
    PRESSURE_EQUIPMENT_CATEGORIES,
    RELIEF_SIZES,
    Default,
    choice,
    choices,
    default,
    defaults,
    pressure_equipment_category,
    relief_size_for,
)
from loopslack.physics.collector import stagnation_temperature
from loopslack.physics.relief import ALLOWANCES, blowdown_gas, blowdown_liquid

TYPES = ("flat-plate", "evacuated-tube-direct", "evacuated-tube-heat-pipe")


@pytest.mark.parametrize("found", defaults().values(), ids=lambda found: found.key)
def test_a_default_lies_in_its_range_and_says_why(found: Default) -> None:
    assert found.low <= found.si <= found.high
    assert found.kind.low <= found.low
    assert found.high <= found.kind.high
    assert found.unit in found.kind.units
    assert found.why.endswith(".")


def test_a_default_word_is_one_of_the_words_it_may_be() -> None:
    for found in choices().values():
        assert found.word in found.among
        assert found.why.endswith(".")


def test_a_default_becomes_a_value_that_says_it_was_assumed() -> None:
    value = default("fill-temperature").value()
    assert value.si == pytest.approx(288.15)
    assert value.name == "fill temperature"
    assert isinstance(value.origin, Assumed)


@pytest.mark.parametrize(
    ("key", "number", "scale", "offset"),
    [
        ("stagnation-liquid", 120, 1, 273.15),
        ("pump-cut-off", 120, 1, 273.15),
        ("membrane-limit", 70, 1, 273.15),
        ("indoor-cold", 5, 1, 273.15),
        ("vessel-room", 20, 1, 273.15),
        ("minimum-top-pressure", 0.5, 1e5, 0),
        ("fill-window-width", 0.3, 1e5, 0),
        ("boiling-margin", 0.3, 1e5, 0),
        ("fluid-data-allowance", 0.005, 1, 0),
        ("insulation-conductivity", 0.04, 1, 0),
        ("film-coefficient", 10, 1, 0),
        ("design-irradiance", 1000, 1, 0),
        ("design-ambient", 30, 1, 273.15),
        ("doubt-stagnation-shift", 15, 1, 0),
        ("doubt-measured-steam-power", 1.25, 1, 0),
    ],
)
def test_a_default_is_held_in_si(key: str, number: float, scale: float, offset: float) -> None:
    assert default(key).si == pytest.approx(number * scale + offset)


@pytest.mark.parametrize(("kind", "celsius"), [(TYPES[0], 198), (TYPES[1], 297), (TYPES[2], 297)])
def test_default_coefficients_stagnate_at_the_temperature_they_claim(kind: str, celsius: float) -> None:
    hot = stagnation_temperature(
        default(f"optical-efficiency-{kind}").si,
        default("design-irradiance").si,
        default(f"linear-loss-{kind}").si,
        default(f"quadratic-loss-{kind}").si,
        default("design-ambient").si,
    )
    assert hot - 273.15 == pytest.approx(celsius, abs=0.5)
    # Plausible ranges: flat plates 170-210 degC, evacuated tubes 220-300 degC (Task 49, from memory).
    low, high = (170, 210) if kind == "flat-plate" else (220, 300)
    assert low < hot - 273.15 < high


@pytest.mark.parametrize("kind", TYPES)
def test_worse_emptying_means_more_steam_and_the_worst_is_the_default(kind: str) -> None:
    powers = [default(f"steam-power-{kind}-{word}").si for word in choice("emptying-class").among]
    assert powers == sorted(powers)
    assert choice("emptying-class").word == choice("emptying-class").among[-1]


@pytest.mark.parametrize("kind", TYPES)
def test_a_default_collector_content_is_the_highest_of_its_range(kind: str) -> None:
    found = default(f"collector-content-{kind}")
    assert found.si == found.high


def test_every_allowance_a_caller_may_name_has_a_law() -> None:
    assert set(choice("relief-allowance").among) == set(ALLOWANCES)


def test_the_default_blowdown_is_the_law_of_the_blowdown() -> None:
    for name, law in (("liquid", blowdown_liquid), ("gas", blowdown_gas)):
        share, least = default(f"relief-blowdown-{name}").si, default(f"relief-blowdown-{name}-least").si
        for stamp in (1e5, 2.5e5, 6e5, 10e5):
            assert law(stamp) == pytest.approx(max(share * stamp, least))


@pytest.mark.parametrize(
    ("area", "size"),
    [(18.4, 15), (50, 15), (50.1, 20), (100, 20), (200, 25), (350, 32), (600, 40), (600.1, None)],
)
def test_the_relief_valve_grows_with_the_area_until_the_table_ends(area: float, size: int | None) -> None:
    assert relief_size_for(area) == size
    assert tuple(sorted(RELIEF_SIZES)) == RELIEF_SIZES


@pytest.mark.parametrize(
    ("product", "category"),
    [
        (50, "sound-engineering-practice"),
        (50.1, "category-i"),
        (200, "category-i"),
        (1000, "category-ii"),
        (3000, "category-iii"),
        (3000.1, "category-iv"),
    ],
)
def test_the_category_of_a_vessel_follows_pressure_times_volume(product: float, category: str) -> None:
    assert pressure_equipment_category(product) == category
    assert "category-iv" not in PRESSURE_EQUIPMENT_CATEGORIES


def test_a_key_that_does_not_exist_is_a_slip_of_ours() -> None:
    with pytest.raises(KeyError):
        default("weather")
    with pytest.raises(KeyError):
        choice("weather")


def test_every_default_that_the_service_names_exists() -> None:
    named = []
    for path in Path(loopslack.__file__).parent.rglob("*.py"):
        tree = ast.parse(path.read_text(encoding="utf-8"))
        imported = any(
            isinstance(node, ast.ImportFrom) and node.module == "loopslack.library.defaults"
            for node in ast.walk(tree)
        )
        for node in ast.walk(tree):
            if not (
                imported and isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.args
            ):
                continue
            key = node.args[0]
            if node.func.id in {"default", "choice"} and isinstance(key, ast.Constant):
                named.append((node.func.id, key.value))
    assert len(named) > 10
    assert [key for word, key in named if key not in (defaults() if word == "default" else choices())] == []
