"""Which other rows could name the columns, and how the choice of the header row is told."""

from collections.abc import Sequence
from dataclasses import replace

from analysis.reading.choices import Reading
from analysis.reading.records import Record
from analysis.reading.words import short
from analysis.table import Alternative, Decision

_MOST = 6  # rows offered
_BELOW = 3  # of them, filled rows below the one chosen
_SHOWN = 48  # characters of a row in its words


def decision(head: Sequence[Record], rows: Sequence[int], found: int | None, told: str, reading: Reading) -> Decision:
    """Tell which rows of the file gave the names (none: there is no header), and what could have been read instead.

    found is the row that the reader takes for the header of itself; told is the sentence where there is more to say.
    """
    sentence = told or f"Row {rows[-1]} names the columns."
    return Decision("header", sentence, _alternatives(head, rows, found, reading), ordinary=not told)


def _alternatives(head: Sequence[Record], rows: Sequence[int], found: int | None, reading: Reading) -> tuple[Alternative, ...]:
    """The first filled rows, and no header at all; what the reader finds of itself comes first where something else was asked for."""
    asked = reading.header_row is not None
    shown = {record.row: _words(record) for record in _near(head, rows)}
    alone = None if len(rows) > 1 else rows[0] if rows else 0  # the one row that gives what was read already
    first = [
        Alternative(f"as first read ({shown.get(found, f'row {found}') if found else 'no header'})", replace(reading, header_row=None))
    ]
    skipped = {alone, found or 0} if asked else {alone}
    others = [Alternative(words, replace(reading, header_row=row)) for row, words in shown.items() if row not in skipped]
    none = [] if 0 in skipped else [Alternative("no header", replace(reading, header_row=0))]
    return (*(first if asked else []), *others, *none)


def _near(head: Sequence[Record], rows: Sequence[int]) -> list[Record]:
    """The filled records down to a few below the header."""
    filled = [record for record in head if record.filled]
    last = rows[-1] if rows else 0
    above, below = [r for r in filled if r.row <= last], [r for r in filled if r.row > last]
    return [*above, *below[:_BELOW]][-_MOST - 1 :]


def _words(record: Record) -> str:
    return f"row {record.row}: {short(', '.join(cell for cell in record.cells if cell), _SHOWN)}"
