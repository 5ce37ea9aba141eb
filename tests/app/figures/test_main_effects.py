"""Averages of each factor are the engine's equal-weight means, with a warning where they hide an interaction."""

import numpy as np
import pytest

from app import answer_words
from app.figures import main_effects
from app.look import DESK
from tests.app import designs, opening


@pytest.mark.parametrize("scale", ["none", "log", "reciprocal"])
def test_means_and_intervals_are_the_engines(scale: str) -> None:
    found = designs.basil(scale=scale)
    cells_of_rows, rows, cells_of_columns, columns = main_effects.main_effects(found, DESK).data
    for drawn, factor in ((rows, "light"), (columns, "feed")):
        means = found.marginal_means[factor]
        told = means["told"].tolist() if scale != "none" else [{"estimate": m.mean, "lower": m.lower, "upper": m.upper}
                                                               for m in means.itertuples()]  # fmt: skip
        np.testing.assert_array_equal(drawn.y, [mean["estimate"] for mean in told])
        np.testing.assert_allclose(drawn.y + drawn.error_y.array, [mean["upper"] for mean in told], rtol=1e-12)
        np.testing.assert_allclose(drawn.y - drawn.error_y.arrayminus, [mean["lower"] for mean in told], rtol=1e-12)
    estimates = found.cells["estimate"] if scale == "none" else [cell["estimate"] for cell in found.cells["told"]]
    for drawn in (cells_of_rows, cells_of_columns):
        np.testing.assert_array_equal(np.sort(drawn.y), np.sort(estimates))


def test_an_average_over_an_interaction_is_warned_of() -> None:
    warning = answer_words.over_interaction(designs.basil())
    assert "what light does depends on feed" in warning
    assert warning in main_effects.main_effects_alt(designs.basil())
    assert answer_words.over_interaction(designs.design("undecided")) == ""
    dashboard = opening.station("answer", opening.sample())
    dashboard.get("button_group")[0].set_value(answer_words.AVERAGES).run()
    assert not dashboard.exception
    assert "These averages hide something" in opening.page(dashboard)


def test_what_cannot_be_averaged_is_left_out_and_said() -> None:
    found = designs.design("an empty cell")
    rows = main_effects.main_effects(found, DESK).data[1]
    assert np.isnan(rows.y).tolist() == (~found.marginal_means["light"]["estimable"]).tolist()
    assert "cannot be estimated" in main_effects.main_effects_caption(found)
