"""The whole road in a real browser: drop a file, read the answers, compare, take the files away, and find the engine's numbers in them."""

import io
from pathlib import Path

import openpyxl
import pandas as pd
import pptx
import pytest
from playwright.sync_api import Browser, Page, expect

from analysis.findings import Findings
from app import records, tabled, words
from app.stations import STATIONS
from tests.app import opening
from tests.browser import driving

SIZES = [(1366, 768), (1920, 1080)]


@pytest.fixture
def pots(samples: Path, tmp_path: Path) -> Path:
    """A file of the user's own: the basil experiment under another name."""
    file = tmp_path / "my pots.csv"
    file.write_bytes((samples / "basil_light_feed.csv").read_bytes())
    return file


@pytest.fixture
def found() -> Findings:
    return opening.findings(opening.sample())


MOST_CLICKS = 6  # from a dropped file to its three answers


def test_a_new_file_is_answered_after_a_few_clicks(running: Browser, address: str, tmp_path: Path) -> None:
    file = tmp_path / "cheese.csv"
    lines = [
        f"{rennet},{days},{50 + 3 * r + days / 7 + k / 5:.1f}"
        for r, rennet in enumerate(("calf", "thistle"))
        for days in (7, 14, 28)
        for k in (0, 3, 1, 4)
    ]
    file.write_text("rennet,ripening (days),firmness (N)\n" + "\n".join(lines), encoding="utf-8")
    opened = driving.open_page(running, address)
    opened.evaluate("window.clicks = 0; addEventListener('click', event => { if (event.isTrusted) clicks += 1; }, true)")
    driving.drop(opened, file)
    driving.go(opened, "Lay out")  # a careful user looks at the roles first
    driving.go(opened, "Answer")
    told = opened.locator(".st-key-answers .sentence").all_inner_texts()
    assert len(told) == 3
    assert "rennet" in told[1].lower()
    assert 0 < opened.evaluate("clicks") <= MOST_CLICKS
    opened.context.close()


def test_from_a_dropped_file_to_slides_and_workbook(page: Page, pots: Path, tmp_path: Path, found: Findings) -> None:
    driving.drop(page, pots)
    driving.go(page, "Lay out")
    driving.choose(page, "role_row", "feed")  # changes places with light
    expect(page.locator(".st-key-role_column input")).to_have_value("light")
    driving.choose(page, "role_row", "light")
    expect(page.locator(".st-key-role_column input")).to_have_value("feed")
    driving.go(page, "Answer")
    told = page.locator(".st-key-answers")
    for answer in found.answers:
        expect(told).to_contain_text(answer.sentence, timeout=driving.PATIENCE * 1000)
        expect(told).to_contain_text(answer.statistic)
    driving.go(page, "Compare")
    asked = words.family("feed", found.study.factors)
    driving.choose(page, "compare_family", asked)
    page.get_by_role("heading", name=asked).wait_for()
    driving.settle(page)
    table = page.locator(".st-key-compare_table").inner_text()
    for compared in records.lines(found.comparisons["feed"]):
        assert tabled.size(compared) in table
    driving.go(page, "Tell")
    the_slides_hold_the_answers(driving.save(page, "save_deck", tmp_path), found)
    the_workbook_holds_the_numbers(driving.save(page, "save_workbook", tmp_path), found)


def the_slides_hold_the_answers(file: Path, found: Findings) -> None:
    """Open the deck and find each answer as it is told on screen."""
    deck = pptx.Presentation(io.BytesIO(file.read_bytes()))
    assert deck.slide_width / deck.slide_height == pytest.approx(16 / 9, abs=0.01)
    told = [f"{slide.shapes.title.text_frame.text} {slide.notes_slide.notes_text_frame.text}" for slide in deck.slides]
    for answer in found.answers:
        assert any(answer.sentence in words for words in told)


def the_workbook_holds_the_numbers(file: Path, found: Findings) -> None:
    """Open the workbook and find means, sums of squares and differences in full precision."""
    book = openpyxl.load_workbook(io.BytesIO(file.read_bytes()), read_only=True)
    numbers = pd.Series(
        [float(value) for sheet in book for row in sheet.iter_rows(values_only=True) for value in row if isinstance(value, int | float)]
    )
    wanted = [
        *found.cells["mean"],
        *found.used_table["ss"],
        *found.comparisons["feed"]["difference"],
        *found.comparisons["feed"]["p_adjusted"],
    ]
    for number in wanted:
        # A workbook keeps 15 to 17 significant digits; the last one may turn in the writing.
        assert ((numbers - number).abs() <= 1e-14 * max(abs(number), 1e-300)).any(), number


def test_a_wrong_file_gets_one_sentence_and_the_open_study_stays(page: Page, pots: Path, tmp_path: Path) -> None:
    driving.drop(page, pots)
    picture = tmp_path / "pots.csv"
    picture.write_bytes(b"\x89PNG\r\n\x1a\n" + bytes(range(256)) * 8)
    driving.drop(page, picture, shows=".notice")
    notices = page.locator(".notice").all_inner_texts()
    assert len(notices) == 1
    assert "\n" not in notices[0].strip()
    assert page.locator('[data-testid="stException"]').count() == 0
    driving.go(page, "Answer")
    assert page.locator(".st-key-answers .sentence").count() == 3
    assert page.locator(".status").inner_text().startswith("my pots.csv")


def test_any_address_opens_the_whole_dashboard(running: Browser, address: str) -> None:
    opened = driving.open_page(running, f"{address}/compare")
    assert words.NOTHING_OPEN in opened.locator('[data-testid="stMain"]').inner_text()
    assert opened.locator(".st-key-undo").count() == 1
    opened.context.close()


def test_nothing_is_asked_of_the_outside(running: Browser, address: str) -> None:
    asked: list[str] = []
    context = running.new_context()
    context.on("request", lambda request: asked.append(request.url))
    opened = context.new_page()
    opened.goto(address)
    opened.locator(driving.READY).first.wait_for()
    driving.open_sample(opened)
    for station in STATIONS:
        driving.go(opened, station.title)
    context.close()
    assert asked
    assert not [url for url in asked if not url.startswith((address, address.replace("http", "ws"), "data:", "blob:"))]


@pytest.mark.parametrize(("size", "scheme"), [(SIZES[0], "light"), (SIZES[1], "light"), (SIZES[0], "dark")])
def test_nothing_is_cut_or_runs_out_of_the_page(running: Browser, address: str, size: tuple[int, int], scheme: str) -> None:
    opened = driving.open_page(running, address, *size, scheme=scheme)
    driving.open_sample(opened)
    for station in STATIONS:
        driving.go(opened, station.title)
        assert driving.runs_out(opened) == [], station.title
        assert driving.cut_letters(opened) == [], station.title
    opened.context.close()
