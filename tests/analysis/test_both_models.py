"""Both models can be told side by side, whichever is analysed."""

import pandas as pd
import pytest

from tests.analysis.experiments import analysed, crossed

COUNTS = [[3, 4, 5], [4, 2, 3]]


@pytest.mark.parametrize("kind", ["type_1", "type_2", "type_3"])
def test_the_model_with_interaction_is_the_same_from_either_side(kind: str) -> None:
    frame = crossed(COUNTS)
    full, additive = analysed(frame), analysed(frame, model="additive")
    assert full.tables_full is full.tables
    assert additive.tables_full is not None
    assert full.tables_additive is not None
    pd.testing.assert_frame_equal(additive.tables_full[kind], full.tables[kind])
    pd.testing.assert_frame_equal(full.tables_additive[kind], additive.tables[kind])


def test_one_value_a_cell_leaves_no_model_with_interaction() -> None:
    assert analysed(crossed([[1, 1, 1], [1, 1, 1], [1, 1, 1]])).tables_full is None
