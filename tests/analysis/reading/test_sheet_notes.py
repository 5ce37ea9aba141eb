"""What a sheet carries beside its values is told: hidden and filtered rows, unsaved formulas, errors, levels turned into dates."""

import datetime
import io
from collections.abc import Callable

import pytest
import xlwt

from analysis.reading.choices import Reading
from analysis.reading.entry import read_table
from tests.analysis.reading.files import BALANCED, YIELDS, Row, ods, ods_cell, ods_of, read, told, values, xlsx


def hidden_xlsx() -> bytes:
    def hide(sheet) -> None:  # type: ignore[no-untyped-def]
        sheet.auto_filter.ref = "A1:C9"
        sheet.row_dimensions[3].hidden = sheet.row_dimensions[5].hidden = True

    return xlsx(BALANCED, hide)


def hidden_xls() -> bytes:
    book = xlwt.Workbook()
    sheet = book.add_sheet("Data")
    for i, row in enumerate(BALANCED):
        for j, cell in enumerate(row):
            sheet.write(i, j, cell)
    sheet.row(2).hidden = sheet.row(4).hidden = True
    stream = io.BytesIO()
    book.save(stream)
    return stream.getvalue()


def hidden_ods() -> bytes:
    shown = {2: ' table:visibility="collapse"', 4: ' table:visibility="filter"'}
    rows = "".join(f"<table:table-row{shown.get(i, '')}>{''.join(map(ods_cell, row))}</table:table-row>" for i, row in enumerate(BALANCED))
    return ods_of(f'<table:table table:name="Data">{rows}</table:table>')


@pytest.mark.parametrize("make", [hidden_xlsx, hidden_xls, hidden_ods])
def test_hidden_and_filtered_rows_stay_unless_the_user_says_otherwise(make: Callable[[], bytes]) -> None:
    table = read_table(make())
    assert values(table, "yield") == YIELDS
    assert "Hidden rows of the sheet were kept (rows 3 and 5)." in table.notes
    without = read_table(make(), reading=Reading(hidden="leave out"))
    assert [entry.row for entry in without.left_out] == [3, 5]
    assert without.rows + len(without.left_out) == 8
    assert "Hidden rows of the sheet were left out (rows 3 and 5)." in without.notes


def test_hidden_rows_of_a_grid_are_left_out_once() -> None:
    def hide(sheet) -> None:  # type: ignore[no-untyped-def]
        sheet.row_dimensions[3].hidden = True

    rows: list[Row] = [("feed \\ shade", "low", "high"), ("hay", 1.5, 2.5), ("straw", 3.5, 4.5), ("beet", 5.5, 6.5)]
    table = read_table(xlsx(rows, hide), reading=Reading(hidden="leave out"))
    assert values(table, "value") == [1.5, 2.5, 5.5, 6.5]
    assert [entry.row for entry in table.left_out] == [3]


def test_unsaved_formulas_of_ods_are_told() -> None:
    unsaved = '<table:table-row><table:table-cell/><table:table-cell/><table:table-cell table:formula="of:=[.C2]"/></table:table-row>'
    assert "Formulas without a stored value were read as blank (C10)" in told(read_table(ods(BALANCED, unsaved)))


def test_many_unsaved_formulas_are_counted() -> None:
    def formulas(sheet) -> None:  # type: ignore[no-untyped-def]
        for row in range(2, 14):
            sheet.cell(row, 4).value = "=C2*2"

    rows: list[Row] = [(*BALANCED[0], "double"), *BALANCED[1:], *BALANCED[1:]]
    assert "(D2, D3, D4, D5, D6, D7, D8, D9 and 4 more)" in told(read_table(xlsx(rows, formulas)))


def test_error_cells_are_listed() -> None:
    def errors(sheet) -> None:  # type: ignore[no-untyped-def]
        for name, word in {"C5": "#DIV/0!", "C3": "#N/A"}.items():
            sheet[name] = word
            sheet[name].data_type = "e"

    table = read_table(xlsx(BALANCED, errors))
    assert "Cells of the sheet hold errors (C3 #N/A, C5 #DIV/0!): among measurements they are missing values." in table.notes


def dated(levels: list[object], name: str = "depth") -> str:
    rows: list[Row] = [(name, "shade", "y"), *((level, shade, i + 0.5) for i, level in enumerate(levels) for shade in ("low", "high"))]
    return told(read_table(xlsx(rows)))


def test_a_few_dates_that_recur_are_told_as_probable_levels() -> None:
    days = [datetime.date(2031, 2, 1), datetime.date(2031, 4, 3)]
    assert "Column “depth” holds nothing but dates that recur (“2031-02-01” and “2031-04-03”)" in dated(days)  # type: ignore[arg-type]
    assert "dates" not in dated(days, "sampling date")  # type: ignore[arg-type]


@pytest.mark.parametrize("made", ["1-Feb", "Feb-02", "02. Feb", "3. Mai", "1/2/2031", "2031-02-01", "4-Sept"])
def test_dates_among_the_levels_of_a_text_file_are_told(made: str) -> None:
    text = f"depth,shade,y\n{made},low,1\n{made},high,2\n5-40,low,3\n5-40,high,4\n"
    assert "Column “depth” holds dates among other cells (rows 2 and 3); a spreadsheet has probably made them" in told(read(text))


@pytest.mark.parametrize("level", ["1-2", "May", "Mar 10a", "10-20", "T2", "2-Mars-x", "1.5", "10-10-20"])
def test_ordinary_levels_are_no_dates(level: str) -> None:
    assert "dates" not in told(read(f"depth,shade,y\n{level},low,1\n{level},high,2\n5-40,low,3\n5-40,high,4\n"))
