"""Row numbers as people write them, rows set aside and put back."""

from dataclasses import replace

import pytest

import analysis
from analysis import row_edits
from analysis.refusals import ReasonMissing, UnknownRow
from analysis.study import Study
from tests.analysis.experiments import crossed


@pytest.fixture
def study() -> Study:
    return Study(analysis.read_table(crossed([[4, 4, 4], [4, 4, 4]]), name="experiment"), "y", "a", "b")


@pytest.mark.parametrize(
    ("text", "rows"),
    [
        ("3", (3,)),
        ("3, 5", (3, 5)),
        (" 3;5 7 ", (3, 5, 7)),
        ("3-5", (3, 4, 5)),
        ("3 – 5, 9", (3, 4, 5, 9)),
        ("5, 3, 5", (5, 3)),
        ("22-99", (22, 23, 24)),
    ],
)
def test_rows_are_named_by_numbers_and_stretches(study: Study, text: str, rows: tuple[int, ...]) -> None:
    assert row_edits.rows_named(text, study.table) == rows


@pytest.mark.parametrize("text", ["", "x", "0", "25", "5-3", "3, tall", "3.5"])
def test_what_names_no_row_is_refused(study: Study, text: str) -> None:
    with pytest.raises(UnknownRow, match="names no row of the table: write row numbers of the file, 1 to 24"):
        row_edits.rows_named(text, study.table)


def test_rows_set_aside_are_left_out_and_come_back(study: Study) -> None:
    aside = replace(study, **row_edits.set_aside(study, "3, 4", "pot fell over"))
    assert analysis.analyse(aside).design["observations"] == 22
    one = replace(aside, **row_edits.only_aside(aside, [4]))
    assert one.set_aside == {4: "pot fell over"}
    assert replace(one, **row_edits.only_aside(one, [])).fingerprint == study.fingerprint


def test_a_reason_is_needed(study: Study) -> None:
    with pytest.raises(ReasonMissing):
        replace(study, **row_edits.set_aside(study, "3", " "))


def test_cells_are_told_under_the_names_of_now(study: Study) -> None:
    renamed = replace(study, relabel={"b": {"b0": "control"}})
    assert row_edits.with_levels(renamed, ("a", "b"), 3, 5) == [["a0", "control"], ["a0", "b1"]]


def test_stretches_cover_every_row_once(study: Study) -> None:
    assert row_edits.stretches(study.table, 10) == [(0, 10), (10, 20), (20, 24)]
