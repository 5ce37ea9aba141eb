"""What another reading of a file leaves of a study, and what it says of the rest."""

from dataclasses import replace

import pytest

import analysis
from analysis import reread
from analysis.reading.choices import Reading
from analysis.roles import guess_roles
from analysis.study import Study
from analysis.table import Table

LINES = ["light;feed;yield;pot"] + [
    f"{light};{feed};{10 + 2 * place},{25 * (place % 3)};{place}"
    for place, (light, feed) in enumerate((a, b) for a in ("sun", "shade") for b in ("A", "B", "b") for _ in range(3))
]
TEXT = "\n".join(LINES).encode()


def read(**asked: object) -> Table:
    return analysis.read_table(TEXT, name="messy.csv", reading=Reading(**asked))  # type: ignore[arg-type]


@pytest.fixture
def study() -> Study:
    return Study(
        read(), "yield", "light", "feed", keep={"feed": ("B", "A")}, relabel={"feed": {"b": "B"}}, control={"feed": "B"},
        set_aside={2: "pot fell over", 5: "label lost"}, matters=2.0, amounts={"pot": False}, apart={"feed": {"A": "B"}},
    )  # fmt: skip


def on(study: Study, table: Table) -> reread.Carried:
    return reread.carried(study, table, guess_roles(table))


def test_the_same_columns_keep_everything(study: Study) -> None:
    found = on(study, read(decimal="comma"))
    assert found.dropped == ()
    assert found.study.choices() == study.choices()


def test_columns_that_are_gone_are_guessed_anew(study: Study) -> None:
    found = on(study, read(header_row=0))
    assert found.study.row_factor == "column 1"
    assert found.study.keep == found.study.relabel == found.study.control == {}
    assert "The response was “yield”, which is not there as the file is read now" in " ".join(found.dropped)
    assert "Column “feed”, whose levels had been looked after, is not there" in " ".join(found.dropped)
    back = on(found.study, read())
    assert (back.study.response, back.study.row_factor, back.study.column_factor) == ("yield", "light", "feed")


def test_rows_that_are_gone_are_set_aside_no_longer(study: Study) -> None:
    table = read(header_row=3)
    renamed = replace(study, response=None, row_factor=None, column_factor=None, keep={}, relabel={}, control={}, amounts={}, apart={})
    found = on(renamed, table)
    assert found.study.set_aside == {5: "label lost"}
    assert "Row 2, set aside before, is not there as the file is read now." in found.dropped


def test_levels_that_are_gone_are_told(study: Study) -> None:
    other = analysis.read_table(TEXT.replace(b";b;", b";C;"), name="messy.csv")
    found = on(study, other)
    assert found.study.relabel == {}
    assert found.study.keep == {"feed": ("B", "A", "C")}
    assert found.dropped == ("“b” of “feed” is not there as the file is read now.",)


def test_rows_of_another_sheet_are_other_rows(study: Study) -> None:
    other = replace(study.table, reading=Reading(sheet="Trial 2"))
    found = on(study, other)
    assert found.study.set_aside == {}
    assert "Rows 2 and 5, set aside before, are not there as the file is read now." in found.dropped


def test_the_size_that_matters_belongs_to_its_response(study: Study) -> None:
    other = analysis.read_table(TEXT.replace(b"yield", b"height"), name="messy.csv")
    found = on(study, other)
    assert (found.study.response, found.study.matters) == ("height", None)
    assert "The smallest difference that matters belonged to another response." in found.dropped


def test_a_role_left_open_on_purpose_stays_open(study: Study) -> None:
    assert on(study, read(decimal="comma")).study.block is None


def test_another_reading_of_nothing_leaves_open_roles(study: Study) -> None:
    assert on(Study(study.table), read(decimal="comma")).study.response == "yield"
