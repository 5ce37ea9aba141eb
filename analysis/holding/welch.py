"""A test for crossed cells whose spreads differ, with degrees of freedom estimated from those spreads."""

import numpy as np
from scipy import stats

from analysis.cells import Matrix, Vector


def anova_type_p(means: Vector, variances: Vector, n: Vector, hypothesis: Matrix) -> float | None:
    """Return the p-value of hypothesis @ means = 0 by the ANOVA-type statistic, None without a hypothesis or where a cell has no spread.

    means, variances, n (cells,): variances are the cells' own, in squared response units; hypothesis (q, cells) of full row rank.
    Source: Brunner, Dette and Munk (1997), JASA 92, 1494-1502: the statistic and both degrees of freedom.
    """
    if not hypothesis.size or n.min() < 2 or not np.all(variances > 0):
        return None
    projection = hypothesis.T @ np.linalg.solve(hypothesis @ hypothesis.T, hypothesis)
    spread, diagonal = variances / n, np.diag(projection)
    trace = float(diagonal @ spread)
    weighted = projection * spread
    df1 = trace**2 / float(np.sum(weighted * weighted.T))
    df2 = trace**2 / float(np.sum((diagonal * spread) ** 2 / (n - 1)))
    return float(stats.f.sf(float(means @ projection @ means) / trace, df1, df2))
