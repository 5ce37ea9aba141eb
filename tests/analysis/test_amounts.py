"""Numbers as levels: which look like amounts and which like codes, and what the answer changes."""

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis import amounts
from analysis.log import log
from analysis.study import Study
from tests.analysis.experiments import analysed


def experiment(levels: list[float], name: str = "b") -> pd.DataFrame:
    chance = np.random.default_rng(11)
    rows = [(a, level, float(chance.normal(10))) for a in ("p", "q") for level in levels for _ in range(4)]
    return pd.DataFrame(rows, columns=["a", name, "y"])


@pytest.mark.parametrize(
    ("levels", "are", "why"),
    [
        ([0, 50, 200], True, "0, 50 and 200 lie unequally far apart"),
        ([0, 10, 20], True, "run in steps of 10"),
        ([0.1, 0.2, 0.3], True, "run in steps of 0.1"),
        ([1, 2, 3, 4], False, "1, 2, 3 and 4 run in steps of one"),
        ([2021, 2022, 2023], False, "run in steps of one"),
        ([5, 40], False, "are two numbers"),
        ([0, 1, 2, 3, 4, 5, 8], True, "0 to 8 lie unequally far apart"),
    ],
)
def test_amounts_are_told_from_codes(levels: list[float], are: bool, why: str) -> None:
    study = analysed(experiment(levels)).study
    asked = amounts.question(study, "b")
    assert asked is not None
    assert (asked.are_amounts, asked.chosen) == (are, False)
    assert why in asked.reason


def test_a_unit_makes_numbers_amounts() -> None:
    study = analysed(experiment([1, 2, 3], "dose (mg)"), column="dose (mg)").study
    asked = amounts.question(study, "dose (mg)")
    assert asked is not None
    assert asked.are_amounts
    assert "come with a unit" in asked.reason
    text = "a,dose,y\n" + "".join(
        f"{a},{dose} mg,{k}.5\n" for k, (a, dose) in enumerate((a, d) for a in "pq" for d in (1, 2, 3) for _ in "12")
    )
    read = amounts.question(Study(analysis.read_table(text.encode(), name="t.csv"), "y", "a", "dose"), "dose")
    assert read is not None
    assert read.are_amounts


def test_words_are_not_asked_about() -> None:
    assert amounts.question(analysed(experiment([1, 2, 3])).study, "a") is None


@pytest.mark.parametrize(("levels", "are"), [([0, 50, 200], False), ([1, 2, 3], True)])
def test_the_answer_decides_over_trends_and_spacing(levels: list[float], are: bool) -> None:
    asked, answered = analysed(experiment(levels)), analysed(experiment(levels), amounts={"b": are})
    assert (asked.spacing("b") is None) is are
    assert answered.spacing("b") == (tuple(float(level) for level in levels) if are else None)
    assert set(answered.trends["factor"]) == ({"b"} if are else set())
    for table in ("type_3", "type_2"):  # the questions about the factor are the same either way
        pd.testing.assert_frame_equal(asked.tables[table], answered.tables[table])


def test_linear_part_and_departure_add_up_to_the_factor_in_a_balanced_layout() -> None:
    # Three levels leave one df beside the straight trend (Fisher and Yates, 1938).
    found = analysed(experiment([0, 50, 200]))
    overall = found.trends[found.trends["within"].isna() & found.trends["part"].isin(["linear", "quadratic"])]
    whole = found.used_table.set_index("term").loc["b"]
    assert whole["df"] == 2
    assert overall["ss"].sum() == pytest.approx(whole["ss"], rel=1e-12)


def test_the_answer_is_kept_in_the_study_and_told_in_the_log() -> None:
    study = analysed(experiment([0, 50, 200])).study
    groups = Study(study.table, "y", "a", "b", amounts={"b": False})
    assert Study.from_json(groups.to_json(), study.table).amounts == {"b": False}
    assert groups.fingerprint != study.fingerprint
    told = [entry.sentence for entry in log([study, groups, study], {})]
    assert told[-2:] == ["The levels of “b” count as groups.", "The levels of “b” count as they look again."]
