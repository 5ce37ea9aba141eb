"""What a hypothesis test says when the spread may differ from cell to cell: a Wald F with an HC3 covariance."""

import numpy as np
from numpy.typing import NDArray
from scipy import linalg

from analysis.checks.outcomes import FTest, f_test

Floats = NDArray[np.float64]
FITTED_BY_ITSELF = 1e-9  # 1 - h below which an observation determines its own fitted value
DEPENDENT = 1e-12  # a squared pivot of a correlation matrix below which a row depends on those before


def spread_by_row(residual: Floats, leverage: Floats, row: NDArray[np.intp], rows: int) -> Floats:
    """Return Σ e² / (1 - h)² over the observations of each design row (rows,), NaN where one has leverage 1.

    residual and leverage (n,), row (n,) the design row of each observation (its cell, or its cell and block).
    """
    free = 1 - leverage
    with np.errstate(divide="ignore", invalid="ignore"):
        squares = np.where(free > FITTED_BY_ITSELF, (residual / free) ** 2, np.nan)
    return np.asarray(np.bincount(row, squares, minlength=rows), dtype=np.float64)


def wald_hc3(design: Floats, counts: Floats, spread: Floats, coefficients: Floats, hypothesis: Floats, residual_df: int) -> FTest | None:
    """Test hypothesis @ coefficients = 0 with the HC3 covariance of the coefficients.

    design (g, p) of full column rank holds each distinct row once, counts (g,) its observations and spread (g,) their
    spread_by_row (for a plain design matrix: counts of 1 and e² / (1 - h)²); coefficients (p,), hypothesis (q, p) of full row
    rank. Returns F with q and residual_df degrees of freedom; None where a leverage is 1, where no degree of freedom is left or
    where the covariance of the hypothesis is singular.
    Source: MacKinnon and White (1985), J. Econometrics 29, 305-325; Long and Ervin (2000), Am. Stat. 54, 217-224.
    """
    gain = hypothesis @ np.linalg.solve(design.T @ (counts[:, None] * design), design.T)
    return wald(hypothesis @ coefficients, (gain * spread) @ gain.T, residual_df)


def wald_hc3_cells(means: Floats, n: Floats, spread: Floats, hypothesis: Floats, residual_df: int) -> FTest | None:
    """Test hypothesis @ means = 0 for independent cells, whose means have the HC3 variances spread / n².

    means, n, spread (cells,), spread from spread_by_row with leverage 1 / n; hypothesis (q, cells) of full row rank. A cell with one
    observation has no spread of its own (NaN), and a hypothesis that weighs it has no answer: None, and in the cases of wald_hc3.
    """
    used = np.any(hypothesis != 0, axis=0)
    weights = hypothesis[:, used]
    return wald(weights @ means[used], (weights * (spread[used] / n[used] ** 2)) @ weights.T, residual_df)


def wald(estimate: Floats, covariance: Floats, residual_df: int) -> FTest | None:
    """Return the Wald F of an estimate (q,) against 0, None where its covariance (q, q) is undefined or singular."""
    sd = np.sqrt(np.diag(covariance))
    if residual_df < 1 or not np.all(sd > 0):
        return None
    try:
        root = np.linalg.cholesky(covariance / np.outer(sd, sd))
    except np.linalg.LinAlgError:  # not positive definite: some contrast has no spread, or rows depend on each other
        return None
    if np.diag(root).min() ** 2 < DEPENDENT:
        return None
    scaled = linalg.solve_triangular(root, estimate / sd, lower=True)
    return f_test(scaled @ scaled / estimate.size, estimate.size, residual_df)
