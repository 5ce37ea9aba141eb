"""Every reason for which a table, a choice or a design is turned down, each in one sentence for the user."""

import difflib
import re
from collections.abc import Sequence

_LINE_ENDS = re.compile(r"[\t\n\v\f\r\x1c-\x1e\x85\u2028\u2029]+")
LONGEST = 1000  # characters of a refusal


class Refusal(Exception):
    """A sentence for the user: what was found, where, and what would help; always one line, whatever a file put into it."""

    def __init__(self, sentence: str) -> None:
        super().__init__(_LINE_ENDS.sub(" ", sentence)[:LONGEST])


def rows_told(rows: Sequence[int], most: int = 5) -> str:
    """Write file rows for a sentence: "row 4", "rows 4, 9 and 12", "rows 4, 9, 12, 13, 20 and 7 more"."""
    shown = [str(row) for row in rows[:most]]
    if len(rows) == 1:
        return f"row {shown[0]}"
    if len(rows) > most:
        return f"rows {', '.join(shown)} and {len(rows) - most} more"
    return f"rows {', '.join(shown[:-1])} and {shown[-1]}"


def nearest_told(wanted: str, known: Sequence[str], what: str) -> str:
    """Write the hint that follows an unknown name: the nearest one, or the first few there are."""
    by_fold = {name.casefold(): name for name in known}
    close = difflib.get_close_matches(wanted.casefold(), list(by_fold), n=1, cutoff=0.5)
    if close:
        return f"did you mean “{by_fold[close[0]]}”?"
    some = ", ".join(f"“{name}”" for name in known[:8])
    return f"{what} are {some}{' and more' if len(known) > 8 else ''}."


class UnknownScale(Refusal):
    """A scale that does not exist."""

    def __init__(self, text: str) -> None:
        super().__init__(f"There is no scale “{text}”: choose none, log, sqrt, reciprocal, or power=L with a number L other than 0.")


class OutsideScale(Refusal):
    """Values that the chosen scale cannot take."""

    def __init__(self, response: str, scale: str, needs: str, rows: tuple[int, ...]) -> None:
        self.rows = rows
        super().__init__(
            f"The {scale} scale needs every “{response}” to be {needs}, and {rows_told(rows)} "
            f"{'is' if len(rows) == 1 else 'are'} not: choose another scale, or set those rows aside with a reason."
        )


class SpanOutOfReach(Refusal):
    """Values so far apart, or so close together, that their squares leave the range of double precision."""

    def __init__(self, response: str, scale: str) -> None:
        what = f"“{response}”" if scale == "none" else f"“{response}” on the {scale} scale"
        super().__init__(f"The numbers of {what} are too large or too small to be squared: use another unit or another scale.")


class UnknownChoice(Refusal):
    """A choice with a value that it does not offer."""

    def __init__(self, choice: str, value: object, offered: Sequence[str]) -> None:
        super().__init__(f"“{value}” is not offered for {choice}: choose {', '.join(offered[:-1])} or {offered[-1]}.")


class OutOfRange(Refusal):
    """A number given as a choice that lies outside what makes sense."""

    def __init__(self, choice: str, value: object, expected: str) -> None:
        super().__init__(f"{choice.capitalize()} is given as {value}: it must be {expected}.")


class RoleMissing(Refusal):
    """A role that no column has been given yet."""

    def __init__(self, role: str) -> None:
        super().__init__(f"No column has been chosen as the {role} yet: choose one.")


class SameColumnTwice(Refusal):
    """One column in two roles."""

    def __init__(self, column: str, first: str, second: str) -> None:
        super().__init__(f"Column “{column}” is given as {first} and as {second}: choose a different column for one of them.")


class NameTaken(Refusal):
    """A factor or block named like a line of the results."""

    def __init__(self, column: str) -> None:
        super().__init__(f"The results call something else “{column}”: give that column another name, such as “{column} 1”.")


class UnknownLevel(Refusal):
    """A level that its column does not hold."""

    def __init__(self, column: str, level: str, levels: Sequence[str]) -> None:
        super().__init__(f"Column “{column}” has no level “{level}”; {nearest_told(level, levels, 'its levels')}")


class LevelTwice(Refusal):
    """A level named twice among those to keep."""

    def __init__(self, column: str, level: str) -> None:
        super().__init__(f"Level “{level}” of column “{column}” is named twice among the levels to keep: name it once.")


class NoUsableRow(Refusal):
    """No row left that has a response and both levels."""

    def __init__(self, response: str, left_out: int) -> None:
        super().__init__(
            f"No row is left to analyse: all {left_out} rows lack a usable “{response}” or a level, or hold levels that are not kept."
        )


class OneLevel(Refusal):
    """A factor with a single level among the usable rows."""

    def __init__(self, column: str, level: str) -> None:
        super().__init__(
            f"Column “{column}” has only one level, “{level}”, among the usable rows, so there is nothing to compare: "
            f"choose another column as the factor, or keep more levels."
        )


class LevelForEveryRow(Refusal):
    """A factor whose every row is a level of its own."""

    def __init__(self, column: str, levels: int) -> None:
        super().__init__(
            f"Column “{column}” has a different level in each of its {levels} rows, like a label or a measurement: "
            f"choose a column whose levels repeat as the factor."
        )


class TooManyCells(Refusal):
    """A crossed layout with more cells than can be held or shown."""

    def __init__(self, row_factor: str, a: int, column_factor: str, b: int, most: int) -> None:
        super().__init__(
            f"“{row_factor}” has {a} levels and “{column_factor}” has {b}, which makes {a * b} cells where {most} can be "
            f"handled: one of them may be a label or a measurement, so choose another column or keep fewer levels."
        )


class ConstantResponse(Refusal):
    """A response that never varies."""

    def __init__(self, response: str, value: str, rows: int) -> None:
        super().__init__(
            f"“{response}” is {value} in all {rows} usable rows, so there is no variation to explain: choose another response."
        )


class TooFewObservations(Refusal):
    """Fewer than two observations more than the model has parameters."""

    def __init__(self, observations: int, parameters: int, model: str, units: bool) -> None:
        what = "units" if units else "observations"
        help_ = "bring more replicates, or choose the model without interaction." if model == "full" else "bring more replicates."
        super().__init__(
            f"There are {observations} usable {what} for {parameters} parameters of the model, and at least "
            f"{parameters + 2} are needed to judge what is chance: {help_}"
        )


class UnitInSeveralCells(Refusal):
    """A unit measured under more than one combination of the factors."""

    def __init__(self, column: str, label: str, rows: tuple[int, ...]) -> None:
        self.rows = rows
        super().__init__(
            f"Unit “{label}” of column “{column}” was measured under more than one combination ({rows_told(rows)}): that is a "
            f"repeated measurement, which needs another analysis; choose the column that names one independent unit, or none."
        )


class BlockIsFactor(Refusal):
    """A block that cannot be told apart from a factor."""

    def __init__(self, block: str, factor: str) -> None:
        super().__init__(
            f"Block “{block}” and factor “{factor}” go together level by level, so their effects cannot be told apart: "
            f"analyse without the block, or choose another block column."
        )


class FactorsGoTogether(Refusal):
    """Two factors that name the same grouping."""

    def __init__(self, row: str, column: str) -> None:
        super().__init__(
            f"Columns “{row}” and “{column}” go together level by level, so their effects cannot be told apart: choose another "
            f"column as one of the factors."
        )


class UnreadableChoice(Refusal):
    """A choice in the shell that cannot be read."""

    def __init__(self, what: str) -> None:
        super().__init__(f"The choices cannot be read: {what}; `python -m analysis --help` lists them.")


class TwoRoutesDisagree(Refusal):
    """A table that a second computation does not confirm."""

    def __init__(self, term: str) -> None:
        super().__init__(
            f"Two independent computations disagree on “{term}”, so the result is withheld: please report this table, since it "
            f"shows a fault in the program."
        )


class NotEstimable(Refusal):
    """A combination of cells that the layout does not determine."""

    def __init__(self, cells: Sequence[str]) -> None:
        super().__init__(
            f"The combination of {', '.join(cells[:6])} cannot be estimated, because the layout lacks observations that it needs: "
            f"choose filled cells that are connected."
        )


class NoBrowser(Refusal):
    """A picture asked for where no browser is installed that could draw it."""

    def __init__(self) -> None:
        super().__init__(
            "A picture needs a browser of the Chromium family (Chrome, Edge, Chromium, Brave) and none was found: install one, or take the "
            "figure with the camera above it or from the slides, which hold it as a chart of their own."
        )


def _quoted(items: Sequence[str], most: int = 8) -> str:
    """Write names or texts for a sentence, long ones cut."""
    shown = ", ".join(f"“{item if len(item) <= 60 else item[:59] + '…'}”" for item in items[:most])
    return f"{shown} and {len(items) - most} more" if len(items) > most else shown


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
        named = f" ({_quoted([name for name in header if name])})" if any(header) else ""
        super().__init__(f"The file has a header{named} but no rows of data below it: add the observations, one in each row.")


class NoNumericColumn(Refusal):
    """A table in which nothing is a number."""

    def __init__(self, columns: int, rows: int) -> None:
        super().__init__(
            f"The table has no numeric column: none of the cells in its {columns} column{'' if columns == 1 else 's'} and {rows} "
            f"row{'' if rows == 1 else 's'} is a number, and a response is needed to analyse; check that this is the right "
            "file, sheet and separator."
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

    def __init__(self, limit: int) -> None:
        super().__init__(
            f"The workbook unpacks to more than the limit of {limit // 2**20} MiB: save only the sheet with the data, or save it as .csv."
        )


class TooManyCellsInSheet(Refusal):
    """A sheet whose filled cells span more than can be held."""

    def __init__(self, sheet: str, rows: int, columns: int) -> None:
        super().__init__(
            f"The sheet “{sheet[:60]}” spans {rows:,} rows × {columns:,} columns, more than can be read: delete stray cells "
            "far below or beside the table."
        )


class MissingSheet(Refusal):
    """A sheet that the workbook does not have."""

    def __init__(self, sheet: str, sheets: Sequence[str]) -> None:
        super().__init__(f"The workbook has no sheet “{sheet[:60]}”: {nearest_told(sheet, sheets, 'its sheets')}")


class SheetOutsideWorkbook(Refusal):
    """A sheet asked of a file that has none."""

    def __init__(self, sheet: str) -> None:
        super().__init__(f"The sheet “{sheet[:60]}” was asked for, but the file is not a workbook and has no sheets: leave the sheet out.")


class NoSheetWithTable(Refusal):
    """A workbook in which no sheet holds a table."""

    def __init__(self, sheets: Sequence[str]) -> None:
        super().__init__(f"No sheet of the workbook holds a table ({_quoted(sheets)}): each is empty, or a header without rows.")


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


class ReasonMissing(Refusal):
    """A row set aside without a reason."""

    def __init__(self, row: int) -> None:
        super().__init__(f"Row {row} is to be set aside without a reason: say in a few words why it does not belong to the experiment.")
