"""Intervals of the noncentrality: against scipy, against every Poisson term summed, and against what must hold."""

import math

import numpy as np
import pytest
from scipy import special, stats

from analysis.distributions.noncentral_f import noncentrality_interval, tail_probability


@pytest.mark.parametrize(("f", "df1", "df2", "noncentrality"), [(0.4, 1, 3, 2.5), (3.0, 2, 36, 8), (5.5, 4, 8, 0), (40.0, 7, 120, 250)])
def test_tails_agree_with_scipy(f: float, df1: float, df2: float, noncentrality: float) -> None:
    below = special.ncfdtr(df1, df2, noncentrality, f)
    assert tail_probability(f, df1, df2, noncentrality, upper=False) == pytest.approx(below, rel=1e-9)
    assert tail_probability(f, df1, df2, noncentrality, upper=True) == pytest.approx(1 - below, abs=1e-12)


@pytest.mark.parametrize(("f", "df1", "df2", "noncentrality"), [(1010.0, 5, 60, 5000), (40.0, 3, 2, 9000), (900.0, 8, 1e5, 7100)])
def test_a_great_noncentrality_agrees_with_every_term_summed(f: float, df1: float, df2: float, noncentrality: float) -> None:
    # Johnson, Kotz and Balakrishnan (1995), equation 30.9; 60 standard deviations on either side leave out nothing.
    rate = noncentrality / 2
    terms = np.arange(max(0, int(rate - 60 * math.sqrt(rate))), int(rate + 60 * math.sqrt(rate)))
    whole = stats.poisson.pmf(terms, rate) @ special.betainc(df1 / 2 + terms, df2 / 2, df1 * f / (df1 * f + df2))
    assert tail_probability(f, df1, df2, noncentrality, upper=False) == pytest.approx(whole, rel=1e-9)


@pytest.mark.parametrize(("f", "df1", "df2"), [(9.5, 1, 36), (23.222, 2, 36), (4.0, 6, 3), (250.0, 3, 1), (1.9, 2400, 10000)])
@pytest.mark.parametrize("confidence", [0.8, 0.95, 0.999])
def test_bounds_put_f_at_the_tails(f: float, df1: float, df2: float, confidence: float) -> None:
    lower, upper = noncentrality_interval(f, df1, df2, confidence)
    tail = (1 - confidence) / 2
    assert stats.ncf.cdf(f, df1, df2, upper) == pytest.approx(tail, rel=1e-6)
    assert stats.ncf.sf(f, df1, df2, lower) == pytest.approx(tail, rel=1e-6) if lower else stats.f.sf(f, df1, df2) >= tail
    assert 0 <= lower < upper


def test_one_contrast_with_known_variance_is_a_normal_interval() -> None:
    # √F is |Z + √λ|: far from 0 the bounds are (√F ± 1.96)².
    lower, upper = noncentrality_interval(10.0**2, 1, math.inf, 0.95)
    z = stats.norm.isf(0.025)
    assert lower == pytest.approx((10 - z) ** 2, rel=1e-9)
    assert upper == pytest.approx((10 + z) ** 2, rel=1e-9)


def test_one_contrast_is_a_noncentral_t() -> None:
    # P(F <= f) = P(|T| <= √f) for a noncentral t with the root of λ.
    lower, upper = noncentrality_interval(3.1**2, 1, 14, 0.95)
    assert stats.nct.cdf(3.1, 14, math.sqrt(upper)) - stats.nct.cdf(-3.1, 14, math.sqrt(upper)) == pytest.approx(0.025, abs=1e-9)
    assert stats.nct.sf(3.1, 14, math.sqrt(lower)) + stats.nct.cdf(-3.1, 14, math.sqrt(lower)) == pytest.approx(0.025, abs=1e-9)


def test_a_huge_f_leaves_the_chi_square_of_its_error() -> None:
    # λ / F / df1 then varies like chi-square(df2) / df2 alone; a relative error of 1 / √λ is left.
    for f in (1e20, 1e100, 1e300):
        lower, upper = noncentrality_interval(f, 2, 16, 0.95)
        assert lower / f / 2 == pytest.approx(stats.chi2.ppf(0.025, 16) / 16, rel=1e-8)
        assert upper / f / 2 == pytest.approx(stats.chi2.ppf(0.975, 16) / 16, rel=1e-8)


def test_bounds_are_zero_where_no_noncentrality_fits() -> None:
    assert noncentrality_interval(1.0, 3, 20, 0.95)[0] == 0
    assert noncentrality_interval(0.01, 3, 20, 0.9) == (0, 0)
    assert noncentrality_interval(0.0, 3, 20, 0.95) == (0, 0)


def test_what_is_not_defined_is_not_a_number() -> None:
    assert noncentrality_interval(math.inf, 3, 20, 0.95) == (math.inf, math.inf)
    for f, df1, df2 in ((math.nan, 3, 20), (2.0, 0, 20), (2.0, 3, 0)):
        assert all(math.isnan(bound) for bound in noncentrality_interval(f, df1, df2, 0.95))
