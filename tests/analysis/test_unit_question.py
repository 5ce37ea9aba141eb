"""What each answer to the question of the unit leaves to judge chance by."""

import analysis
from analysis.study import Study
from analysis.unit_question import unit_answers
from tests.analysis.experiments import crossed
from tests.analysis.test_units import readings


def test_each_answer_tells_its_units_and_residual_df() -> None:
    study = Study(analysis.read_table(readings(), name="leaves"), "y", "a", "b")
    rows, pots = unit_answers(study, "pot")
    assert (rows.unit, rows.units, rows.residual_df) == (None, 48, 44)  # 48 rows less 4 cells
    assert (pots.unit, pots.units, pots.residual_df) == ("pot", 12, 8)  # 12 pots less 4 cells


def test_an_answer_that_cannot_be_analysed_says_why() -> None:
    frame = crossed([[4, 4], [4, 4]]).assign(who=[k % 4 if k < 15 else 9 for k in range(16)])
    _, who = unit_answers(Study(analysis.read_table(frame, name="people"), "y", "a", "b"), "who")
    assert who.units is None
    assert who.residual_df is None
    assert "more than one combination" in str(who.refusal)
