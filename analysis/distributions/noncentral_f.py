"""Which noncentralities are compatible with an observed F."""

from functools import lru_cache

import numpy as np
from scipy import optimize, special

from analysis.distributions.pieces import Floats

SPAN = 9  # Poisson standard deviations summed on either side; they leave out less than 1e-17
FINENESS = 3  # terms per Poisson standard deviation: taking every nth term of so smooth a series is exact to exp(-2π² 3²)

BEYOND_BETA = 1e50  # a first parameter so great that the beta distribution is a gamma distribution to all digits


@lru_cache(maxsize=1024)
def noncentrality_interval(f: float, df1: float, df2: float, confidence: float) -> tuple[float, float]:
    """Return the lower and upper noncentrality λ that put f at the two tails of (1 - confidence) / 2 each.

    A bound is 0 where λ = 0 is already too great for it; (inf, inf) for infinite f; (nan, nan) where f or a df is not a number
    or a df is not positive. Relative accuracy 1e-9 for f up to 1e300, df1 and df2 from 1 (df2 may be infinite).
    Source: Steiger (2004), Psychological Methods 9, 164-182.
    """
    if not (f >= 0 and df1 > 0 and df2 > 0):
        return float("nan"), float("nan")
    if f == np.inf:
        return float("inf"), float("inf")
    tail = (1 - confidence) / 2
    return _solve(f, df1, df2, -tail, upper=True), _solve(f, df1, df2, tail, upper=False)


def _solve(f: float, df1: float, df2: float, tail: float, upper: bool) -> float:
    """Return the λ at which the upper tail at f has risen to -tail or the lower one fallen to tail; 0 where no λ >= 0 has it."""

    def excess(noncentrality: float) -> float:
        probability = tail_probability(f, df1, df2, noncentrality, upper)
        return -probability - tail if upper else probability - tail

    if excess(0.0) <= 0:
        return 0.0
    low, high = 0.0, max(f * df1, 1.0)
    while excess(high) > 0:
        low, high = high, 2 * high
    return float(optimize.brentq(excess, low, high, xtol=1e-12, rtol=1e-12, maxiter=500))


def tail_probability(f: float, df1: float, df2: float, noncentrality: float, upper: bool) -> float:
    """Return P(F > f) or P(F <= f) of a noncentral F, as a Poisson mixture of incomplete beta (or gamma) functions.

    With a great noncentrality only every nth Poisson term is taken, which changes a sum of so smooth a series by less than
    rounding does. Source: Johnson, Kotz and Balakrishnan (1995), Continuous Univariate Distributions 2, chapter 30.
    """
    rate = noncentrality / 2
    sd = np.sqrt(rate)
    stride = max(1.0, np.floor(sd / FINENESS))
    first = max(0.0, np.floor(rate - SPAN * sd))
    terms = first + stride * np.arange(np.ceil((2 * SPAN * sd + 30) / stride))
    each = _central_tail(f, df1, df2, terms, upper)
    return float(_poisson_weights(terms, rate) @ each)


def _central_tail(f: float, df1: float, df2: float, terms: Floats, upper: bool) -> Floats:
    """Return the tail at f of the beta (or gamma) distribution that goes with each Poisson term."""
    a = df1 / 2 + terms
    if np.isinf(df2):
        return np.asarray(special.gammaincc(a, f * df1 / 2) if upper else special.gammainc(a, f * df1 / 2))
    y = 1 / (1 + df1 * f / df2)  # the small side of the beta variable: 1 - y would round for great f
    if a[0] > BEYOND_BETA:
        return np.asarray(special.gammainc(df2 / 2, a * y) if upper else special.gammaincc(df2 / 2, a * y))
    return np.asarray(special.betainc(df2 / 2, a, y) if upper else special.betaincc(df2 / 2, a, y))


def _poisson_weights(terms: Floats, rate: float) -> Floats:
    """Return Poisson probabilities of the terms, scaled to sum to 1.

    For great rates the exponent is expanded about the rate, where its parts would cancel: with j = rate (1 + x) it is
    -rate ((1 + x) log(1 + x) - x) - log(1 + x) / 2. Source: Loader (2000), Fast and accurate computation of binomial probabilities.
    """
    if rate < 1000:
        exponent = special.xlogy(terms, rate) - special.gammaln(terms + 1)
    else:
        x = terms / rate - 1
        deviance = (1 + x) * np.log1p(x) - x if rate < 1e10 else x**2 / 2 - x**3 / 6 + x**4 / 12
        exponent = -rate * deviance - np.log1p(x) / 2 - 1 / (12 * terms)
    weight = np.exp(exponent - exponent.max())
    return np.asarray(weight / weight.sum(), dtype=np.float64)
