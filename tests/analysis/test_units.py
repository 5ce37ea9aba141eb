"""Repeated readings of one unit count once."""

import numpy as np
import pandas as pd
import pytest

from analysis.refusals import UnitInSeveralCells
from tests.analysis.experiments import analysed


def readings(labels: str = "own") -> pd.DataFrame:
    """Return 2 × 2 cells of 3 pots with 4 leaves each; pots labelled apart, or alike in every cell."""
    rng = np.random.default_rng(11)
    rows = []
    for a in ("dry", "wet"):
        for b in ("low", "high"):
            for pot in range(3):
                level = rng.normal(10, 2)
                label = f"{a}-{b}-{pot}" if labels == "own" else f"pot {pot}"
                rows += [(a, b, label, level + rng.normal(0, 0.1)) for _ in range(4)]
    return pd.DataFrame(rows, columns=["a", "b", "pot", "y"])


def test_units_are_the_observations():
    findings = analysed(readings(), unit="pot")
    assert findings.model.residual_df == 12 - 4
    assert findings.design["observations"] == 48
    assert findings.cells["n"].tolist() == [3, 3, 3, 3]


def test_the_table_is_that_of_the_unit_means():
    frame = readings()
    means = frame.groupby(["a", "b", "pot"], sort=False, as_index=False)["y"].mean()
    ours, plain = analysed(frame, unit="pot").tables["type_3"], analysed(means).tables["type_3"]
    np.testing.assert_allclose(ours["ss"], plain["ss"], rtol=1e-12)


def test_the_notes_tell_what_averaging_did_to_the_degrees_of_freedom():
    notes = " ".join(analysed(readings(), unit="pot").notes)
    assert "48 readings were averaged to 12 units" in notes
    assert "8 with the unit as the observation; 44 if every reading had been counted as independent" in notes


def test_labels_used_alike_in_every_cell_are_several_units():
    findings = analysed(readings("alike"), unit="pot")
    assert findings.model.residual_df == 8
    assert "same labels" in " ".join(findings.notes)


def test_a_unit_under_two_combinations_is_a_repeated_measurement():
    frame = readings()
    frame.loc[frame["pot"] == "dry-low-0", "pot"] = "wet-low-0"
    with pytest.raises(UnitInSeveralCells, match="repeated measurement"):
        analysed(frame, unit="pot")


def test_readings_are_averaged_before_the_scale_changes():
    frame = readings()
    frame["y"] = np.exp(frame["y"] / 10)
    means = frame.groupby(["a", "b", "pot"], sort=False, as_index=False)["y"].mean()
    ours, plain = analysed(frame, unit="pot", scale="log"), analysed(means, scale="log")
    np.testing.assert_allclose(ours.cells["estimate"], plain.cells["estimate"], rtol=1e-12)
