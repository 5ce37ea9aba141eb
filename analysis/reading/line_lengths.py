"""How text without quotation marks is made regular: blank lines dropped, short ones filled, over-long ones looked at."""

from dataclasses import dataclass

import numpy as np

from analysis import refusals
from analysis.table import Rows


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
    separators = np.diff(np.searchsorted(np.flatnonzero(codes == ord(delimiter)), ends), prepend=0)
    odd = np.flatnonzero((separators != width - 1) | (ends == starts))
    pieces: list[bytes] = []
    kept = np.ones(ends.size, dtype=bool)
    place = 0
    for line in odd.tolist():
        start, end = int(starts[line]), int(ends[line])
        pieces.append(body[place:start])
        text = _fitted(body[start:end], delimiter.encode(), width, first_row + line)
        kept[line] = bool(text)
        pieces.append(text)
        place = end + 1
    pieces.append(body[place:])
    return Regular(b"".join(pieces), first_row + np.flatnonzero(kept).astype(np.int64))


def _fitted(line: bytes, delimiter: bytes, width: int, row: int) -> bytes:
    """One line of the width of the header with its end, b"" where it is blank."""
    if not line.strip():
        return b""
    cells = line.split(delimiter)
    if any(cell.strip() for cell in cells[width:]):
        filled = max(index for index, cell in enumerate(cells) if cell.strip()) + 1
        raise refusals.TooManyFields(row, filled, width)
    cells = [*cells[:width], *[b""] * (width - len(cells))]
    return delimiter.join(cells) + b"\n"
