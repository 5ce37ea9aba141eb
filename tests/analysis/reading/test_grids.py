"""Grids: one factor down the side, the other across the top, recognised and turned into rows."""

import numpy as np
import pandas as pd
import pytest

from analysis.reading.entry import read_table
from analysis.table import Table
from tests.analysis.reading.files import labels, read, values, xlsx

EXPECTED = {
    ("Rex", "none"): [5.1],
    ("Rex", "half"): [4.2],
    ("Rex", "full"): [3.3],
    ("Nova", "none"): [6.4],
    ("Nova", "half"): [5.5],
    ("Nova", "full"): [2.6],
}


def cells(table: Table) -> dict[tuple[str, str], list[float]]:
    """The values of each cell of a table turned into rows."""
    row, column = table.names[0], table.names[-2]
    found: dict[tuple[str, str], list[float]] = {}
    for a, b, value in zip(labels(table, row), labels(table, column), values(table, "value"), strict=True):
        found.setdefault((a, b), []).append(value)
    return found


@pytest.mark.parametrize(
    ("header", "names"),
    [
        ("Cultivar \\ Shade,none,half,full", ("Cultivar", "Shade", "value")),
        ("Cultivar / Shade,none,half,full", ("Cultivar", "Shade", "value")),
        ("Cultivar\\Shade,none,half,full", ("Cultivar", "Shade", "value")),
        (",none,half,full", ("row", "column", "value")),
        ("Cultivar,none,half,full", ("Cultivar", "column", "value")),
        (",Shade,,\nCultivar,none,half,full", ("Cultivar", "Shade", "value")),
        ("My trial of 2031\n\nCultivar \\ Shade,none,half,full", ("Cultivar", "Shade", "value")),
    ],
)
def test_factors_take_their_names_from_the_corner(header: str, names: tuple[str, ...]) -> None:
    table = read(f"{header}\nRex,5.1,4.2,3.3\nNova,6.4,5.5,2.6\n")
    assert table.names == names
    assert cells(table) == EXPECTED
    assert any("read as a grid" in note for note in table.notes)


def test_replicates_as_repeated_column_headings() -> None:
    table = read(",none,none,half,half\nRex,5.1,5.2,4.2,4.3\nNova,6.4,6.5,5.5,5.6\n")
    assert cells(table)["Rex", "half"] == [4.2, 4.3]
    assert table.rows == 8


def test_replicates_under_a_heading_written_once() -> None:
    table = read("Cultivar,none,,half,\nRex,5.1,5.2,4.2,4.3\nNova,6.4,6.5,5.5,5.6\n")
    assert cells(table)["Nova", "none"] == [6.4, 6.5]


def test_replicates_as_repeated_row_headings() -> None:
    table = read("Cultivar \\ Shade,none,half\nRex,5.1,4.2\nRex,5.2,4.3\nNova,6.4,5.5\nNova,6.5,5.6\n")
    assert cells(table)["Rex", "none"] == [5.1, 5.2]
    assert table.file_rows.tolist() == [2, 2, 3, 3, 4, 4, 5, 5]


def test_replicates_below_a_row_heading_written_once() -> None:
    table = read("Cultivar \\ Shade,none,half\nRex,5.1,4.2\n,5.2,4.3\nNova,6.4,5.5\n,6.5,5.6\n")
    assert cells(table)["Nova", "half"] == [5.5, 5.6]


def test_levels_that_span_numbered_replicates_are_a_grid_and_no_two_row_header() -> None:
    table = read(",none,,half,\nCultivar,rep 1,rep 2,rep 1,rep 2\nRex,5.1,5.2,4.2,4.3\nNova,6.4,6.5,5.5,5.6\n")
    assert table.names == ("Cultivar", "column", "value")
    assert cells(table)["Rex", "none"] == [5.1, 5.2]


def test_levels_that_span_replicates_by_merged_cells() -> None:
    rows = [
        ["Shade", "none", None, "half", None],
        ["Cultivar", "rep 1", "rep 2", "rep 1", "rep 2"],
        ["Rex", 5.1, 5.2, 4.2, 4.3],
        ["Nova", 6.4, 6.5, 5.5, 5.6],
    ]
    table = read_table(xlsx(rows, lambda sheet: [sheet.merge_cells("B1:C1"), sheet.merge_cells("D1:E1")]))  # type: ignore[func-returns-value]
    assert table.names == ("Cultivar", "Shade", "value")
    assert cells(table)["Nova", "half"] == [5.5, 5.6]


def test_a_column_that_numbers_the_replicates_stays_a_column() -> None:
    table = read("Cultivar,rep,none,half\nRex,1,5.1,4.2\nRex,2,5.2,4.3\nNova,1,6.4,5.5\nNova,2,6.5,5.6\n")
    assert table.names == ("Cultivar", "rep", "column", "value")
    assert cells(table)["Rex", "half"] == [4.2, 4.3]


def test_a_blank_cell_is_no_observation_and_one_with_a_missing_code_is() -> None:
    table = read("Cultivar \\ Shade,none,half\nRex,5.1,\nNova,NA,5.5\nLux,6.1,5.2\n")
    assert table.rows == 5
    missing = table.column("value").as_response().missing
    assert [(entry.row, entry.why) for entry in missing] == [(3, "“NA” stands for a missing value")]


def test_totals_are_left_out() -> None:
    table = read("Cultivar \\ Shade,none,half,Total\nRex,5.1,4.2,9.3\nNova,6.4,5.5,11.9\nTotal,11.5,9.7,21.2\n")
    assert table.rows == 4
    assert [entry.row for entry in table.left_out] == [4]
    assert any("“Total”" in note and "passed over" in note for note in table.notes)


@pytest.mark.parametrize("header", ["Cultivar,0,50,100", "Cultivar,10 mg,20 mg,40 mg", "Cultivar,low,medium,high", "Cultivar,T1,T2,T10"])
def test_headings_that_are_levels_by_their_form(header: str) -> None:
    table = read(f"{header}\nRex,5.1,4.2,3.3\nNova,6.4,5.5,2.6\n")
    assert table.names == ("Cultivar", "column", "value")
    assert list(table.column("column").as_levels().labels) == header.split(",")[1:]


def test_numbers_down_and_across() -> None:
    table = read("Temp \\ Dose,0,50\n10,5.1,4.2\n20,6.4,5.5\n")
    assert table.column("Temp").as_levels().amounts == (10.0, 20.0)
    assert table.column("Dose").as_levels().amounts == (0.0, 50.0)
    assert values(table, "value") == [5.1, 4.2, 6.4, 5.5]


def test_a_blank_corner_between_numbers() -> None:
    table = read(",0,50\n10,5.1,4.2\n20,6.4,5.5\n")
    assert table.names == ("row", "column", "value")
    assert table.column("column").as_levels().amounts == (0.0, 50.0)


def test_decimal_commas_in_a_grid() -> None:
    assert values(read("Cultivar / Shade;none;half\nRex;5,1;4,2\nNova;6,4;5,5\n"), "value") == [5.1, 4.2, 6.4, 5.5]


@pytest.mark.parametrize(
    "content",
    [
        "feed,shade,y\nA,low,1.5\nA,high,2.5\nB,low,3.5\nB,high,4.5\n",
        "feed,dose,y\nA,0,1.5\nA,50,2.5\nA,0,3.5\nB,50,4.5\nB,0,5.5\nB,50,4.5\n",
        "dose,temp,y\n0,10,1.5\n0,20,2.5\n50,10,3.5\n50,20,4.5\n",
        "feed,height,weight\nA,11.5,2.5\nA,12.5,2.6\nB,13.5,2.7\nB,14.5,2.9\n",
        "feed,shade,early,late\nA,low,1.5,2.5\nA,high,2.5,3.5\nB,low,3.5,1.5\nB,high,4.5,5.5\n",
        ",feed,shade,y\n0,A,low,1.5\n1,A,high,2.5\n2,B,low,3.5\n3,B,high,4.5\n",
        ",dose,temp,y\n0,0,10,1.5\n1,0,20,2.5\n2,50,10,3.5\n3,50,20,4.5\n",
        "animal,rep 1,rep 2\nA,1.5,2.5\nB,2.5,3.5\n",
    ],
)
def test_tables_in_rows_stay_in_rows(content: str) -> None:
    table = read(content)
    assert table.names[-1] == content.split("\n")[0].split(",")[-1]
    assert not any("grid" in note for note in table.notes)


def test_the_layout_can_be_overridden_both_ways() -> None:
    grid = "Cultivar \\ Shade,none,half\nRex,5.1,4.2\nNova,6.4,5.5\n"
    assert read(grid, layout="rows").names == ("Cultivar \\ Shade", "none", "half")
    rows = "feed,height,weight\nA,11.5,2.5\nB,12.5,2.6\n"
    assert read(rows, layout="grid").names == ("feed", "column", "value")


def test_a_grid_of_numbers_alone_by_request() -> None:
    assert values(read("0,10,20\n1,5.5,6.5\n2,7.5,8.5\n", layout="grid"), "value") == [5.5, 6.5, 7.5, 8.5]


def test_a_frame_as_a_grid_by_request() -> None:
    frame = pd.DataFrame({"Cultivar": ["Rex", "Nova"], "none": [5.1, 6.4], "half": [4.2, np.nan]})
    table = read_table(frame, layout="grid")
    assert values(table, "value") == [5.1, 4.2, 6.4]
    assert labels(table, "column") == ["none", "half", "none"]


def test_a_large_grid_value_keeps_its_decimals() -> None:
    table = read("Cultivar \\ Shade,none,half\nRex,1000000000000.4,1000000000000.3\nNova,1000000000000.5,1000000000000.2\n")
    assert table.column("value").as_response().offsets.tolist() == [0.4, 0.3, 0.5, 0.2]
