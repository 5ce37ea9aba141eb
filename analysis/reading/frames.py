"""How a pandas frame becomes a table: taken as it is, categories with their order, rows counted from 1."""

import numpy as np
import pandas as pd

from analysis import refusals
from analysis.reading import names, value_cells
from analysis.table import Column, Rows, Table


def read(frame: pd.DataFrame, name: str) -> Table:
    """Take a frame as a table; later changes of the frame do not reach it.

    Raises EmptyFile without columns, HeaderWithoutRows without rows, NoNumericColumn where no column holds numbers.
    """
    if not len(frame.columns):
        raise refusals.EmptyFile()
    labels, naming = names.distinct([_name(label) for label in frame.columns])
    if not len(frame):
        raise refusals.HeaderWithoutRows(labels)
    shared = frame.copy(deep=False)
    columns = tuple(Column(label, value_cells.cells_of(label, shared.iloc[:, index])) for index, label in enumerate(labels))
    if not any(_holds_numbers(column) for column in columns):
        raise refusals.NoNumericColumn(len(columns), len(frame))
    rows: Rows = np.arange(1, len(frame) + 1, dtype=np.int32) if len(frame) < 2**31 - 1 else np.arange(1, len(frame) + 1, dtype=np.int64)
    return Table(name, columns, rows, (), naming, None)


def _name(label: object) -> str:
    return " ".join(map(str, label)).strip() if isinstance(label, tuple) else str(label)


def _holds_numbers(column: Column) -> bool:
    """Whether any category or cell is a number; a categorical response is refused when it is asked for."""
    return column.looks_numeric or bool(column.as_levels().amounts)
