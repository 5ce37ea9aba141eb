"""Text is measured, wrapped and shortened so that it fits and names stay different."""

import itertools

import pandas as pd
import pytest
from hypothesis import given
from hypothesis import strategies as st

from app.exports import fit, plot
from app.exports.series import mixed
from app.exports.setting import Dress, fitted
from tests.app import designs

texts = st.text(alphabet=st.characters(codec="utf-8", exclude_categories=("Cc", "Cs")), min_size=1, max_size=80)
one_name = st.text(alphabet="abcdefgh mnop", min_size=1, max_size=60).map(lambda text: " ".join(text.split()) or "x")
names = st.lists(one_name, min_size=2, max_size=8, unique=True)


@given(texts, st.sampled_from([18, 24, 32]), st.floats(1.0, 12.0))
def test_no_line_is_wider_than_its_column(text: str, points: int, inches: float) -> None:
    for line in fit.wrap(text, points, inches):
        assert fit.width(line, points) <= inches or len(line) == 1


@given(texts, st.floats(1.0, 12.0), st.integers(1, 3))
def test_a_shortened_text_fits(text: str, inches: float, lines: int) -> None:
    assert len(fit.wrap(fit.shorten(text, 18, inches, lines), 18, inches)) <= lines


@given(names, st.floats(0.8, 4.0), st.integers(1, 2))
def test_names_stay_different_and_fit(labels: list[str], inches: float, lines: int) -> None:
    short = fit.names(labels, 18, inches, lines)
    assert len(set(short)) == len(labels)
    assert all(len(fit.wrap(name, 18, inches)) <= lines for name in short)


def test_names_keep_what_tells_them_apart() -> None:
    short = fit.names(["Treated with alpha at full strength", "Treated with alpha at half strength"], 18, 2.2)
    assert [name.partition("…")[2] for name in short] == ["full strength", "half strength"]


def test_what_fits_is_left_alone() -> None:
    assert fit.shorten("1 319 kg", 18, 2.0) == "1 319 kg"
    assert fit.names(["low", "high"], 18, 2.0) == ("low", "high")


@given(st.floats(-1e6, 1e6), st.floats(1e-3, 1e6))
def test_an_axis_holds_its_values_in_a_few_round_steps(low: float, reach: float) -> None:
    axis = plot.axis_for(low, low + reach)
    slack = 1e-6 * axis.step
    assert axis.low <= low + slack
    assert axis.high >= low + reach - slack
    assert 2 <= round((axis.high - axis.low) / axis.step) <= 8


@pytest.mark.parametrize("name", designs.DESIGNS)
def test_names_of_lines_do_not_touch(name: str) -> None:
    drawn = plot.plan(designs.design(name))
    row = fit.height(1, 18) * (drawn.axis.high - drawn.axis.low) / drawn.tall
    stands = sorted([*((line.name_height, line.name.count("\n") + 1) for line in drawn.lines), (drawn.heading_height, 1)])
    for (below, low_lines), (above, high_lines) in itertools.pairwise(stands):
        assert above - below >= row * (low_lines + high_lines) / 2 * (1 - 1e-9)
    assert drawn.axis.low <= stands[0][0]
    assert stands[-1][0] <= drawn.axis.high * (1 + 1e-9)


def test_a_table_that_must_keep_its_rows_loses_words() -> None:
    long = pd.DataFrame({"question": ["What of it? " * 30] * 3, "answer": ["So it is. " * 40] * 3})
    held = fitted(long, Dress(every_row=True))
    assert len(held.rows) == 4
    assert held.shortened
    assert sum(held.heights) <= plot.BODY.tall + 1e-9


def test_a_hue_is_thinned_by_its_ground() -> None:
    assert mixed("000000", "FFFFFF", 0.5) == "808080"
    assert mixed("1F5F8B", "FBFAF6", 1.0) == "1F5F8B"
