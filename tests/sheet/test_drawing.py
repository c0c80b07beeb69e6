"""The means of drawing: round ticks, labels that keep clear, texts that fit."""

from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.sheet.drawing import STYLE, Canvas, Scale, fitted, round_ticks, spread, tick_labels, width_of

finite = st.floats(min_value=-1e6, max_value=1e6)


@given(finite, st.floats(min_value=1e-6, max_value=1e6), st.integers(min_value=2, max_value=12))
def test_ticks_are_round_few_and_within_their_ends(low: float, span: float, most: int) -> None:
    ticks = round_ticks(low, low + span, most)
    slack = 1e-6 * max(span, abs(low))
    assert len(ticks) <= most + 1
    assert all(low - slack <= tick <= low + span + slack for tick in ticks)
    assert ticks == sorted(ticks)


@pytest.mark.parametrize(
    ("low", "high", "most", "ticks"),
    [
        (0, 10, 6, [0, 2, 4, 6, 8, 10]),
        (0, 80, 5, [0, 20, 40, 60, 80]),
        (1.6, 2.7, 12, [1.6, 1.7, 1.8, 1.9, 2.0, 2.1, 2.2, 2.3, 2.4, 2.5, 2.6, 2.7]),
        (-1.1, 1.1, 6, [-1.0, -0.5, 0.0, 0.5, 1.0]),
        (3, 3, 5, [3]),
    ],
)
def test_ticks_step_by_one_two_or_five(low: float, high: float, most: int, ticks: list[float]) -> None:
    assert round_ticks(low, high, most) == pytest.approx(ticks)


def test_ticks_of_one_scale_have_the_same_decimals() -> None:
    assert [label for _, label in tick_labels([1.8, 2.0, 2.2])] == ["1.8", "2.0", "2.2"]
    assert [label for _, label in tick_labels([0, 20])] == ["0", "20"]


@given(
    st.lists(st.floats(min_value=0, max_value=300), min_size=1, max_size=20),
    st.floats(min_value=1, max_value=14),
)
def test_labels_keep_their_order_and_their_distance(wanted: list[float], gap: float) -> None:
    placed = spread(wanted, gap, 0.0, 300.0)
    order = sorted(range(len(wanted)), key=lambda k: wanted[k])
    in_order = [placed[k] for k in order]
    assert all(-1e-9 <= place <= 300.0 + 1e-9 for place in placed)
    assert all(after - before >= gap - 1e-6 for before, after in pairwise(in_order))


def test_labels_with_room_stay_where_they_are_wanted() -> None:
    assert spread([10.0, 100.0, 50.0], 20.0, 0.0, 200.0) == [10.0, 100.0, 50.0]


def test_too_many_labels_share_the_room_there_is() -> None:
    placed = spread([5.0] * 11, 50.0, 0.0, 100.0)
    assert sorted(placed) == pytest.approx([10.0 * k for k in range(11)])


@given(st.text(max_size=60), st.floats(min_value=20, max_value=300))
def test_a_text_is_cut_to_its_room(text: str, room: float) -> None:
    shown = fitted(text, room)
    assert width_of(shown) <= max(room, width_of("…"))
    assert shown == text or shown.endswith("…")


def test_wide_letters_count_twice() -> None:
    assert width_of("水") == 2 * width_of("w")


def test_a_scale_puts_its_ends_on_its_ends() -> None:
    scale = Scale(2.0, 4.0, 100.0, 0.0)
    assert (scale(2.0), scale(4.0), scale(3.0)) == (100.0, 0.0, 50.0)


def test_a_text_is_lettering_and_never_markup() -> None:
    canvas = Canvas(20.0)
    canvas.text((0.0, 10.0), "</text><script>alert(1)</script>&amp;")
    drawn = canvas.svg("x", "<b>", "&")
    assert "<script" not in drawn
    assert "&lt;script&gt;alert(1)" in drawn


def test_dark_colours_hold_on_dark_screens_only() -> None:
    light, dark = STYLE.split("@media")
    assert dark.startswith(" screen and (prefers-color-scheme:dark)")
    assert "#ffffff" in light
