"""What each answer would have been without any one observation."""

import numpy as np
from scipy import stats

from analysis.cells import Vector
from analysis.holding.bases import Bases

FITTED_BY_ITSELF = 1e-9  # 1 - h below which an observation determines its own fitted value


def p_without_each(bases: Bases) -> dict[str, Vector]:
    """Return for every question the p-values (n,) without each observation in turn, NaN where leaving it out leaves no test.

    A residual sum of squares falls by e² / (1 - h) in the full and in the reduced model alike, so nothing is fitted again.
    Source: Cook and Weisberg (1982), Residuals and Influence in Regression, section 2.2.
    """
    return {term: _p(bases, term) for term in bases.questions}


def _p(bases: Bases, term: str) -> Vector:
    basis = bases.questions[term]
    whole = np.column_stack([basis.reduced, basis.added])
    df, residual_df = basis.added.shape[1], bases.residual_df - 1
    with np.errstate(divide="ignore", invalid="ignore"):
        full, reduced = (_remaining_ss(bases.left_over(part), bases.leverage(part)) for part in (whole, basis.reduced))
        f = np.where(full > 0, (reduced - full) / df / (full / residual_df), np.nan)
    return np.asarray(stats.f.sf(f, df, residual_df)) if residual_df > 0 else np.full(f.size, np.nan)


def _remaining_ss(residual: Vector, leverage: Vector) -> Vector:
    free = np.where(1 - leverage > FITTED_BY_ITSELF, 1 - leverage, np.nan)
    return np.asarray(residual @ residual - residual**2 / free)
