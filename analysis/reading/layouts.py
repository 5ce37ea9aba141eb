"""The way from records to a table: header, rows that are no observations, layout, names and columns."""

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
import pyarrow as pa

from analysis import refusals
from analysis.reading import filling, footers, headers, names, numerals, spaces
from analysis.reading.headers import Heading
from analysis.reading.records import Body, Found, Source
from analysis.reading.text_cells import TextCells
from analysis.reading.words import counted, several
from analysis.table import Column, Decision, Table

_SAMPLE = 5000  # cells of a column looked at before it is searched as a whole for a number


def read(source: Source, name: str, layout: str, fingerprint: str) -> Table:
    """Turn a file of text or a sheet into a table; raises a refusal where it holds none."""
    heading = headers.find(source.head, source.found)
    cleaned = footers.clean(source.body(heading.start, heading.width))
    if not cleaned.body.rows.size:
        raise refusals.HeaderWithoutRows(heading.joined())
    heading, body, places = _without_blank_columns(heading, cleaned.body)
    _refuse_without_numbers(body)
    decisions = (*source.found.decisions, *heading.decisions, *cleaned.decisions)
    labels, naming = names.distinct(heading.joined())
    fills = [_fill(body, index, place, source.found) for index, place in enumerate(places)]
    filled = _filled_decision([label for label, fill in zip(labels, fills, strict=True) if fill is not None])
    units = [unit or given for unit, given in zip(heading.units, body.units, strict=True)]
    columns = tuple(
        Column(label, TextCells(label, texts, body.rows, numbers, unit, source.found.comma_separated, fill))
        for label, texts, numbers, unit, fill in zip(labels, body.columns, body.numbers, units, fills, strict=True)
    )
    return Table(name, columns, body.rows, cleaned.left_out, (*decisions, *naming, *filled), fingerprint)


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
    return Body(columns, body.rows, numbers, tuple(body.units[i] for i in kept))


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


def _fill(body: Body, index: int, place: int, found: Found) -> np.ndarray[tuple[int], np.dtype[np.intp]] | None:
    """From which row each row takes its level, where the column is written once above several rows."""
    merged = filling.by_merged(place, body.rows, found.spans)
    return merged if merged is not None else filling.by_blocks(body.columns[index])


def _filled_decision(labels: Sequence[str]) -> tuple[Decision, ...]:
    if not labels:
        return ()
    word = "Column" if len(labels) == 1 else "Columns"
    return (Decision("fill", f"{word} {several(labels)}: a level written once above several rows was filled down."),)
