"""What an adjustment costs is read off the comparisons that it adjusted."""

import pytest
from scipy import stats

from analysis import families
from tests.analysis.experiments import analysed, crossed

COUNTS = [[4, 4, 4], [4, 4, 4]]


@pytest.mark.parametrize(("adjust", "divided_by"), [("bonferroni", 3), ("none", 1)])
def test_the_price_is_the_ratio_of_two_quantiles(adjust: str, divided_by: int) -> None:
    found = analysed(crossed(COUNTS), adjust=adjust)
    df = found.fit["residual_df"]
    price = families.price(found.comparisons["b"])
    assert price is not None
    # By hand: Bonferroni's quantile of t over the plain one, for three pairs.
    assert price.wider == pytest.approx(stats.t.isf(0.025 / divided_by, df) / stats.t.isf(0.025, df), rel=1e-12)


def test_what_is_lost_is_counted() -> None:
    found = analysed(crossed(COUNTS, spread=3.0), adjust="scheffe", confidence=0.6)
    frame = found.comparisons["cells"]
    price = families.price(frame)
    assert price is not None
    alone = int((frame["p"] < 0.4).sum())
    together = int((frame["p_adjusted"] < 0.4).sum())
    assert price.lost == alone - together > 0


def test_nothing_compared_has_no_price() -> None:
    frame = analysed(crossed(COUNTS)).comparisons["b"]
    assert families.price(frame.iloc[:0]) is None
