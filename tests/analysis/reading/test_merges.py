"""What merges are proposed for levels that look alike."""

import numpy as np
import pytest

from analysis.reading import look_alikes
from analysis.table import Levels


def levels(*counts: tuple[str, int]) -> Levels:
    codes = np.repeat(np.arange(len(counts)), [n for _, n in counts])
    return Levels(codes, tuple(label for label, _ in counts), None, ())


@pytest.mark.parametrize(
    ("found", "merges"),
    [
        ([("Control", 22), ("Contol", 2)], {"Contol": "Control"}),
        ([("Beta", 3), ("BETA", 1), ("beta", 2)], {"BETA": "Beta", "beta": "Beta"}),
        ([("beta", 2), ("Beta", 2)], {"Beta": "beta"}),
        ([("half shade", 4), ("half-shade", 1)], {"half-shade": "half shade"}),
        ([("Вeta", 1), ("Beta", 5)], {"Вeta": "Beta"}),  # a Cyrillic capital Ve
        ([("T1", 4), ("T2", 4), ("line A", 2), ("line B", 2)], {}),
    ],
)
def test_the_rarer_spelling_is_taken_for_the_commoner(found, merges):
    assert look_alikes.merges(levels(*found)) == merges
