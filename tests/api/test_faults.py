"""All faults of a question are told, each with its place, code, rule and remedy."""

import pytest

from api.small_service import GOOD, JSON, pointers


def ask(client, **members):
    return client.post("/v1/double", json=GOOD | members)


def messages(response):
    return " | ".join(fault["message"] for fault in response.json()["errors"])


def test_every_fault_is_listed_at_once(client):
    refused = client.post(
        "/v1/double",
        json={
            "reliefPresure": {"value": 6, "unit": "barg"},
            "count": 99,
            "fluid": {"kind": "propylene-glycol", "massPercent": 80, "grade": 1},
            "stock": [{"id": "ok", "litres": 8}, {"id": "NO SUCH THING", "litres": 0}],
            "exact": "yes",
            "note": "n" * 41,
        },
    )
    assert refused.status_code == 422
    assert pointers(refused) == {
        "/reliefPressure": "missing",
        "/reliefPresure": "unknown-field",
        "/count": "out-of-range",
        "/fluid/massPercent": "out-of-range",
        "/fluid/grade": "unknown-field",
        "/stock/1/id": "pattern",
        "/stock/1/litres": "out-of-range",
        "/exact": "wrong-type",
        "/note": "too-long",
    }
    codes_at_id = [fault["code"] for fault in refused.json()["errors"] if fault["pointer"] == "/stock/1/id"]
    assert codes_at_id == ["too-long", "pattern"]
    assert refused.json()["detail"] == "10 fields of the question are faulty."


def test_strict_numbers(client):
    assert pointers(ask(client, reliefPressure={"value": "1.5", "unit": "barg"})) == {
        "/reliefPressure/value": "wrong-type"
    }
    assert pointers(ask(client, reliefPressure={"value": True, "unit": "barg"})) == {
        "/reliefPressure/value": "wrong-type"
    }
    assert ask(client, count=9.0).status_code == 200
    assert pointers(ask(client, count=9.5)) == {"/count": "wrong-type"}
    assert pointers(ask(client, count="9")) == {"/count": "wrong-type"}
    assert pointers(ask(client, exact=1)) == {"/exact": "wrong-type"}


def test_null_counts_as_absent_where_a_member_is_optional_and_nowhere_else(client):
    assert ask(client, fluid=None, stock=None, note=None).status_code == 200
    assert pointers(ask(client, reliefPressure=None)) == {"/reliefPressure": "wrong-type"}


@pytest.mark.parametrize(
    ("unit", "meant"),
    [
        ("bar", '"barg" or "bara"'),
        ("BARG", '"barg"'),
        ("bar-g", '"barg"'),
        ("psi", '"psig"'),
        ("b\u0430rg", '"barg"'),
    ],
)
def test_a_near_miss_of_a_unit_is_answered_with_what_was_meant(client, unit, meant):
    refused = ask(client, reliefPressure={"value": 6, "unit": unit})
    assert pointers(refused) == {"/reliefPressure/unit": "not-a-member"}
    assert f"Did you mean {meant}" in messages(refused)


def test_a_look_alike_letter_is_shown_for_what_it_is(client):
    assert r"b\u0430rg" in messages(ask(client, reliefPressure={"value": 6, "unit": "b\u0430rg"}))


@pytest.mark.parametrize("name", ["relief_pressure", "ReliefPressure", "reliefPresure", "pressure"])
def test_a_near_miss_of_a_member_is_answered_with_what_was_meant(client, name):
    refused = client.post("/v1/double", json={name: GOOD["reliefPressure"]})
    assert pointers(refused) == {"/reliefPressure": "missing", f"/{name}": "unknown-field"}
    assert 'Did you mean "reliefPressure"?' in messages(refused)


def test_an_unknown_member_near_nothing_is_told_what_there_is(client):
    refused = ask(client, zzzzz=1)
    assert 'It has "count", "exact"' in messages(refused)


def test_a_variant_needs_its_kind(client):
    assert pointers(ask(client, fluid={"massPercent": 40})) == {"/fluid/kind": "missing"}
    assert pointers(ask(client, fluid={"kind": "brine"})) == {"/fluid/kind": "not-a-member"}
    assert pointers(ask(client, fluid={"kind": 7})) == {"/fluid/kind": "wrong-type"}
    assert pointers(ask(client, fluid="water")) == {"/fluid": "wrong-type"}
    assert "Glycol by mass." in messages(ask(client, fluid={"kind": "propylene-glycol"}))


def test_a_rule_between_members_is_told_where_it_stands(client):
    refused = ask(client, span={"low": 3, "high": 2})
    assert pointers(refused) == {"/span/low": "contradiction"}
    assert "low 3 lies above high 2. Swap them." in messages(refused)


def test_a_message_names_value_rule_and_remedy(client):
    assert messages(ask(client, count=99)) == (
        "99 is outside the range: it must be at least 1 and at most 50. Correct it."
    )
    assert "Send the number without quotes" in messages(
        ask(client, reliefPressure={"value": "6", "unit": "barg"})
    )
    assert "together with its unit" in messages(ask(client, reliefPressure=6))


def test_a_list_or_a_number_is_no_question(client):
    for body in (b"[1]", b"7", b'"text"', b"null", b"true"):
        refused = client.post("/v1/double", content=body, headers=JSON)
        assert refused.status_code == 422
        assert pointers(refused) == {"": "wrong-type"}


def test_a_long_value_of_the_caller_is_not_repeated_in_full(client):
    refused = client.post("/v1/double", json=GOOD | {"x" * 5_000: 1, "exact": "y" * 5_000})
    assert refused.status_code == 422
    assert len(refused.content) < 2_000


def test_many_unknown_members_do_not_cost_a_search_each(client):
    refused = client.post("/v1/double", json=GOOD | {f"count{number}": 1 for number in range(2_000)})
    assert refused.json()["furtherErrors"] == 950
    assert float(refused.headers.get("content-length")) < 20_000
