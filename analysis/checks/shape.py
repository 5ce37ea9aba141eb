"""Whether residuals look normal."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import stats

MOST = 5000  # Royston's p-value is fitted for samples of 3 to 5,000
DRAW = 1965  # seed of the draw from a larger sample, so that it is the same draw every time


@dataclass(frozen=True)
class Shapiro:
    """Shapiro and Wilk's statistic, its p-value and how many residuals it used."""

    w: float
    p: float
    n: int


def shapiro(residuals: NDArray[np.float64]) -> Shapiro | None:
    """Test normality by Shapiro and Wilk's W; None for fewer than three residuals or for residuals all alike.

    From more than 5,000 residuals a fixed random draw of 5,000 is used (n tells it): the draw is made by rank, so that it
    depends on the residuals and not on the order of the rows.
    Source: Shapiro and Wilk (1965), Biometrika 52, 591-611; Royston (1995), Appl. Stat. 44, 547-551.
    """
    used = np.sort(residuals)
    if used.size < 3 or used[0] == used[-1]:
        return None
    if used.size > MOST:
        used = used[np.sort(np.random.default_rng(DRAW).choice(used.size, MOST, replace=False))]
    w, p = stats.shapiro(used / np.abs(used).max())
    return Shapiro(float(w), float(p), used.size)
