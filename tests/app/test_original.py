"""On the logarithmic scale figures and tables tell geometric means in the response's own units, as the engine hands them back."""

import numpy as np
import pytest

from analysis.findings import Findings
from analysis.rounding import significant
from app import original, records, sheets
from app.figures import grid, interaction
from app.look import DESK
from tests.app import designs, opening


@pytest.fixture
def found() -> Findings:
    return designs.design("logarithm")


@pytest.mark.parametrize("turned", [False, True])
def test_the_figure_draws_original_units_on_a_log_axis(found: Findings, turned: bool) -> None:
    figure = interaction.interaction(found, DESK, turned)
    line = "column" if turned else "row"
    levels = found.design[f"{line}_levels"]
    assert figure.layout.yaxis.type == "log"
    for level, points, means in zip(levels, figure.data[: len(levels)], figure.data[len(levels) :], strict=True):
        told = list(found.cells.loc[found.cells[line] == level, "told"])
        mine = found.observations.loc[found.observations[line] == level, "value"]
        np.testing.assert_array_equal(means.y, [cell["estimate"] for cell in told])
        np.testing.assert_array_equal(means.error_y.array, [cell["upper"] - cell["estimate"] for cell in told])
        np.testing.assert_array_equal(means.error_y.arrayminus, [cell["estimate"] - cell["lower"] for cell in told])
        np.testing.assert_array_equal(np.sort(points.y), np.sort(np.exp(mine)))
    low, high = figure.layout.yaxis.range
    assert all(low < note.y < high for note in figure.layout.annotations)
    assert all(low <= np.log10(tick) <= high for tick in figure.layout.yaxis.tickvals)


def test_captions_say_so(found: Findings) -> None:
    assert "geometric means" in interaction.interaction_caption(found)
    assert "logarithmic axis" in interaction.interaction_caption(found)
    assert "geometric mean in original units" in grid.grid_caption(found)
    assert "geometric" not in interaction.interaction_caption(designs.basil())


def test_grid_and_table_tell_original_units(found: Findings) -> None:
    texts, sheet = grid.grid(found, DESK).data[0].text, sheets.cell_means(found)
    shown = [cell for row in sheet.rows for cell in row]
    for cell, text in zip(records.lines(found.cells), texts, strict=True):
        assert f"<b>{significant(cell.told['estimate'])}</b>" in text
        assert original.with_interval(found, cell) in shown
        assert original.with_interval(found, cell).startswith(significant(cell.told["estimate"]))


def test_other_scales_stay_as_they_are_analysed() -> None:
    found = designs.basil()
    assert original.means(found, found.cells) is found.cells
    assert interaction.interaction(found, DESK).layout.yaxis.type is None


def test_what_runs_along_the_axis_can_be_switched() -> None:
    dashboard = opening.station("answer", opening.sample())
    dashboard.selectbox(key="choice_axis").select("light").run()
    assert not dashboard.exception
    dashboard.switch_page("stops/doubt.py").run()
    dashboard.switch_page("stops/answer.py").run()
    assert dashboard.selectbox(key="choice_axis").value == "light"
