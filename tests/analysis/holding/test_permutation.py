"""Permutations made as products of two sets, against permutations drawn one by one."""

import numpy as np
import pandas as pd
import pytest

from analysis.anova import INTERACTION
from analysis.holding import permutation
from analysis.holding.bases import Bases
from analysis.holding.permutation import permuted, side_for
from tests.analysis.experiments import analysed, crossed

UNEQUAL = [[5, 3, 4], [4, 6, 5]]


def _bases(frame: pd.DataFrame, **choices: str) -> Bases:
    found = analysed(frame, **choices).analysed.bases
    assert found is not None
    return found


def _blocked(seed: int) -> pd.DataFrame:
    frame = crossed([[8, 8], [8, 7]], seed=seed, spread=3)
    return frame.assign(block=[f"k{k % 4}" for k in range(len(frame))])


def _one_by_one(bases: Bases, term: str, permutations: int, seed: int) -> float:
    """Return the p-value of Freedman and Lane's scheme with every permuted response fitted again by both models."""
    rng, basis = np.random.default_rng(seed), bases.questions[term]
    reduced, whole = basis.reduced[bases.stratum], bases.whole[bases.stratum]
    fitted = reduced @ np.linalg.lstsq(reduced, bases.values, rcond=None)[0]
    left = bases.values - fitted
    group = np.zeros(left.size) if bases.block is None else bases.block

    def f(y: np.ndarray) -> np.ndarray:
        small, large = (((y - x @ np.linalg.lstsq(x, y, rcond=None)[0]) ** 2).sum(axis=0) for x in (reduced, whole))
        return np.asarray((small - large) / large)

    by_block = np.argsort(group, kind="stable")
    shuffled = np.empty((left.size, permutations))
    for k in range(permutations):
        shuffled[by_block, k] = left[np.lexsort((rng.random(left.size), group))]
    return float((1 + np.sum(f(fitted[:, None] + shuffled) >= f(bases.values[:, None]))) / (1 + permutations))


@pytest.mark.parametrize(
    ("frame", "choices"), [(crossed(UNEQUAL, spread=3), {}), (_blocked(2), {"block": "block"}), (_blocked(5), {"model": "additive"})]
)
def test_products_agree_with_permutations_drawn_one_by_one(frame: pd.DataFrame, choices: dict[str, str]) -> None:
    bases = _bases(frame, **choices)
    for term, told in permuted(bases).items():
        plain = _one_by_one(bases, term, 3000, seed=4)
        assert told.p == pytest.approx(plain, abs=4 * np.hypot(told.error, np.sqrt(plain * (1 - plain) / 3000)))


def test_products_vary_no_more_than_independent_permutations() -> None:
    """N products are pairwise independent, so p varies by p (1 - p) / N: over 300 seeds the ratio has a standard error of 0.08."""
    bases = _bases(crossed(UNEQUAL, spread=3))
    side, target = 10, permuted(bases)[INTERACTION].p
    p = np.array([permuted(bases, side, seed)[INTERACTION].p for seed in range(300)])
    assert p.mean() == pytest.approx(target, abs=5 * np.sqrt(target / side**2 / 300) + 1 / side**2)
    assert 0.7 < p.var() / (target * (1 - target) / side**2) < 1.3


def test_permutations_stay_within_blocks() -> None:
    bases = _bases(_blocked(1), block="block")
    shuffler = permutation._Shuffler(bases, np.random.default_rng(1))
    drawn = shuffler.draws(50)
    assert (np.sort(drawn, axis=1) == np.arange(drawn.shape[1])).all()
    assert (shuffler.block[drawn] == shuffler.block).all()


def test_every_permutation_is_as_likely() -> None:
    """Five observations have 120 permutations: 5,184 products bring each about 43 times, within five standard deviations of 6.5."""
    shuffler = permutation._Shuffler(_bases(crossed([[2, 1], [1, 1]]), model="additive"), np.random.default_rng(3))
    outer, inner = shuffler.draws(72), shuffler.draws(72)
    _, counts = np.unique(inner[:, outer].reshape(-1, 5) @ (5 ** np.arange(5)), return_counts=True)
    assert counts.size == 120
    assert np.abs(counts - 5184 / 120).max() < 5 * 6.5


def test_with_too_many_observations_the_row_says_that_it_is_left_out() -> None:
    rng = np.random.default_rng(1)
    frame = pd.DataFrame({"a": rng.integers(0, 2, 300_000), "b": rng.integers(0, 2, 300_000), "y": rng.normal(size=300_000)})
    found = analysed(frame.assign(a="a" + frame["a"].astype(str), b="b" + frame["b"].astype(str)))
    assert side_for(found.analysed.bases) == 0
    row = found.holds[found.holds["analysis"] == "permutation of residuals"].iloc[0]
    assert np.isnan(row["p"])
    assert row["note"].startswith("Left out")
