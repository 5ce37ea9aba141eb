"""What the layout allows is said in words, and what it forbids is refused."""

import numpy as np
import pandas as pd
import pytest

from analysis.design import refuse_one_level
from analysis.refusals import BlockIsFactor, ConstantResponse, FactorsGoTogether, LevelForEveryRow, OneLevel, TooFewObservations
from tests.analysis.experiments import analysed, crossed


def told(findings) -> str:
    return " ".join(findings.notes)


def test_an_empty_cell_is_named_with_what_follows():
    findings = analysed(crossed([[3, 3], [3, 0], [3, 3]]))
    assert "No observation for a1 × b1" in told(findings)
    assert findings.used["table"] == "type_2"
    assert findings.design["empty_cells"] == [["a1", "b1"]]


def test_estimable_degrees_of_freedom_with_an_empty_cell():
    table = analysed(crossed([[3, 3], [3, 0], [3, 3]])).tables["type_2"].set_index("term")
    # filled cells - a - b + 1 = 5 - 3 - 2 + 1
    assert table.at["interaction", "df"] == 1
    assert table.loc[["a", "b", "interaction", "residual"], "df"].sum() == table.at["total", "df"]


def test_parts_of_an_unconnected_layout_are_named():
    findings = analysed(crossed([[3, 3, 0, 0], [3, 3, 0, 0], [0, 0, 3, 3], [0, 0, 3, 3]]))
    assert not findings.design["connected"]
    assert "a0, a1 with b0, b1; a2, a3 with b2, b3" in told(findings)
    compared = findings.comparisons["cells"]
    # Filled cells can always be compared with each other: 8 of them, 28 pairs, and no pair with an empty one.
    assert compared["difference"].notna().sum() == 28
    assert set(compared["family_size"]) == {28}
    assert findings.marginal_means["a"]["mean"].isna().all()


def test_one_observation_a_cell_leaves_the_interaction_untested():
    findings = analysed(crossed([[1, 1, 1], [1, 1, 1], [1, 1, 1]]))
    assert findings.answers[0].verdict == "not_tested"
    assert not findings.model.interaction
    assert "interaction cannot be tested" in told(findings)
    assert findings.checks["nonadditivity"] is not None


def test_nested_and_lonely_levels_are_named():
    nested = analysed(crossed([[3, 0], [3, 0], [0, 3], [0, 3]]), model="additive")
    assert "“a” is nested in “b”" in told(nested)
    lonely = analysed(crossed([[3, 3], [3, 3], [3, 0]]))
    assert "“a2” of “a” was tried with “b0” of “b” only" in told(lonely)


def test_factors_that_go_together_are_refused_by_name():
    with pytest.raises(FactorsGoTogether, match="“a” and “b” go together"):
        analysed(crossed([[3, 0], [0, 3]]))


def test_a_block_that_is_a_factor_is_refused_by_name():
    frame = crossed([[3, 3], [3, 3]])
    with pytest.raises(BlockIsFactor, match="“k” and factor “a”"):
        analysed(frame.assign(k=frame["a"].str.upper()), block="k")


def test_a_constant_response_is_refused():
    with pytest.raises(ConstantResponse, match=r"0\.1 in all 12 usable rows"):
        analysed(crossed([[3, 3], [3, 3]]).assign(y=0.1))


def test_a_factor_with_a_level_for_every_row_is_refused():
    frame = crossed([[3, 3], [3, 3]])
    with pytest.raises(LevelForEveryRow, match="different level in each of its 12 rows"):
        analysed(frame.assign(a=[f"plot {i}" for i in range(12)]))


def test_too_few_observations_are_refused_with_a_way_out():
    with pytest.raises(TooFewObservations, match="without interaction"):
        analysed(crossed([[2, 1, 1], [1, 1, 1]]))


def test_one_level_is_the_one_way_case_from_python_and_refused_at_the_shell():
    findings = analysed(crossed([[4], [5], [3]]))
    groups = [group["y"].to_numpy() for _, group in crossed([[4], [5], [3]]).groupby("a")]
    within = sum(((g - g.mean()) ** 2).sum() for g in groups)  # common practice: the one-way table
    table = findings.tables["type_2"].set_index("term")
    assert table.at["residual", "ss"] == pytest.approx(within, rel=1e-12)
    assert table.at["a", "df"] == 2
    assert len(findings.comparisons["a"]) == 3
    assert findings.to_dict()["comparisons"]["b"] == []
    with pytest.raises(OneLevel, match="only one level, “b0”"):
        refuse_one_level(findings.observed)


def test_cells_without_any_spread_withhold_tests_and_say_so():
    frame = pd.DataFrame({"a": ["p", "p", "q", "q"] * 3, "b": ["u", "v"] * 6, "y": [1.0, 2.0, 3.0, 5.0] * 3})
    findings = analysed(frame)
    whole = findings.to_dict()
    assert all(row["f"] is None and row["p"] is None for row in whole["tables"]["type_3"])
    assert any("fits every observation exactly" in note for note in whole["design"]["notes"])
    assert np.isfinite(findings.tables["type_3"].set_index("term").at["interaction", "ss"])
