"""Trends over amounts and contrasts of cells, against a published split of a sum of squares and against regression."""

import numpy as np
import pandas as pd
import pytest
import statsmodels.formula.api as smf

import analysis
from analysis.refusals import NotEstimable, UnknownLevel
from analysis.trends import polynomial
from tests.analysis.experiments import analysed, crossed
from tests.conftest import ROOT


@pytest.fixture(scope="module")
def oats() -> analysis.Findings:
    """Yates (1935), JRSS Suppl. 2, 181-247, read as a two-factor block design."""
    table = analysis.read_table(ROOT / "tests" / "reference" / "oats" / "data.csv")
    return analysis.analyse(analysis.Study(table=table, response="yield", row_factor="variety", column_factor="nitrogen", block="block"))


def part(findings: analysis.Findings, name: str, within: str | None = None) -> pd.Series:
    frame = findings.trends
    where = frame["within"].isna() if within is None else frame["within"] == within
    return frame[where & (frame["part"] == name)].iloc[0]


def test_oats_linear_part_and_the_rest(oats):
    # Sums of squares as published: nitrogen linear 19536, the rest 484 on 2 df.
    assert part(oats, "linear")["ss"] == pytest.approx(19536, abs=0.5)
    assert part(oats, "quadratic")["ss"] + part(oats, "departure")["ss"] == pytest.approx(484, abs=0.5)


def test_parts_add_up_to_the_factor_when_balanced(oats):
    whole = oats.used_table.set_index("term").at["nitrogen", "ss"]
    assert sum(part(oats, name)["ss"] for name in ("linear", "quadratic", "departure")) == pytest.approx(whole, rel=1e-12)


def test_slopes_inside_levels_average_to_the_overall_slope(oats):
    inside = [part(oats, "linear", level)["estimate"] for level in oats.observed.row.levels]
    assert np.mean(inside) == pytest.approx(part(oats, "linear")["estimate"], rel=1e-12)


def test_the_slope_is_the_one_of_a_regression_through_the_means(oats):
    means = oats.marginal_means["nitrogen"]
    slope = np.polyfit(np.array(oats.observed.column.amounts), means["mean"].to_numpy(), 1)[0]
    assert part(oats, "linear")["estimate"] == pytest.approx(slope, rel=1e-10)


def test_different_slopes_are_tested_as_a_product_of_numbers_would_be():
    rng = np.random.default_rng(3)
    dose = np.tile(np.repeat([0.0, 1.0, 4.0], 6), 2)
    kind = np.repeat(["p", "q"], 18)
    frame = pd.DataFrame({"a": kind, "b": dose, "y": 5 + np.where(kind == "p", 1, 2) * dose + rng.normal(size=36)})
    ours = part(analysed(frame), "slopes differ")
    # Second route: the linear-by-kind term added to the cell-means model's complement, by extra sum of squares.
    full = smf.ols("y ~ C(a) * C(b)", frame).fit()
    centred = dose - dose.mean()
    alone = smf.ols("y ~ C(a) + C(b)", frame).fit()
    with_slopes = smf.ols("y ~ C(a) + C(b) + C(a):x", frame.assign(x=centred)).fit()
    assert ours["ss"] == pytest.approx(alone.ssr - with_slopes.ssr, rel=1e-9)
    assert ours["f"] == pytest.approx((alone.ssr - with_slopes.ssr) / full.mse_resid, rel=1e-9)


@pytest.mark.parametrize("amounts", [(0.0, 50.0, 200.0, 1000.0), (1.0, 2.0), (2.0, 10.0, 100.0), tuple(1e9 + np.arange(5.0))])
def test_weights_answer_their_own_polynomial_and_no_other(amounts):
    x = np.array(amounts)
    slope, bend, beyond = polynomial(x)
    assert slope @ x == pytest.approx(1, rel=1e-6)
    assert slope.sum() == pytest.approx(0, abs=1e-9 * np.abs(slope).max())
    if x.size > 2:
        assert bend @ (x - x.mean()) ** 2 == pytest.approx(1, rel=1e-6)
        assert bend @ (x - x.mean()) == pytest.approx(0, abs=1e-6 * np.abs(bend).max() * np.ptp(x))
    assert beyond.shape == (max(x.size - 3, 0), x.size)


def test_words_have_no_trend():
    assert analysed(crossed([[3, 3], [3, 3]])).trends.empty


def test_a_contrast_of_two_cells_is_their_comparison():
    findings = analysed(crossed([[3, 5], [4, 2]]))
    row = findings.comparisons["cells"].iloc[0]
    ours = findings.contrast({tuple(row["left"]): 1, tuple(row["right"]): -1})
    assert (ours.estimate, ours.se, ours.p) == pytest.approx((row["difference"], row["se"], row["p"]), rel=1e-12)


def test_a_contrast_that_weighs_to_one_is_a_mean():
    findings = analysed(crossed([[3, 5], [4, 2]]).assign(y=lambda f: f["y"] + 1e6))
    mean = findings.marginal_means["a"].iloc[0]
    ours = findings.contrast({("a0", "b0"): 0.5, ("a0", "b1"): 0.5})
    assert (ours.estimate, ours.se) == pytest.approx((mean["mean"], mean["se"]), rel=1e-12)


def test_a_contrast_over_an_empty_cell_is_refused():
    findings = analysed(crossed([[3, 0], [4, 2], [3, 3]]))
    with pytest.raises(NotEstimable, match="a0 × b1"):
        findings.contrast({("a0", "b1"): 1, ("a0", "b0"): -1})
    with pytest.raises(UnknownLevel, match="a9"):
        findings.contrast({("a9", "b1"): 1})


@pytest.mark.parametrize("within", [None, "Victory"])
def test_the_drawn_lines_are_regressions_through_the_means(oats, within):
    amounts = np.array(oats.observed.column.amounts)
    if within is None:
        means = oats.marginal_means["nitrogen"]["mean"].to_numpy()
    else:
        means = oats.cells.loc[oats.cells["row"] == within, "estimate"].to_numpy()
    frame = oats.trend_curves
    drawn = frame[frame["within"].isna() if within is None else frame["within"] == within]
    for name, degree in (("straight", 1), ("curved", 2)):
        np.testing.assert_allclose(drawn[name], np.polyval(np.polyfit(amounts, means, degree), drawn["amount"]), rtol=1e-9)


def test_two_amounts_have_a_line_and_no_curve():
    rng = np.random.default_rng(5)
    frame = pd.DataFrame({"a": np.tile(["p", "q"], 8), "b": np.repeat([1.0, 2.0], 8), "y": rng.normal(size=16)})
    drawn = analysed(frame).trend_curves
    assert drawn["curved"].isna().all()
    assert drawn["straight"].notna().all()
