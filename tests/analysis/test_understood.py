"""The first rows show what is computed with, not what is written."""

import pandas as pd
import pytest

import analysis
from analysis import row_edits
from analysis.reading.choices import Reading
from analysis.study import Study
from analysis.understood import MOST_CELLS, first_rows

TEXT = b"light;feed;seeds\nsun;1;1,100\nsun;2;2,137\nshade;1;n.d.\nshade;2;\nshade;2;2,5\n"


@pytest.mark.parametrize(("decimal", "seeds"), [("comma", ["1.1", "2.137"]), ("point", ["1100", "2137"])])
def test_numbers_stand_as_they_are_taken(decimal: str, seeds: list[str]) -> None:
    shown = first_rows(Study(analysis.read_table(TEXT, name="seeds.csv", reading=Reading(decimal=decimal)), "seeds", "light"), 4)
    assert shown.columns == ("light", "feed", "seeds")
    assert shown.numbers == (False, True, True)
    assert [row for row, _ in shown.rows] == [2, 3, 4, 5]
    assert [cells[2] for _, cells in shown.rows] == [*seeds, "n.d. (missing)", "(missing)"]
    assert [cells[0] for _, cells in shown.rows] == ["sun", "sun", "shade", "shade"]


def test_of_a_very_large_table_only_the_response_is_read() -> None:
    rows = MOST_CELLS // 2
    table = analysis.read_table(pd.DataFrame({"y": [1.0] * rows, "a": [2.5] * rows, "b": ["x"] * rows}), name="large")
    shown = first_rows(Study(table, "y"), 3)
    assert shown.numbers == (True, False, False)
    assert shown.rows[0] == (1, ("1", "2.5", "x"))


def test_a_table_shorter_than_asked_is_shown_whole() -> None:
    assert len(first_rows(Study(analysis.read_table(TEXT, name="seeds.csv")), 50).rows) == 5


def test_levels_stand_as_they_are_written() -> None:
    shown = first_rows(Study(analysis.read_table(TEXT.replace(b";1;", b";01;"), name="seeds.csv"), "seeds", "light", "feed"), 1)
    assert shown.numbers == (False, False, True)
    assert shown.rows[0][1][1] == "01"


def test_a_level_left_to_the_row_above_is_shown() -> None:
    text = b"light;feed;seeds\nsun;a;1.5\n;b;2.5\nshade;a;3.5\n;b;1.2\n"
    study = Study(analysis.read_table(text, name="seeds.csv"), "seeds", "light", "feed")
    assert [cells[0] for _, cells in first_rows(study, 4).rows] == ["sun", "sun", "shade", "shade"]
    assert row_edits.with_levels(study, ["seeds", "light"], 1, 3) == [["2.5", "sun"], ["3.5", "shade"]]
