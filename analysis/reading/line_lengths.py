"""How text without quotation marks is made regular: blank lines dropped, short ones filled, over-long ones looked at."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from analysis import refusals
from analysis.table import Rows

_BLANKS = np.frombuffer(b" \t\r\v\f\n", dtype=np.uint8)
Places = npt.NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Regular:
    """Lines that all have the same number of cells, and the row of the file that each of them was."""

    data: bytes
    rows: Rows


def regular(data: bytes, offset: int, delimiter: str, width: int, first_row: int) -> Regular:
    """Make all lines from a place on as wide as the header; raises TooManyFields where filled cells would be lost.

    first_row is the row of the file at that place. A line of white space counts as blank.
    """
    body = data[offset:] if data.endswith(b"\n") else data[offset:] + b"\n"
    codes = np.frombuffer(body, dtype=np.uint8)
    ends = np.flatnonzero(codes == 10)
    starts = np.concatenate([[0], ends[:-1] + 1])
    separators = np.flatnonzero(codes == ord(delimiter))
    before = np.searchsorted(separators, ends)  # separators up to the end of each line
    missing = width - 1 - np.diff(before, prepend=0)
    blank = ~np.logical_or.reduceat(~np.isin(codes, _BLANKS), starts)
    kept = np.ones(codes.size, dtype=bool)
    long = np.flatnonzero((missing < 0) & ~blank)
    if long.size:
        _cut(body, kept, starts[long], separators[before[long] + missing[long]], ends[long], first_row + long, delimiter, width)
    for line in np.flatnonzero(blank).tolist():
        kept[starts[line] : ends[line] + 1] = False
    missing[blank] = 0
    places = np.repeat(ends, np.maximum(missing, 0))
    filled = np.insert(codes, places, ord(delimiter))[np.insert(kept, places, True)] if places.size else codes[kept]
    return Regular(filled.tobytes(), first_row + np.flatnonzero(~blank).astype(np.int64))


def _cut(
    body: bytes, kept: npt.NDArray[np.bool_], starts: Places, cuts: Places, ends: Places, rows: Rows, delimiter: str, width: int
) -> None:
    """Drop what stands behind the width of the header in over-long lines, where that is blank."""
    for start, cut, end, row in zip(starts.tolist(), cuts.tolist(), ends.tolist(), rows.tolist(), strict=True):
        if body[cut:end].replace(delimiter.encode(), b"").strip():
            cells = body[start:end].split(delimiter.encode())
            raise refusals.TooManyFields(row, max(index for index, cell in enumerate(cells) if cell.strip()) + 1, width)
        kept[cut:end] = False
