"""What pointing at the grid asks, and that the engine's numbers answer it."""

import pandas as pd
import pytest

from analysis.findings import Findings
from app import asked_words, asking
from app.asking import HEAD, Asked
from app.figures import differences, pointing
from app.look import DESK
from tests.app import designs, opening

FACTORS, ROWS, COLUMNS = ("light", "feed"), ("sun", "shade", "dark"), ("none", "A", "B")


def after(*places: tuple[int, int]) -> Asked:
    """Return the question after pointing at some places in turn."""
    now = Asked("light")
    for place in places:
        now = asking.pointed(now, place, FACTORS, ROWS, COLUMNS)
    return now


@pytest.mark.parametrize(
    ("places", "asked"),
    [
        ([(HEAD, HEAD)], Asked("feed")),
        ([(HEAD, HEAD - 1)], Asked("light")),
        ([(1, HEAD)], Asked("feed within light", "shade")),
        ([(HEAD, 2)], Asked("light within feed", "B")),
        ([(0, 0), (0, 2)], Asked(asking.CHOSEN, None, ((0, 0), (0, 2)))),
        ([(0, 0), (0, 0)], Asked(asking.CHOSEN)),
        ([(0, 0), (1, HEAD), (2, 2)], Asked(asking.CHOSEN, None, ((2, 2),))),
        ([(0, 0), (0, 1), (2, 1)], Asked(asking.CHOSEN, None, ((0, 0), (0, 1), (2, 1)))),
        ([(0, 0), (0, 1), (2, 1), (2, 0)], Asked(asking.CHOSEN, None, ((0, 0), (0, 1), (2, 1), (2, 0)))),
        ([(0, 0), (0, 1), (0, 2)], Asked(asking.CHOSEN, None, ((0, 2),))),
        ([(0, 0), (0, 1), (1, 0), (2, 2)], Asked(asking.CHOSEN, None, ((2, 2),))),
    ],
)
def test_a_click_asks(places: list[tuple[int, int]], asked: Asked) -> None:
    assert after(*places) == asked


def cells(*chosen: tuple[int, int]) -> Asked:
    """Return the question about some cells."""
    return Asked(asking.CHOSEN, None, chosen)


def answer(found: Findings, asked: Asked) -> pd.Series:
    """Return the one line that answers a question."""
    frame = asking.compared(found, asked)
    assert frame is not None
    assert len(frame) == 1
    return frame.iloc[0]


def test_two_cells_are_compared_in_the_smallest_family_that_holds_them() -> None:
    found = designs.basil()
    row = answer(found, cells((0, 2), (0, 1)))
    frame = found.comparisons["feed within light"]
    assert frame is not None
    pd.testing.assert_series_equal(
        row, frame[(frame["within"] == "Full sun") & (frame["right"] == "Feed A") & (frame["left"] == "Feed B")].iloc[0]
    )
    assert answer(found, cells((0, 0), (2, 0)))["within"] == "No feed"
    across = answer(found, cells((0, 0), (2, 1)))
    assert (across["left"], across["right"], across["family_size"]) == (["Deep shade", "Feed A"], ["Full sun", "No feed"], 66)


def test_four_cells_are_the_engines_difference_of_differences() -> None:
    found = designs.basil()
    row = answer(found, cells((2, 1), (0, 0), (2, 0), (0, 1)))
    contrasts = found.interaction_contrasts
    assert contrasts is not None
    told = next(c for c in contrasts.itertuples() if c.rows == ["Full sun", "Deep shade"] and c.columns == ["No feed", "Feed A"])
    for name in ("difference", "se", "t", "p", "lower", "upper"):
        assert row[name] == pytest.approx(getattr(told, name), rel=1e-12)


def test_against_a_control_other_pairs_are_asked_on_their_own() -> None:
    found = designs.basil(adjust="dunnett")
    assert answer(found, cells((0, 0), (0, 2)))["family_size"] == 3
    alone = answer(found, cells((0, 1), (0, 2)))
    assert alone["family_size"] == 1
    assert alone["p_adjusted"] == alone["p"]
    assert alone["difference"] == pytest.approx(found.cells.loc[2, "estimate"] - found.cells.loc[1, "estimate"], rel=1e-12)


def test_a_question_that_no_longer_fits_gives_way() -> None:
    found = designs.basil()
    assert asking.valid(found, Asked("soil")) == Asked("light")
    assert asking.valid(found, Asked("feed within light", "Moonlight")) == Asked("feed within light")
    assert asking.valid(found, cells((0, 0), (9, 9))) == cells((0, 0))


def test_every_mark_is_a_place_and_the_question_is_framed() -> None:
    found = designs.basil()
    asked = Asked("feed within light", "Half shade")
    bars = pointing.pointing(found, DESK, asking.places(found, asked)).data[1]
    assert len(bars.customdata) == 3 * 4 + 3 + 4 + 2
    framed = [tuple(place) for place, width in zip(bars.customdata, bars.marker.line.width, strict=True) if width > 1]
    assert framed == [(1, HEAD)]


@pytest.mark.parametrize(
    "asked", [Asked("feed"), Asked("feed within light", "Full sun"), cells((0, 0), (2, 1)), cells((0, 0), (0, 1), (1, 0), (1, 1))]
)
@pytest.mark.parametrize("design", ["3 by 4", "logarithm"])
def test_the_figure_draws_what_was_asked(asked: Asked, design: str) -> None:
    found = designs.design(design)
    frame = asking.compared(found, asked)
    assert frame is not None
    marks = differences.differences(found, DESK, asked.family, frame).data[0]
    told = [c["estimate"] for c in frame["told"]] if "told" in frame else frame["difference"].tolist()
    assert list(marks.x) == told
    for words in asked_words.answer(found, asked, frame)[:2]:
        assert words


def test_cells_and_slices_can_be_chosen_in_words() -> None:
    dashboard = opening.station("compare", opening.sample())
    dashboard.selectbox(key="compare_family").select("feed within light").run()
    dashboard.selectbox(key="compare_within").select("Half shade").run()
    assert "Within Half shade: feed" in opening.page(dashboard)
    assert "6 comparisons, adjusted together (Tukey-Kramer, all pairs)" in opening.page(dashboard)
    dashboard.selectbox(key="compare_family").select(asking.CHOSEN).run()
    dashboard.multiselect(key="compare_cells").set_value([(0, 0), (0, 1)]).run()
    assert not dashboard.exception
    assert "Within Full sun: Feed A against No feed" in opening.page(dashboard)


def test_a_trend_is_asked_where_levels_are_amounts() -> None:
    frame = pd.DataFrame(
        {
            "y": [float(k % 5) + k // 12 for k in range(36)],
            "a": [f"a{k % 2}" for k in range(36)],
            "b": [(0, 5, 20)[k // 12] for k in range(36)],
        }
    )
    study = opening.findings_of(frame).study
    dashboard = opening.station("compare", study)
    dashboard.selectbox(key="compare_family").select("trend of b").run()
    assert not dashboard.exception
    assert "How y follows b" in opening.page(dashboard)
    dashboard.get_by_key("compare_table")
