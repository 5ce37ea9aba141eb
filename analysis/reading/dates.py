"""Which cells are dates that a spreadsheet has probably made of levels such as 1-2 or 3/4."""

import re
from collections.abc import Sequence

import numpy as np

from analysis import refusals
from analysis.reading import spaces
from analysis.reading.records import Body
from analysis.reading.words import several
from analysis.table import Decision

_ROWS = 1000  # of text looked at
_MOST_LEVELS = 12  # different dates that may still be levels
_MONTH = r"(?:jan|feb|febr|mar|mär|mrz|apr|avr|may|mai|jun|jul|aug|sep|sept|oct|okt|nov|dec|dez)[a-zé]{0,6}\.?"
_MADE = re.compile(
    rf"[0-9]{{1,2}}[-. /]{{1,2}}{_MONTH}|{_MONTH}[-. /][0-9]{{2}}|"
    r"[0-9]{1,2}[./-][0-9]{1,2}[./-][0-9]{4}|[0-9]{4}-[0-9]{2}-[0-9]{2}",
    re.IGNORECASE,
)
_NAMED = re.compile(
    r"dat[eau]|day|tag|fecha|jour|giorno|dag|sown|sowing|harvest|when|time|zeit|month|monat|week|woche|sampl|record", re.IGNORECASE
)


def decisions(names: Sequence[str], body: Body) -> tuple[Decision, ...]:
    """A sentence for each column in which dates stand beside other cells, or in which a few dates recur like levels."""
    found = []
    for place, name in enumerate(names):
        texts = [spaces.tidy(text) for text in body.columns[place].slice(0, _ROWS).to_pylist()]
        filled = [text for text in texts if text]
        if body.dates and body.dates[place]:
            rows = [int(row) for row in np.intersect1d(body.rows, body.dates[place])]
            made = [texts[i] for i in np.flatnonzero(np.isin(body.rows[:_ROWS], rows))]
        else:
            at = [i for i, text in enumerate(texts) if _MADE.fullmatch(text)]
            rows, made = [int(body.rows[i]) for i in at], [texts[i] for i in at]
        sentence = _sentence(name or f"column {place + 1}", rows, made, filled)
        found += [Decision("dates", sentence)] if sentence else []
    return tuple(found)


def _sentence(name: str, rows: Sequence[int], made: Sequence[str], filled: Sequence[str]) -> str:
    """What is to be told of a column, "" where its dates, if any, look like dates of its own."""
    if made and len(made) < len(filled):
        told = f"Column “{name}” holds dates among other cells ({refusals.rows_told(rows)})"
        return f"{told}; a spreadsheet has probably made them from levels such as 1-2."
    few = 1 < len(set(made)) <= _MOST_LEVELS and 2 * len(set(made)) <= len(made)
    if few and not _NAMED.search(name):
        told = f"Column “{name}” holds nothing but dates that recur ({several(list(dict.fromkeys(made)), 3)})"
        return f"{told}; if they were levels such as 1-2, a spreadsheet has changed them."
    return ""
