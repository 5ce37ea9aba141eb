"""The kinds of doubt, one function each: what was seen, what it would mean and what to do."""

import numpy as np
from scipy import stats

from analysis.doubting.signs import AMBER, NOTE, Doubt, Signs
from analysis.holding import agreement
from analysis.rounding import p_value, shortest, significant

STRICT = 0.005  # p below which a check raises amber: several checks run on every study, and few clean ones should raise any
SEEN = 0.01  # p of the outlying observation, already adjusted for how many there are
FEW = 4  # observations in the largest cell below which spread and shape cannot be seen
MOST_ROWS = 20


def outlying(signs: Signs) -> Doubt | None:
    """Doubt an observation that stands far outside the rest; a power of ten too large or small is said."""
    if signs.outlying_p >= SEEN:
        return None
    at = signs.farthest
    row = int(signs.file_rows[at])
    value = signs.observations["value"].iloc[at]
    return Doubt(
        "one_observation",
        AMBER,
        f"Row {row} ({shortest(float(value))}) lies {significant(abs(float(signs.student[at])))} standard errors from what the other "
        f"rows lead one to expect (Bonferroni {p_value(signs.outlying_p)}). One value can decide an answer: check the original record, "
        "and see the answers without it.",
        (row,),
    )


def spread_with_mean(signs: Signs) -> Doubt | None:
    """Doubt one scale for all cells where the size of residuals rises with the fitted value."""
    fitted = signs.observations["fitted"].to_numpy(float)
    if signs.n < 8 or np.ptp(fitted) == 0:
        return None
    told = stats.spearmanr(fitted, np.abs(signs.residual))
    if not told.statistic > 0 or told.pvalue >= STRICT:
        return None
    return Doubt(
        "spread_grows_with_mean",
        AMBER,
        f"Residuals grow with the fitted value (rank correlation {significant(float(told.statistic))}, {p_value(float(told.pvalue))}). "
        "Intervals are then too wide where values are small and too narrow where they are large: look at the log scale.",
    )


def spread_between_cells(signs: Signs) -> Doubt | None:
    """Doubt one residual mean square where cells differ in spread."""
    check = signs.checks["brown_forsythe"]
    p = None if check is None else check.p
    if p is None or not p < STRICT:
        return None
    sd = signs.layout.cells.sd
    known = sd[np.isfinite(sd) & (sd > 0)]
    ratio = significant(float(known.max() / known.min()))
    return Doubt(
        "spread_by_cell",
        AMBER,
        f"The spread differs between cells: the largest standard deviation is {ratio} times the smallest (Brown-Forsythe {p_value(p)}). "
        "The p-values of the ordinary analysis can then be too small or too large: compare the rows that allow unequal spread.",
    )


def odd_shape(signs: Signs) -> Doubt | None:
    """Doubt normal residuals; a single outlying value is told as such and not again here."""
    check = signs.checks["shapiro"]
    if check is None or not check.p < STRICT or not check.w < 1:
        return None
    skew, tails = float(stats.skew(signs.residual)), float(stats.kurtosis(signs.residual))
    what = "skewed" if abs(skew) > 1 else "heavy-tailed" if tails > 1 else "in two humps or flat" if tails < -1 else "not normal in shape"
    return Doubt(
        "shape",
        AMBER,
        f"The residuals are {what} (Shapiro-Wilk {p_value(check.p)}, skewness {significant(skew)}, excess kurtosis {significant(tails)}). "
        "Means and tests can lean on a few values: compare the permutation row, and the log scale if values are positive.",
    )


def drift(signs: Signs) -> Doubt | None:
    """Doubt independent residuals where they follow the order of the rows."""
    if signs.n < 10:
        return None
    order = np.argsort(signs.file_rows, kind="stable")
    told = stats.spearmanr(np.arange(signs.n), signs.residual[order])
    if not told.pvalue < STRICT:
        return None
    return Doubt(
        "order",
        AMBER,
        f"Residuals {'rise' if told.statistic > 0 else 'fall'} along the rows of the file (rank correlation "
        f"{significant(float(told.statistic))}, {p_value(float(told.pvalue))}). If rows stand in the order of measuring, something "
        "drifted: find out what, and use the run or day as a block.",
    )


def few(signs: Signs) -> Doubt | None:
    """Note that with few observations in a cell no check of spread or shape can see much."""
    most = int(signs.layout.cells.n.max())
    if most >= FEW:
        return None
    count = "one observation" if most == 1 else f"{most} observations"
    return Doubt(
        "few_observations",
        NOTE,
        f"No cell holds more than {count}: checks of spread and shape cannot see much here, so their silence is no assurance. "
        "Rely on what is known of this kind of measurement.",
    )


def depends(signs: Signs) -> Doubt | None:
    """Note that another defensible analysis answers otherwise."""
    if not agreement.dissenting(signs.holds):
        return None
    return Doubt("answer_depends", NOTE, agreement.told(signs.holds) + " Say which analysis was planned, and tell the others beside it.")


KINDS = (outlying, drift, spread_with_mean, spread_between_cells, odd_shape, depends, few)
