"""No table is told that a second computation does not confirm."""

import pytest

from analysis import anova
from analysis.refusals import TwoRoutesDisagree
from tests.analysis.experiments import analysed, crossed

UNEQUAL = [[3, 5, 2], [4, 2, 6]]


@pytest.mark.parametrize("factor", [1 + 1e-7, 1.5, 0.0])
def test_a_fault_in_the_first_route_withholds_the_result(monkeypatch, factor):
    true = anova.distance
    monkeypatch.setattr(anova, "distance", lambda strata, larger, smaller: factor * true(strata, larger, smaller))
    with pytest.raises(TwoRoutesDisagree, match="the result is withheld"):
        _ = analysed(crossed(UNEQUAL)).tables


def test_a_wrong_degree_of_freedom_withholds_the_result(monkeypatch):
    monkeypatch.setattr("analysis.surfaces.Surface.rank", 5)
    with pytest.raises(TwoRoutesDisagree):
        _ = analysed(crossed(UNEQUAL)).tables


@pytest.mark.parametrize("choices", [{}, {"model": "additive"}, {"block": "block"}, {"block": "block", "model": "additive"}])
@pytest.mark.parametrize("counts", [UNEQUAL, [[4, 4], [4, 4]], [[4, 0, 3], [2, 5, 4]], [[2, 3, 0, 0], [0, 0, 3, 2]]])
def test_sound_tables_are_confirmed(counts, choices):
    frame = crossed(counts)
    frame["block"] = [f"k{i % 3}" for i in range(len(frame))]
    assert set(analysed(frame, **choices).tables) == set(anova.TYPES)
