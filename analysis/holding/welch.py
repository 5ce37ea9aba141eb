"""A test for crossed cells whose spreads differ, with degrees of freedom estimated from those spreads."""

from dataclasses import dataclass

import numpy as np

from analysis import tails
from analysis.cells import Matrix, Vector


@dataclass(frozen=True)
class WelchJames:
    """An approximate F statistic; df2 is estimated from the spreads and seldom whole."""

    f: float
    df1: int
    df2: float
    p: float


def welch_james(means: Vector, variances: Vector, n: Vector, hypothesis: Matrix) -> WelchJames | None:
    """Test hypothesis @ means = 0 for independent cells of unequal variance; None without a hypothesis or a cell's own spread.

    means, variances, n (cells,): variances are the cells' own, in squared response units; hypothesis (q, cells) of full row rank.
    With one contrast this is Welch's t squared with Satterthwaite's degrees of freedom, with one factor Welch's (1951) F.
    Source: Johansen (1980), Biometrika 67, 85-92, equations 3.1 to 3.4; for crossed factors Keselman, Carriere and Lix (1993),
    J. Educational Statistics 18, 305-319.
    """
    if not hypothesis.size or n.min() < 2 or not np.all(variances > 0):
        return None
    q, spread = len(hypothesis), variances / n
    estimate, covariance = hypothesis @ means, (hypothesis * spread) @ hypothesis.T
    wald = float(estimate @ np.linalg.solve(covariance, estimate))
    shares = spread * np.einsum("qc,qc->c", hypothesis, np.linalg.solve(covariance, hypothesis))
    a = float(np.sum(shares**2 / (n - 1)))
    f, df2 = wald / (q + 2 * a - 6 * a / (q + 2)), q * (q + 2) / (3 * a)
    return WelchJames(f, q, df2, float(tails.f_upper(f, q, df2)))
