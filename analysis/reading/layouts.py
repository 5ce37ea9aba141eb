"""The way from records to a table: header, rows that are no observations, layout, names and columns."""

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
import numpy.typing as npt
import pyarrow as pa

from analysis import refusals
from analysis.reading import (
    cell_lengths,
    dates,
    decimal_marks,
    filling,
    footers,
    grid_signs,
    grids,
    headers,
    names,
    numerals,
    spaces,
    summaries,
)
from analysis.reading.filling import Fill
from analysis.reading.grids import Grid
from analysis.reading.headers import Heading
from analysis.reading.records import Body, Found, Source
from analysis.reading.text_cells import TextCells
from analysis.reading.value_cells import NumberCells
from analysis.reading.words import counted, several
from analysis.table import Column, Decision, LeftOut, Table

_SAMPLE = 5000  # cells of a column looked at before it is searched as a whole for a number


def read(source: Source, account: Table) -> Table:
    """Turn a file of text or a sheet into a table, from an account that holds no rows yet; raises a refusal where it holds none."""
    heading = headers.find(source.head, source.found, account.reading)
    body = source.body(heading.start, heading.width)
    cell_lengths.check(heading.cells, heading.row, body)
    heading, body, places = _without_blank_columns(heading, body)
    body, hidden = _without_hidden(body, source.found.hidden)
    cleaned = footers.clean(body, source.head[0].row + heading.start)
    body = cleaned.body
    if not body.rows.size:
        raise refusals.HeaderWithoutRows(heading.joined())
    summaries.refuse(heading.joined(), body)
    _refuse_without_numbers(body)
    fills = tuple(_fill(body, index, place, source.found) for index, place in enumerate(places))
    made = dates.decisions(heading.joined(), body)
    mark = decimal_marks.decision(body, source.found.known, account.reading)
    decisions = (*account.decisions, *source.found.decisions, *heading.decisions, *cleaned.decisions, *made, *([mark] if mark else []))
    left_out = tuple(sorted((*hidden, *cleaned.left_out), key=lambda entry: entry.row))
    account = replace(account, file_rows=body.rows, left_out=left_out, decisions=decisions)
    return _in_layout(heading, body, fills, source.found, account)


def _without_hidden(body: Body, hidden: Sequence[int]) -> tuple[Body, tuple[LeftOut, ...]]:
    """Take out the rows that the sheet hides, where that was asked for; blank ones need no account."""
    chosen = np.isin(body.rows, hidden)
    if not chosen.any():
        return body, ()
    filled = chosen & ~footers.blank_rows(body)
    return footers.taken(body, ~chosen), tuple(LeftOut(int(row), "hidden in the sheet") for row in body.rows[filled])


def _in_layout(heading: Heading, body: Body, fills: tuple[Fill, ...], found: Found, account: Table) -> Table:
    """Complete the account of a table with its columns, in rows or as a grid turned into rows."""
    signs = grid_signs.of(heading, body)
    itself = "grid" if signs.is_likely() and not heading.for_grid else "rows"
    grid = grids.find(signs, body, fills, itself, account.reading)
    if grid is not None:
        return _in_grid(grid, fills, found, account)
    labels, naming = names.distinct(heading.joined())
    body = replace(body, units=tuple(above or given for above, given in zip(heading.units, body.units, strict=True)))
    in_rows = grids.told_in_rows(signs, itself, account.reading)
    decisions = (*account.decisions, in_rows, *naming, *_filled(labels, fills))
    return replace(account, columns=_columns(labels, body, fills, found), decisions=decisions)


def _in_grid(grid: Grid, fills: tuple[Fill, ...], found: Found, account: Table) -> Table:
    labels, naming = names.distinct(grid.names)
    columns = _columns(labels, grid.body, (None,) * len(labels), found)
    decisions = (*account.decisions, *grid.decisions, *_filled(labels[:1], fills[:1]), *naming)
    return replace(account, columns=columns, file_rows=grid.body.rows, decisions=decisions)


def _columns(labels: Sequence[str], body: Body, fills: Sequence[Fill], found: Found) -> tuple[Column, ...]:
    parts = zip(labels, body.columns, body.numbers, body.units, fills, strict=True)
    return tuple(
        Column(label, TextCells(label, texts, body.rows, numbers, unit, found.known, fill)) for label, texts, numbers, unit, fill in parts
    )


def of_values(table: Table) -> Table:
    """Read the columns of a frame or a Parquet file as a grid where that is asked for; left as it is where it cannot be one."""
    asked = table.reading.layout == "grid"
    rows = table.rows if asked else min(table.rows, grid_signs.SAMPLE)
    texts = tuple(pa.array(column.text(0, rows), pa.string()) for column in table.columns)
    numbers = tuple(column.cells.floats[:rows] if isinstance(column.cells, NumberCells) else None for column in table.columns)
    nothing: tuple[None, ...] = (None,) * len(texts)
    body = Body(texts, table.file_rows[:rows], numbers, nothing)
    signs = grid_signs.of(Heading(table.names, None, nothing, 0, 0, ()), body)
    grid = grids.find(signs, body, nothing, "rows", table.reading)
    if grid is not None:
        return _in_grid(grid, nothing, Found(), table)
    return replace(table, decisions=(*table.decisions, grids.told_in_rows(signs, "rows", table.reading)))


def _without_blank_columns(heading: Heading, body: Body) -> tuple[Heading, Body, tuple[int, ...]]:
    """Drop the columns without name and content; the third value is the place in the file of each column that stays."""
    joined = heading.joined()
    kept = [i for i, column in enumerate(body.columns) if joined[i] or not footers.blank_cells(column).all()]
    if len(kept) == len(joined):
        return heading, body, tuple(kept)
    decision = Decision("blanks", f"{counted(len(joined) - len(kept), 'blank column')} passed over.")
    spanning = None if heading.spanning is None else tuple(heading.spanning[i] for i in kept)
    cells, units = tuple(heading.cells[i] for i in kept), tuple(heading.units[i] for i in kept)
    heading = replace(heading, cells=cells, spanning=spanning, units=units, decisions=(*heading.decisions, decision))
    return heading, _with_columns(body, kept), tuple(kept)


def _with_columns(body: Body, kept: Sequence[int]) -> Body:
    """A body with these of its columns."""
    columns, numbers = tuple(body.columns[i] for i in kept), tuple(body.numbers[i] for i in kept)
    dates = tuple(body.dates[i] for i in kept) if body.dates else ()
    return Body(columns, body.rows, numbers, tuple(body.units[i] for i in kept), dates)


def _refuse_without_numbers(body: Body) -> None:
    """Turn the table down where no cell of any column is a number."""
    for texts, numbers in zip(body.columns, body.numbers, strict=True):
        if numbers is not None and np.isfinite(numbers).any():
            return
        if _any_number(texts.slice(0, _SAMPLE)):
            return
    if not any(_any_number(texts) for texts in body.columns):
        raise refusals.NoNumericColumn(len(body.columns), int(body.rows.size))


def _any_number(texts: pa.StringArray) -> bool:
    return any(numerals.find(spaces.tidy(text)) is not None for text in texts.unique().to_pylist())


def _fill(body: Body, index: int, place: int, found: Found) -> Fill:
    """From which row each row takes its level, where the column is written once above several rows.

    Blanks alone count only to the left of measurements that go on where this column is blank.
    """
    merged = filling.by_merged(place, body.rows, found.spans)
    if merged is not None:
        return merged
    fill = filling.by_blocks(body.columns[index])
    if fill is None:
        return None
    blank = footers.blank_cells(body.columns[index])
    return fill if any(_goes_on(texts, blank) for texts in body.columns[index + 1 :]) else None


def _goes_on(texts: pa.StringArray, blank: npt.NDArray[np.bool_]) -> bool:
    """Whether a column holds numbers, as far as its first cells show, also in most rows where another is blank."""
    return _any_number(texts.slice(0, 20)) and 2 * int(footers.blank_cells(texts)[blank].sum()) < int(blank.sum())


def _filled(labels: Sequence[str], fills: Sequence[Fill]) -> tuple[Decision, ...]:
    named = [label for label, fill in zip(labels, fills, strict=True) if fill is not None]
    if not named:
        return ()
    word = "Column" if len(named) == 1 else "Columns"
    return (Decision("fill", f"{word} {several(named)}: a level written once above several rows was filled down."),)
