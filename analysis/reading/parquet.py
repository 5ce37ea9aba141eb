"""How a Parquet file becomes a table: text by the rules of text, numbers and ordered categories as they are; its first row is 1."""

import io

import numpy as np
import pandas as pd
import pyarrow as pa
from pyarrow import parquet

from analysis import refusals
from analysis.reading import limits, names, value_cells
from analysis.reading.choices import Reading
from analysis.reading.marks import Known
from analysis.reading.records import RAW, raw_line
from analysis.reading.text_cells import TextCells
from analysis.table import Cells, Column, Decision, Rows, Table

_VALUES = 400_000_000  # rows × columns; a small file can declare any number of equal ones
_UNNAMED_INDEX = "__index_level_"


def read(data: bytes, name: str, decisions: tuple[Decision, ...], fingerprint: str, reading: Reading) -> Table:
    """Read a Parquet file; raises DamagedFile, Encrypted, FileTooLarge, HeaderWithoutRows or NoNumericColumn."""
    found = _load(data)
    kept = [label for label in found.column_names if not label.startswith(_UNNAMED_INDEX)]
    labels, naming = names.distinct(kept)
    if not found.num_rows:
        raise refusals.HeaderWithoutRows(labels)
    rows = np.arange(1, found.num_rows + 1, dtype=np.int64)
    places = [index for index, label in enumerate(found.column_names) if not label.startswith(_UNNAMED_INDEX)]
    known = Known(decimal=reading.decimal)
    cells = [_cells(label, found.column(place), rows, known) for label, place in zip(labels, places, strict=True)]
    columns = tuple(Column(label, cell) for label, cell in zip(labels, cells, strict=True))
    if not any(column.looks_numeric or column.as_levels().amounts for column in columns):
        raise refusals.NoNumericColumn(len(columns), found.num_rows)
    raw = tuple(raw_line(i + 1, " | ".join(row)) for i, row in enumerate(zip(*(cell.text(0, RAW) for cell in cells), strict=True)))
    return Table(name, columns, rows, (), (*decisions, *naming), fingerprint, reading, raw)


def _load(data: bytes) -> pa.Table:
    try:
        source = parquet.ParquetFile(io.BytesIO(data))
        _refuse_vast(source.metadata.num_rows, source.metadata.num_columns)
        return source.read()
    except (pa.ArrowException, OSError, ValueError, KeyError) as error:
        if "encrypt" in str(error).lower():
            raise refusals.Encrypted() from error
        raise refusals.DamagedFile("Parquet file") from error


def _refuse_vast(rows: int, columns: int) -> None:
    """Turn down a file by what it declares; raises TooManyRows, TooManyColumns or TooManyCellsInSheet."""
    if columns > limits.COLUMNS:
        raise refusals.TooManyColumns(1, columns, limits.COLUMNS)
    if rows > limits.ROWS:
        raise refusals.TooManyRows(rows, limits.ROWS)
    if rows * columns > _VALUES:
        raise refusals.TooManyCellsInSheet("table", rows, columns)


def _cells(name: str, column: pa.ChunkedArray, rows: Rows, known: Known) -> Cells:
    """Choose how a column is kept, by its type."""
    kind = column.type
    if pa.types.is_dictionary(kind) and kind.ordered:
        return value_cells.CategoryCells(name, column.to_pandas())
    if pa.types.is_dictionary(kind):
        column, kind = column.cast(kind.value_type), kind.value_type
    if pa.types.is_integer(kind) or pa.types.is_floating(kind):
        return value_cells.NumberCells(name, column.to_pandas())
    if pa.types.is_string(kind) or pa.types.is_large_string(kind) or pa.types.is_decimal(kind) or pa.types.is_null(kind):
        return TextCells(name, _text(column), rows, known=known)
    if pa.types.is_boolean(kind) or pa.types.is_temporal(kind):
        return value_cells.ObjectCells(name, column.to_pandas())
    return value_cells.ObjectCells(name, pd.Series([None if value is None else str(value) for value in column.to_pylist()], dtype=object))


def _text(column: pa.ChunkedArray) -> pa.StringArray:
    return pa.concat_arrays([chunk.cast(pa.string()).fill_null("") for chunk in column.chunks] or [pa.array([], pa.string())])
