"""Where a level is written once above several rows: merged cells, or blocks that all start with it."""

from collections.abc import Sequence

import numpy as np
import numpy.typing as npt
import pyarrow as pa

from analysis.reading import footers
from analysis.reading.records import Span
from analysis.table import Rows

Fill = npt.NDArray[np.intp] | None  # for each row, the row whose cell stands for it


def by_merged(column: int, rows: Rows, spans: Sequence[Span]) -> Fill:
    """For each row, the row whose cell covers it by a merged range of this column; None where no range does."""
    source = np.arange(rows.size, dtype=np.intp)
    for span in spans:
        if span.first_column == column and span.last_row > span.first_row:
            covered = np.flatnonzero((rows >= span.first_row) & (rows <= span.last_row))
            if covered.size and rows[covered[0]] == span.first_row:
                source[covered] = covered[0]
    return source if (source != np.arange(rows.size)).any() else None


def by_blocks(texts: pa.StringArray) -> Fill:
    """For each row, the row that names its block, where every block starts with its level and leaves the rest blank.

    None where a row that stands alone, or a blank first row, shows that blanks are simply empty.
    """
    filled = ~footers.blank_cells(texts)
    starts = np.flatnonzero(filled)
    if not starts.size or starts[0] != 0 or starts.size == filled.size:
        return None
    if (np.diff(np.append(starts, filled.size)) < 2).any():
        return None
    return np.maximum.accumulate(np.where(filled, np.arange(filled.size), 0)).astype(np.intp)
