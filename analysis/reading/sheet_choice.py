"""How the choice of a sheet, and of what becomes of its hidden rows, is told, and what could have been chosen instead."""

from collections.abc import Sequence
from dataclasses import replace

from analysis import refusals
from analysis.reading.choices import Reading
from analysis.reading.words import several, short
from analysis.table import Alternative, Decision


def decision(name: str, names: Sequence[str], reading: Reading) -> Decision:
    """Tell which sheet was read; another one is read anew, with its own header and tables."""
    others = [other for other in names if other != name]
    sentence = f"The sheet “{name}” was read; the workbook also holds {several(others, 8)}." if others else f"The sheet “{name}” was read."
    asked = reading.sheet is not None
    offered: list[tuple[str, str | None]] = [(f"the sheet “{short(other)}”", other) for other in others]
    if asked and name != names[0]:
        offered = [("the first sheet with a table", None), *(pair for pair in offered if pair[1] != names[0])]
    alternatives = [Alternative(words, replace(reading, sheet=other, table=None, header_row=None)) for words, other in offered]
    return Decision("sheet", sentence, tuple(alternatives), ordinary=asked or not others)


def hidden(rows: Sequence[int], reading: Reading) -> Decision:
    """Tell what became of the hidden rows of the sheet."""
    if not rows:
        return Decision("hidden", "No row of the sheet is hidden.", ordinary=True)
    told = refusals.rows_told(rows)
    if reading.hidden == "leave out":
        return Decision(
            "hidden", f"Hidden rows of the sheet were left out ({told}).", (Alternative("keep them", replace(reading, hidden=None)),)
        )
    leave = Alternative("leave them out", replace(reading, hidden="leave out"))
    return Decision("hidden", f"Hidden rows of the sheet were kept ({told}).", (leave,))
