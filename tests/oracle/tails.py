"""Tail areas and their inverses at 50 digits: F, t, chi-square, noncentral F, studentised range, comparisons with a control."""

from collections.abc import Callable
from functools import cache

from mpmath import mp, mpf

mp.dps = 50
HALF = mpf(1) / 2


@cache
def f_tail(f: mpf, df1: int, df2: int) -> mpf:
    """P(F > f)."""
    return mpf(1) if f <= 0 else mp.betainc(mpf(df2) / 2, mpf(df1) / 2, 0, df2 / (df2 + df1 * f), regularized=True)


def t_two_sided(t: mpf, df: int) -> mpf:
    """P(|T| > |t|)."""
    return f_tail(t * t, 1, df)


def chi2_tail(x: mpf, df: int) -> mpf:
    """P(chi-square > x)."""
    return mp.gammainc(mpf(df) / 2, x / 2, mp.inf, regularized=True)


def root(function: Callable[[mpf], mpf], low: mpf, high: mpf) -> mpf:
    """Find where an increasing function crosses zero: widen upwards, then halve the bracket 75 times (22 digits)."""
    while function(high) < 0:
        low, high = high, 2 * high
    for _ in range(75):
        middle = (low + high) / 2
        low, high = (middle, high) if function(middle) < 0 else (low, middle)
    return (low + high) / 2


@cache
def f_point(alpha: mpf, df1: int, df2: int) -> mpf:
    """The value that F exceeds with probability alpha."""
    return root(lambda f: alpha - f_tail(f, df1, df2), mpf(0), mpf(1))


def t_point(alpha: mpf, df: int) -> mpf:
    """The value that |T| exceeds with probability alpha."""
    return mp.sqrt(f_point(alpha, 1, df))


def noncentral_f_below(f: mpf, df1: int, df2: int, lam: mpf) -> mpf:
    """P(F' <= f): Poisson mixture of central beta areas, each from the one before (Johnson, Kotz and Balakrishnan 1995, ch. 30)."""
    a, b, x = mpf(df1) / 2, mpf(df2) / 2, df1 * f / (df1 * f + df2)
    area = mp.betainc(a, b, 0, x, regularized=True)
    drop = mp.power(x, a) * mp.power(1 - x, b) / (a * mp.beta(a, b))
    weight, total, used, j = mp.exp(-lam / 2), mpf(0), mpf(0), 0
    while 1 - used > mpf(10) ** -40 and j < 20000:
        total, used = total + weight * area, used + weight
        area, drop = area - drop, drop * x * (a + b + j) / (a + 1 + j)
        j += 1
        weight *= lam / 2 / j
    return total


@cache
def noncentrality(f: mpf, df1: int, df2: int, confidence: mpf) -> tuple[mpf, mpf]:
    """Confidence limits of the noncentrality of an observed F, 0 where even 0 is too large (Steiger 2004, Psychol. Methods 9, 164-182)."""
    tail = (1 - confidence) / 2
    return noncentrality_at(f, df1, df2, 1 - tail), noncentrality_at(f, df1, df2, tail)


def noncentrality_at(f: mpf, df1: int, df2: int, below: mpf) -> mpf:
    """The noncentrality for which the observed F has this share of the distribution below it."""
    if 1 - f_tail(f, df1, df2) <= below:
        return mpf(0)
    return root(lambda lam: below - noncentral_f_below(f, df1, df2, lam), mpf(0), mpf(8))


STEP = mpf(6) / 100  # of log r; the spread of log s is at least 0.09 up to 60 degrees of freedom, so the rule errs by less than 1e-19
LOWEST, HIGHEST = mp.log(mpf(10) ** -4), mp.log(mpf(26))  # below, the range is surely larger; above, surely smaller


def scale_density(s: mpf, df: int) -> mpf:
    """Density, per unit of log s, of s = sqrt(chi-square / df)."""
    return 2 * mp.exp(mpf(df) / 2 * mp.log(mpf(df) / 2) - mp.loggamma(mpf(df) / 2) + df * mp.log(s) - df * s * s / 2)


@cache
def range_beyond(r: mpf, means: int) -> mpf:
    """P(range of standard normals > r), by the trapezoidal rule, which is exact to all digits for such bells."""
    with mp.workdps(28):
        parts = 4 if means < 7 else 8  # a power of a normal area is the narrower the higher the power
        step = mpf(1) / parts
        inside = (mp.npdf(z) * (mp.ncdf(z) - mp.ncdf(z - r)) ** (means - 1) for z in (step * i for i in range(-11 * parts, 11 * parts + 1)))
        return 1 - means * step * mp.fsum(inside)


@cache
def range_nodes(means: int) -> tuple[tuple[mpf, mpf], ...]:
    """The normal range at steps of log r, shared by every quantile and every number of degrees of freedom."""
    count = int((HIGHEST - LOWEST) / STEP)
    points = [mp.exp(LOWEST + STEP * i) for i in range(count + 1)]
    return tuple((r, range_beyond(r, means)) for r in points)


@cache
def studentised_range_tail(q: mpf, means: int, df: int) -> mpf:
    """P(Q > q) for the studentised range of `means` means with `df` degrees of freedom, for df up to 60."""
    if means == 2:
        return t_two_sided(q / mp.sqrt(2), df)
    if q == 0:
        return mpf(1)
    with mp.workdps(28):
        between = STEP * mp.fsum(scale_density(r / q, df) * share for r, share in range_nodes(means))
        below = mp.gammainc(mpf(df) / 2, 0, df * (mp.exp(LOWEST - STEP / 2) / q) ** 2 / 2, regularized=True)
        return between + below


@cache
def studentised_range_point(alpha: mpf, means: int, df: int) -> mpf:
    """The studentised range that is exceeded with probability alpha, to 15 digits."""
    if means == 2:
        return mp.sqrt(2) * t_point(alpha, df)
    start = mp.sqrt(2) * t_point(alpha / (means * (means - 1) / 2), df)  # Bonferroni: a little too large
    return mp.findroot(lambda q: studentised_range_tail(q, means, df) - alpha, (start * mpf("0.93"), start), solver="secant", tol=1e-36)


def many_to_one_tail(d: mpf, loadings: tuple[mpf, ...], df: int) -> mpf:
    """P(max |T_i| > d) for correlations l_i l_j (Dunnett 1955, JASA 50, 1096-1121), by the trapezoidal rule in both directions."""
    if len(loadings) == 1:
        return t_two_sided(d, df)
    with mp.workdps(20):
        step, total = mpf(1) / 4, mpf(0)
        for u in range(-40, 21):
            s = mp.exp(u * STEP)
            density = scale_density(s, df)
            if density > mpf(10) ** -16:
                bells = (mp.npdf(step * i) * all_inside(step * i, d * s, loadings) for i in range(-34, 35))
                total += density * STEP * step * mp.fsum(bells)
        return 1 - total


def all_inside(z: mpf, bound: mpf, loadings: tuple[mpf, ...]) -> mpf:
    """P(every |l_i z + sqrt(1 - l_i^2) e_i| < bound) for the control's deviate z."""
    spreads = [(load, mp.sqrt(1 - load * load)) for load in loadings]
    return mp.fprod(mp.ncdf((bound - load * z) / spread) - mp.ncdf((-bound - load * z) / spread) for load, spread in spreads)
