"""Every reason for which a file, a table or a column is turned down."""

from collections.abc import Sequence

from analysis.refusals.sentence import Refusal, nearest_told, quoted_told


class EmptyFile(Refusal):
    """A file with nothing in it."""

    def __init__(self) -> None:
        super().__init__("The file is empty: choose one with a header and at least a few rows.")


class MissingFile(Refusal):
    """A path that leads to no readable file."""

    def __init__(self, path: str) -> None:
        super().__init__(f"There is no file “{path[-200:]}” that can be read: check the name and the folder.")


class FileTooLarge(Refusal):
    """A file beyond the size that is read."""

    def __init__(self, size: int, limit: int) -> None:
        super().__init__(
            f"The file holds {size / 2**20:,.0f} MiB and the limit is {limit / 2**20:,.0f} MiB: leave out columns that are not "
            "needed, or bring a data frame."
        )


class HeaderWithoutRows(Refusal):
    """A header with no observation below it."""

    def __init__(self, header: Sequence[str]) -> None:
        named = f" ({quoted_told([name for name in header if name])})" if any(header) else ""
        super().__init__(f"The file has a header{named} but no rows of data below it: add the observations, one in each row.")


class NoSuchHeader(Refusal):
    """A row asked for as the header that cannot be one."""

    def __init__(self, row: int, last: int) -> None:
        self.row = row
        super().__init__(
            f"Row {row} cannot be the header: it is blank, or not among the first {last} rows; choose a filled row above the data."
        )


class NoNumericColumn(Refusal):
    """A table in which nothing is a number."""

    def __init__(self, columns: int, rows: int) -> None:
        super().__init__(
            f"The table has no numeric column: none of the cells in its {columns} column{'' if columns == 1 else 's'} and {rows} "
            f"row{'' if rows == 1 else 's'} is a number, and a response is needed to analyse; check that this is the right "
            "file, sheet and separator."
        )


class SummaryTable(Refusal):
    """A table of means and their spread in place of the observations."""

    def __init__(self, sign: str) -> None:
        super().__init__(
            f"The table holds means and their spread ({sign}), not the single observations, which the analysis needs: bring the table "
            "with one row for each measured value."
        )


class NotATable(Refusal):
    """A picture, a document, or another file that holds no table, whatever its name says."""

    def __init__(self, what: str) -> None:
        super().__init__(f"The file is {what}, not a table: save the data as .xlsx, .ods, .csv or Parquet and bring that file.")


class DamagedFile(Refusal):
    """A file of a known kind that cannot be read to its end."""

    def __init__(self, what: str) -> None:
        super().__init__(
            f"The {what} is damaged or cut short and cannot be read: open it where it was made, save it anew and bring that file."
        )


class Encrypted(Refusal):
    """A file that needs a password."""

    def __init__(self) -> None:
        super().__init__("The file is encrypted and needs a password: save it without one and bring that file.")


class UnpacksTooLarge(Refusal):
    """A compressed file that unpacks beyond the limit."""

    def __init__(self, limit: int, what: str = "more than") -> None:
        super().__init__(
            f"The workbook unpacks to {what} the limit of {limit // 2**20} MiB: save only the sheet with the data, or save it as .csv."
        )


class UnpacksBeyondItsWord(UnpacksTooLarge):
    """A compressed file with a part that is larger than it says, as it is made to pass a limit."""

    def __init__(self, limit: int) -> None:
        super().__init__(limit, "more than it says of itself, which may well be more than")


class TooManyCellsInSheet(Refusal):
    """A sheet whose filled cells span more than can be held."""

    def __init__(self, sheet: str, rows: int, columns: int) -> None:
        super().__init__(
            f"The sheet “{sheet[:60]}” spans {rows:,} rows × {columns:,} columns, more than can be read: delete stray cells "
            "far below or beside the table."
        )


class TooManyRows(Refusal):
    """A file with more rows than are read."""

    def __init__(self, rows: int, limit: int) -> None:
        super().__init__(f"The file has {rows:,} rows and the limit is {limit:,}: bring a part of it, or means of its experimental units.")


class TooManyColumns(Refusal):
    """A table with more columns than are read."""

    def __init__(self, row: int | None, columns: int, limit: int) -> None:
        where = "The table" if row is None else f"Row {row}"
        super().__init__(
            f"{where} fills {columns:,} columns and the limit is {limit:,}: keep the factors and the response, or check the separator."
        )


class MissingSheet(Refusal):
    """A sheet that the workbook does not have."""

    def __init__(self, sheet: str, sheets: Sequence[str]) -> None:
        super().__init__(f"The workbook has no sheet “{sheet[:60]}”: {nearest_told(sheet, sheets, 'its sheets')}")


class MissingTable(Refusal):
    """A table that was asked for by a name that none of a sheet has."""

    def __init__(self, table: str, tables: Sequence[str]) -> None:
        hint = nearest_told(table, tables, "its tables") if tables else "it holds one table, so leave the choice out."
        super().__init__(f"The sheet has no table “{table[:60]}”: {hint}")


class SheetOutsideWorkbook(Refusal):
    """A sheet asked of a file that has none."""

    def __init__(self, sheet: str) -> None:
        super().__init__(f"The sheet “{sheet[:60]}” was asked for, but the file is not a workbook and has no sheets: leave the sheet out.")


class NoSheetWithTable(Refusal):
    """A workbook in which no sheet holds a table."""

    def __init__(self, sheets: Sequence[str]) -> None:
        super().__init__(f"No sheet of the workbook holds a table ({quoted_told(sheets)}): each is empty, or a header without rows.")


class NulBytes(Refusal):
    """A text file with zero bytes in it."""

    def __init__(self, row: int) -> None:
        self.row = row
        super().__init__(
            f"Row {row} holds NUL bytes, which no text table has: the file is damaged or of another kind; save it anew as .csv or .xlsx."
        )


class UnclosedQuote(Refusal):
    """A quotation mark that opens a cell and does not close it."""

    def __init__(self, row: int) -> None:
        self.row = row
        super().__init__(
            f"An unclosed quotation mark was found in row {row}, so that the cells after it run together: close or remove it there."
        )


class CellTooLong(Refusal):
    """A cell with more text than a spreadsheet cell can hold."""

    def __init__(self, row: int, limit: int) -> None:
        self.row = row
        super().__init__(
            f"A cell in row {row} is longer than {limit:,} characters: shorten it, or check the separator and the quotation marks."
        )


class TooManyFields(Refusal):
    """A row with more filled cells than the header has names."""

    def __init__(self, row: int, fields: int, names: int) -> None:
        self.row = row
        super().__init__(
            f"Row {row} has {fields} filled fields and the header only {names}: name the further columns, or put quotation "
            "marks around cells "
            f"that hold the separator (a decimal comma, perhaps)."
        )


class UnknownColumn(Refusal):
    """A column name that the table does not have."""

    def __init__(self, name: str, known: Sequence[str]) -> None:
        super().__init__(f"There is no column “{name[:60]}”: {nearest_told(name, known, 'the columns')}")


class MixedUnits(Refusal):
    """A column whose numbers carry more than one unit."""

    def __init__(self, column: str, spots: Sequence[tuple[str, int]]) -> None:  # unit and the first row with it
        self.rows = tuple(row for _, row in spots)
        told = [f"{unit} (row {row})" for unit, row in spots[:6]]
        super().__init__(
            f"Column “{column[:60]}” holds {', '.join(told[:-1])} and {told[-1]}: write one unit throughout, or one column for each unit."
        )


class ResponseIsText(Refusal):
    """A response with text where most of its numbers should be."""

    def __init__(self, column: str, first: Sequence[tuple[str, int]], text_rows: int, rows: int) -> None:
        self.rows = tuple(row for _, row in first)
        told = ", ".join(f"“{text[:40]}” (row {row})" for text, row in first)
        super().__init__(
            f"Column “{column[:60]}” holds text in {text_rows} of its {rows} rows, such as {told}: choose a column of numbers "
            "as the response."
        )


class NoNumbers(Refusal):
    """A response without a single number."""

    def __init__(self, column: str, rows: int) -> None:
        super().__init__(f"Column “{column[:60]}” holds no number in any of its {rows} rows: choose a column of numbers as the response.")
