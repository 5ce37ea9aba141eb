"""What an interval says against zero and against the smallest difference that matters."""

import numpy as np
import pytest

from analysis.verdicts import verdicts


@pytest.mark.parametrize(
    ("lower", "upper", "verdict"),
    [
        (2.1, 4.0, "larger_than_matters"),
        (-4.0, -2.1, "larger_than_matters"),
        (0.5, 4.0, "differs"),
        (0.5, 1.9, "differs_but_small"),
        (-1.9, 1.9, "no_difference_that_matters"),
        (-1.0, 4.0, "undecided"),
        (-2.0, 2.0, "undecided"),  # reaches D itself
        (float("nan"), float("nan"), "undecided"),
    ],
)
def test_with_a_difference_of_two_that_matters(lower, upper, verdict):
    assert verdicts(np.array([lower]), np.array([upper]), 2.0).tolist() == [verdict]


def test_without_it_only_zero_counts():
    found = verdicts(np.array([0.1, -0.1]), np.array([0.2, 0.2]), None)
    assert found.tolist() == ["differs", "undecided"]
