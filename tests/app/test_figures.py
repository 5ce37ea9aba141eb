"""Figures show the engine's numbers, where the engine put them, whatever the names."""

import numpy as np
import pandas as pd
import pytest

from analysis.findings import Findings
from analysis.rounding import measured
from app import records
from app.figures import differences, distributions, effects, grid, interaction, main_effects, placing, residuals
from app.look import DESK, NIGHT, PRINT, PROJECTOR, SLIDE, Look
from tests.app import opening

LOOKS = [DESK, NIGHT, PROJECTOR, SLIDE, PRINT]
SAMPLES = ["basil_light_feed.csv", "coating_primer_cure.csv"]


@pytest.fixture(params=SAMPLES)
def findings(request: pytest.FixtureRequest) -> Findings:
    return opening.findings(opening.sample(request.param))


def random_frame(rows: int, columns: int, n: int, seed: int = 3) -> pd.DataFrame:
    """Return an invented layout with n values in each cell."""
    rng = np.random.default_rng(seed)
    a, b = np.repeat(np.arange(rows), columns * n), np.tile(np.repeat(np.arange(columns), n), rows)
    return pd.DataFrame({"y": a * 1.5 + b * b * 0.3 + rng.normal(size=a.size), "a": [f"a{i}" for i in a], "b": [f"b{j}" for j in b]})


@pytest.mark.parametrize("look", LOOKS, ids=lambda look: look.name)
def test_means_and_bars_are_the_engines(findings: Findings, look: Look) -> None:
    figure = interaction.interaction(findings, look)
    rows = findings.design["row_levels"]
    for level, line in zip(rows, figure.data[len(rows) :], strict=True):
        cells = findings.cells[findings.cells["row"] == level]
        np.testing.assert_array_equal(line.y, cells["estimate"])
        np.testing.assert_array_equal(line.y + line.error_y.array, cells["estimate"] + (cells["upper"] - cells["estimate"]))
        np.testing.assert_array_equal(line.y - line.error_y.arrayminus, cells["estimate"] - (cells["estimate"] - cells["lower"]))


def test_every_observation_is_drawn(findings: Findings) -> None:
    figure = interaction.interaction(findings, DESK)
    rows = findings.design["row_levels"]
    for level, points in zip(rows, figure.data[: len(rows)], strict=True):
        mine = findings.observations[findings.observations["row"] == level]
        assert sorted(points.y) == sorted(mine["value"])


def test_points_stand_by_their_own_column_and_line(findings: Findings) -> None:
    figure = interaction.interaction(findings, DESK)
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    for points, line in zip(figure.data[: len(rows)], figure.data[len(rows) :], strict=True):
        for x, (_, column, _) in zip(points.x, points.customdata, strict=True):
            assert abs(x - line.x[columns.index(column)]) < placing.step(len(rows)) / 2


def test_the_additive_model_draws_its_own_means() -> None:
    study = opening.sample()
    found = opening.findings_of(random_frame(3, 4, 5), model="additive")
    figure = interaction.interaction(found, DESK)
    drawn = np.concatenate([line.y for line in figure.data[3:]])
    np.testing.assert_array_equal(drawn, found.additive_means["mean"])
    assert "without interaction" in interaction.interaction_caption(found)
    assert "without interaction" not in interaction.interaction_caption(opening.findings(study))


def test_names_of_lines_never_touch() -> None:
    rng = np.random.default_rng(1)
    frame = pd.DataFrame({"y": rng.normal(size=96), "a": [f"level {k % 8}" for k in range(96)], "b": [f"b{k // 8 % 3}" for k in range(96)]})
    figure = interaction.interaction(opening.findings_of(frame), DESK)
    low, high = figure.layout.yaxis.range
    heights = np.sort([note.y for note in figure.layout.annotations])
    px = np.diff(heights) / (high - low) * (DESK.height - 5.5 * DESK.text)
    assert len(heights) == 8
    assert px.min() >= DESK.text * 1.25 - 1e-6


def test_labels_pushed_apart_stay_in_order_and_near() -> None:
    placed = placing.apart(np.array([3.0, 1.0, 1.1, 8.0]), np.ones(4))
    assert np.all(np.diff(np.sort(placed)) >= 1 - 1e-12)
    assert np.argsort(placed).tolist() == [1, 2, 0, 3]
    assert placed[3] == 8.0
    assert placed[1] + placed[2] == pytest.approx(2.1)  # two neighbours part around their middle


def test_very_many_points_are_thinned_and_the_caption_says_so() -> None:
    found = opening.findings_of(random_frame(2, 2, 3_000))
    figure = interaction.interaction(found, DESK)
    assert sum(len(points.y) for points in figure.data[:2]) == 4 * placing.MOST_POINTS
    for level, points in zip(found.design["row_levels"], figure.data[:2], strict=True):
        values = found.observations.loc[found.observations["row"] == level, "value"]
        assert (points.y.min(), points.y.max()) == (values.min(), values.max())
    assert "2000 only so many" in interaction.interaction_caption(found)
    assert "every observation" in interaction.interaction_caption(opening.findings(opening.sample()))


def test_many_cells_share_the_points_that_a_figure_can_hold() -> None:
    found = opening.findings_of(random_frame(3, 4, 2_100))
    figure = interaction.interaction(found, DESK)
    assert sum(len(points.y) for points in figure.data[:3]) == placing.MOST_DRAWN
    assert "1000 only so many" in interaction.interaction_caption(found)
    assert placing.most_of_a_cell(2_000, 12) == placing.MOST_POINTS  # nothing is thinned up to 2,000 in a cell


def test_an_empty_cell_leaves_a_gap() -> None:
    frame = random_frame(3, 3, 4)
    found = opening.findings_of(frame[~((frame["a"] == "a1") & (frame["b"] == "b2"))])
    line = interaction.interaction(found, DESK).data[3 + 1]
    assert np.isnan(line.y[2])
    assert np.isfinite(line.y[:2]).all()
    assert not line.connectgaps
    assert "empty" in grid.grid(found, DESK).data[0].text[5]


def test_the_grid_tells_the_engines_numbers(findings: Findings) -> None:
    texts = grid.grid(findings, DESK).data[0]
    for cell, x, y, text in zip(records.lines(findings.cells), texts.x, texts.y, texts.text, strict=True):
        assert (findings.design["row_levels"][y], findings.design["column_levels"][x]) == (cell.row, cell.column)
        assert f"<b>{measured(cell.mean, cell.se)}</b>" in text
        assert f"n {cell.n}" in text


def test_the_grid_of_counts_names_what_is_odd() -> None:
    frame = random_frame(2, 3, 4)
    empty = (frame["a"] == "a0") & (frame["b"] == "b0")
    single = ((frame["a"] == "a1") & (frame["b"] == "b2")).to_numpy().nonzero()[0][1:]
    found = opening.findings_of(frame[~empty].drop(index=single, errors="ignore"))
    texts = grid.counts(found.design, DESK).data[0].text
    assert "empty" in texts[0]
    assert "single" in texts[5]
    assert "most" in texts[1]


@pytest.mark.parametrize("rows", [2, 12])
def test_small_and_large_grids_are_legible(rows: int) -> None:
    found = opening.findings_of(random_frame(rows, rows, 3))
    figure = grid.grid(found, DESK)
    assert figure.data[0].textfont.size >= 9
    assert figure.layout.height / rows >= grid.LOWEST


@pytest.mark.parametrize("family", ["light", "feed", "cells", "light within feed", "feed within light"])
def test_differences_are_the_engines(family: str) -> None:
    found = opening.findings(opening.sample())
    frame, marks = differences.shown(found, family), differences.differences(found, DESK, family).data[0]
    np.testing.assert_array_equal(marks.x, frame["difference"])
    np.testing.assert_array_equal(marks.error_x.array, frame["upper_adjusted"] - frame["difference"])
    np.testing.assert_array_equal(marks.error_x.arrayminus, frame["difference"] - frame["lower_adjusted"])
    assert len(set(marks.y)) == len(frame)


def test_a_filled_mark_is_an_interval_without_zero() -> None:
    found = opening.findings(opening.sample())
    frame, marks = differences.shown(found, "cells"), differences.differences(found, DESK, "cells").data[0]
    without_zero = (frame["lower_adjusted"] > 0) | (frame["upper_adjusted"] < 0)
    assert [symbol == "circle" for symbol in marks.marker.symbol] == without_zero.tolist()


def test_a_long_family_is_cut_and_the_caption_says_so() -> None:
    found = opening.findings(opening.sample())
    assert len(differences.shown(found, "cells")) == differences.MOST_LINES
    assert "24 that lie farthest" in differences.differences_caption(found, "cells")
    assert "all 66" in differences.differences_caption(found, "cells")


def test_residuals_are_the_engines(findings: Findings) -> None:
    drawn = np.concatenate([trace.x for trace in residuals.by_cell(findings, DESK).data])
    np.testing.assert_allclose(np.sort(drawn), np.sort(findings.observations["residual"]), rtol=0, atol=0)
    along = residuals.along_fitted(findings, DESK).data
    np.testing.assert_array_equal(np.sort(np.concatenate([t.y for t in along])), np.sort(findings.observations["residual"]))
    np.testing.assert_array_equal(np.sort(np.concatenate([t.x for t in along])), np.sort(findings.observations["fitted"]))


def test_quantiles_rise_with_the_ordered_residuals(findings: Findings) -> None:
    _, line, points = residuals.against_bell(findings, DESK).data
    np.testing.assert_array_equal(points.y, np.sort(findings.observations["residual"]))
    assert np.all(np.diff(points.x) > 0)
    assert points.x[0] == pytest.approx(-points.x[-1])
    assert (line.x[0], line.x[-1]) == (line.y[0], line.y[-1])


def test_names_that_look_like_markup_are_inert() -> None:
    frame = random_frame(2, 2, 4).replace({"a0": "<b>loud</b> & <a href='x'>link</a>", "b1": "🌿" + "long name " * 8})
    found = opening.findings_of(frame)
    drawn = [
        interaction.interaction(found, DESK),
        grid.grid(found, DESK),
        grid.counts(found.design, DESK),
        differences.differences(found, DESK, "a within b"),
        residuals.by_cell(found, DESK),
        distributions.distributions(found, DESK),
        distributions.distributions(found, DESK, boxes=True),
        main_effects.main_effects(found, DESK),
        effects.effects(found, DESK),
    ]
    for figure in drawn:
        assert "<b>loud" not in figure.to_json().replace("\\u003c", "<")
        assert "<a href" not in figure.to_json().replace("\\u003c", "<")


def test_captions_and_descriptions_tell_n_and_names() -> None:
    found = opening.findings(opening.sample())
    told = [
        interaction.interaction_alt(found),
        grid.grid_alt(found),
        differences.differences_alt(found, "feed"),
        residuals.by_cell_alt(found),
        residuals.along_fitted_alt(found),
        residuals.against_bell_alt(found),
    ]
    assert all("yield (g)" in text for text in told)
    assert "Full sun" in told[0]
    assert "n = 6 in each cell" in interaction.interaction_caption(found)
    assert "95\u202f% confidence intervals" in interaction.interaction_caption(found)
    assert "6 comparisons" in differences.differences_caption(found, "feed")


def test_every_count_of_the_grid_is_read_out() -> None:
    found = opening.findings_of(random_frame(3, 9, 2))
    told = grid.counts_alt(found.design)
    for row in found.design["row_levels"]:
        for column in found.design["column_levels"]:
            assert f"{row} with {column}: " in told
    assert "more combinations" not in told
    assert "; and 25 more combinations." in grid.counts_alt(opening.findings_of(random_frame(15, 15, 2)).design)
