"""Which rows below the header hold no observation: blank rows, remarks, totals and means."""

import re
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import pyarrow as pa
import pyarrow.compute as pc

from analysis.reading import missing, numerals, spaces
from analysis.reading.records import Body
from analysis.reading.words import counted
from analysis.table import Decision, LeftOut

Mask = npt.NDArray[np.bool_]
_MARGINS = np.zeros(256, dtype=bool)  # the first bytes that a cell of white space may have
_MARGINS[[*range(0x21), 0xC2, 0xE1, 0xE2, 0xE3, 0xEF]] = True
_TAIL = 40  # rows at the end among which totals are looked for
_TOTAL = re.compile(
    r"(?:(?:grand|overall|general|column|row|sub)[ -]?)?(?:totals?|sums?|means?|averages?|avg|subtotals?|overall|"
    r"summe|gesamt|insgesamt|mittelwert|mittel|durchschnitt|moyenne|somme|media|promedio|suma|totale|gemiddelde|totaal|σ|ø|x̄)"
    r"[:.=]?(?: ?\([^)]*\))?[:.=]?",
    re.IGNORECASE,
)
_SPREAD = re.compile(
    r"(?:s\.?d\.?|s\.?e\.?|s\.?e\.?m\.?|std\.?|st\.? ?dev\.?|stdev|standard (?:deviation|error)|variance|cv|cv ?%|cv ?\(%\)|lsd|"
    r"min|max|minimum|maximum|median|range|count|n)[:.=]?",
    re.IGNORECASE,
)


@dataclass(frozen=True, eq=False)
class Cleaned:
    """The rows that hold observations, and an account of the others."""

    body: Body
    left_out: tuple[LeftOut, ...]
    decisions: tuple[Decision, ...]


def is_total(text: str) -> bool:
    """Whether a row or column heading names a total or a mean."""
    return _TOTAL.fullmatch(text) is not None


def is_spread(text: str) -> bool:
    """Whether a heading names a spread or a count, which counts as a summary only beside a total or mean."""
    return _SPREAD.fullmatch(text) is not None


def clean(body: Body, first_row: int) -> Cleaned:
    """Take out the rows that hold no observation; first_row is that of the file below the header, some blank ones may be gone already."""
    blanks = blank_rows(body)
    kept, left_out, decisions = ~blanks, [], []
    gone = int(body.rows[-1]) - first_row + 1 - body.rows.size if body.rows.size else 0
    if blanks.any() or gone > 0:
        decisions.append(Decision("blanks", f"{counted(int(blanks.sum()) + gone, 'blank row')} passed over."))
    remarks = _remarks(body, blanks)
    left_out += [LeftOut(int(row), "text in its first cell alone: a remark, not an observation") for row in body.rows[remarks]]
    kept &= ~remarks
    totals = _totals(body, np.flatnonzero(kept))
    left_out += [LeftOut(int(body.rows[index]), f"“{label}” row, not an observation") for index, label in totals]
    kept[[index for index, _ in totals]] = False
    if left_out:
        rows = sorted(entry.row for entry in left_out)
        decisions.append(Decision("total", f"{counted(len(rows), 'row')} without an observation (remarks, totals or means) left out."))
    return Cleaned(taken(body, kept), tuple(sorted(left_out, key=lambda entry: entry.row)), tuple(decisions))


def taken(body: Body, kept: Mask) -> Body:
    """The rows of a body that are kept."""
    if kept.all():
        return body
    chosen = pa.array(kept)
    columns = tuple(column.filter(chosen) for column in body.columns)
    numbers = tuple(None if values is None else values[kept] for values in body.numbers)
    return Body(columns, body.rows[kept], numbers, body.units, body.dates)


def blank_rows(body: Body) -> Mask:
    """Which rows hold nothing."""
    return _all_blank(body, 0)


def _all_blank(body: Body, first: int) -> Mask:
    """Which rows are blank in every column from number first on."""
    blank = np.ones(body.rows.size, dtype=bool)
    for column in body.columns[first:]:
        if blank.any():
            blank &= blank_cells(column)
    return blank


def blank_cells(column: pa.StringArray) -> Mask:
    """Which cells of a column hold nothing but white space."""
    if not len(column):
        return np.zeros(0, dtype=bool)
    _, places, letters = column.buffers()
    starts = np.frombuffer(places, dtype=np.int32)[column.offset : column.offset + len(column) + 1]
    blank: Mask = starts[1:] == starts[:-1]
    filled = np.flatnonzero(~blank)
    if filled.size:
        spaced = filled[_MARGINS[np.frombuffer(letters, dtype=np.uint8)[starts[filled]]]]
        blank[[index for index in spaced if spaces.is_blank(column[int(index)].as_py())]] = True
    return blank


def _remarks(body: Body, blanks: Mask) -> Mask:
    """Which rows hold text in their first cell alone; a table of two columns has no such rows, only missing values."""
    if len(body.columns) < 3:
        return np.zeros(body.rows.size, dtype=bool)
    alone = _all_blank(body, 1) & ~blanks
    cells = body.columns[0].filter(pa.array(alone)).dictionary_encode()
    words = np.array([numerals.find(spaces.tidy(text)) is None for text in cells.dictionary.to_pylist()], dtype=bool)
    alone[alone] = words[cells.indices.to_numpy(zero_copy_only=False)]
    return alone


def _totals(body: Body, rows: npt.NDArray[np.intp]) -> list[tuple[int, str]]:
    """The summary rows at the end, each with its heading; a spread or count belongs to them only beside a total or mean."""
    found: list[tuple[int, str]] = []
    labels_needed = _label_columns(body, rows)
    for index in rows[: -_TAIL - 1 : -1]:
        label = _summary_label([spaces.tidy(column[int(index)].as_py()) for column in body.columns], labels_needed)
        if not label:
            break
        found.append((int(index), label))
    above = rows[: rows.size - len(found)]
    if not above.size or not any(is_total(label) for _, label in found):
        return []
    return [] if any(_occurs(body, above, label) for _, label in found) else found


def _occurs(body: Body, rows: npt.NDArray[np.intp], label: str) -> bool:
    """Whether a heading is also a level of observations, and therefore no sign of a summary."""
    chosen = pa.array(rows)
    return any(pc.any(pc.equal(column.take(chosen), label)).as_py() for column in body.columns)


def _label_columns(body: Body, rows: npt.NDArray[np.intp]) -> int:
    """How many columns hold labels rather than numbers, judged by the rows at the start."""
    first = rows[:_TAIL]
    texts = [[spaces.tidy(column[int(index)].as_py()) for index in first] for column in body.columns]
    return sum(any(text and numerals.find(text) is None and not missing.is_missing(text) for text in column) for column in texts)


def _summary_label(cells: Sequence[str], label_columns: int) -> str:
    """The heading of a summary row ("" for an observation): its other cells are numbers, and no label beside it is filled."""
    filled = [cell for cell in cells if cell]
    words = [cell for cell in filled if numerals.find(cell) is None and not missing.is_missing(cell)]
    if not words or not all(is_total(word) or is_spread(word) for word in words) or len(filled) == len(words):
        return ""
    labels_filled = len(words) == max(1, label_columns)
    alike = len(set(words)) == 1
    return words[0] if cells.index(words[0]) <= 1 and (not labels_filled or label_columns <= 1 or (alike and label_columns > 1)) else ""
