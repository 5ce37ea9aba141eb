"""How the cells of a sheet's column become text and numbers, all at once where they are of ordinary kinds."""

from collections.abc import Sequence

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis.reading import cell_values
from analysis.reading.cell_values import Value
from analysis.table import Floats

_ORDINARY = frozenset([str, int, float])
_SHORTEST, _LONGEST = 1e-3, 1e10  # between them Arrow writes a number as Python does


def read(column: Sequence[Value]) -> tuple[pa.StringArray, Floats | None]:
    """Return the text of every cell, and the numbers among them (NaN elsewhere), None where there are none."""
    kinds = set(map(type, column))
    if kinds <= {str}:
        return pa.array(column, pa.string()), None
    if not kinds <= _ORDINARY:
        return pa.array([cell_values.text_of(value) for value in column], pa.string()), cell_values.numbers_of(column)
    numbers = np.array([np.nan if type(value) is str else value for value in column], dtype=np.float64)
    texts = _written(numbers, column)
    if str in kinds:
        is_text = pa.array([type(value) is str for value in column])
        texts = pc.if_else(is_text, pa.array([value if type(value) is str else "" for value in column], pa.string()), texts)
    return texts, None if np.isnan(numbers).all() else numbers


def _written(numbers: Floats, column: Sequence[Value]) -> pa.StringArray:
    """Numbers as text: by Arrow where it writes as Python does, the others one by one."""
    size = np.abs(numbers)
    alike = ((size >= _SHORTEST) & (size < _LONGEST)) | np.isnan(numbers)
    texts = pc.cast(pa.array(numbers), pa.string())
    others = np.flatnonzero(~alike)
    if not others.size:
        return texts
    written = pa.array([cell_values.text_of(column[place]) for place in others.tolist()], pa.string())
    return pc.replace_with_mask(texts, pa.array(~alike), written)
