"""Names from the file as they read in a sentence."""

import pytest

from analysis.naming import level_told, listed, word_and_unit


@pytest.mark.parametrize(
    ("name", "word", "unit"),
    [
        ("yield (g per pot)", "yield", "g per pot"),
        ("adhesion [MPa]", "adhesion", "MPa"),
        ("yield", "yield", None),
        ("(g)", "(g)", None),
        ("yield (g", "yield (g", None),
        ("count (day 3) (per mL)", "count (day 3)", "per mL"),
    ],
)
def test_the_unit_is_what_stands_in_brackets_behind_the_word(name: str, word: str, unit: str | None) -> None:
    assert word_and_unit(name) == (word, unit)


def test_a_level_that_is_a_number_says_of_what() -> None:
    assert level_told("temperature", "°C", "120") == "120 °C"
    assert level_told("dose", None, "20") == "dose 20"
    assert level_told("light", None, "Full sun") == "Full sun"
    assert level_told("shade", None, "30 %") == "30 %"
    assert level_told("nitrogen", "kg/ha", "0,5") == "0,5 kg/ha"


def test_lists_read_aloud() -> None:
    assert [listed(words) for words in (("a",), ("a", "b"), ("a", "b", "c"))] == ["a", "a and b", "a, b and c"]
