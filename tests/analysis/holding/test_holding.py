"""The table of defensible analyses: against refits, F tests and what it must say."""

import numpy as np
import pandas as pd
import pytest
from scipy import stats
from statsmodels.stats import oneway

from analysis.anova import INTERACTION
from analysis.coding import contrast_rows
from analysis.holding import agreement, table, welch
from analysis.holding.permutation import permuted
from analysis.plain import plain
from tests.analysis.experiments import analysed, crossed

UNEQUAL = [[5, 3, 4], [4, 6, 5]]


def _blocked() -> pd.DataFrame:
    frame = crossed([[6, 6], [6, 5]], seed=3)
    frame["block"] = [f"k{k % 3}" for k in range(len(frame))]
    return frame


@pytest.mark.parametrize(
    ("frame", "choices"), [(crossed(UNEQUAL), {}), (_blocked(), {"block": "block"}), (crossed(UNEQUAL), {"model": "additive"})]
)
def test_leaving_one_out_equals_fitting_again(frame: pd.DataFrame, choices: dict[str, str]) -> None:
    found = analysed(frame, **choices)
    kind = "type_3" if found.layout.analysed.interaction else "type_2"
    for k in range(len(frame)):
        again = analysed(frame.drop(index=k), **choices)
        p = again.tables[kind].set_index("term")["p"]
        for term, told in found.analysed.without.items():
            estimate = again.layout.analysed.cells.combined(found.analysed.contrasts[term][None])
            assert told.p[k] == pytest.approx(p[term], rel=1e-10, abs=1e-14)
            assert told.effect[k] == pytest.approx(estimate.value[0] + 0.0, rel=1e-10, abs=1e-12)
            assert told.se[k] == pytest.approx(np.sqrt(again.fit["residual_ms"] * estimate.unit_variance[0]), rel=1e-10)


@pytest.mark.parametrize("seed", range(4))
def test_permutation_agrees_with_f_on_normal_data(seed: int) -> None:
    """Source: Freedman and Lane (1983): on normal data both estimate the same tail, up to Monte Carlo error and O(1/n)."""
    rng = np.random.default_rng(seed)
    frame = crossed([[20, 14, 17], [16, 20, 18]], seed=seed).assign(y=rng.normal(size=105))
    found = analysed(frame)
    f = found.tables["type_3"].set_index("term")["p"]
    for term, told in permuted(found.analysed.bases).items():
        assert told.error == pytest.approx(np.sqrt(told.p * (1 - told.p) / told.permutations))
        assert told.p == pytest.approx(f[term], abs=4 * told.error + 0.012)


def test_permutation_gives_the_same_each_time() -> None:
    bases = analysed(crossed(UNEQUAL)).analysed.bases
    assert permuted(bases) == permuted(bases)


def _test_of_groups(groups: list[np.ndarray]) -> welch.WelchJames:
    means, variances, n = (np.array([measure(group) for group in groups]) for measure in (np.mean, lambda g: g.var(ddof=1), np.size))
    return welch.welch_james(means, variances, n, contrast_rows(len(groups)))


def test_with_two_cells_welch_james_is_welchs_t() -> None:
    """Source: scipy.stats.ttest_ind(equal_var=False); with one contrast of two means the statistic is Welch's t squared."""
    rng = np.random.default_rng(1)
    one, other = rng.normal(size=9), rng.normal(1, 3, size=5)
    assert _test_of_groups([one, other]).p == pytest.approx(stats.ttest_ind(one, other, equal_var=False).pvalue, rel=1e-10)


def test_with_one_factor_welch_james_is_welchs_f() -> None:
    """Source: statsmodels.stats.oneway.anova_oneway(use_var="unequal"), Welch (1951), Biometrika 38, 330-336."""
    rng = np.random.default_rng(2)
    groups = [spread * rng.normal(size=n) for n, spread in ((4, 4), (12, 1), (7, 2), (9, 1))]
    told, welchs = _test_of_groups(groups), oneway.anova_oneway(groups, use_var="unequal", welch_correction=True)
    assert (told.f, told.df2, told.p) == pytest.approx((welchs.statistic, welchs.df_denom, welchs.pvalue), rel=1e-10)


def test_the_analysis_told_comes_first_and_every_question_has_its_row() -> None:
    found = analysed(crossed(UNEQUAL))
    first = found.holds.iloc[:3]
    assert set(first["analysis"]) == {table.AS_ANALYSED}
    told = found.tables["type_3"].set_index("term")
    assert first.set_index("term")["p"].to_dict() == pytest.approx(told.loc[[INTERACTION, "a", "b"], "p"].to_dict(), rel=1e-10)
    assert first["same"].all()
    assert (first["lower"] < first["effect"]).all()
    assert (first["effect"] < first["upper"]).all()


def test_effects_are_those_of_the_comparisons() -> None:
    found = analysed(crossed(UNEQUAL), adjust="none")
    effect = found.holds.set_index(["analysis", "term"]).loc[(table.AS_ANALYSED, "b")]
    largest = found.comparisons["b"].assign(size=lambda frame: frame["difference"].abs()).sort_values("size").iloc[-1]
    assert effect["effect"] == pytest.approx(largest["size"], rel=1e-10)
    assert sorted(np.abs([effect["lower"], effect["upper"]])) == pytest.approx(
        sorted(np.abs([largest["lower"], largest["upper"]])), rel=1e-9
    )


def test_each_block_is_left_out_once() -> None:
    names = analysed(_blocked(), block="block").holds["analysis"].unique()
    assert [name for name in names if name.startswith("without block")] == ["without block k0", "without block k1", "without block k2"]


def test_an_answer_that_hangs_on_unequal_spread_is_told() -> None:
    """A quarter of the observations carry four times the spread and no effect is there: some shuffles decide only as analysed."""
    spread = np.repeat([1.0, 1.0, 4.0, 4.0], [12, 12, 4, 4])
    frames = [crossed([[12, 12], [4, 4]]).assign(y=spread * np.random.default_rng(seed).normal(size=32)) for seed in range(8)]
    told = [analysed(frame) for frame in frames]
    apart = [found for found in told if agreement.dissenting(found.holds)]
    assert apart
    assert all(found.holds_sentence.startswith("The answer to") for found in apart)


@pytest.mark.parametrize("counts", [[[1, 1, 1], [1, 1, 1], [1, 1, 1]], [[3, 0, 3], [3, 3, 3]], [[2, 2], [2, 2]], [[4, 1], [3, 3]]])
def test_small_and_incomplete_layouts_have_a_table(counts: list[list[int]]) -> None:
    found = analysed(crossed(counts))
    assert len(found.holds) >= 3
    assert found.holds_sentence
    assert {"analysis", "term", "p", "effect", "lower", "upper", "same"} <= set(plain(found.holds)[0])


def test_progress_is_told_after_each_analysis() -> None:
    steps: list[tuple[int, int]] = []
    held = table.holds(analysed(crossed(UNEQUAL)).analysed, lambda done, of: steps.append((done, of)))
    count = held["analysis"].nunique()
    assert steps == [(k, count) for k in range(1, count + 1)]
