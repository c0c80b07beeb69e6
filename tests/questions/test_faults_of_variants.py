"""What is told of an object whose kind is not known, and of the tables that a kind holds."""

import pytest

from questions.questions_of_each_kind import SOUND, quantity
from questions.test_all_faults import places_in, told
from questions.wash_house import changed, wash_house


def test_a_variant_that_is_not_known_hides_no_fault_that_whichever_is_meant_would_have():
    fluid = {"kind": "glycol", "concentration": {"kind": "volume", "share": 45}}
    assert told(changed(wash_house(), "/fluid", fluid)) == [
        ("/fluid/kind", "not-a-member"),
        ("/fluid/concentration/kind", "not-a-member"),
        ("/fluid/concentration/share", "wrong-type"),
    ]
    # what one of them takes is not laid at the door of all
    assert told(changed(wash_house(), "/fluid", {"kind": "brine", "name": "ready mix"})) == [
        ("/fluid/kind", "not-a-member")
    ]
    # nor is what is missing where the kind is only guessed at by what is there
    assert told(changed(wash_house(), "/fluid", {"kind": "brine", "freezingPoint": 7})) == [
        ("/fluid/kind", "not-a-member"),
        ("/fluid/freezingPoint", "wrong-type"),
    ]


@pytest.mark.parametrize(
    ("at", "value", "expected"),
    [
        # of two near words both take such a share
        (
            "/fluid",
            {
                "kind": "glycol",
                "concentration": {"kind": "by-volume", "share": quantity(0.45, "volume-percent")},
            },
            {"/fluid/kind": "not-a-member", "/fluid/concentration/share": "out-of-range"},
        ),
        # only one kind has such members, though its name is far from that stated, or was left out
        (
            "/pipeRuns/0/segments/0/tube",
            {"kind": "pipe", "bore": quantity(25, "m")},
            {
                "/pipeRuns/0/segments/0/tube/kind": "not-a-member",
                "/pipeRuns/0/segments/0/tube/bore": "out-of-range",
            },
        ),
        (
            "/pipeRuns/0/segments/0/tube",
            {"standard": "en-1057", "size": "28x2"},
            {
                "/pipeRuns/0/segments/0/tube/kind": "missing",
                "/pipeRuns/0/segments/0/tube/size": "unknown-tube-size",
            },
        ),
        (
            "/fluid/concentration",
            {"share": quantity("45", "percent")},
            {"/fluid/concentration/kind": "missing", "/fluid/concentration/share/value": "wrong-type"},
        ),
        # three kinds share the range, and what the kinds differ in is left open
        (
            "/vessel",
            {"kind": "mine", "nominalVolume": quantity(-80, "L"), "ratedPressure": quantity(999, "barg")},
            {
                "/vessel/kind": "not-a-member",
                "/vessel/nominalVolume": "out-of-range",
                "/vessel/ratedPressure": "out-of-range",
            },
        ),
        # nobody knows whether a temperature or a share is meant
        ("/fluid/concentration", {"kind": "some"}, {"/fluid/concentration/kind": "not-a-member"}),
        # a thickness is out of range for either kind that has one
        (
            "/pipeRuns/0/segments/0/insulation",
            {"thickness": quantity(20, "m")},
            {
                "/pipeRuns/0/segments/0/insulation/kind": "missing",
                "/pipeRuns/0/segments/0/insulation/thickness": "out-of-range",
            },
        ),
    ],
)
def test_a_number_out_of_range_is_told_beside_a_kind_that_is_not_known(at, value, expected):
    assert dict(told(changed(wash_house(), at, value))) == expected


@pytest.mark.parametrize("kind", SOUND, ids=lambda kind: kind.__name__)
def test_members_beside_a_kind_that_is_not_known_are_blamed_for_nothing(kind):
    tags = [pointer for pointer in places_in(SOUND[kind], "") if pointer.endswith("/kind")]
    assert tags
    for tag in tags:
        assert told(changed(SOUND[kind], tag, "none of these"), kind) == [(tag, "not-a-member")]


def own_fluid(densities, boiling, heat_capacities):
    """A fluid by tables cut to so many rows; the whole ones are those of a mixture as a store may sell it."""
    rows = ((-20, 1046, 3.5), (20, 1030, 3.6), (60, 1005, 3.7), (120, 960, 3.9))
    bubbles = ((90, 0.62), (120, 1.75), (150, 4.2))
    return {
        "kind": "own",
        "name": "ready mix of our store",
        "points": [
            {"temperature": quantity(at, "degC"), "density": quantity(density, "kg/m3")}
            for at, density, _ in rows[:densities]
        ],
        "freezingPoint": quantity(-21, "degC"),
        "boiling": {
            "kind": "table",
            "points": [
                {"temperature": quantity(at, "degC"), "pressure": quantity(pressure, "bara")}
                for at, pressure in bubbles[:boiling]
            ],
        },
        "heatCapacity": [
            {"temperature": quantity(at, "degC"), "heatCapacity": quantity(heat, "kJ/kgK")}
            for at, _, heat in rows[:heat_capacities]
        ],
    }


def test_tables_of_a_fluid_are_too_short_where_the_schema_says_so_and_nowhere_else():
    assert told(changed(wash_house(), "/fluid", own_fluid(3, 3, 3))) == []
    assert told(changed(wash_house(), "/fluid", own_fluid(2, 2, 2))) == [
        ("/fluid/points", "too-few"),
        ("/fluid/boiling/points", "too-few"),
        ("/fluid/heatCapacity", "too-few"),
    ]
