"""What an interval says: whether there is a difference, and whether one that matters."""

import numpy as np
from numpy.typing import NDArray

from analysis.cells import Vector

LARGER = "larger_than_matters"
DIFFERS = "differs"
SMALL = "differs_but_small"
NONE_THAT_MATTERS = "no_difference_that_matters"
UNDECIDED = "undecided"
VERDICTS = (LARGER, DIFFERS, SMALL, NONE_THAT_MATTERS, UNDECIDED)


def verdicts(lower: Vector, upper: Vector, matters: float | None) -> NDArray[np.object_]:
    """Return the verdict of each interval against zero and against ±matters; undecided where there is no interval.

    Source: interval reading of difference and equivalence, Schuirmann (1987), J. Pharmacokinet. Biopharm. 15, 657-680.
    """
    differs = (lower > 0) | (upper < 0)
    found = np.where(differs, DIFFERS, UNDECIDED).astype(object)
    if matters is not None:
        inside = (lower > -matters) & (upper < matters)
        found[differs & ((lower > matters) | (upper < -matters))] = LARGER
        found[differs & inside] = SMALL
        found[~differs & inside] = NONE_THAT_MATTERS
    return found
