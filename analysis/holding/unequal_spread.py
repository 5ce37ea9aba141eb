"""What analyses that let every cell have its own spread say of each question."""

from collections.abc import Callable, Iterator, Mapping

import numpy as np
import pandas as pd

from analysis import tails
from analysis.checks.hc3 import spread_by_row
from analysis.holding import welch
from analysis.holding.analysed import Analysed, Entry, ends
from analysis.holding.bases import Bases
from analysis.holding.hypotheses import hypotheses

HC3, WELCH = "unequal spread allowed (HC3)", "unequal spread allowed (Welch-James)"


def analyses(analysed: Analysed) -> Iterator[tuple[str, Callable[[], Mapping[str, Entry]]]]:
    """Yield the analyses that this layout allows."""
    robust = analysed.checks["hc3"].set_index("term")["p"]
    if robust.notna().any() and analysed.bases is not None:
        bases = analysed.bases
        yield HC3, lambda: _hc3(analysed, bases, robust)
    layout = analysed.layout
    if layout.analysed.interaction and not layout.strata.has_blocks and layout.cells.n.min() > 1 and np.all(layout.cells.sd > 0):
        yield WELCH, lambda: _welch(analysed)


def _hc3(analysed: Analysed, bases: Bases, robust: "pd.Series[float]") -> dict[str, Entry]:
    """Return the HC3 tests, the differences with intervals from the same covariance.

    Source: MacKinnon and White (1985), J. Econometrics 29, 305-325: the covariance of the coefficients in orthonormal directions is
    the sum of x x' e² / (1 - h)².
    """
    spread = spread_by_row(bases.left_over(bases.whole), bases.leverage(bases.whole), bases.stratum, bases.counts.size)
    t = float(tails.t_quantile((1 - analysed.confidence) / 2, bases.residual_df))
    found = {}
    for term in analysed.terms:
        if pd.notna(robust[term]):
            weights = analysed.contrasts[term] @ bases.cell_rows
            se = float(np.sqrt(spread @ (bases.whole @ weights) ** 2))
            found[term] = Entry(float(robust[term]), *ends(analysed.scale, float(weights @ bases.coordinates), t * se))
    return found


def _welch(analysed: Analysed) -> dict[str, Entry]:
    """Return the Welch-James tests, the differences with Welch's intervals.

    Source: Satterthwaite (1946), Biometrics Bulletin 2, 110-114, for the degrees of freedom of the intervals.
    """
    cells = analysed.layout.cells
    tests = hypotheses(analysed.layout.observed.shape, analysed.names)
    means, variances, n = cells.mean.ravel(), cells.sd.ravel() ** 2, cells.n.ravel().astype(float)
    means = means - means.mean()
    found = {}
    for term in analysed.terms:
        test = welch.welch_james(means, variances, n, tests[term])
        weights = analysed.contrasts[term]
        if test is None or not weights.any():  # a factor with one level
            continue
        share = weights**2 * variances / n
        df = float(share.sum() ** 2 / np.sum(share**2 / (n - 1)))
        half = float(tails.t_quantile((1 - analysed.confidence) / 2, df) * np.sqrt(share.sum()))
        found[term] = Entry(test.p, *ends(analysed.scale, float(weights @ means), half))
    return found
