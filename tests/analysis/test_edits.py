"""Rows set aside and levels renamed or merged: every row is still accounted for, and nothing else changes."""

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis.refusals import ReasonMissing
from analysis.study import Study
from tests.analysis.experiments import analysed, crossed


@pytest.fixture
def frame() -> pd.DataFrame:
    return crossed([[4, 4, 4], [4, 4, 4]])


def test_a_row_set_aside_is_left_out_with_its_reason(frame):
    findings = analysed(frame, set_aside={3: "pot fell over"})
    assert findings.design["left_out"] == [{"row": 3, "why": "set aside: pot fell over"}]
    assert findings.design["observations"] + len(findings.design["left_out"]) == len(frame)
    without = analysed(frame.drop(index=2))
    np.testing.assert_allclose(findings.tables["type_3"]["ss"].astype(float), without.tables["type_3"]["ss"].astype(float), rtol=1e-12)


def test_setting_a_row_aside_needs_a_reason(frame):
    with pytest.raises(ReasonMissing, match="Row 3 is to be set aside without a reason"):
        analysed(frame, set_aside={3: "  "})


def test_merged_levels_are_analysed_as_one(frame):
    merged = analysed(frame, relabel={"b": {"b2": "b1"}})
    plain = analysed(frame.assign(b=frame["b"].replace("b2", "b1")))
    assert merged.design["column_levels"] == ["b0", "b1"]
    np.testing.assert_allclose(merged.tables["type_3"]["ss"].astype(float), plain.tables["type_3"]["ss"].astype(float), rtol=1e-12)
    assert "“b2” is analysed as “b1”." in merged.notes


def test_a_renamed_level_keeps_its_place(frame):
    assert analysed(frame, relabel={"b": {"b0": "control"}}).design["column_levels"] == ["control", "b1", "b2"]


def test_a_merge_into_a_later_level_stands_where_that_level_stood(frame):
    assert analysed(frame, relabel={"b": {"b0": "b2"}}).design["column_levels"] == ["b1", "b2"]


def test_levels_to_keep_go_by_their_new_names(frame):
    findings = analysed(frame, relabel={"b": {"b0": "control"}}, keep={"b": ["b2", "control"]})
    assert findings.design["column_levels"] == ["b2", "control"]


def test_edits_survive_writing_and_reading_a_study(frame):
    table = analysis.read_table(frame, name="experiment")
    study = Study(table, "y", "a", "b", relabel={"b": {"b0": "control"}}, set_aside={3: "pot fell over"})
    again = Study.from_json(study.to_json(), table)
    assert again.fingerprint == study.fingerprint
    assert again.set_aside == {3: "pot fell over"}
