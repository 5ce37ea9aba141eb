"""How the wanted sheet of a workbook is found, and what is told about its cells."""

from collections.abc import Callable, Sequence
from functools import partial

from analysis import refusals
from analysis.reading import archives, books, cell_values, limits, ods_marks, ole, sheet_choice, sheets, table_choice, xls_marks, xlsx_marks
from analysis.reading.books import Book
from analysis.reading.choices import Reading
from analysis.reading.marks import Known
from analysis.reading.records import Found
from analysis.reading.sheet_marks import Marks
from analysis.reading.sheets import Sheet
from analysis.reading.signatures import Kind
from analysis.table import Decision


def read(data: bytes, kind: Kind, reading: Reading) -> Sheet:
    """Read the wanted sheet of a workbook, or the first that holds a table.

    Raises MissingSheet, NoSheetWithTable, Encrypted, DamagedFile, UnpacksTooLarge or TooManyCellsInSheet.
    """
    if kind != "xls":
        archives.check(data)
    marks = _marks(data, kind)
    book = books.opened_apart(data) if kind == "xls" else books.opened(data)
    if reading.sheet is not None and reading.sheet not in book.names:
        raise refusals.MissingSheet(reading.sheet, book.names)
    for name in book.names if reading.sheet is None else (reading.sheet,):
        sheet = _sheet(book, marks, name, reading)
        if reading.sheet is not None or len(book.names) == 1 or _holds_table(sheet):
            return table_choice.chosen(sheet, reading)
    raise refusals.NoSheetWithTable(book.names)


def _marks(data: bytes, kind: Kind) -> Callable[[str], Marks]:
    """How the marks of a sheet are found; those of .ods before anything else, since its cells may repeat without end."""
    if kind == "ods":
        marks_of = ods_marks.read(data)
        for name, marks in marks_of.items():
            _refuse_vast(name, marks)
        return lambda name: marks_of.get(name, Marks())
    if kind == "xls":
        ole.stream(data, xls_marks.STREAMS)  # broken chains are told before the workbook is opened
    return partial(xlsx_marks.read if kind == "xlsx" else xls_marks.read, data)


def _refuse_vast(name: str, marks: Marks) -> None:
    if marks.rows * marks.columns > limits.SHEET_CELLS:
        raise refusals.TooManyCellsInSheet(name, marks.rows, marks.columns)
    if marks.columns > limits.COLUMNS:
        raise refusals.TooManyColumns(None, marks.columns, limits.COLUMNS)


def _sheet(book: Book, marks_of: Callable[[str], Marks], name: str, reading: Reading) -> Sheet:
    marks = marks_of(name)
    _refuse_vast(name, marks)
    values, spans = book.load(name)
    marks.spans.extend([] if marks.spans else spans)  # those of .ods are known already
    cells = cell_values.marked(values, marks)
    decisions = (sheet_choice.decision(name, book.names, reading), *_decisions(marks, reading))
    hidden = tuple(marks.hidden) if reading.hidden == "leave out" else ()
    found = Found(decisions, Known(decimal=reading.decimal), tuple(marks.spans), hidden, sheets.raw_rows(cells))
    return Sheet(cells, marks, found)


def _decisions(marks: Marks, reading: Reading) -> tuple[Decision, ...]:
    """What the marks of a sheet have to tell."""
    decisions = [sheet_choice.hidden(marks.hidden, reading)]
    if marks.unsaved:
        told = _listed([cell_values.reference(*cell) for cell in marks.unsaved])
        sentence = f"Formulas without a stored value were read as blank ({told}): save the file in a spreadsheet program first."
        decisions.append(Decision("formulas", sentence))
    if marks.errors:
        told = _listed([f"{cell_values.reference(*cell)} {word}" for cell, word in sorted(marks.errors.items())])
        decisions.append(Decision("errors", f"Cells of the sheet hold errors ({told}): among measurements they are missing values."))
    return tuple(decisions)


def _listed(cells: Sequence[str], most: int = 8) -> str:
    return ", ".join(cells[:most]) + (f" and {len(cells) - most} more" if len(cells) > most else "")


def _holds_table(sheet: Sheet) -> bool:
    """Whether at least two rows fill at least two cells each, one of them below the first with a number in it."""
    rows = [record for record in sheet.head if record.filled > 1]
    return len(rows) > 1 and any(cell_values.has_number(record.cells) for record in rows[1:])
