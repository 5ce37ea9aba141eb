"""Files that would take long or much memory, or stop a parser: each is refused in one sentence by what it declares or starts with."""

import pytest

from analysis import refusals
from analysis.reading.entry import read_table
from tests.analysis.reading.files import BALANCED, ods_of, read, text, values, xlsx

REFUSED: dict[str, tuple[bytes, type[refusals.Refusal], str]] = {
    "a long line with one quotation mark": (b'"' + b"x," * 200_000, refusals.Refusal, "row 1"),
    "quotation marks and commas": (b'",' * 200_000, refusals.Refusal, "ow 1"),
    "nothing but zeros": (bytes(3_000_000), refusals.EmptyFile, "empty"),
    "nothing but blanks": (b" \n\t" * 1_000_000, refusals.EmptyFile, "empty"),
    "commas without end": (b"a," * 2_000_000, refusals.TooManyColumns, "Row 1 fills 1,280,000 columns"),
    "one word without end": (b"a" * 5_000_000, refusals.CellTooLong, "row 1 is longer"),
    "a cell without end": (b"a,b,y\nu,v," + b"x" * 5_000_000 + b"\nu,v,1\n", refusals.CellTooLong, "row 2 is longer"),
    "an open quotation mark at the end": (text(BALANCED).encode() * 3 + b'"u,v,1\n', refusals.UnclosedQuote, "row 28"),
}


@pytest.mark.parametrize("name", REFUSED)
def test_refused(name: str) -> None:
    data, refusal, words = REFUSED[name]
    with pytest.raises(refusal, match=words):
        read_table(data)


def test_cells_repeated_without_end() -> None:
    cell = '<table:table-cell office:value-type="float" office:value="1" table:number-columns-repeated="900"/>'
    rows = f'<table:table-row table:number-rows-repeated="1000000">{cell}</table:table-row>'
    with pytest.raises(refusals.TooManyCellsInSheet, match="spans 1,000,000 rows × 900 columns"):
        read_table(ods_of(f'<table:table table:name="D">{rows}</table:table>'))


def test_one_cell_at_the_far_end() -> None:
    with pytest.raises(refusals.TooManyCellsInSheet, match="spans 1,048,576 rows × 16,384 columns"):
        read_table(xlsx(BALANCED, lambda sheet: sheet.__setitem__("XFD1048576", 3)))


def test_ragged_lines_are_made_regular() -> None:
    table = read("a,b,y,z\nu,v,1\n\n \t\nu\nw,v,2,3,, ,\nu,w,3,4\n")
    assert table.file_rows.tolist() == [2, 6, 7]
    assert [entry.row for entry in table.left_out] == [5]
    assert values(table, "y") == [1.0, 2.0, 3.0]
    assert [entry.row for entry in table.column("z").as_response().missing] == [2]
