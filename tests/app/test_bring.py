"""Bring: a table read another way and back, studies that come back after a reload, and earlier ones to open or forget."""

import html
from pathlib import Path

import pytest
from streamlit.testing.v1 import AppTest

from analysis import log, study_file
from analysis.reading.choices import Reading
from app import bring_words, keeping, saving
from tests.app import opening

MESSY = "Trial 12, greenhouse\n\nlight;feed;yield;pot\n" + "".join(
    f"{light};{feed};{10 + 2 * place},{25 * (place % 3)};{place}\n"
    for place, (light, feed) in enumerate((a, b) for a in ("sun", "shade") for b in ("A", "B", "b") for _ in range(3))
)


@pytest.fixture(autouse=True)
def home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv(keeping.HOME, str(tmp_path / "home"))
    return tmp_path / "home"


def dropped(content: bytes = MESSY.encode(), name: str = "pots.csv") -> AppTest:
    dashboard = opening.station("bring")
    dashboard.file_uploader(key="bring_file").upload(name, content, "text/csv").run()
    assert not dashboard.exception
    return dashboard


def press(dashboard: AppTest, words: str) -> None:
    """Press the button with these words."""
    next(button for button in dashboard.button if button.label.replace("\\", "") == words).click().run()
    assert not dashboard.exception


def test_the_file_stands_beside_what_was_understood() -> None:
    page = opening.page(dropped())
    assert "<li value='3'><code>light;feed;yield;pot</code></li>" in page
    assert "<th scope='row'>4</th><td>sun</td>" in page


def test_a_decision_is_changed_in_one_click_and_undo_takes_it_back() -> None:
    dashboard = dropped()
    before = opening.study_of(dashboard)
    assert "Numbers are read with the comma as decimal mark." in opening.page(dashboard)
    press(dashboard, "point")
    after = opening.study_of(dashboard)
    assert after.table.reading == Reading(decimal="point")
    assert "Numbers are read with the point as decimal mark." in opening.page(dashboard)
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard) is before
    dashboard.button(key="redo").click().run()
    assert opening.study_of(dashboard) is after


def test_what_another_reading_drops_is_told() -> None:
    dashboard = dropped()
    dashboard.switch_page("stops/lay_out.py").run()
    dashboard.text_input(key="rows_named").set_value("4")
    dashboard.text_input(key="rows_why").set_value("pot fell over")
    dashboard.button(key="rows_aside").click().run()
    dashboard.switch_page("stops/bring.py").run()
    press(dashboard, "row 4: sun, A, 10,0, 0")
    page = opening.page(dashboard)
    assert bring_words.FOLLOWED in page
    assert "Row 4, set aside before, is not there as the file is read now." in page
    assert html.escape("“feed”, which is not there as the file is read now") in page
    dashboard.button(key="undo").click().run()
    assert opening.study_of(dashboard).set_aside == {4: "pot fell over"}
    assert bring_words.FOLLOWED not in opening.page(dashboard)


def test_a_reading_that_fails_leaves_the_table_and_says_why() -> None:
    dashboard = dropped()
    before = opening.study_of(dashboard)
    press(dashboard, "row 1: Trial 12, greenhouse")
    assert opening.study_of(dashboard) is before
    assert opening.page(dashboard).count("class='notice'") == 1


def test_the_log_tells_how_the_file_is_read() -> None:
    dashboard = dropped()
    press(dashboard, "point")
    dashboard.switch_page("stops/lay_out.py").run()
    assert "<td>Numbers are read with the point as decimal mark.</td><td>chosen</td>" in opening.page(dashboard)


def test_nothing_is_written_before_a_table_is_opened(home: Path) -> None:
    opening.station("bring")
    assert not home.exists()


def place_of(dashboard: AppTest) -> str:
    """Return where the open study is kept, as the address names it."""
    told = dashboard.query_params["study"]
    return told if isinstance(told, str) else told[0]


def reloaded(dashboard: AppTest, name: str = "bring") -> AppTest:
    """Return the page loaded anew, with nothing but its address."""
    again = AppTest.from_file(str(opening.ROOT / "app" / "main.py"), default_timeout=opening.SECONDS)
    again.query_params["study"] = place_of(dashboard)
    again = again.run().switch_page(f"stops/{name}.py").run()
    assert not again.exception
    return again


def test_a_page_loaded_anew_comes_back_to_the_same_study_with_its_history() -> None:
    dashboard = dropped()
    dashboard.switch_page("stops/lay_out.py").run()
    dashboard.button(key="row_0_down").click().run()
    dashboard.switch_page("stops/bring.py").run()
    press(dashboard, "point")
    again = reloaded(dashboard, "lay_out")
    assert opening.study_of(again).fingerprint == opening.study_of(dashboard).fingerprint
    for _ in range(2):
        again.button(key="undo").click().run()
        dashboard.button(key="undo").click().run()
        assert opening.study_of(again).fingerprint == opening.study_of(dashboard).fingerprint
    again.button(key="redo").click().run()
    third = reloaded(again)
    assert opening.study_of(third).fingerprint == opening.study_of(again).fingerprint
    third.button(key="redo").click().run()
    assert opening.study_of(third).table.reading == Reading(decimal="point")


def test_an_address_that_leads_nowhere_is_told() -> None:
    again = AppTest.from_file(str(opening.ROOT / "app" / "main.py"), default_timeout=opening.SECONDS)
    again.query_params["study"] = "0123456789ab"
    again.run()
    assert not again.exception
    assert "not kept on this machine any longer" in opening.page(again)


def test_earlier_studies_are_offered_opened_and_forgotten() -> None:
    first = dropped()
    first.switch_page("stops/lay_out.py").run()
    first.button(key="row_0_down").click().run()
    place = place_of(first)
    dashboard = opening.station("bring")
    page = opening.page(dashboard)
    assert "pots.csv, light by feed, just now" in page
    dashboard.button(key=f"reopen_{place}").click().run()
    assert opening.study_of(dashboard).fingerprint == opening.study_of(first).fingerprint
    other = opening.station("bring")
    other.button(key=f"forget_{place}").click().run()
    assert "pots.csv" not in opening.page(other)
    assert keeping.earlier() == ()


def test_a_study_file_dropped_opens_with_its_log() -> None:
    first = dropped()
    press(first, "point")
    state = first.session_state["desk"]
    content = first.session_state["desk"].files[state.study.table.fingerprint].content
    assert content == MESSY.encode()
    saved = keeping.kept(place_of(first))
    dashboard = dropped(study_file.packed(saved), "pots.crossgrain")
    assert opening.study_of(dashboard).fingerprint == opening.study_of(first).fingerprint
    told = [entry.sentence for entry in log.log(list(saved.studies), {})]
    assert "Numbers are read with the point as decimal mark." in told
    dashboard.switch_page("stops/lay_out.py").run()
    assert all(html.escape(sentence) in opening.page(dashboard) for sentence in told)


def test_a_damaged_study_file_gets_one_sentence() -> None:
    dashboard = dropped(b"PK\x03\x04 nothing of the kind", "pots.crossgrain")
    assert "The study file is damaged" in opening.page(dashboard)


def test_a_folder_that_cannot_be_written_is_told(home: Path) -> None:
    home.write_text("a file in the way")
    dashboard = dropped()
    assert opening.study_of(dashboard).table.rows == 18
    assert "could not be kept on this machine" in opening.page(dashboard)


def test_the_study_is_saved_at_tell() -> None:
    dashboard = dropped()
    dashboard.switch_page("stops/tell.py").run()
    assert not dashboard.exception
    assert html.escape(saving.HOLDS) in opening.page(dashboard)
    assert html.escape(saving.NO_FILE) in opening.page(opening.station("tell", opening.sample()))


def test_two_windows_on_one_study_lose_nothing_to_each_other() -> None:
    first = dropped()
    place = place_of(first)
    second = reloaded(first, "lay_out")
    second.button(key="row_0_down").click().run()
    assert place_of(second) == place
    first.switch_page("stops/lay_out.py").run()
    first.button(key="row_0_out").click().run()
    assert place_of(first) != place
    assert keeping.kept(place).study.fingerprint == opening.study_of(second).fingerprint
    assert keeping.kept(place_of(first)).study.fingerprint == opening.study_of(first).fingerprint


def test_every_study_that_is_kept_can_be_opened() -> None:
    for k in range(6):
        dropped(MESSY.replace("10,0", f"1{k},5").encode(), f"pots {k}.csv")
    dashboard = opening.station("bring")
    assert [expander.label for expander in dashboard.expander] == ["2 more"]
    press_open = [button for button in dashboard.button if button.label == bring_words.OPEN_AGAIN]
    assert len(press_open) == 6
    press_open[-1].click().run()
    assert opening.study_of(dashboard).table.name == "pots 0.csv"
