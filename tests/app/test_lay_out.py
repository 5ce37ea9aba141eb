"""What Lay out changes: levels, rows and their reasons, each taken back by undo."""

import html

import pytest

import analysis
from analysis.study import Study
from app import lay_out_words, words
from tests.analysis.experiments import crossed
from tests.analysis.test_units import readings
from tests.app import opening


@pytest.fixture
def misspelt() -> Study:
    lines = (opening.SAMPLES / "basil_light_feed.csv").read_text(encoding="utf-8").replace("No feed", "no feed", 3)
    table = analysis.read_table(lines.encode(), name="pots.csv")
    return Study(table, "yield (g)", "light", "feed")


def test_a_merge_is_offered_and_taken(misspelt: Study) -> None:
    dashboard = opening.station("lay_out", misspelt)
    assert "look-alikes taken for one" in opening.page(dashboard)
    assert "merge them if they are one" not in opening.page(dashboard)
    assert html.escape("is “no feed” (3 rows) the same as “No feed” (15 rows)? They differ only in case.") in opening.page(dashboard)
    dashboard.button(key="column_merge_0").click().run()
    assert opening.study_of(dashboard).relabel == {"feed": {"no feed": "No feed"}}
    assert "the same as" not in opening.page(dashboard)
    dashboard.button(key="undo").click().run()
    assert "the same as" in opening.page(dashboard)
    assert not dashboard.exception


def test_a_merge_refused_is_not_offered_again(misspelt: Study) -> None:
    dashboard = opening.station("lay_out", misspelt)
    assert "the same as" in opening.page(dashboard)
    dashboard.button(key="column_apart_0").click().run()
    assert "the same as" not in opening.page(dashboard)
    assert opening.study_of(dashboard).relabel == {}
    dashboard.button(key="undo").click().run()
    assert "the same as" in opening.page(dashboard)


@pytest.mark.parametrize(
    ("press", "levels"),
    [
        ("row_0_down", ["Half shade", "Full sun"]),
        ("row_1_up", ["Half shade", "Full sun"]),
        ("row_0_out", ["Half shade"]),
    ],
)
def test_levels_move_and_are_left_out(press: str, levels: list[str]) -> None:
    study = opening.sample()
    dashboard = opening.station("lay_out", study)
    dashboard.button(key=press).click().run()
    assert list(opening.study_of(dashboard).keep["light"])[: len(levels)] == levels
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is study
    assert not dashboard.exception


def test_a_level_left_out_is_taken_back_in() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    last = len(opening.findings(opening.sample()).design["row_levels"]) - 1
    dashboard.button(key="row_0_out").click().run()
    dashboard.button(key=f"row_{last}_back").click().run()
    assert opening.study_of(dashboard).fingerprint == opening.sample().fingerprint


def test_a_level_is_renamed_by_writing_its_name() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    dashboard.text_input(key="row_0_name").set_value("Open sky").run()
    assert opening.findings(opening.study_of(dashboard)).design["row_levels"][0] == "Open sky"
    dashboard.text_input(key="row_0_name").set_value(" ").run()
    assert "needs a name" in opening.page(dashboard)
    assert dashboard.text_input(key="row_0_name").value == "Open sky"


def test_the_control_level_is_chosen() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    dashboard.selectbox(key="column_control").select("No feed").run()
    assert opening.study_of(dashboard).control == {"feed": "No feed"}


def test_rows_are_set_aside_with_a_reason_and_put_back() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    dashboard.text_input(key="rows_named").set_value("3, 5-6")
    dashboard.text_input(key="rows_why").set_value("pot fell over")
    dashboard.button(key="rows_aside").click().run()
    assert opening.study_of(dashboard).set_aside == dict.fromkeys((3, 5, 6), "pot fell over")
    page = opening.page(dashboard)
    assert page.count("<tr class=struck>") == 3
    assert "72 rows in the file: 69 analysed, 3 set aside, 0 unusable." in page
    assert dashboard.text_input(key="rows_named").value == ""
    dashboard.multiselect(key="rows_kept_aside").unselect(5).run()
    assert set(opening.study_of(dashboard).set_aside) == {3, 6}
    dashboard.button(key="undo").click().run()
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is opening.sample()
    assert not dashboard.exception


@pytest.mark.parametrize(
    ("rows", "why", "sentence"), [("3", " ", "without a reason"), ("900", "gone", "names no row of the table"), ("", "x", "names no row")]
)
def test_rows_without_a_reason_or_a_number_stay(rows: str, why: str, sentence: str) -> None:
    study = opening.sample()
    dashboard = opening.station("lay_out", study)
    dashboard.text_input(key="rows_named").set_value(rows)
    dashboard.text_input(key="rows_why").set_value(why)
    dashboard.button(key="rows_aside").click().run()
    assert opening.study_of(dashboard) is study
    assert sentence in opening.page(dashboard)
    assert dashboard.text_input(key="rows_named").value == rows


def test_a_slip_is_offered_for_a_look() -> None:
    lines = (opening.SAMPLES / "basil_light_feed.csv").read_text(encoding="utf-8").replace(",26.9", ",269", 1)
    study = Study(analysis.read_table(lines.encode(), name="pots.csv"), "yield (g)", "light", "feed")
    dashboard = opening.station("lay_out", study)
    page = opening.page(dashboard)
    assert "Row 2: 269, while the others of Full sun with No feed lie between" in page
    dashboard.button(key="odd_take_0").click().run()
    assert dashboard.text_input(key="rows_named").value == "2"
    assert opening.study_of(dashboard) is study
    assert "72 rows in the file: 72 analysed, 0 set aside, 0 unusable." in page


def test_the_question_of_the_unit_is_asked_where_a_column_looks_like_one() -> None:
    table = analysis.read_table(readings(), name="leaves")
    dashboard = opening.station("lay_out", Study(table, "y", "a", "b"))
    asked = dashboard.radio(key="unit_asked")
    assert (asked.label, asked.options, asked.value) == (words.ONE_UNIT, ["Each row", "Each pot"], None)
    assert list(asked.proto.captions) == ["48 values; 44 residual df", "12 values, the mean of its rows each; 8 residual df"]
    dashboard.radio(key="unit_asked").set_value("pot").run()
    assert opening.study_of(dashboard).unit == "pot"
    assert dashboard.selectbox(key="role_unit").value == "pot"


def test_the_question_of_the_unit_is_not_asked_without_one() -> None:
    with pytest.raises(KeyError):
        opening.station("lay_out", opening.sample("coating_primer_cure.csv")).radio(key="unit_asked")


def test_single_cells_are_named_in_words() -> None:
    found = opening.findings_of(crossed([[4, 1], [4, 4]]))
    page = opening.page(opening.station("lay_out", found.study))
    assert "A single observation, which says nothing about spread, in a0 with b1." in page


def test_the_log_tells_each_decision_and_forgets_what_was_undone() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    dashboard.text_input(key="rows_named").set_value("3")
    dashboard.text_input(key="rows_why").set_value("pot <fell> over")
    dashboard.button(key="rows_aside").click().run()
    dashboard.button(key="row_0_down").click().run()
    page = opening.page(dashboard)
    assert "<td>Row 3 set aside.</td><td>pot &lt;fell&gt; over</td>" in page
    assert "<td>Analysed of “light”: “Half shade”, “Full sun”, “Deep shade”.</td><td>chosen</td>" in page
    dashboard.button(key="undo").click().run()
    page = opening.page(dashboard)
    assert "Row 3 set aside." in page
    assert "Analysed of “light”" not in page


@pytest.mark.parametrize("columns", [3, 12])
def test_empty_single_and_unequal_cells_are_named_in_words(columns: int) -> None:
    counts = [[4] * columns, [4] * columns]
    counts[0][0], counts[1][1], counts[1][2] = 0, 1, 6
    page = opening.page(opening.station("lay_out", opening.findings_of(crossed(counts)).study))
    assert "Empty: a0 with b0." in page
    assert "spread, in a1 with b1." in page
    assert "Most, n = 6: a1 with b2." in page


def test_fewest_cells_are_named_where_none_is_single() -> None:
    page = opening.page(opening.station("lay_out", opening.findings_of(crossed([[4, 2], [4, 4]])).study))
    assert "Fewest, n = 2: a0 with b1." in page
    assert "Most, n = 4: a0 with b0; a1 with b0; a1 with b1." in page


@pytest.mark.parametrize(
    ("counts", "response", "refusal"), [([[2, 3], [2, 2]], 7.0, "there is no variation to explain"), ([[1, 1], [1, 1]], None, "4 usable")]
)
def test_the_grid_is_there_for_a_study_that_is_refused(counts: list[list[int]], response: float | None, refusal: str) -> None:
    frame = crossed(counts) if response is None else crossed(counts).assign(y=response)
    dashboard = opening.station("lay_out", Study(analysis.read_table(frame, name="frame"), "y", "a", "b"))
    page = opening.page(dashboard)
    assert not dashboard.exception
    assert refusal in page
    assert f"2 levels of a × 2 of b, {len(frame)} observations" in page
    dashboard.get_by_key("grid")


def test_numbers_as_levels_are_asked_about() -> None:
    frame = crossed([[4, 4, 4], [4, 4, 4]])
    frame["b"] = frame["b"].map({"b0": 0, "b1": 50, "b2": 200})
    study = opening.findings_of(frame).study
    dashboard = opening.station("lay_out", study)
    assert dashboard.radio(key="role_column_amounts").value is True
    page = opening.page(dashboard)
    assert "0, 50 and 200 lie unequally far apart" in page
    assert lay_out_words.AMOUNTS_MEAN[True] in page
    dashboard.radio(key="role_column_amounts").set_value(False).run()
    assert opening.study_of(dashboard).amounts == {"b": False}
    assert lay_out_words.AMOUNTS_MEAN[False] in opening.page(dashboard)
    assert "The levels of “b” count as groups." in opening.page(dashboard)
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is study
    assert dashboard.radio(key="role_column_amounts").value is True
    assert not dashboard.exception


def test_words_as_levels_are_not() -> None:
    with pytest.raises(KeyError):
        opening.station("lay_out", opening.sample()).radio(key="role_column_amounts")


def test_three_spellings_are_merged_in_one_click() -> None:
    lines = (
        (opening.SAMPLES / "basil_light_feed.csv")
        .read_text(encoding="utf-8")
        .replace("No feed", "no feed", 3)
        .replace("No feed", "NO FEED", 2)
    )
    dashboard = opening.station("lay_out", Study(analysis.read_table(lines.encode(), name="pots.csv"), "yield (g)", "light", "feed"))
    asked = "are “NO FEED” (2 rows) and “no feed” (3 rows) the same as “No feed” (13 rows)?"
    assert html.escape(asked) in opening.page(dashboard)
    dashboard.button(key="column_merge_0").click().run()
    assert opening.study_of(dashboard).relabel == {"feed": {"NO FEED": "No feed", "no feed": "No feed"}}
    assert opening.findings(opening.study_of(dashboard)).design["balanced"]
