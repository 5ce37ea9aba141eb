"""The columns of a table that play no role in the study but may say in what order, where or on what a value was measured."""

import re
from dataclasses import dataclass

import numpy as np

from analysis.cells import Vector
from analysis.observations import Observations
from analysis.refusals import Refusal
from analysis.study import ROLES, Study
from analysis.table import Codes, Column

SEQUENCE = re.compile(r"\b(order|sequence|run|position|pos|time|hour|minute|day|date|nr|no|number|index)\b", re.IGNORECASE)
MOST_ROWS = 200_000  # beyond it other columns are not read
MOST_COLUMNS = 12


@dataclass(frozen=True, eq=False)
class Beside:
    """One such column, over the analysed observations; a column of numbers has amounts, every column has levels."""

    name: str
    codes: Codes  # (n,) level of each observation, -1 where empty
    levels: int
    amounts: Vector | None  # (n,) where the column is one of numbers with a name that speaks of order, time or place


def beside(study: Study, observed: Observations) -> tuple[Beside, ...]:
    """Return the columns without a role; none of a very large table."""
    if observed.size > MOST_ROWS or observed.readings != observed.size:
        return ()
    taken = {getattr(study, role) for role in ROLES}
    rows = np.searchsorted(study.table.file_rows, observed.file_rows)
    free = [column for column in study.table.columns if column.name not in taken][:MOST_COLUMNS]
    return tuple(_read(column, rows) for column in free)


def _read(column: Column, rows: np.ndarray) -> Beside:
    levels = column.as_levels()
    amounts = _amounts(column)[rows] if column.looks_numeric and SEQUENCE.search(column.name.replace("_", " ")) else None
    return Beside(column.name, levels.codes[rows], len(levels.labels), amounts)


def _amounts(column: Column) -> Vector:
    try:
        return np.asarray(column.as_response().values)
    except Refusal:  # mixed units, say: then it tells no order
        return np.full(len(column.as_levels().codes), np.nan)
