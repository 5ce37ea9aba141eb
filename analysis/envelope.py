"""Between which values ordered residuals of a normal sample lie, all of them at once."""

from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from scipy import special

Floats = NDArray[np.float64]
SEED = 1933
NUMBERS = 200_000  # drawn altogether
LEAST, MOST = 200, 2000  # samples drawn
LARGE = 1000  # sample size beyond which the level of a place is taken to fall as the number of places rises, which is on the safe side


def envelope(count: int, confidence: float) -> tuple[Floats, Floats]:
    """Return the ends (count,) of the stretch in which each ordered value of a normal sample lies, in its own standard deviations.

    With this confidence all values of a sample, less their mean and divided by their standard deviation, lie inside; every place has the
    same level, which is found from samples drawn with a fixed seed.
    Source: Aldor-Noiman, Brown, Buja, Rolke and Stine (2013), The American Statistician 67, 249-260: equal local levels from the beta
    distributions of the order statistics.
    """
    places = np.arange(1, count + 1)
    level = local_level(min(count, LARGE), round(confidence, 6)) * min(1.0, LARGE / count)
    low = np.asarray(special.ndtri(special.betaincinv(places, count - places + 1.0, level / 2)), dtype=np.float64)
    return low, -low[::-1]


@lru_cache(maxsize=256)
def local_level(count: int, confidence: float) -> float:
    """Return the level of each place with which a whole sample of this size lies inside with the confidence asked for."""
    draws = int(np.clip(NUMBERS // count, LEAST, MOST))
    values = np.sort(np.random.default_rng(SEED).normal(size=(draws, count)), axis=1)
    values = (values - values.mean(axis=1, keepdims=True)) / values.std(axis=1, ddof=1, keepdims=True)
    places = np.arange(1, count + 1.0)
    tail = special.betainc(places, count - places + 1, special.ndtr(values))
    worst = 2 * np.minimum(tail, 1 - tail).min(axis=1)
    return float(np.quantile(worst, 1 - confidence))
