"""Which power of the response suits the model best."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import optimize, stats

Floats = NDArray[np.float64]
LEAST, MOST = -5.0, 5.0  # powers that are looked at
STEP = 1.0  # of the first look; every look costs a fit
IMPOSSIBLE = -1e15  # log-likelihood of a power that leaves the range of doubles


@dataclass(frozen=True)
class BoxCox:
    """The best power and its interval, which ends at ±5 where the profile has not fallen enough by then."""

    lam: float
    lower: float
    upper: float


def box_cox(y: Floats, residual_ss: Callable[[Floats], float], confidence: float) -> BoxCox | None:
    """Return the power λ that maximises -n/2 log(RSS(λ)/n) + (λ - 1) Σ log y, with its profile likelihood interval.

    y (n,) in response units; residual_ss gives the residual sum of squares of transformed values (n,) from the study's model,
    which must hold an intercept. None when a value is not above 0, when all are alike, or when the model fits some power perfectly.
    Source: Box and Cox (1964), JRSS B 26, 211-252; the interval is where twice the log-likelihood has fallen by chi-square with 1 df.
    """
    if y.size == 0 or y.min() <= 0 or y.min() == y.max():
        return None
    profile = _profile(y, residual_ss)
    grid = np.arange(LEAST, MOST + STEP / 2, STEP)
    found = np.array([profile(power) for power in grid])
    if not np.all(found < np.inf):
        return None
    best = grid[found.argmax()]
    inner = optimize.minimize_scalar(
        lambda power: -profile(power), bounds=(max(best - STEP, LEAST), min(best + STEP, MOST)), method="bounded", options={"xatol": 1e-7}
    )
    lam = float(inner.x) if -inner.fun >= found.max() else float(best)
    cut = max(-float(inner.fun), float(found.max())) - stats.chi2.isf(1 - confidence, 1) / 2
    below, above = grid[(grid < lam) & (found < cut)], grid[(grid > lam) & (found < cut)]

    def excess(power: float) -> float:
        return profile(power) - cut

    lower = optimize.brentq(excess, below[-1], lam, xtol=1e-9) if below.size else LEAST
    upper = optimize.brentq(excess, lam, above[0], xtol=1e-9) if above.size else MOST
    return BoxCox(lam, float(lower), float(upper))


def _profile(y: Floats, residual_ss: Callable[[Floats], float]) -> Callable[[float], float]:
    """Return the log-likelihood of a power up to a constant.

    Divided by its geometric mean g, y needs no Jacobian: ((y/g)^λ - 1) / λ is the scaled transform of Box and Cox's equation 8. Taken by
    expm1 of logarithms it passes through log(y/g) at λ = 0 without a jump.
    """
    log_y = np.log(y)
    log_y = log_y - log_y.mean()
    reach = float(np.abs(log_y).max())

    def log_likelihood(power: float) -> float:
        if abs(power) * reach > 300:  # squares would overflow
            return IMPOSSIBLE
        ss = residual_ss(np.expm1(power * log_y) / power if power else log_y)
        return -y.size / 2 * float(np.log(ss / y.size)) if ss > 0 else float("inf")

    return log_likelihood
