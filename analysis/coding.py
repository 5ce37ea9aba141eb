"""How levels are written as columns of a design matrix, and contrasts as rows of a hypothesis."""

import numpy as np

from analysis.cells import Matrix
from analysis.table import Codes


def sum_to_zero(codes: Codes, size: int) -> Matrix:
    """Return the columns whose effects sum to zero over the levels: (n, size - 1)."""
    coding = np.vstack([np.eye(size - 1), -np.ones(size - 1)])
    return np.asarray(coding[codes])


def contrast_rows(size: int) -> Matrix:
    """Return contrasts that span all differences of some levels: (size - 1, size), each level against the last."""
    return np.hstack([np.eye(size - 1), -np.ones((size - 1, 1))])
