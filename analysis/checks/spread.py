"""Whether cells spread alike: Levene's, Brown and Forsythe's and Bartlett's tests.

All take values (n,), the code of the cell of each (n,), and the number of cells: one array with codes is counted and summed in one pass,
where a list of arrays would cost a call a cell. Cells with fewer than two values are passed over. Shifting the values of a
cell changes nothing, so residuals from cell means (or offsets from a pivot) may be given and lose no digits to a large mean.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from analysis.checks.outcomes import ChiSquare, FTest, chi_square, f_test

Floats = NDArray[np.float64]
Codes = NDArray[np.intp]
ROUNDING = 1e-10  # deviations below this share of the largest value are rounding, of residuals too small beside what they were left from


@dataclass(frozen=True, eq=False)
class Groups:
    """The values of the cells that hold at least two."""

    values: Floats  # (n,)
    codes: Codes  # (n,) from 0 to size - 1
    n: NDArray[np.int64]  # (size,) at least 2 each

    @property
    def size(self) -> int:
        return self.n.size

    @property
    def within_df(self) -> int:
        return self.values.size - self.size

    @property
    def noise(self) -> float:
        """The largest squared deviation that rounding alone could leave."""
        return float(ROUNDING * np.abs(self.values).max()) ** 2

    def means(self, values: Floats) -> Floats:
        """Return the mean of each group; a second pass takes up what the first one rounds off."""
        first = np.bincount(self.codes, values) / self.n
        return np.asarray(first + np.bincount(self.codes, values - first[self.codes]) / self.n, dtype=np.float64)

    def medians(self) -> Floats:
        """Return the median of each group."""
        by_value = np.argsort(self.values)
        codes = self.codes[by_value]
        narrow = codes.astype(np.uint16) if self.size <= 1 << 16 else codes  # sixteen bits are sorted in one pass over the digits
        ordered = self.values[by_value[np.argsort(narrow, kind="stable")]]
        start = np.cumsum(self.n) - self.n
        return np.asarray((ordered[start + (self.n - 1) // 2] + ordered[start + self.n // 2]) / 2, dtype=np.float64)


def levene(values: Floats, codes: Codes, count: int) -> FTest | None:
    """Test equal spread by one-way analysis of the absolute deviations from cell means.

    None with fewer than two cells of two values, or where deviations do not vary inside any cell (always so with two values each).
    Source: Levene (1960), in Contributions to Probability and Statistics, 278-292.
    """
    groups = repeated(values, codes, count)
    return None if groups is None else _one_way(groups, groups.means(groups.values))


def brown_forsythe(values: Floats, codes: Codes, count: int) -> FTest | None:
    """Test equal spread by one-way analysis of the absolute deviations from cell medians.

    None as for Levene's test. Source: Brown and Forsythe (1974), JASA 69, 364-367.
    """
    groups = repeated(values, codes, count)
    return None if groups is None else _one_way(groups, groups.medians())


def bartlett(values: Floats, codes: Codes, count: int) -> ChiSquare | None:
    """Test equal variances by comparing the logarithms of the cell variances with that of the pooled one.

    None with fewer than two cells of two values, or where a cell does not vary at all.
    Source: Bartlett (1937), Proc. R. Soc. A 160, 268-282.
    """
    groups = repeated(values, codes, count)
    if groups is None:
        return None
    deviations = groups.values - groups.means(groups.values)[groups.codes]
    ss, df = np.bincount(groups.codes, deviations**2), groups.n - 1
    if np.any(ss <= groups.n * groups.noise):
        return None
    pooled = groups.within_df * np.log(ss.sum() / groups.within_df)
    correction = 1 + ((1 / df).sum() - 1 / groups.within_df) / (3 * (groups.size - 1))
    return chi_square((pooled - (df * np.log(ss / df)).sum()) / correction, groups.size - 1)


def repeated(values: Floats, codes: Codes, count: int) -> Groups | None:
    """Return the groups with at least two values, None where there are fewer than two such groups."""
    n = np.bincount(codes, minlength=count)
    kept = n >= 2
    if kept.sum() < 2:
        return None
    if kept.all():
        return Groups(values, codes, n)
    chosen = kept[codes]
    return Groups(values[chosen], (np.cumsum(kept) - 1)[codes[chosen]], n[kept])


def _one_way(groups: Groups, centre: Floats) -> FTest | None:
    deviation = np.abs(groups.values - centre[groups.codes])
    means = groups.means(deviation)
    within = ((deviation - means[groups.codes]) ** 2).sum()
    if within <= groups.values.size * groups.noise:
        return None
    between = (groups.n * (means - deviation.mean()) ** 2).sum()
    df1, df2 = groups.size - 1, groups.within_df
    return f_test(between / df1 / (within / df2), df1, df2)
