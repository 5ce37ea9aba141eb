"""What is counted of a study that cannot be analysed, and that the counts are those of the object where it can."""

import pytest

import analysis
from analysis import counted
from analysis.refusals import ConstantResponse, Refusal, RoleMissing, TooFewObservations
from analysis.study import Study
from tests.analysis.experiments import analysed, crossed


@pytest.mark.parametrize("counts", [[[4, 4], [4, 4]], [[3, 0, 1], [2, 5, 4]]])
def test_the_crossing_is_that_of_the_object(counts: list[list[int]]) -> None:
    found = analysed(crossed(counts), set_aside={1: "pot fell over"})
    crossing = counted.crossing(found.study)
    assert {name: found.design[name] for name in crossing} == crossing


def test_a_constant_response_is_still_counted() -> None:
    frame = crossed([[2, 3], [2, 2]]).assign(y=7.0)
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b")
    with pytest.raises(ConstantResponse):
        analysis.analyse(study)
    assert counted.crossing(study)["counts"] == [[2, 3], [2, 2]]


def test_too_few_observations_are_still_counted() -> None:
    study = Study(analysis.read_table(crossed([[1, 1], [1, 1]]), name="experiment"), "y", "a", "b")
    with pytest.raises(TooFewObservations):
        analysis.analyse(study)
    assert counted.crossing(study)["counts"] == [[1, 1], [1, 1]]


def test_a_scale_that_does_not_fit_is_no_reason_not_to_count() -> None:
    frame = crossed([[2, 2], [2, 2]])
    frame.loc[0, "y"] = -1.0
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b", scale="log")
    with pytest.raises(Refusal):
        analysis.analyse(study)
    assert counted.crossing(study)["observations"] == 8


def test_without_two_factors_there_is_nothing_to_count() -> None:
    study = Study(analysis.read_table(crossed([[2, 2], [2, 2]]), name="experiment"), "y", "a")
    with pytest.raises(RoleMissing):
        counted.crossing(study)
    assert counted.level_rows(study, "b") == {"b0": 4, "b1": 4}


def test_a_level_left_out_counts_the_rows_that_it_would_bring() -> None:
    table = analysis.read_table(crossed([[2, 3], [2, 2], [1, 4]]), name="experiment")
    study = Study(table, "y", "a", "b", keep={"b": ["b0"]}, set_aside={1: "pot fell over"})
    assert counted.level_rows(study, "b") == {"b0": 4, "b1": 9}


def test_the_account_adds_up_and_tells_why() -> None:
    frame = crossed([[4, 4, 2], [4, 4, 2]])
    frame.loc[4, "y"] = float("nan")
    found = analysed(frame, keep={"b": ["b0", "b1"]}, set_aside={1: "pot fell over", 9: "of a level left out", 5: "empty anyhow"})
    told = counted.account(found.study, found.design["observations"], found.design["left_out"])
    assert (told.analysed, told.aside, told.unkept, told.unusable) == (14, 2, 3, 1)
    assert told.whole == len(frame)
    assert not told.in_grid


def test_a_grid_counts_observations() -> None:
    table = analysis.read_table(b"kind \\ dose,low,high\np,1.2,1.4\np,1.3,1.6\nq,2.1,2.2\nq,2.0,2.6\n", name="grid.csv")
    assert counted.in_grid(table)
