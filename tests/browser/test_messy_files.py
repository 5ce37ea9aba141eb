"""Six untidy files dropped in a real browser: a decision of the reader, a level and a row mended in each, and the right grid read."""

from pathlib import Path

import pytest
from playwright.sync_api import Page, expect

from tests.browser import driving
from tests.browser.messy_files import MESSES, Mess


def counts_read_out(page: Page) -> str:
    """Return the grid as a screen reader tells it."""
    return page.locator(".st-key-grid [aria-label^='Grid of counts']").first.get_attribute("aria-label") or ""


def mend_the_level(page: Page, mess: Mess) -> None:
    """Merge, leave out or rename a level, as the file needs it."""
    if "_merge_" not in mess.level:
        page.locator(f".st-key-{mess.level.split('_')[0]}_levels summary").click()
    if mess.name is None:
        page.locator(f".st-key-{mess.level} button").click()
    else:
        page.locator(f".st-key-{mess.level} input").fill(mess.name)
        page.keyboard.press("Enter")
    driving.settle(page)


def set_rows_aside(page: Page, rows: str) -> None:
    page.locator(".st-key-rows summary").click()
    page.locator(".st-key-rows_named input").fill(rows)
    page.locator(".st-key-rows_why input").fill("label lost")
    page.locator(".st-key-rows_aside button").click()
    page.locator(".st-key-rows_kept_aside").wait_for()
    driving.settle(page)


@pytest.mark.parametrize("mess", MESSES, ids=lambda mess: mess.file)
def test_an_untidy_file_is_mended_and_read(page: Page, tmp_path: Path, mess: Mess) -> None:
    file = tmp_path / mess.file
    file.write_bytes(mess.content())
    driving.drop(page, file)
    for words in mess.instead:
        page.locator(".st-key-reader").get_by_role("button", name=words, exact=True).click()
        page.locator(".st-key-reader").get_by_role("button", name=words, exact=True).wait_for(state="detached")
        driving.settle(page)
    driving.go(page, "Lay out")
    mend_the_level(page, mess)
    set_rows_aside(page, mess.rows)
    expect(page.locator("h1.station").nth(1)).to_have_text(mess.told)
    assert mess.counts in counts_read_out(page)
    assert page.locator('[data-testid="stException"]').count() == 0
    assert driving.runs_out(page) == []
