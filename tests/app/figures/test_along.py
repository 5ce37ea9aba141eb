"""Levels that are amounts stand at their true spacing; what cannot be told apart there, or has no amounts, stands at equal steps."""

import numpy as np
import pandas as pd
import pytest

from analysis.findings import Findings
from app.figures import along, distributions, interaction
from app.look import DESK
from tests.app import designs, opening


def found_with(levels: tuple[object, ...], **choices: object) -> Findings:
    rng = np.random.default_rng(2)
    rows = [(kind, level, rng.normal()) for kind in ("p", "q") for level in levels for _ in range(3)]
    return opening.findings_of(pd.DataFrame(rows, columns=["a", "b", "y"]), **choices)


@pytest.mark.parametrize(
    ("levels", "spacing", "places"),
    [
        ((0.0, 10.0, 40.0), along.TRUE, [0, 0.5, 2]),
        ((1.0, 10.0, 100.0, 1000.0), along.LOGARITHMIC, [0, 1, 2, 3]),
        ((0.0, 1.0, 1000.0), along.EQUAL, [0, 1, 2]),
        (("low", "mid", "high"), along.EQUAL, [0, 1, 2]),
    ],
)
def test_the_spacing_follows_the_amounts(levels: tuple[object, ...], spacing: str, places: list[float]) -> None:
    found = found_with(levels)
    stood = along.along(found, "b")
    assert stood.spacing == spacing
    np.testing.assert_allclose(stood.places, places, rtol=1e-12)
    assert (stood.told == "") == (levels[0] == "low")
    assert stood.told in interaction.interaction_caption(found)


def test_groups_stand_at_equal_steps() -> None:
    stood = along.along(found_with((0.0, 10.0, 40.0), amounts={"b": False}), "b")
    assert (stood.spacing, stood.told) == (along.EQUAL, "")


@pytest.mark.parametrize("draw", [interaction.interaction, distributions.distributions])
def test_ticks_lines_and_points_stand_at_the_same_places(draw: object) -> None:
    found = found_with((0.0, 10.0, 40.0))
    figure = draw(found, DESK)  # type: ignore[operator]
    np.testing.assert_allclose(figure.layout.xaxis.tickvals, [0, 0.5, 2])
    assert list(figure.layout.xaxis.ticktext) == ["0.0", "10.0", "40.0"] or list(figure.layout.xaxis.ticktext) == ["0", "10", "40"]
    for trace in figure.data:
        middle = np.array([found.spacing("b")]).ravel() / 20
        nearest = np.abs(np.asarray(trace.x)[:, None] - middle).argmin(axis=1)
        assert (np.abs(np.asarray(trace.x) - middle[nearest]) < 0.25).all()


def test_a_row_of_units_names_the_axes() -> None:
    lines = [f"{d},{k},{d * 1.5 + n}\n" for d in (1, 2, 10) for k in "ab" for n in (0, 0.4, 0.9)]
    table = ("dose,light,mass\nmg,,g\n" + "".join(lines)).encode()
    found = opening.findings_of_file(table, "mass", "light", "dose")
    figure = interaction.interaction(found, DESK)
    assert figure.layout.yaxis.title.text == "mass (g)"
    assert figure.layout.xaxis.title.text == "dose (mg)"


def test_a_name_that_holds_its_unit_is_left_alone() -> None:
    assert interaction.interaction(designs.design("6 by 8"), DESK).layout.yaxis.title.text == "grain yield (kg/ha)"
