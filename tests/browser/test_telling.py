"""The walk-through in a real browser: legible from afar on every size and theme, without scroll, moved by keys, followed by the speaker."""

from pathlib import Path

import pytest
from playwright.sync_api import Browser, Page, expect

from tests.app import designs
from tests.browser import driving

SHOWINGS = [((1280, 720), "light"), ((1366, 768), "dark"), ((1920, 1080), "light")]  # window and theme
SMALLEST = 1 / 40  # of the height of the screen, for every letter


@pytest.fixture
def files(tmp_path: Path) -> dict[str, Path]:
    """Files of experiments that are hard to show: nothing is decided in it."""
    found = {}
    for name in ("undecided",):
        found[name] = tmp_path / f"{name}.csv"
        designs.design(name).study.table.preview(1_000).to_csv(found[name], index=False)
    return found


def begin(page: Page) -> int:
    """Start the walk-through and return how many boards it has."""
    driving.go(page, "Tell")
    page.locator(".st-key-tell_start button").click()
    page.locator("h1.claim").wait_for()
    driving.settle(page)
    return int(page.locator(".evidence .place").inner_text().split(" of ")[1])


def turn(page: Page, key: str, to: int) -> None:
    page.keyboard.press(key)
    page.locator(".evidence .place").get_by_text(f"{to} of ").wait_for()
    driving.settle(page)


def too_small(page: Page) -> list[str]:
    """Return what is written smaller than a fortieth of the height of the screen."""
    told: list[str] = page.evaluate(
        """smallest => {
            const parts = 'h1.claim, .evidence p, .st-key-walk_board td, .st-key-walk_board th, .js-plotly-plot text';
            const board = [...document.querySelectorAll(parts)];
            const seen = board.filter(part => part.textContent.trim() && part.getBoundingClientRect().width > 1);
            return seen.filter(part => parseFloat(getComputedStyle(part).fontSize) < smallest * innerHeight - 0.01)
                .map(part => `${getComputedStyle(part).fontSize} ${part.textContent.slice(0, 40)}`);
        }""",
        SMALLEST,
    )
    return told


def out_of_sight(page: Page) -> list[str]:
    """Return what reaches beyond the place that it is seen in, and by how much the page scrolls."""
    told: list[str] = page.evaluate(
        """() => {
            const below = (part, place) => part.getBoundingClientRect().bottom - place.getBoundingClientRect().bottom;
            const of = (parts, place) => {
                const edge = document.querySelector(place);
                const found = [...document.querySelectorAll(parts)].filter(part => below(part, edge) > 1);
                return found.map(part => `${parts} ${below(part, edge)}`);
            };
            const scrolled = [document.documentElement, document.querySelector('[data-testid=stMain]')]
                .map(part => part.scrollHeight - part.clientHeight).filter(more => more > 1).map(more => `scrolls ${more}`);
            return [...scrolled, ...of('h1.claim', '.st-key-tell_claim'),
                ...of('.evidence p', '.evidence'), ...of('.evidence', '[data-testid=stMain]'),
                ...of('.st-key-walk_board table, .st-key-walk_board .js-plotly-plot', '.st-key-walk_board')];
        }"""
    )
    return told


def look_through(page: Page, boards: int) -> None:
    for place in range(1, boards + 1):
        assert not too_small(page), place
        assert not out_of_sight(page), place
        assert not driving.cut_letters(page), place
        expect(page.locator("[data-testid=stHeader]")).to_be_hidden()
        if place < boards:
            turn(page, "ArrowRight", place + 1)


@pytest.mark.browser
@pytest.mark.parametrize(("size", "scheme"), SHOWINGS, ids=str)
def test_every_board_is_legible_from_afar(running: Browser, address: str, size: tuple[int, int], scheme: str) -> None:
    page = driving.open_page(running, address, *size, scheme)
    driving.open_sample(page)
    look_through(page, begin(page))
    page.context.close()


@pytest.mark.browser
@pytest.mark.parametrize("name", ["undecided"])
def test_what_is_hard_to_show_is_legible_too(running: Browser, address: str, files: dict[str, Path], name: str) -> None:
    page = driving.open_page(running, address, 1280, 720)
    driving.drop(page, files[name])
    look_through(page, begin(page))
    page.context.close()


@pytest.mark.browser
def test_keys_move_hide_and_leave_and_the_speaker_follows(running: Browser, address: str) -> None:
    page = driving.open_page(running, address)
    driving.open_sample(page)
    last = begin(page)
    for key, to in (("PageDown", 2), ("Space", 3), ("ArrowLeft", 2), ("End", last), ("PageUp", last - 1), ("Home", 1), ("ArrowDown", 2)):
        turn(page, key, to)
    claim = page.locator("h1.claim").inner_text()
    page.keyboard.press("h")
    page.locator("h1.claim.waits").wait_for()
    speaker = page.context.new_page()
    speaker.goto(f"{address}/tell{page.locator('.st-key-walk_keys a').get_attribute('href')}")
    expect(speaker.locator(".speaker h1")).to_have_text(claim)
    expect(speaker.locator(".speaker .place")).to_contain_text("still hidden")
    turn(page, "ArrowRight", 3)
    expect(speaker.locator(".speaker .place")).to_contain_text(f"3 of {last}")
    page.reload()
    page.locator(".evidence .place").get_by_text(f"3 of {last}").wait_for()
    driving.settle(page)
    page.keyboard.press("h")
    page.locator("h1.claim:not(.waits)").wait_for()
    page.keyboard.press("Escape")
    page.locator(".st-key-save_deck").wait_for()
    page.context.close()


@pytest.mark.browser
def test_the_story_is_changed_and_told_so(running: Browser, address: str) -> None:
    page = driving.open_page(running, address)
    driving.open_sample(page)
    driving.go(page, "Compare")
    page.locator(".st-key-keep_comparison button").click()
    driving.settle(page)
    driving.go(page, "Tell")
    page.locator(".st-key-story_change_2 button").first.click()
    words = page.locator(".st-key-story_claim_2 textarea")
    words.fill("Feed pays in the sun.")
    words.press("Control+Enter")
    page.locator(".told b").get_by_text("Feed pays in the sun.").wait_for()
    page.keyboard.press("Escape")
    expect(page.locator(".told").nth(2).locator("span")).to_contain_text("own words")
    driving.settle(page)
    page.locator(".st-key-story_change_1 button").first.click()
    page.locator(".st-key-story_drop_1 button").click()
    page.locator(".told.dropped").wait_for()
    driving.settle(page)
    boards = begin(page)
    assert boards == 8  # nine with the one kept, one left out
    turn(page, "ArrowRight", 2)
    expect(page.locator("h1.claim")).to_have_text("Feed pays in the sun.")
    page.context.close()
