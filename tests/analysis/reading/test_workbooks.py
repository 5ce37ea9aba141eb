"""Workbooks: values not formats, merged cells, errors, hidden rows, sheets, and the files that mean harm."""

import datetime
import io
import re
import zipfile

import openpyxl
import pytest

from analysis import refusals
from analysis.reading import archives, xlsx_marks, xlsx_scan
from analysis.reading.entry import read_table
from analysis.reading.sheet_marks import Marks
from tests.analysis.reading.files import (
    BALANCED,
    YIELDS,
    archive,
    labels,
    ods,
    ods_cell,
    ods_of,
    replaced,
    saved,
    told,
    values,
    xls,
    xlsx,
)

KINDS = {"xlsx": xlsx, "xls": xls, "ods": ods}


@pytest.mark.parametrize("make", KINDS.values(), ids=KINDS.keys())
class TestEveryKind:
    """What all three kinds of workbook have in common."""

    def test_the_same_table(self, make) -> None:  # type: ignore[no-untyped-def]
        table = read_table(make(BALANCED))
        assert table.names == ("feed", "shade", "yield")
        assert values(table, "yield") == YIELDS
        assert table.file_rows.tolist() == list(range(2, 10))

    def test_titles_blank_rows_and_columns(self, make) -> None:  # type: ignore[no-untyped-def]
        rows = [
            ["Trial 7"],
            [],
            *([None, *row[:1], None, *row[1:]] for row in BALANCED),
            [],
            [None, "Total", None, None, 79.5],
            [None, "by hand"],
        ]
        table = read_table(make(rows))
        assert table.names == ("feed", "shade", "yield")
        assert values(table, "yield") == YIELDS
        assert table.file_rows.tolist() == list(range(4, 12))

    def test_text_among_numbers(self, make) -> None:  # type: ignore[no-untyped-def]
        table = read_table(
            make(
                [
                    ["feed", "shade", "y"],
                    ["A", "low", 1.5],
                    ["A", "high", "2,5"],
                    ["B", "low", "<0.5"],
                    ["B", "high", "NA"],
                    ["B", "low", 3],
                ]
            )
        )
        assert values(table, "y")[:2] == [1.5, 2.5]
        assert [entry.row for entry in table.column("y").as_response().missing] == [4, 5]

    def test_a_level_1_is_shown_as_1(self, make) -> None:  # type: ignore[no-untyped-def]
        table = read_table(make([["dose", "shade", "y"], [1.0, "low", 1.5], [10.0, "low", 2.5], [0.5, "high", 3.5]]))
        assert table.column("dose").as_levels().labels == ("0.5", "1", "10")

    def test_a_sheet_that_is_not_there(self, make) -> None:  # type: ignore[no-untyped-def]
        with pytest.raises(refusals.MissingSheet, match="no sheet “Dta”: did you mean “Data”"):
            read_table(make(BALANCED), sheet="Dta")

    def test_cut_short(self, make) -> None:  # type: ignore[no-untyped-def]
        data = make(BALANCED)
        with pytest.raises(refusals.Refusal, match="damaged or cut short"):
            read_table(data[: len(data) // 2])

    def test_a_header_without_rows(self, make) -> None:  # type: ignore[no-untyped-def]
        with pytest.raises(refusals.HeaderWithoutRows, match="“feed”, “shade”, “yield”"):
            read_table(make(BALANCED[:1]))

    def test_an_empty_sheet(self, make) -> None:  # type: ignore[no-untyped-def]
        with pytest.raises(refusals.EmptyFile):
            read_table(make([]))

    def test_more_filled_cells_than_the_header(self, make) -> None:  # type: ignore[no-untyped-def]
        with pytest.raises(refusals.TooManyFields, match="Row 3"):
            read_table(make([*BALANCED[:2], ["grain", "half", 3.5, "late"], *BALANCED[2:]]))

    def test_exact_decimals(self, make) -> None:  # type: ignore[no-untyped-def]
        table = read_table(make([["a", "b", "y"], ["x", "u", 1000000000000.4], ["x", "v", 1000000000000.3]]))
        assert table.column("y").as_response().offsets.tolist() == [0.4, 0.3]


def test_percent_cells_stay_in_percent() -> None:
    rows = [["feed", "rate", "y"], ["A", 0.45, 0.45], ["A", 0.07, 0.071], ["B", 0.45, 1.0]]
    table = read_table(xlsx(rows, lambda sheet: [setattr(cell, "number_format", "0.0%") for row in sheet["B2:C4"] for cell in row]))  # type: ignore[func-returns-value]
    response = table.column("y").as_response()
    assert (response.values.tolist(), response.unit) == ([45.0, 7.1, 100.0], "%")
    assert table.column("rate").as_levels().labels == ("7", "45")


def test_percent_cells_in_ods() -> None:
    percent = '<table:table-cell office:value-type="percentage" office:value="0.45"><text:p>45%</text:p></table:table-cell>'
    raw = "".join(f"<table:table-row>{ods_cell('A')}{ods_cell(level)}{percent}</table:table-row>" for level in "uv")
    response = read_table(ods([["a", "b", "y"]], raw)).column("y").as_response()
    assert (response.values.tolist(), response.unit) == ([45.0, 45.0], "%")


def test_percent_cells_in_xls() -> None:
    rows = [["a", "b", "y"], ["x", "u", 0.45], ["x", "v", 0.07]]
    response = read_table(xls(rows, formats={(1, 2): "0%", (2, 2): "0.00%"})).column("y").as_response()
    assert (response.values.tolist(), response.unit) == ([45.0, 7.0], "%")


def test_merged_levels_are_filled_down() -> None:
    rows = [
        ["feed", "shade", "y"],
        ["grain", "low", 1.5],
        [None, "high", 2.5],
        ["grass", "low", 3.5],
        [None, "high", 4.5],
        ["hay", "low", 5.5],
    ]
    table = read_table(xlsx(rows, lambda sheet: [sheet.merge_cells("A2:A3"), sheet.merge_cells("A4:A5")]))  # type: ignore[func-returns-value]
    assert labels(table, "feed") == ["grain", "grain", "grass", "grass", "hay"]
    assert "filled down" in told(table)


def test_merged_levels_in_ods() -> None:
    merged = '<table:table-cell table:number-rows-spanned="2" office:value-type="string"><text:p>grain</text:p></table:table-cell>'
    raw = (
        f"<table:table-row>{merged}{ods_cell('low')}{ods_cell(1.5)}</table:table-row>"
        f"<table:table-row><table:covered-table-cell/>{ods_cell('high')}{ods_cell(2.5)}</table:table-row>"
        f"<table:table-row>{ods_cell('hay')}{ods_cell('high')}{ods_cell(3.5)}</table:table-row>"
    )
    assert labels(read_table(ods([["feed", "shade", "y"]], raw)), "feed") == ["grain", "grain", "hay"]


def test_a_merged_measurement_is_one_measurement() -> None:
    rows = [["feed", "shade", "y"], ["A", "low", 1.5], ["A", "high", None], ["B", "low", 2.5], ["B", "high", 3.5]]
    table = read_table(xlsx(rows, lambda sheet: sheet.merge_cells("C2:C3")))
    assert [entry.row for entry in table.column("y").as_response().missing] == [3]


def test_blanks_beside_merged_cells_are_not_filled() -> None:
    rows = [["feed", "shade", "y"], ["grain", "low", 1.5], [None, "high", 2.5], ["grass", "low", 3.5], [None, "high", 4.5]]
    table = read_table(xlsx(rows, lambda sheet: sheet.merge_cells("A2:A3")))
    assert labels(table, "feed") == ["grain", "grain", "grass", ""]


def test_a_merged_title_is_no_header() -> None:
    table = read_table(xlsx([["Trial 7", None, None], *BALANCED], lambda sheet: sheet.merge_cells("A1:C1")))
    assert table.names == ("feed", "shade", "yield")


def test_error_cells_are_missing_in_the_response_and_levels_in_a_factor() -> None:
    def errors(sheet) -> None:  # type: ignore[no-untyped-def]
        for name in ("B3", "C3", "C5"):
            sheet[name] = "#DIV/0!"
            sheet[name].data_type = "e"

    table = read_table(xlsx(BALANCED, errors))
    assert [entry.row for entry in table.column("yield").as_response().missing] == [3, 5]
    assert "#DIV/0!" in table.column("shade").as_levels().labels


def test_hidden_rows_are_kept_and_told() -> None:
    def hide(sheet) -> None:  # type: ignore[no-untyped-def]
        sheet.row_dimensions[4].hidden = True

    table = read_table(xlsx(BALANCED, hide))
    assert table.rows == 8
    assert "Hidden rows of the sheet were kept (row 4)" in told(table)


def test_formulas_without_a_stored_value_are_told_with_their_cells() -> None:
    def formula(sheet) -> None:  # type: ignore[no-untyped-def]
        sheet["C3"] = "=C2+1"

    table = read_table(xlsx(BALANCED, formula))
    assert "(C3)" in told(table)
    assert [entry.row for entry in table.column("yield").as_response().missing] == [3]


def test_levels_that_turned_into_dates_are_told() -> None:
    rows = [["plot", "shade", "y"], [datetime.date(2031, 2, 1), "low", 1.5], ["3-4x", "high", 2.5], ["5-6x", "low", 3.5]]
    table = read_table(xlsx(rows))
    assert "holds dates among other cells (row 2)" in told(table)
    assert labels(table, "plot")[0] == "2031-02-01"


def test_true_and_false() -> None:
    table = read_table(xlsx([["watered", "b", "y"], [True, "u", 1.5], [False, "u", 2.5], [True, "v", 3.5]]))
    assert table.column("watered").as_levels().labels == ("FALSE", "TRUE")


def test_the_first_sheet_with_a_table_is_read_and_the_others_named() -> None:
    book = openpyxl.Workbook()
    book.active.append(["Read me first"])  # type: ignore[union-attr]
    for name in ("Yields", "Weights"):
        sheet = book.create_sheet(name)
        for row in BALANCED:
            sheet.append(list(row))
    table = read_table(saved(book))
    assert values(table, "yield") == YIELDS
    assert "The sheet “Yields” was read; the workbook also holds “Sheet” and “Weights”." in table.notes
    assert read_table(saved(book), sheet="Weights").rows == 8


def test_hidden_sheets_come_last() -> None:
    book = openpyxl.Workbook()
    assert book.active is not None
    book.active.append(["a", "b", "y"])
    book.active.append(["x", "u", 1])
    book.active.sheet_state = "hidden"
    sheet = book.create_sheet("Shown")
    for row in BALANCED:
        sheet.append(list(row))
    assert read_table(saved(book)).rows == 8


def test_no_sheet_with_a_table() -> None:
    book = openpyxl.Workbook()
    book.create_sheet("Notes").append(["nothing here"])
    with pytest.raises(refusals.NoSheetWithTable, match="“Sheet”, “Notes”"):
        read_table(saved(book))


def test_a_sheet_of_a_text_file_is_refused() -> None:
    with pytest.raises(refusals.SheetOutsideWorkbook, match="not a workbook"):
        read_table(b"a,b,y\nx,u,1\nx,v,2\n", sheet="Data")


def test_names_and_levels_with_markup_stay_text() -> None:
    table = read_table(xlsx([["<b>feed</b>", "b", "y"], ["=1+1x", "<script>", 1.5], ["B", "&amp;", 2.5]]))
    assert table.names[0] == "<b>feed</b>"
    assert "<script>" in table.column("b").as_levels().labels


class TestHarm:
    """Workbooks that are encrypted, swollen, mislabelled or broken."""

    def test_more_than_the_limit_by_its_own_word(self) -> None:
        with pytest.raises(refusals.UnpacksTooLarge, match="512 MiB"):
            read_table(bomb(declared=None))

    def test_more_than_the_limit_behind_a_false_word(self) -> None:
        with pytest.raises(refusals.UnpacksTooLarge, match="512 MiB"):
            read_table(bomb(declared=1000))

    def test_a_cell_at_the_far_corner(self) -> None:
        with pytest.raises(refusals.TooManyCellsInSheet, match="1,048,576 rows × 16,384 columns"):
            read_table(xlsx(BALANCED, lambda sheet: sheet.__setitem__("XFD1048576", 1)))

    def test_a_cell_repeated_without_end_in_ods(self) -> None:
        many = '<table:table-cell table:number-columns-repeated="16000" office:value-type="float" office:value="1"/>'
        with pytest.raises(refusals.TooManyCellsInSheet):
            read_table(ods(BALANCED, f'<table:table-row table:number-rows-repeated="1000000">{many}</table:table-row>'))

    def test_blank_cells_repeated_to_the_end_in_ods_are_nothing(self) -> None:
        blank = '<table:table-cell table:number-columns-repeated="16384"/>'
        raw = f'<table:table-row table:number-rows-repeated="1048000">{blank}</table:table-row>'
        assert read_table(ods(BALANCED, raw)).rows == 8

    def test_entities_that_multiply(self) -> None:
        lol = b'<?xml version="1.0"?><!DOCTYPE x [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;">]>'
        book = replaced(xlsx(BALANCED), "xl/worksheets/sheet1.xml", lambda xml: lol + xml)
        with pytest.raises(refusals.DamagedFile):
            read_table(book)

    def test_broken_xml(self) -> None:
        with pytest.raises(refusals.DamagedFile, match="damaged or cut short"):
            read_table(replaced(xlsx(BALANCED), "xl/worksheets/sheet1.xml", lambda xml: xml[:300]))

    def test_an_encrypted_workbook(self) -> None:
        ole = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(600) + "EncryptedPackage".encode("utf-16-le") + bytes(600)
        with pytest.raises(refusals.Encrypted, match="password"):
            read_table(ole)

    def test_an_encrypted_ods(self) -> None:
        manifest = '<manifest:manifest xmlns:manifest="x"><manifest:encryption-data/></manifest:manifest>'
        with pytest.raises(refusals.Encrypted, match="password"):
            read_table(ods_of("", manifest))

    @pytest.mark.parametrize("part", ["word/document.xml", "ppt/presentation.xml", "readme.txt"])
    def test_other_archives(self, part: str) -> None:
        with pytest.raises(refusals.NotATable, match="not a table"):
            read_table(archive({part: "x"}), name="trial.xlsx")

    def test_a_workbook_without_its_list_of_sheets(self) -> None:
        with pytest.raises(refusals.Refusal):
            read_table(archive({"xl/worksheets/sheet1.xml": "<worksheet/>"}))


def bomb(declared: int | None) -> bytes:
    """A workbook with a part that unpacks to 600 MiB, saying so or saying something else."""
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED, compresslevel=1) as packed:
        packed.writestr("xl/workbook.xml", "<workbook/>")
        with packed.open("xl/worksheets/sheet1.xml", "w", force_zip64=True) as part:
            for _ in range(600):
                part.write(bytes(2**20))
    data = stream.getvalue()
    if declared is None:
        return data
    size = (600 * 2**20).to_bytes(4, "little")
    place = data.rindex(size)  # in the directory at the end
    return data[:place] + declared.to_bytes(4, "little") + data[place + 4 :]


def full_of_marks() -> bytes:
    """A workbook with every mark that a sheet can carry."""

    def mark(sheet) -> None:  # type: ignore[no-untyped-def]
        sheet["C3"], sheet["C4"], sheet["C5"] = "=C2+1", 0.5, "#N/A"
        sheet["C4"].number_format, sheet["C5"].data_type = '0.0"%"%', "e"
        sheet["C6"].number_format = '0.0"%"'
        sheet.row_dimensions[4].hidden = True
        sheet["Z99"].number_format = "0%"

    return xlsx(BALANCED, mark)


@pytest.mark.parametrize("prefix", ["", "x:"])
def test_the_quick_look_and_the_walk_find_the_same_marks(prefix: str) -> None:
    percent = frozenset({"1", "3"})
    with zipfile.ZipFile(io.BytesIO(full_of_marks())) as packed:
        xml = packed.read("xl/worksheets/sheet1.xml")
    if prefix:
        xml = re.sub(rb"<(/?)(?=[a-zA-Z])", rb"<\1x:", xml).replace(b"xmlns=", b"xmlns:x=")
    quick, walked = xlsx_scan.scan(xml, percent), Marks()
    archives.parse(xml, xlsx_marks._SheetParser(walked, percent).parser)
    assert quick is not None
    assert (quick.errors, quick.unsaved, quick.hidden) == (walked.errors, walked.unsaved, walked.hidden)
    assert (quick.errors, quick.unsaved, quick.hidden) == ({(4, 2): "#N/A"}, [(2, 2)], [4])
    assert walked.percent <= quick.percent
    assert (walked.rows, walked.columns) == (9, 3)


def test_cells_without_references_are_read() -> None:
    book = replaced(xlsx(BALANCED), "xl/worksheets/sheet1.xml", lambda xml: re.sub(rb'<c r="[A-Z]+\d+"', b"<c", xml))
    assert values(read_table(book), "yield") == YIELDS


def test_a_format_far_below_the_table_is_no_cell() -> None:
    table = read_table(xlsx(BALANCED, lambda sheet: setattr(sheet["XFD1000000"], "number_format", "0%")))
    assert table.rows == 8
