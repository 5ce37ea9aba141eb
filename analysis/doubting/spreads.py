"""Doubts about one residual spread for all cells: a cell or a row that is looser, or a spread that grows with the mean."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy import special, stats

from analysis import tails
from analysis.cells import Vector
from analysis.doubting.signs import AMBER, Doubt, Left, Signs
from analysis.rounding import p_value, significant

STRICT = 0.003  # p below which a check raises amber: several checks run on every study, and few clean ones should raise any
DEFINED = 4  # observations in a cell from which single deviations tell something
SMALL = 2.0  # by which p-values from variances of two or three are multiplied, which lean on normal values
ALSO = 0.1  # p of a growth among the other cells, so that it is not one cell alone
MOST = 0.5  # share of what differs that the growth takes
SLIP = 0.15  # of a power of ten in which the ratio of a whole cell to the others may miss it
MOST_ROWS = 20
MOST_SINGLE = 60  # cells beyond which the farthest of them is too far out in the tail to be judged


@dataclass(frozen=True, eq=False)
class Spread:
    """How the spread of the cells differs: altogether, and along their means."""

    between: float  # p
    along: float  # p of a spread that grows with the mean
    explained: bool  # whether that growth, and not one cell alone, is most of what differs
    cell: int  # the cell that differs most from the others, among those filled


@dataclass(frozen=True, eq=False)
class _Scatter:
    """How much each filled cell scatters, on a scale that steadies it; arrays (cells,)."""

    value: Vector
    weight: Vector  # 0 where a cell tells nothing
    mean: Vector  # of the fitted values
    row: NDArray[np.intp]
    column: NDArray[np.intp]
    error: float  # variance of a value of weight 1
    df: float  # of the error

    def p(self, ss: float, df1: int) -> float:
        """Return the p-value of a sum of squares between cells."""
        if df1 < 1:
            return 1.0
        return float(special.chdtrc(df1, ss)) if np.isinf(self.df) else float(tails.f_upper(max(ss, 0.0) / df1 / self.error, df1, self.df))

    def without(self, cell: int) -> "_Scatter":
        """Return the other cells."""
        weight = self.weight.copy()
        weight[cell] = 0.0
        return replace(self, weight=weight)

    def apart(self) -> Vector:
        """Return the distance of every value from their mean."""
        return np.asarray(self.value - self.weight @ self.value / self.weight.sum())

    def p_of_levels(self, codes: NDArray[np.intp]) -> float:
        """Return the p-value of what differs between the levels of one factor."""
        weight = np.bincount(codes, self.weight)
        means = np.bincount(codes, self.weight * self.apart()) / np.where(weight > 0, weight, 1.0)
        return self.p(float(weight @ means**2), int(np.count_nonzero(weight)) - 1)

    def growth(self) -> float:
        """Return the sum of squares of a growth along the cell means or their ranks, 0 where values fall along them."""
        used = self.weight > 0
        scores = (self.mean, stats.rankdata(self.mean))
        found = [self._along(np.where(used, score - self.weight @ score / self.weight.sum(), 0.0)) for score in scores]
        return max(found)

    def _along(self, score: Vector) -> float:
        size, product = float(self.weight @ score**2), float(self.weight @ (score * self.apart()))
        return product**2 / size if size > 0 and product > 0 else 0.0


def spread_of(left: Left) -> Spread | None:
    """Return how the spread differs between cells; None where too few hold repeated observations.

    Cells with four or more observations are judged by the roots of their deviations, which vary more alike than the deviations do
    where the spread differs; smaller ones by the cube roots of their variances, as normal values would make them vary. Looked at are
    all cells, one against the others, the levels of each factor, and a growth along the means, a contrast of one degree of freedom.
    Source: Levene (1960), in Contributions to Probability and Statistics, 278-292, who gives the roots beside the deviations; Wilson and
    Hilferty (1931), Proc. Nat. Acad. Sci. 17, 684-688.
    """
    if left.n < 8 or np.count_nonzero(left.counts > 1) < 2:
        return None
    many = np.median(left.counts) >= DEFINED
    scatter = _deviations(left) if many else _variances(left)
    return None if scatter is None else _spread(scatter, 1.0 if many else SMALL)


def _deviations(left: Left) -> _Scatter | None:
    """Return the mean root of the deviations of each cell that holds three or more."""
    used = (left.counts > 2)[left.cell] & np.isfinite(left.even)
    roots = np.sqrt(np.abs(np.where(used, left.even, 0.0)))
    weight = np.bincount(left.cell, used).astype(float)
    value = np.bincount(left.cell, roots) / np.maximum(weight, 1)
    df = int(used.sum()) - int(np.count_nonzero(weight))
    within = float(np.sum(np.where(used, roots - value[left.cell], 0.0) ** 2))
    if df < 4 or within == 0 or np.count_nonzero(weight) < 2:
        return None
    # Residuals of a small cell sum to 0, so their sizes go together: a correlation near 0.85 / (n - 1)² (measured).
    alike = np.minimum(0.85 / np.maximum(weight - 1, 1) ** 2, 0.5)
    return _Scatter(value, weight * (1 - alike) / (1 + (weight - 1) * alike), *_places(left), within / df, df)


def _variances(left: Left) -> _Scatter | None:
    """Return the cube root of each cell's variance beside the pooled one, which is nearly normal even for two observations."""
    df = np.maximum(left.counts - 1, 1)
    ss = np.bincount(left.cell, np.nan_to_num(left.residual) ** 2)
    usable = left.counts > 1
    pooled = float(ss[usable].sum() / df[usable].sum()) if usable.any() else 0.0
    if usable.sum() < 4 or pooled == 0:
        return None
    value = np.where(usable, np.cbrt(ss / df / pooled) + 2 / (9 * df), 0.0)
    weight = np.where(usable, 9 * df / 2, 0.0)
    return _Scatter(value, weight, *_places(left), 1.0, np.inf)


def _places(left: Left) -> tuple[Vector, NDArray[np.intp], NDArray[np.intp]]:
    """Return the fitted mean, the row and the column of every filled cell."""
    strata = left.layout.strata
    filled = np.unique(strata.cell)
    return left.by_cell(left.fitted), filled // strata.levels[1], filled % strata.levels[1]


def _spread(scatter: _Scatter, penalty: float) -> Spread:
    apart, weight = scatter.apart(), scatter.weight
    between, k = float(weight @ apart**2), int(np.count_nonzero(weight))
    single = weight * apart**2 / np.maximum(1 - weight / weight.sum(), 1e-9)
    cell = int(single.argmax())
    p_all = scatter.p(between, k - 1)
    p_single = min(1.0, k * scatter.p(float(single[cell]), 1)) if k <= MOST_SINGLE else 1.0
    growth, others = scatter.growth(), scatter.without(cell)
    along = min(1.0, penalty * 2 * scatter.p(growth, 1))
    also_elsewhere = k > 3 and 2 * others.p(others.growth(), 1) < ALSO
    explained = growth >= MOST * between and (also_elsewhere or p_single >= STRICT)
    p = (p_all, p_single, scatter.p_of_levels(scatter.row), scatter.p_of_levels(scatter.column))
    return Spread(min(1.0, penalty * len(p) * min(p)), along, explained, cell)


def grows(signs: Signs, found: Spread | None) -> Doubt | None:
    """Doubt one scale for all cells where the spread grows with the mean."""
    if found is None or found.along >= STRICT:
        return None
    sd, fitted = _sds(signs.rest), signs.rest.by_cell(signs.rest.fitted)
    low, high = sd[fitted.argmin()], sd[fitted.argmax()]
    told = f"from {significant(low, 2)} in the cell with the smallest mean to {significant(high, 2)} in that with the largest"
    return Doubt(
        "spread_grows_with_mean",
        AMBER,
        f"The spread grows with the mean: standard deviations go {told} ({p_value(found.along)}). Intervals are then too wide where values "
        "are small and too narrow where they are large, and an interaction may be the scale's. If changes are naturally told in percent, "
        "look at the log scale.",
    )


def _sds(left: Left) -> Vector:
    df = np.maximum(left.counts - 1, 1)
    return np.asarray(np.sqrt(np.bincount(left.cell, (left.residual - left.by_cell(left.residual)[left.cell]) ** 2) / df))


def differs(signs: Signs, found: Spread | None) -> Doubt | None:
    """Doubt one residual mean square where cells differ in spread; the cell that differs most is named with its rows."""
    if found is None or found.between >= STRICT:
        return None
    left = signs.rest
    sd = _sds(left)
    known = sd[(sd > 0) & (left.counts > 1)]
    if known.size < 2:
        return None
    ratio, here = significant(float(known.max() / known.min()), 2), left.cell == found.cell
    at = int(np.flatnonzero(here)[0])
    observed = left.layout.observed
    row, column = (factor.told(factor.levels[factor.codes[at]]) for factor in observed.factors[:2])
    name = f"{row} with {column}"
    others = float(np.sqrt(np.nanmean(left.even[~here] ** 2)))
    apart = f"{significant(float(sd[found.cell]), 2)} in {name} against {significant(others, 2)} elsewhere"
    rows = tuple(int(row) for row in observed.file_rows[here][:MOST_ROWS])
    return Doubt(
        "spread_by_cell",
        AMBER,
        f"The cells do not spread alike: {apart}, the largest {ratio} times the smallest ({p_value(found.between)}).{_against(left, sd)}"
        f"{_cell_slip(left, found.cell)} Compare the rows that allow unequal spread.",
        rows,
    )


def _against(left: Left, sd: Vector) -> str:
    """Say whether the small cells have the large spread, which is what makes p-values too small."""
    if np.ptp(left.counts) == 0 or sd.size < 3:
        return " With equal numbers in the cells the tests suffer little, single comparisons more."
    tau = float(stats.kendalltau(left.counts, sd).statistic)
    if tau < -0.2:
        return " The small cells have the large spread, so that p-values of the ordinary analysis are too small."
    return " The large cells have the large spread, so that p-values of the ordinary analysis are too large." if tau > 0.2 else ""


def _cell_slip(left: Left, cell: int) -> str:
    """Say where a whole cell stands a power of ten away from what rows and columns lead one to expect, spread and all."""
    observed, here = left.layout.observed, left.cell == cell
    values = observed.scale.back(observed.values)
    sd, others = _sds(left)[cell], float(np.sqrt(np.nanmean(left.even[~here] ** 2)))
    middle, expected = float(np.median(values[here])), float(np.median(values[~here]))
    if not (middle * expected > 0 and sd > 0 and others > 0):
        return ""
    of_mean, of_spread = np.log10(middle / expected), np.log10(sd / others)
    power = round(of_mean)
    if power == 0 or abs(of_mean - power) > 2 * SLIP or abs(of_spread - power) > 3 * SLIP:
        return ""
    return " Its mean is a power of ten away from the others too: was the whole cell noted in another unit?"
