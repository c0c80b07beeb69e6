"""The memory of names: exact, and small."""

from hypothesis import given, settings
from hypothesis import strategies as some

from loopslack.contract.names import Names


@given(some.lists(some.text(max_size=3), max_size=400))
@settings(deadline=None, max_examples=60)
def test_it_knows_a_name_exactly_if_it_was_there(names):
    seen, memory = set(), Names()
    for name in names:
        assert memory.is_new(name) == (name not in seen)
        seen.add(name)


def test_it_keeps_knowing_them_while_it_grows():
    memory = Names()
    names = [f"quote-{number}" for number in range(20_000)]
    assert all(memory.is_new(name) for name in names)
    assert not any(memory.is_new(name) for name in reversed(names))


def test_a_name_takes_at_most_54_bytes():
    memory = Names()
    count = 20_000
    for number in range(count):
        memory.is_new(f"a rather long name for a quote, number {number}")
    table = memory._table
    assert len(table) * table.itemsize <= 54 * count
