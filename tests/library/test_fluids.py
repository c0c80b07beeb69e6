"""The fluid tables: whole, named, and equal to what the calculation enforces."""

import msgspec
import pytest

from loopslack.calc.fluids.making import glycol, water
from loopslack.library.fluids import fluids, glycol_data, publications, water_data
from loopslack.library.sources import sources


def test_every_fluid_the_service_computes_is_listed_once() -> None:
    assert [entry.id for entry in fluids()] == ["water", "propylene-glycol", "ethylene-glycol"]
    assert [entry.strength_highest for entry in fluids()] == [0.0, 0.63, 0.63]


@pytest.mark.parametrize("entry", fluids(), ids=lambda entry: entry.id)
def test_every_fluid_states_range_uncertainty_and_source_of_what_it_answers(entry) -> None:
    names = " ".join(listed.name for listed in entry.properties)
    for subject in ("density", "bubble pressure", "vapour", "heat capacity", "viscosity"):
        assert subject in names
    for listed in entry.properties:
        assert listed.form
        assert listed.uncertainty
        assert listed.source.key in sources()
        for step in listed.uncertainty:
            assert (step.relative is None) != (step.kelvin is None)


@pytest.mark.parametrize("entry", fluids(), ids=lambda entry: entry.id)
def test_uncertainties_are_stated_up_to_the_end_of_the_range_or_the_gap_is_explained(entry) -> None:
    for listed in entry.properties:
        ends = [step.up_to for step in listed.uncertainty]
        assert ends == sorted(ends)
        if listed.highest is not None and ends[-1] != listed.highest:
            assert "no uncertainty is stated" in listed.note


@pytest.mark.parametrize("entry", fluids(), ids=lambda entry: entry.id)
def test_the_listed_ranges_are_the_ones_the_calculation_enforces(entry) -> None:
    fluid = water() if entry.id == "water" else glycol(entry.id, 0.6)
    for listed in entry.properties:
        if listed.name == "density of the liquid":
            assert (listed.lowest, listed.highest) == (fluid.lowest, fluid.highest)
        if listed.name == "bubble pressure":
            assert (listed.lowest, listed.highest) == (fluid.boiling_lowest, fluid.boiling_highest)


def test_publications_are_named_once_and_say_what_they_gave() -> None:
    keys = [entry.key for entry in publications()]
    assert len(keys) == len(set(keys))
    for entry in publications():
        assert entry.title
        assert entry.used_for
        assert not entry.doi or entry.doi.startswith("10.")


def test_the_coefficient_sets_are_complete() -> None:
    assert [len(c) for c in (water_data().specific_volume, water_data().heat_capacity)] == [7, 6]
    for kind in ("propylene-glycol", "ethylene-glycol"):
        data = glycol_data(kind)
        lengths = [len(c) for c in msgspec.structs.astuple(data) if isinstance(c, tuple)]
        assert lengths == [5, 8, 3, 2, 5, 5, 7, 9]


def test_the_listing_can_be_sent() -> None:
    assert msgspec.json.decode(msgspec.json.encode(fluids()))
