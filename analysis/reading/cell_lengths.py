"""How much text a cell may hold."""

from collections.abc import Sequence

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis import refusals
from analysis.reading.limits import CELL_CHARACTERS
from analysis.reading.records import Body


def check(header: Sequence[str], header_row: int, body: Body) -> None:
    """Turn down a table with a longer cell; raises CellTooLong with its row."""
    if any(len(cell) > CELL_CHARACTERS for cell in header):
        raise refusals.CellTooLong(header_row, CELL_CHARACTERS)
    for column in body.columns:
        _check_column(column, body)


def _check_column(column: pa.StringArray, body: Body) -> None:
    if len(column) and pc.max(pc.binary_length(column)).as_py() > CELL_CHARACTERS:  # bytes first: it is the quicker look
        long = np.flatnonzero(pc.greater(pc.utf8_length(column), CELL_CHARACTERS).to_numpy(zero_copy_only=False))
        if long.size:
            raise refusals.CellTooLong(int(body.rows[long[0]]), CELL_CHARACTERS)
