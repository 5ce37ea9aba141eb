"""Several tables on one sheet: the first is read, the others can be chosen; blank rows and columns inside a table set nothing apart."""

from collections.abc import Callable

import pytest

from analysis import refusals
from analysis.reading.choices import WHOLE, Reading
from analysis.reading.entry import read_table
from analysis.table import Table
from tests.analysis.reading.files import Row, labels, ods, text, values, xls, xlsx

YIELD: list[Row] = [("feed", "shade", "yield"), ("hay", "low", 1.5), ("hay", "high", 2.5), ("straw", "low", 3.5), ("straw", "high", 4.5)]
OIL: list[Row] = [("feed", "shade", "oil"), ("hay", "low", 11.5), ("hay", "high", 12.5), ("straw", "low", 13.5)]


def csv(rows: list[Row]) -> bytes:
    """The rows as a file of text."""
    return text([["" if cell is None else cell for cell in row] for row in rows]).encode()


MAKERS: dict[str, Callable[[list[Row]], bytes]] = {"csv": csv, "xlsx": xlsx, "xls": xls, "ods": ods}


@pytest.fixture(params=MAKERS)
def make(request: pytest.FixtureRequest) -> Callable[[list[Row]], bytes]:
    return MAKERS[request.param]


def offered(table: Table) -> dict[str, Reading]:
    (decision,) = [decision for decision in table.decisions if decision.kind == "table"]
    return {alternative.words: alternative.reading for alternative in decision.alternatives}


def beside(left: list[Row], right: list[Row]) -> list[Row]:
    """Two tables with a blank column between them."""
    rows = max(len(left), len(right))
    padded = [[*table, *[(None,) * len(table[0])] * (rows - len(table))] for table in (left, right)]
    return [(*one, None, *other) for one, other in zip(*padded, strict=True)]


def test_tables_below_each_other(make: Callable[[list[Row]], bytes]) -> None:
    data = make([("Yields of 2025",), *YIELD, (), ("Oil",), (), *OIL])
    table = read_table(data)
    assert values(table, "yield") == [1.5, 2.5, 3.5, 4.5]
    assert table.left_out == ()
    assert "2 tables stand apart from each other, in “rows 2 to 6” and “rows 10 to 13”; the one in rows 2 to 6 was read." in table.notes
    assert offered(table) == {
        "the table in rows 10 to 13": Reading(table="rows 10 to 13"),
        "the whole sheet, as one table": Reading(table=WHOLE),
    }
    other = read_table(data, reading=Reading(table="rows 10 to 13"))
    assert (values(other, "oil"), other.file_rows.tolist()) == ([11.5, 12.5, 13.5], [11, 12, 13])
    assert offered(other)["the table in rows 2 to 6"] == Reading()
    assert (other.raw[0].row, other.raw[0].text.split(" | ")) == (10, ["feed", "shade", "oil"])


def test_tables_beside_each_other(make: Callable[[list[Row]], bytes]) -> None:
    data = make(beside(YIELD, OIL))
    table = read_table(data)
    assert (table.names, values(table, "yield")) == (("feed", "shade", "yield"), [1.5, 2.5, 3.5, 4.5])
    other = read_table(data, reading=offered(table)["the table in rows 1 to 4, columns E to G"])
    assert (other.names, values(other, "oil")) == (("feed", "shade", "oil"), [11.5, 12.5, 13.5])


def test_two_grids_with_the_same_levels(make: Callable[[list[Row]], bytes]) -> None:
    first: list[Row] = [("dose", 10, 20), ("hay", 1.5, 2.5), ("straw", 3.5, 4.5)]
    second: list[Row] = [("dose", 10, 20), ("hay", 5.5, 6.5), ("straw", 7.5, 8.5)]
    data = make([*first, (), *second])
    table = read_table(data)
    assert values(table, "value") == [1.5, 2.5, 3.5, 4.5]
    assert values(read_table(data, reading=offered(table)["the table in rows 5 to 7"]), "value") == [5.5, 6.5, 7.5, 8.5]


def test_the_whole_sheet_can_be_read_as_one(make: Callable[[list[Row]], bytes]) -> None:
    table = read_table(make([*YIELD, (), *OIL]), reading=Reading(table=WHOLE))
    assert table.rows == 8
    assert offered(table)["the table in rows 1 to 5"] == Reading()


def test_a_table_that_is_not_there_is_refused(make: Callable[[list[Row]], bytes]) -> None:
    with pytest.raises(refusals.MissingTable, match="The sheet has no table “rows 7 to 11”: did you mean “rows 7 to 10”"):
        read_table(make([*YIELD, (), *OIL]), reading=Reading(table="rows 7 to 11"))
    with pytest.raises(refusals.MissingTable, match="it holds one table, so leave the choice out"):
        read_table(make(YIELD), reading=Reading(table="rows 1 to 5"))


ONE: dict[str, list[Row]] = {
    "a blank row": [*YIELD[:3], (), *YIELD[3:]],
    "a blank row before a row with text for its value": [*YIELD[:3], (), ("hay", "low", "lost"), *YIELD[3:]],
    "a blank column": [(a, b, None, c) for a, b, c in YIELD],
    "further measurements behind a blank column": beside(YIELD, [("oil", "ash", "site"), *[(1.5, 2.5, "A")] * 4]),
    "a remark below": [*YIELD, (), ("Harvest by two people", None, None)],
    "a total below": [*YIELD, (), ("Total", None, 12.0)],
    "settings above": [("plot size", 12, None), ("plots", 24, None), (), *YIELD],
    "a legend below": [*YIELD, (), ("code", "meaning", None), ("hay", "dried grass", None), ("straw", "dried stalks", None)],
}


@pytest.mark.parametrize("name", ONE)
def test_blanks_inside_one_table_set_nothing_apart(name: str, make: Callable[[list[Row]], bytes]) -> None:
    table = read_table(make(ONE[name]))
    (decision,) = [decision for decision in table.decisions if decision.kind == "table"]
    assert (decision.sentence, decision.alternatives) == ("One table was found.", ())
    assert values(table, "yield")[0] == 1.5


def test_merged_cells_of_a_second_table_are_filled_down() -> None:
    rows: list[Row] = [*YIELD, (), ("feed", "shade", "oil"), ("hay", "low", 11.5), (None, "high", 12.5), ("straw", "low", 13.5)]
    data = xlsx(rows, lambda sheet: sheet.merge_cells("A8:A9"))
    assert labels(read_table(data, reading=Reading(table="rows 7 to 10")), "feed") == ["hay", "hay", "straw"]


def test_percent_cells_of_a_table_beside_another_keep_their_unit() -> None:
    def percent(sheet: object) -> None:
        for row in range(2, 5):
            sheet.cell(row, 7).number_format = "0%"  # type: ignore[attr-defined]

    data = xlsx(beside(YIELD, [OIL[0], *[(a, b, float(c) / 100) for a, b, c in OIL[1:]]]), percent)  # type: ignore[arg-type]
    response = read_table(data, reading=Reading(table="rows 1 to 4, columns E to G")).column("oil").as_response()
    assert (response.values.tolist(), response.unit) == ([11.5, 12.5, 13.5], "%")
