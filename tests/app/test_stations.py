"""Every station opens, shows the widgets that others rely on, and tells the engine's numbers."""

import html
import re
import tomllib

import pandas as pd
import pytest

from analysis.refusals import Refusal
from analysis.rounding import p_number
from analysis.study import Study
from app import bring_words, records, tabled, words
from app.stations import STATIONS
from tests.app import opening

# The keys that stay put for users' scripts and styles; a new station fails here until it is listed.
KEYS = {
    "bring": ("bring_file", "bring_paste", "bring_sample"),
    "lay_out": ("role_response", "role_row", "role_column", "role_block", "role_unit", "grid"),
    "answer": ("answers", "grid", "interaction", "cell_means", "choice_model", "choice_scale", "choice_confidence", "choice_matters"),
    "compare": ("compare_table", "choice_adjust", "grid"),
    "doubt": ("doubt_table", "doubts", "by_cell", "along_fitted", "against_bell"),
    "tell": ("tell_start", "save_deck", "save_workbook", "save_tables", "save_script", "save_figures", "save_report", "save_study"),
}
NAMES = [station.name for station in STATIONS]
SAMPLES = ["basil_light_feed.csv", "coating_primer_cure.csv", "yeast_sugar.xlsx"]


@pytest.mark.parametrize("name", NAMES)
def test_a_station_shows_its_widgets(name: str) -> None:
    dashboard = opening.station(name, opening.sample())
    assert not dashboard.exception
    for key in (*KEYS[name], "undo", "redo"):
        dashboard.get_by_key(key)  # raises KeyError where there is none


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("sample", SAMPLES)
def test_a_station_opens_with_every_sample(name: str, sample: str) -> None:
    assert not opening.station(name, opening.sample(sample)).exception


@pytest.mark.parametrize("name", NAMES)
def test_a_station_without_a_table_says_what_to_do(name: str) -> None:
    dashboard = opening.station(name)
    assert not dashboard.exception
    assert name == "bring" or words.NOTHING_OPEN in opening.page(dashboard)


@pytest.mark.parametrize("name", NAMES)
def test_a_station_says_why_a_study_cannot_be_analysed(name: str) -> None:
    open_role = Study(opening.sample().table, "yield (g)", "light", None)
    with pytest.raises(Refusal) as refused:
        open_role.require_roles()
    dashboard = opening.station(name, open_role)
    assert not dashboard.exception
    assert name == "bring" or html.escape(str(refused.value)) in opening.page(dashboard)


def test_every_station_has_its_stop() -> None:
    assert {file.stem for file in (opening.ROOT / "app" / "stops").glob("*.py")} == set(NAMES)


def test_the_answers_are_the_engines() -> None:
    study = opening.sample()
    page = opening.page(opening.station("answer", study))
    for answer in opening.findings(study).answers:
        assert html.escape(answer.sentence) in page
        assert html.escape(answer.statistic) in page


def test_the_cell_means_are_the_engines() -> None:
    study = opening.sample()
    found = opening.findings(study)
    page = opening.page(opening.station("answer", study))
    for cell in records.lines(found.cells):
        assert words.with_interval(cell.estimate, cell.lower, cell.upper, cell.se) in page
    for level in records.lines(found.marginal_means["light"]):
        assert words.with_interval(level.mean, level.lower, level.upper, level.se) in page


@pytest.mark.parametrize("family", ["light", "feed", "cells", "light within feed", "feed within light"])
def test_the_comparisons_are_the_engines(family: str) -> None:
    study = opening.sample()
    found = opening.findings(study)
    dashboard = opening.station("compare", study)
    dashboard.selectbox(key="compare_family").select(family).run()
    page = opening.page(dashboard)
    assert words.family_size(found, family) in page
    for compared in records.lines(found.comparisons[family]):
        assert tabled.size(compared) in page
        assert html.escape(p_number(compared.p_adjusted)) in page


@pytest.mark.parametrize(
    ("station", "kind", "key", "field", "value"),
    [
        ("answer", "selectbox", "choice_model", "model", "additive"),
        ("answer", "selectbox", "choice_scale", "scale", "log"),
        ("answer", "selectbox", "choice_confidence", "confidence", 0.99),
        ("answer", "number_input", "choice_matters", "matters", 2.5),
        ("compare", "selectbox", "choice_adjust", "adjust", "holm"),
        ("lay_out", "selectbox", "role_response", "response", "bench position"),
        ("lay_out", "selectbox", "role_unit", "unit", "pot"),
    ],
)
def test_a_choice_changes_the_study_and_undo_brings_it_back(station: str, kind: str, key: str, field: str, value: object) -> None:
    before = opening.sample()
    dashboard = opening.station(station, before)
    getattr(dashboard, kind)(key=key).set_value(value).run()
    assert getattr(opening.study_of(dashboard), field) == value
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is before
    dashboard.button(key="redo").click().run()
    assert getattr(opening.study_of(dashboard), field) == value
    assert not dashboard.exception


def test_two_changes_in_a_row_are_both_kept() -> None:
    dashboard = opening.station("answer", opening.sample())
    for value in ("additive", "full", "additive"):
        dashboard.selectbox(key="choice_model").select(value).run()
        assert opening.study_of(dashboard).model == value


def test_a_choice_survives_another_station() -> None:
    dashboard = opening.station("answer", opening.sample())
    dashboard.selectbox(key="choice_confidence").select(0.9).run()
    dashboard.switch_page("stops/doubt.py").run()
    dashboard.switch_page("stops/answer.py").run()
    assert dashboard.selectbox(key="choice_confidence").value == 0.9


def test_what_is_compared_survives_another_station() -> None:
    dashboard = opening.station("compare", opening.sample())
    dashboard.selectbox(key="compare_family").select("feed").run()
    dashboard.switch_page("stops/answer.py").run()
    dashboard.switch_page("stops/compare.py").run()
    assert dashboard.selectbox(key="compare_family").value == "feed"


def test_a_column_that_has_a_role_changes_places() -> None:
    dashboard = opening.station("lay_out", opening.sample())
    dashboard.selectbox(key="role_row").select("feed").run()
    study = opening.study_of(dashboard)
    assert (study.row_factor, study.column_factor) == ("feed", "light")


def test_a_dropped_file_opens_with_its_roles() -> None:
    dashboard = opening.station("bring")
    content = (opening.SAMPLES / "basil_light_feed.csv").read_bytes()
    dashboard.file_uploader(key="bring_file").upload("my pots.csv", content, "text/csv").run()
    study = opening.study_of(dashboard)
    assert (study.table.name, study.response, study.row_factor, study.column_factor) == ("my pots.csv", "yield (g)", "light", "feed")
    assert "72 rows in the file: 72 analysed, 0 set aside, 0 unusable." in opening.page(dashboard)


def test_a_sample_opens_by_its_name() -> None:
    dashboard = opening.station("bring")
    dashboard.radio(key="bring_sample").set_value("coating_primer_cure.csv").run()
    assert opening.study_of(dashboard).block == "spray day"


def test_pasted_cells_are_read_like_a_file() -> None:
    dashboard = opening.station("bring")
    text = (opening.SAMPLES / "basil_light_feed.csv").read_text(encoding="utf-8").replace(",", "\t")
    dashboard.text_area(key="bring_paste").set_value(text).run()
    study = opening.study_of(dashboard)
    assert (study.table.name, study.response, study.table.rows) == ("pasted cells", "yield (g)", 72)
    assert "72 rows in the file: 72 analysed, 0 set aside, 0 unusable." in opening.page(dashboard)
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is None


def test_pasted_words_get_one_sentence() -> None:
    dashboard = opening.station("bring")
    dashboard.text_area(key="bring_paste").set_value("a greeting").run()
    assert len(re.findall(r"class='notice'", opening.page(dashboard))) == 1
    assert not dashboard.exception


def test_the_limit_of_a_file_is_that_of_the_server() -> None:
    limit = bring_words.file_limit(tomllib.loads((opening.ROOT / ".streamlit" / "config.toml").read_text())["server"]["maxUploadSize"])
    assert limit.startswith("Up to 200 MB, ")
    assert limit in opening.page(opening.station("bring"))
    assert "up to 200 MB" in (opening.ROOT / "README.md").read_text(encoding="utf-8")


@pytest.mark.parametrize(
    ("name", "content"),
    [
        ("pots.csv", b"\x89PNG\r\n\x1a\n" + bytes(range(256)) * 4),
        ("pots.csv", b""),
        ("pots.csv", b"light,feed\nsun,a\nshade,b\n"),
    ],
    ids=["a picture", "nothing", "no numbers"],
)
def test_a_wrong_file_gets_one_sentence_and_the_study_stays(name: str, content: bytes) -> None:
    before = opening.sample()
    dashboard = opening.station("bring", before)
    dashboard.file_uploader(key="bring_file").upload(name, content, "text/csv").run()
    notices = re.findall(r"class='notice'", opening.page(dashboard))
    assert len(notices) == 1
    assert not dashboard.exception
    assert opening.study_of(dashboard) is before


def test_names_are_shown_as_they_are() -> None:
    names = ["<b>bold</b>", "$x^2$ *star*", 'a & "b"', "🌿 leaf", "[link](http://x)", "x" * 80]
    frame = pd.DataFrame(
        {
            "y": [float(k % 7) + 0.1 * k for k in range(24)],
            "a": [names[k % 2] for k in range(24)],
            "b": [names[2 + (k // 2) % 4] for k in range(24)],
        }
    )
    study = opening.findings_of(frame).study
    for name in NAMES:
        dashboard = opening.station(name, study)
        assert not dashboard.exception
        assert "<b>bold" not in opening.page(dashboard)
