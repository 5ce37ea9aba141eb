"""How the lines of a frame of findings are walked: each line a named tuple, in the frame's order."""

from collections.abc import Iterator
from typing import Any

import pandas as pd

from analysis.families import COLUMNS
from analysis.findings import Findings


def lines(frame: pd.DataFrame) -> Iterator[Any]:
    """Yield the lines of a frame; a column is read as an attribute of its line."""
    yield from frame.itertuples(index=False)


def family(findings: Findings, name: str) -> pd.DataFrame:
    """Return the comparisons of a family; no lines where it is too large to be written out."""
    frame = findings.comparisons[name]
    return pd.DataFrame(columns=list(COLUMNS)) if frame is None else frame
