"""What each answer would have been without any one observation."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from analysis import tails
from analysis.cells import Vector
from analysis.holding.bases import Bases

FITTED_BY_ITSELF = 1e-9  # 1 - h below which an observation determines its own fitted value


@dataclass(frozen=True, eq=False)
class Without:
    """One question's answer without each observation in turn; arrays (n,), NaN where leaving it out leaves no test."""

    p: Vector
    effect: Vector  # the difference told, on the analysed scale
    se: Vector
    df: int


def without_each(bases: Bases, contrasts: Mapping[str, Vector]) -> dict[str, Without]:
    """Return every question's p-value and difference without each observation in turn; contrasts weigh the cells.

    A residual sum of squares falls by e² / (1 - h) in the full and in the reduced model alike, an estimate L'θ by
    (L'x) e / (1 - h), and the unit variance of it rises by (L'x)² / (1 - h), with x the observation's row in orthonormal
    directions; so nothing is fitted again.
    Source: Cook and Weisberg (1982), Residuals and Influence in Regression, section 2.2 and appendix A.2.
    """
    residual, free = bases.left_over(bases.whole), _free(bases.leverage(bases.whole))
    df = bases.residual_df - 1
    remaining = _remaining_ss(residual, free)
    ms = remaining / df if df > 0 else np.full(residual.size, np.nan)
    found = {}
    for term in bases.questions:
        weights = contrasts[term] @ bases.cell_rows
        moves = (bases.whole @ weights)[bases.stratum]
        with np.errstate(invalid="ignore"):
            se = np.sqrt(ms * (weights @ weights + moves**2 / free))
        found[term] = Without(_p(bases, term, remaining, ms), weights @ bases.coordinates - moves * residual / free, se, df)
    return found


def _p(bases: Bases, term: str, remaining: Vector, ms: Vector) -> Vector:
    basis = bases.questions[term]
    added, df = basis.added.shape[1], bases.residual_df - 1
    reduced = _remaining_ss(bases.left_over(basis.reduced), _free(bases.leverage(basis.reduced)))
    with np.errstate(divide="ignore", invalid="ignore"):
        f = np.where(ms > 0, (reduced - remaining) / added / ms, np.nan)
    return np.asarray(tails.f_upper(np.maximum(f, 0.0), added, df)) if df > 0 else np.full(f.size, np.nan)


def _free(leverage: Vector) -> Vector:
    return np.where(1 - leverage > FITTED_BY_ITSELF, 1 - leverage, np.nan)


def _remaining_ss(residual: Vector, free: Vector) -> Vector:
    return np.asarray(residual @ residual - residual**2 / free)
