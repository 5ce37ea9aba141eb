"""Numbers along an axis are round, inside the axis, few, and written with the decimals that their step needs."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from app.figures import lettering, ticks
from app.look import DESK


@pytest.mark.parametrize(
    ("reach", "texts"),
    [
        ((9.3, 45.8), ["10", "15", "20", "25", "30", "35", "40", "45"]),
        ((-0.0051, 0.0049), ["−0.004", "−0.002", "0.000", "0.002", "0.004"]),
        ((0.0, 2.1), ["0.00", "0.25", "0.50", "0.75", "1.00", "1.25", "1.50", "1.75", "2.00"]),
        ((0.0, 21.0), ["0.0", "2.5", "5.0", "7.5", "10.0", "12.5", "15.0", "17.5", "20.0"]),
        ((2500.0, 5600.0), ["2\u202f500", "3\u202f000", "3\u202f500", "4\u202f000", "4\u202f500", "5\u202f000", "5\u202f500"]),
    ],
)
def test_round_numbers(reach: tuple[float, float], texts: list[str]) -> None:
    assert ticks.linear(reach)["ticktext"] == texts


@given(st.floats(-1e9, 1e9), st.floats(1e-6, 1e9))
def test_numbers_lie_inside_and_are_told_apart(low: float, wide: float) -> None:
    high = low + wide
    if wide < 1e-9 * max(abs(low), 1.0):
        return  # closer than a double can step
    shown = ticks.linear((low, high))
    air = 1e-6 * wide
    assert all(low - air <= value <= high + air for value in shown["tickvals"])
    assert 2 <= len(shown["tickvals"]) <= ticks.MOST + 1
    assert len(set(shown["ticktext"])) == len(shown["ticktext"])


@given(st.floats(-6, 6), st.floats(0.05, 6))
def test_powers_of_ten_have_round_numbers(low: float, wide: float) -> None:
    shown = ticks.logarithmic((low, low + wide))["tickvals"]
    assert 2 <= len(shown) <= ticks.MOST_LOGARITHMIC
    assert all(10**low * (1 - 1e-9) <= value <= 10 ** (low + wide) * (1 + 1e-9) for value in shown)


def test_the_room_holds_the_widest_number_and_every_line_of_a_name() -> None:
    axis = {"ticktext": ["5", "1\u202f000\u202f000"], "title": {"text": "yield"}}
    assert ticks.left({**axis, "title": {"text": "yield<br>(g)"}}, DESK) > ticks.left(axis, DESK)
    assert ticks.left(axis, DESK) >= lettering.widest(["1\u202f000\u202f000"], DESK.text) + 2 * DESK.text
    assert ticks.below(["one<br>two<br>three"], DESK) - ticks.below(["one"], DESK) == pytest.approx(2.6 * DESK.text)
