"""Values worth a look are named with their row and stay in the analysis."""

import pandas as pd
import pytest

import analysis
from analysis.implausible import suspicions
from analysis.study import Study
from tests.analysis.experiments import crossed


@pytest.fixture
def frame() -> pd.DataFrame:
    return crossed([[4, 4, 4], [4, 4, 4]])


def found(frame: pd.DataFrame, **choices: object) -> list[tuple[str, tuple[int, ...]]]:
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b", **choices)  # type: ignore[arg-type]
    return [(s.kind, s.rows) for s in suspicions(study)]


def test_nothing_is_odd_about_plain_data(frame: pd.DataFrame) -> None:
    assert found(frame) == []


@pytest.mark.parametrize("factor", [10, 0.1])
def test_a_slipped_decimal_mark_is_named(frame: pd.DataFrame, factor: float) -> None:
    frame.loc[5, "y"] *= factor
    assert found(frame) == [("ten_times", (6,))]
    assert found(frame, scale="log") == [("ten_times", (6,))]


def test_the_sentence_names_row_value_and_mates(frame: pd.DataFrame) -> None:
    frame["y"] = frame["y"].round(1)
    frame.loc[5, "y"] = 231.0
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b")
    (told,) = suspicions(study)
    mates = sorted(frame.loc[[4, 6, 7], "y"])
    assert told.sentence.startswith(f"Row 6: 231, while the others of a0 with b1 lie between {mates[0]:.12g} and {mates[-1]:.12g}.")
    assert analysis.analyse(study).design["observations"] == len(frame)


def test_a_wide_cell_has_no_odd_one(frame: pd.DataFrame) -> None:
    frame.loc[[0, 1, 2, 3], "y"] = [1.0, 9.0, 81.0, 729.0]
    assert found(frame) == []


def test_copied_replicates_are_named(frame: pd.DataFrame) -> None:
    frame.loc[[8, 9, 10, 11], "y"] = 12.25
    assert found(frame) == [("identical", (9, 10, 11, 12))]


def test_equal_counts_are_nothing_odd(frame: pd.DataFrame) -> None:
    frame["y"] = [k % 2 for k in range(len(frame))]
    frame.loc[[8, 9, 10, 11], "y"] = 1
    assert found(frame) == []


def test_a_lone_negative_value_is_named(frame: pd.DataFrame) -> None:
    frame.loc[7, "y"] *= -1
    assert ("negative", (8,)) in found(frame)


def test_many_negative_values_are_a_scale_with_two_sides(frame: pd.DataFrame) -> None:
    frame["y"] -= frame["y"].mean()
    assert found(frame) == []


def test_a_row_set_aside_is_looked_at_no_longer(frame: pd.DataFrame) -> None:
    frame.loc[5, "y"] *= 10
    assert found(frame, set_aside={6: "decimal mark slipped"}) == []
