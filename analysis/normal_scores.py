"""Where the ordered values of a normal sample fall on average."""

import numpy as np
from numpy.typing import NDArray
from scipy import stats


def normal_scores(count: int) -> NDArray[np.float64]:
    """Return the expected standard normal values of 1st to last in a sample of this size, ascending, approximately.

    Source: Blom (1958), Statistical Estimates and Transformed Beta-Variables, positions (i - 3/8) / (n + 1/4).
    """
    return np.asarray(stats.norm.ppf((np.arange(1, count + 1) - 0.375) / (count + 0.25)), dtype=np.float64)
