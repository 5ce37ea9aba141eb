"""The envelope of ordered residuals: how often a whole normal sample lies inside."""

import numpy as np
import pytest

from analysis.envelope import envelope


@pytest.mark.parametrize("count", [6, 24, 100, 1000])
def test_ninety_five_of_a_hundred_normal_samples_lie_inside(count: int) -> None:
    """2,000 samples: the share has a standard error of 0.005, the level found by simulation one of 0.01 at most."""
    values = np.sort(np.random.default_rng(5).normal(size=(2000, count)), axis=1)
    values = (values - values.mean(axis=1, keepdims=True)) / values.std(axis=1, ddof=1, keepdims=True)
    low, high = envelope(count, 0.95)
    assert np.mean(((values >= low) & (values <= high)).all(axis=1)) == pytest.approx(0.95, abs=0.025)


def test_the_envelope_is_symmetric_and_the_same_each_time() -> None:
    low, high = envelope(30, 0.9)
    assert (high == -low[::-1]).all()
    assert (low < high).all()
    assert (envelope(30, 0.9)[0] == low).all()


def test_a_skewed_sample_leaves_the_envelope() -> None:
    values = np.sort(np.random.default_rng(2).exponential(size=60))
    values = (values - values.mean()) / values.std(ddof=1)
    low, high = envelope(60, 0.95)
    assert ((values < low) | (values > high)).any()
