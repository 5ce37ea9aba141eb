"""How measurements are held as exact differences from a pivot where their spread is tiny beside their size."""

import math
from collections.abc import Callable, Sequence
from decimal import Decimal

import numpy as np

from analysis.table import Floats, frozen

_WHOLE = 0.01  # spread from which a whole number is near enough to be the pivot
TINY_SPREAD = 1e-3  # spread beside magnitude; above it a double keeps at least 13 digits of every difference


def pivot_of(values: Floats) -> float:
    """Return a round number near values that lie close together far from zero, else 0."""
    known = np.isfinite(values)
    finite = values if known.all() else values[known]
    if finite.size < 2:
        return 0.0
    low, high = float(finite.min()), float(finite.max())
    magnitude = max(abs(low), abs(high))
    if not 0 < high - low < TINY_SPREAD * magnitude:
        return 0.0
    return math.floor(low / _step(high - low)) * _step(high - low)


def _step(spread: float) -> float:
    """A width not much larger than the spread whose multiples are doubles: a power of ten, 1, or a power of two."""
    if spread >= _WHOLE:
        return 10.0 ** max(0, math.ceil(math.log10(spread)))
    return 2.0 ** math.ceil(math.log2(spread))


def exact(values: Floats, texts: Callable[[], Sequence[str]]) -> tuple[float, Floats]:
    """Return pivot and offsets of values, the offsets from the decimals as written.

    texts gives one plain decimal for each value and is asked for only when needed; what stands at a NaN is not looked at.
    Each offset is the double nearest to the exact decimal difference.
    """
    pivot = pivot_of(values)
    if pivot == 0.0:
        return 0.0, frozen(values)
    offsets = np.full(values.shape, np.nan)
    origin = Decimal(pivot)
    written = texts()
    for index in np.flatnonzero(np.isfinite(values)).tolist():
        offsets[index] = float(Decimal(written[index]) - origin)
    return pivot, frozen(offsets)


def in_doubles(values: Floats) -> tuple[float, Floats]:
    """Return pivot and offsets of values that were never decimals."""
    pivot = pivot_of(values)
    return pivot, frozen(values) if pivot == 0.0 else frozen(values - pivot)
