"""Whether the levels of a column that are numbers count as amounts, with trends and true spacing, or as groups with numbers for names."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from analysis.naming import NUMBER, listed, word_and_unit
from analysis.relabelling import relabelled
from analysis.rounding import shortest
from analysis.study import Study
from analysis.table import Column, Levels

FEWEST = 3  # amounts, before a trend says more than the difference of two
QUOTED = 5  # amounts told in a reason


@dataclass(frozen=True)
class Question:
    """The question that a column of numbers raises, with the answer that stands now and its reason."""

    column: str
    are_amounts: bool
    reason: str
    chosen: bool  # the answer is the user's


def question(study: Study, column: str) -> Question | None:
    """Return what there is to ask about a column, or None where its levels are not all numbers."""
    read = study.table.column(column)
    values = relabelled(read.as_levels(), study.relabel.get(column, {})).amounts
    if values is None or len(values) < 2:
        return None
    suggested, reason = _guess(read, values)
    return Question(column, study.amounts.get(column, suggested), reason, column in study.amounts)


def spacing(column: Column, levels: Levels, chosen: Mapping[str, bool]) -> tuple[float, ...] | None:
    """Return the amounts of a column's levels where they count as such, by choice or by what they look like; else None."""
    if levels.amounts is None:
        return None
    return levels.amounts if chosen.get(column.name, _guess(column, levels.amounts)[0]) else None


def counted_as(study: Study, column: str, are_amounts: bool) -> Mapping[str, Any]:
    """Return the change that makes the levels of a column amounts or groups."""
    return {"amounts": {**study.amounts, column: are_amounts}}


def _guess(column: Column, values: Sequence[float]) -> tuple[bool, str]:
    """Return whether numbers look like amounts, and why: codes run 1, 2, 3 without a unit, doses and times do not."""
    rising = np.sort(np.asarray(values, dtype=float))
    steps = np.diff(rising)
    told = listed([shortest(value) for value in rising]) if rising.size <= QUOTED else f"{shortest(rising[0])} to {shortest(rising[-1])}"
    if rising.size < FEWEST:
        return False, f"{told} are two numbers, and a trend over two says what their difference says"
    unit = column.unit or word_and_unit(column.name)[1]
    if unit is not None or not all(NUMBER.fullmatch(label) for label in column.as_levels().labels):
        return True, f"{told} come with a unit"
    if (steps == 1).all():
        return False, f"{told} run in steps of one, as numbers given to groups do"
    if not np.allclose(steps, steps[0], rtol=1e-9, atol=0):
        return True, f"{told} lie unequally far apart, as doses and times do"
    return True, f"{told} run in steps of {shortest(steps[0])}, as doses and times do"
