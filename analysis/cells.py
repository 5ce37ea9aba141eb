"""What each filled combination of the layout holds: count, mean and spread, from one pass over the rows."""

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from analysis.observations import Observations

Vector = NDArray[np.float64]
Matrix = NDArray[np.float64]
Codes = NDArray[np.intp]
ROUNDED = 4 * float(np.finfo(float).eps)  # share of a mean that rounding can leave of a spread
CHUNK = 1 << 18  # rows handled at a time, so that the working memory does not grow with the table


@dataclass(frozen=True, eq=False)
class Strata:
    """Filled combinations of row, column and block, in that order; one entry each, means as offsets from the pivot.

    Without a block there is one block level and a stratum is a cell. Everything the model needs of the rows is here.
    """

    levels: tuple[int, int, int]  # numbers of row, column and block levels
    row: Codes
    column: Codes
    block: Codes
    n: Vector  # counts, all above 0
    mean: Vector  # response units from the pivot
    within_ss: Vector  # squared response units
    pivot: float
    rounding: float  # the largest spread inside a stratum that rounding alone can make, per observation

    @property
    def cell(self) -> Codes:
        """Index of the stratum's cell, rows running slowest."""
        return self.row * self.levels[1] + self.column

    @property
    def cells(self) -> int:
        """Number of cells of the layout, empty ones included."""
        return self.levels[0] * self.levels[1]

    @property
    def has_blocks(self) -> bool:
        """Return whether there is a block term."""
        return self.levels[2] > 1

    @cached_property
    def observations(self) -> int:
        """Number of observations."""
        return int(self.n.sum())

    def without_rounding(self, ss: float) -> float:
        """Return a sum of squares, or 0 where rounding alone could have made it."""
        return ss if ss > self.observations * self.rounding**2 else 0.0


@dataclass(frozen=True, eq=False)
class Cells:
    """Count, own mean and own spread of each cell; arrays are (row levels, column levels), NaN where undefined."""

    n: NDArray[np.int64]  # 0 marks an empty cell
    mean: Matrix  # response units
    sd: Matrix  # response units, NaN below two observations


def strata_of(observed: Observations) -> Strata:
    """Return the strata of the observations: two chunked passes, the second about the means of the first.

    Source: corrected two-pass algorithm, Chan, Golub and LeVeque (1983), The American Statistician 37, 242-247.
    """
    a, b = observed.shape
    blocks = 1 if observed.block is None else observed.block.size
    size = a * b * blocks
    n, sums = np.zeros(size), np.zeros(size)
    for part in _chunks(observed.size):
        key = _keys(observed, part)
        n += np.bincount(key, minlength=size)
        sums += np.bincount(key, weights=observed.offsets[part], minlength=size)
    mean = np.divide(sums, n, out=np.zeros(size), where=n > 0)
    drift, squares = np.zeros(size), np.zeros(size)
    for part in _chunks(observed.size):
        key = _keys(observed, part)
        deviation = observed.offsets[part] - mean[key]
        drift += np.bincount(key, weights=deviation, minlength=size)
        squares += np.bincount(key, weights=deviation * deviation, minlength=size)
    filled = np.flatnonzero(n)
    n, drift = n[filled], drift[filled]
    row, rest = np.divmod(filled, b * blocks)
    column, block = np.divmod(rest, blocks)
    return Strata(
        levels=(a, b, blocks),
        row=row,
        column=column,
        block=block,
        n=n,
        mean=mean[filled] + drift / n,
        within_ss=np.maximum(squares[filled] - drift * drift / n, 0.0),
        pivot=observed.pivot,
        rounding=ROUNDED * float(np.abs(mean).max(initial=0.0)),
    )


def with_values(strata: Strata, stratum: Codes, values: Vector) -> Strata:
    """Return the strata holding other values of the same observations (n,), none far from 0; stratum (n,) tells where each stands."""
    size = strata.n.size
    first = np.bincount(stratum, values, size) / strata.n
    apart = values - first[stratum]
    drift = np.bincount(stratum, apart, size) / strata.n
    return replace(
        strata,
        mean=first + drift,
        within_ss=np.maximum(np.bincount(stratum, apart * apart, size) - strata.n * drift * drift, 0.0),
        pivot=0.0,
        rounding=ROUNDED * float(np.abs(first).max(initial=0.0)),
    )


def _chunks(n: int) -> list[slice]:
    return [slice(start, min(start + CHUNK, n)) for start in range(0, n, CHUNK)]


def _keys(observed: Observations, part: slice) -> Codes:
    """Return the index of each observation's stratum among all combinations."""
    key: Codes = observed.row.codes[part].astype(np.intp) * observed.column.size + observed.column.codes[part]
    return key if observed.block is None else key * observed.block.size + observed.block.codes[part]


def cells_of(strata: Strata) -> Cells:
    """Return the cells of the layout, pooling the blocks of each."""
    a, b, _ = strata.levels
    cell = strata.cell
    n = np.bincount(cell, weights=strata.n, minlength=a * b)
    filled = n > 0
    mean = np.full(a * b, np.nan)
    mean[filled] = np.bincount(cell, weights=strata.n * strata.mean, minlength=a * b)[filled] / n[filled]
    apart = strata.mean - mean[cell]
    ss = np.bincount(cell, weights=strata.within_ss + strata.n * apart * apart, minlength=a * b)
    sd = np.full(a * b, np.nan)
    sd[n > 1] = np.sqrt(ss[n > 1] / (n[n > 1] - 1))
    shape = (a, b)
    return Cells(n.astype(np.int64).reshape(shape), (mean + strata.pivot).reshape(shape), sd.reshape(shape))
