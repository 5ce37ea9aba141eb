"""Distributions by cell draw the engine's quartiles and every observation, whatever scale is analysed."""

import numpy as np
import pytest

from analysis.findings import Findings
from app.figures import distributions
from app.look import DESK
from tests.app import designs, opening

NUMBERS = {"lowerfence": "lowest", "q1": "lower_quartile", "median": "median", "q3": "upper_quartile", "upperfence": "highest"}


@pytest.fixture(params=["3 by 4", "logarithm", "6 by 8"])
def found(request: pytest.FixtureRequest) -> Findings:
    return designs.design(request.param)


@pytest.mark.parametrize("turned", [False, True])
def test_boxes_are_the_engines_quartiles(turned: bool) -> None:
    found = designs.basil(scale="sqrt")
    side = "column" if turned else "row"
    boxes = distributions.distributions(found, DESK, turned, boxes=True).data
    for level, box in zip(found.design[f"{side}_levels"], boxes, strict=True):
        mine = found.five_numbers[found.five_numbers[side] == level]
        for drawn, name in NUMBERS.items():
            np.testing.assert_array_equal(getattr(box, drawn), mine[name])


def test_points_and_medians_are_the_engines(found: Findings) -> None:
    rows = found.design["row_levels"]
    traces = distributions.distributions(found, DESK).data
    for level, points, medians in zip(rows, traces[::2], traces[1::2], strict=True):
        mine = found.observations.loc[found.observations["row"] == level, "value"].to_numpy()
        np.testing.assert_array_equal(np.sort(points.y), np.sort(found.observed.scale.back(mine)))
        np.testing.assert_array_equal(medians.y, found.five_numbers.loc[found.five_numbers["row"] == level, "median"])


def test_a_cell_with_few_observations_shows_points_instead_of_a_box() -> None:
    found = designs.design("an empty cell")  # 2 to 5 in a cell
    traces = distributions.distributions(found, DESK, boxes=True).data
    n = found.five_numbers["n"].to_numpy()
    assert sum(len(trace.q1) for trace in traces if trace.type == "box") == (n >= distributions.FEWEST).sum()
    drawn = sum(len(trace.y) for trace in traces if trace.type == "scatter" and trace.marker.symbol != "line-ew")
    assert drawn == n[n < distributions.FEWEST].sum()
    assert "shows its points" in distributions.distributions_caption(found, boxes=True)


def test_boxes_suit_cells_with_many_observations() -> None:
    assert not distributions.suits_boxes(designs.basil())
    many = designs.findings_of(designs.frame(("u", "v"), ("p", "q"), lambda i, j: i + j, lambda i, j: 30, 1.0))
    assert distributions.suits_boxes(many)


def test_caption_and_description_tell_what_is_drawn() -> None:
    found = opening.findings(opening.sample())
    assert "every observation, n = 6 in each cell" in distributions.distributions_caption(found)
    assert "upper quartile" in distributions.distributions_caption(found, boxes=True)
    assert "Full sun with No feed: median" in distributions.distributions_alt(found)
