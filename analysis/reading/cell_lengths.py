"""How much text a cell may hold."""

from collections.abc import Sequence

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis import refusals
from analysis.reading.records import Body

LONGEST = 32_767  # characters, the most that a spreadsheet holds in a cell


def check(header: Sequence[str], header_row: int, body: Body) -> None:
    """Turn down a table with a longer cell; raises CellTooLong with its row."""
    if any(len(cell) > LONGEST for cell in header):
        raise refusals.CellTooLong(header_row, LONGEST)
    for column in body.columns:
        _check_column(column, body)


def _check_column(column: pa.StringArray, body: Body) -> None:
    if len(column) and pc.max(pc.binary_length(column)).as_py() > LONGEST:  # bytes first: it is the quicker look
        long = np.flatnonzero(pc.greater(pc.utf8_length(column), LONGEST).to_numpy(zero_copy_only=False))
        if long.size:
            raise refusals.CellTooLong(int(body.rows[long[0]]), LONGEST)
