"""What every refusal is: one sentence on one line, and how rows and names are written in it."""

import difflib
import re
from collections.abc import Sequence

_LINE_ENDS = re.compile(r"[\t\n\v\f\r\x1c-\x1e\x85\u2028\u2029]+")
LONGEST = 1000  # characters of a refusal


class Refusal(Exception):
    """A sentence for the user: what was found, where, and what would help; always one line, whatever a file put into it."""

    def __init__(self, sentence: str) -> None:
        super().__init__(_LINE_ENDS.sub(" ", sentence)[:LONGEST])


def rows_told(rows: Sequence[int], most: int = 5) -> str:
    """Write file rows for a sentence: "row 4", "rows 4, 9 and 12", "rows 4, 9, 12, 13, 20 and 7 more"."""
    shown = [str(row) for row in rows[:most]]
    if len(rows) == 1:
        return f"row {shown[0]}"
    if len(rows) > most:
        return f"rows {', '.join(shown)} and {len(rows) - most} more"
    return f"rows {', '.join(shown[:-1])} and {shown[-1]}"


def nearest_told(wanted: str, known: Sequence[str], what: str) -> str:
    """Write the hint that follows an unknown name: the nearest one, or the first few there are."""
    by_fold = {name.casefold(): name for name in known}
    close = difflib.get_close_matches(wanted.casefold(), list(by_fold), n=1, cutoff=0.5)
    if close:
        return f"did you mean “{by_fold[close[0]]}”?"
    some = ", ".join(f"“{name}”" for name in known[:8])
    return f"{what} are {some}{' and more' if len(known) > 8 else ''}."


def quoted_told(items: Sequence[str], most: int = 8) -> str:
    """Write names or texts for a sentence, long ones cut."""
    shown = ", ".join(f"“{item if len(item) <= 60 else item[:59] + '…'}”" for item in items[:most])
    return f"{shown} and {len(items) - most} more" if len(items) > most else shown
