"""Every number that ships says where it comes from, and the tables agree with figures read elsewhere."""

from importlib import import_module
from importlib.resources import files
from pkgutil import iter_modules

import pytest
from msgspec import ValidationError, convert

import loopslack.physics
from loopslack.kernel import citations
from loopslack.kernel.equation import EQUATIONS
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.units import from_si
from loopslack.kernel.value import Tabulated
from loopslack.library.defaults import choices, defaults
from loopslack.library.sources import sources
from loopslack.library.tables import KIND_NAMED, cell, data, table
from loopslack.library.tubes import Tube, tube, tube_standards
from loopslack.library.vessels import preferred_vessels
from loopslack.physics.geometry import bore_of_tube, content_per_length

for module in iter_modules(loopslack.physics.__path__):
    import_module(f"loopslack.physics.{module.name}")

TABLES = sorted(
    path.name.removesuffix(".toml")
    for path in (files("loopslack.library") / "data").iterdir()
    if path.name.startswith(("tubes_", "vessels_"))
)
TUBES = [row for standard in tube_standards().values() for row in standard.tubes.values()]
ROUND = [row for row in TUBES if row.standard != "corrugated-stainless"]


@pytest.mark.parametrize("name", TABLES)
def test_a_table_cites_a_known_source_and_fills_every_column(name: str) -> None:
    found = table(name)
    assert found.source in sources()
    assert all(row.keys() == found.columns.keys() for row in found.rows.values())
    assert found.seen_otherwise.keys() <= found.rows.keys()
    for column in found.columns.values():
        assert column.unit in KIND_NAMED[column.kind].units


@pytest.mark.parametrize("key", sorted(EQUATIONS))
def test_a_law_cites_a_known_source(key: str) -> None:
    assert EQUATIONS[key].source.key in sources()


@pytest.mark.parametrize("key", [*defaults(), *choices()])
def test_a_default_cites_a_known_source(key: str) -> None:
    assert {**defaults(), **choices()}[key].source.key in sources()


def test_the_marks_for_what_has_no_publication_are_sources_too() -> None:
    for mark in (citations.DERIVED, citations.OWN_ASSUMPTION, citations.COMMON_PRACTICE):
        assert sources()[mark.key].seen == mark.seen


def test_a_place_is_given_only_for_what_was_seen_in_print() -> None:
    cites = [law.source for law in EQUATIONS.values()] + [row.source for row in TUBES]
    assert [cite for cite in cites if cite.place and not cite.seen.startswith("read")] == []


def test_sources_say_what_is_taken_from_them_and_are_named_in_kebab_case() -> None:
    for key, source in sources().items():
        assert key == key.lower()
        assert set(key) <= set("abcdefghijklmnopqrstuvwxyz0123456789-")
        assert source.title
        assert source.publisher
        assert source.used_for.endswith((".", ")"))


def test_a_cell_is_in_si_and_knows_its_row() -> None:
    wall = cell("tubes_en_1057", "22x1", "wall")
    assert wall.si == pytest.approx(0.001, rel=1e-12)
    assert isinstance(wall.origin, Tabulated)
    assert (wall.origin.table, wall.origin.row, wall.origin.source.key) == (
        "tubes_en_1057",
        "22x1",
        "en-1057",
    )


def test_a_malformed_table_is_refused() -> None:
    with pytest.raises(ValidationError):
        convert({**data("tubes_en_1057"), "colour": "green"}, type(table("tubes_en_1057")))


@pytest.mark.parametrize("row", ROUND, ids=lambda row: f"{row.standard} {row.size}")
def test_bore_and_content_follow_from_diameter_and_wall(row: Tube) -> None:
    bore = bore_of_tube(row.outer_diameter, row.wall)
    assert row.bore == pytest.approx(bore, rel=1e-12)
    assert row.content == pytest.approx(content_per_length(bore), rel=1e-12)
    assert 0 < row.wall < row.outer_diameter / 6


@pytest.mark.parametrize(
    ("size", "litres_per_metre"),
    # ASTM B88 type L, content per length, read in a data table.
    [("1/2", 0.1505), ("3/4", 0.3122), ("1", 0.5324), ("1 1/4", 0.8108), ("1 1/2", 1.1477), ("2", 1.9965)],
)
def test_type_l_copper_holds_what_was_read(size: str, litres_per_metre: float) -> None:
    row = tube("astm-b88-l", size)
    assert row.content * 1000 == pytest.approx(litres_per_metre, abs=6e-5)
    assert row.source.seen == "read-second-hand"


@pytest.mark.parametrize(
    ("size", "litres_per_metre"),
    # EN 1057, content per length, from memory.
    [
        ("15x1", 0.1327),
        ("18x1", 0.2011),
        ("22x1", 0.3142),
        ("28x1.5", 0.4909),
        ("35x1.5", 0.8042),
        ("42x1.5", 1.1946),
    ],
)
def test_metric_copper_holds_what_is_remembered(size: str, litres_per_metre: float) -> None:
    assert tube("en-1057", size).content * 1000 == pytest.approx(litres_per_metre, abs=6e-5)


@pytest.mark.parametrize("kind", ["k", "l", "m"])
def test_american_copper_is_an_eighth_of_an_inch_wider_than_its_name(kind: str) -> None:
    for size, row in tube_standards()[f"astm-b88-{kind}"].tubes.items():
        assert row.outer_diameter / 0.0254 == pytest.approx(inches(size) + 0.125, rel=1e-12)


def test_american_copper_is_thickest_as_type_k_and_thinnest_as_type_m() -> None:
    for size, thin in tube_standards()["astm-b88-m"].tubes.items():
        assert tube("astm-b88-k", size).wall >= tube("astm-b88-l", size).wall > thin.wall


@pytest.mark.parametrize("standard", ["en-1057", "en-10220", "en-10312", "cross-linked-polyethylene"])
def test_metric_tubes_are_named_by_diameter_and_wall(standard: str) -> None:
    for size, row in tube_standards()[standard].tubes.items():
        outer, wall = size.split("x")
        assert row.outer_diameter * 1000 == pytest.approx(float(outer), rel=1e-12)
        assert row.wall * 1000 == pytest.approx(float(wall), rel=1e-12)


def test_sizes_stand_from_small_to_large() -> None:
    for standard in tube_standards().values():
        diameters = [row.outer_diameter for row in standard.tubes.values()]
        assert diameters == sorted(diameters)


def test_a_corrugated_tube_holds_a_round_tube_between_root_and_crest() -> None:
    for row in tube_standards()["corrugated-stainless"].tubes.values():
        assert row.outer_diameter * 0.8 < row.bore < row.outer_diameter
        assert row.content == pytest.approx(content_per_length(row.bore), rel=1e-12)


def test_only_plastic_tube_has_a_limit_below_steam() -> None:
    limited = {row.standard: row.highest_temperature for row in TUBES if row.highest_temperature is not None}
    assert limited == {"cross-linked-polyethylene": pytest.approx(368.15)}


@pytest.mark.parametrize(
    ("standard", "written", "size"),
    [
        ("en-1057", "22 x 1", "22x1"),
        ("en-1057", "22X1.0 mm", "22x1"),
        ("en-1057", "22\N{MULTIPLICATION SIGN}1", "22x1"),
        ("astm-b88-l", '3/4"', "3/4"),
        ("astm-b88-l", "3/4 in", "3/4"),
        ("astm-b88-l", "1-1/4 inch", "1 1/4"),
        ("asme-b36-10-schedule-40", "2", "2"),
        ("corrugated-stainless", "DN 16", "dn16"),
        ("corrugated-stainless", "DN16", "dn16"),
    ],
)
def test_a_size_may_be_written_as_people_write_it(standard: str, written: str, size: str) -> None:
    assert tube(standard, written).size == size


def test_an_unknown_size_or_standard_is_refused_with_the_nearest_names() -> None:
    with pytest.raises(OutOfRange) as size:
        tube("en-1057", "23x1")
    assert size.value.code == "unknown-tube-size"
    assert "22x1" in size.value.remedy
    with pytest.raises(OutOfRange) as standard:
        tube("en1057", "22x1")
    assert standard.value.code == "unknown-tube-standard"
    assert "en-1057" in standard.value.remedy
    with pytest.raises(OutOfRange) as nothing:
        tube("en-1057", "")
    assert "Known: 10x1" in nothing.value.remedy


def test_preferred_vessels_are_the_r10_series() -> None:
    volumes = [
        from_si(size.nominal_volume, "L", KIND_NAMED["nominal volume"]) for size in preferred_vessels()
    ]
    exact = [10 ** (n / 10) for n in range(9, 31)]
    assert volumes == pytest.approx(exact, rel=0.013)
    assert (volumes[0], volumes[-1], len(volumes)) == (8, 1000, 22)
    assert len({size.id for size in preferred_vessels()}) == 22


def inches(size: str) -> float:
    whole, _, fraction = size.rpartition(" ")
    numerator, _, denominator = fraction.partition("/")
    return float(whole or 0) + float(numerator) / float(denominator or 1)
