"""Nothing is lost: a study comes back after a reload, after a restart of the server, and from its file, with the same numbers."""

from pathlib import Path

from playwright.sync_api import Page, expect

from tests.browser import driving
from tests.browser.messy_files import seeds


def mend(page: Page, tmp_path: Path) -> None:
    """Open a file, merge a level, and go to the answers."""
    file = tmp_path / "seeds.csv"
    file.write_bytes(seeds())
    driving.drop(page, file)
    driving.go(page, "Lay out")
    page.locator(".st-key-column_merge_0 button").click()
    page.locator(".st-key-column_merge_0").wait_for(state="detached")
    driving.go(page, "Answer")


def answers(page: Page) -> str:
    page.locator(".st-key-answers .sentence").first.wait_for()
    driving.settle(page)
    return str(page.locator(".st-key-answers").inner_text())


def test_a_study_outlives_reload_restart_and_goes_along_as_a_file(chromium: str, tmp_path: Path) -> None:
    port = driving.free_port()
    with driving.browser(chromium) as running:
        with driving.dashboard(port=port) as address:
            page = driving.open_page(running, address)
            mend(page, tmp_path)
            told = answers(page)
            page.reload()
            assert answers(page) == told
            driving.go(page, "Tell")
            study = driving.save(page, "save_study", tmp_path)
            driving.go(page, "Answer")
            there = page.url
        with driving.dashboard(port=port):
            page.goto(there)
            assert answers(page) == told
            page.locator(".st-key-undo button").click()
            page.wait_for_function("told => document.querySelector('.st-key-answers')?.innerText !== told", arg=told)
            driving.settle(page)
            page.locator(".st-key-redo button").click()
            page.wait_for_function("told => document.querySelector('.st-key-answers')?.innerText === told", arg=told)
            other = driving.open_page(running, address)
            expect(other.locator(".st-key-earlier")).to_contain_text("seeds.csv, light by feed")
            driving.drop(other, study)
            driving.go(other, "Answer")
            assert answers(other) == told
            assert study.name == "seeds.crossgrain"
