"""Five kinds of question are asked by pointing at the grid in a real browser, each answered with the engine's numbers."""

from collections.abc import Iterator

import pytest
from playwright.sync_api import Page, expect

from app import records, tabled
from tests.app import opening
from tests.browser import driving


@pytest.fixture(scope="module")
def page(chromium: str) -> Iterator[Page]:
    with driving.dashboard() as address, driving.browser(chromium) as running:
        opened = driving.open_page(running, address)
        driving.open_sample(opened)
        driving.go(opened, "Compare")
        yield opened
        opened.context.close()


def point(page: Page, text: str) -> None:
    """Click the mark of the grid that carries this text, once its figure stands still."""
    driving.settle(page)
    box = page.locator(".st-key-grid text").get_by_text(text, exact=True).first.bounding_box()
    assert box is not None
    page.mouse.move(box["x"] + box["width"] / 2, box["y"] + box["height"] / 2)
    page.mouse.down()
    page.mouse.up()


def in_sight(page: Page) -> list[str]:
    """Return what of question, sentence, figure and grid does not stand whole in the window, without scrolling."""
    told: list[str] = page.evaluate(
        """() => {
            const main = document.querySelector('[data-testid="stMain"]');
            const heads = document.querySelectorAll('h1.station');
            const parts = {
                question: heads[1], sentence: document.querySelector('.answer .sentence'),
                figure: document.querySelector('.st-key-differences .main-svg'), grid: document.querySelector('.st-key-grid .main-svg'),
            };
            const inside = box => box.top >= 0 && box.bottom <= innerHeight && box.height > 0;
            const missing = Object.keys(parts).filter(name => !parts[name] || !inside(parts[name].getBoundingClientRect()));
            return main.scrollTop > 0 ? [...missing, 'the page was scrolled'] : missing;
        }"""
    )
    return told


@pytest.mark.parametrize(
    ("marks", "asked", "family", "within"),
    [
        (["feed →"], "feed, averaged over light", "feed", None),
        (["Half shade"], "Within Half shade: feed", "feed within light", "Half shade"),
        (["Feed B"], "Within Feed B: light", "light within feed", "Feed B"),
    ],
)
def test_heads_and_names_ask(page: Page, marks: list[str], asked: str, family: str, within: str | None) -> None:
    for mark in marks:
        point(page, mark)
    expect(page.locator("h1.station").nth(1)).to_contain_text(asked)
    driving.settle(page)
    assert in_sight(page) == []
    frame = opening.findings(opening.sample()).comparisons[family]
    assert frame is not None
    table = page.locator(".st-key-compare_table").inner_text()
    for compared in records.lines(frame if within is None else frame[frame["within"] == within]):
        assert tabled.size(compared) in table


def test_two_cells_and_a_block_ask(page: Page) -> None:
    found = opening.findings(opening.sample())
    heading, choice = page.locator("h1.station").nth(1), page.locator(".st-key-compare_cells")
    point(page, "23.48")
    expect(choice).to_contain_text("Full sun, No feed")
    point(page, "30.22")
    expect(heading).to_contain_text("Within Full sun: Feed A against No feed")
    driving.settle(page)
    assert in_sight(page) == []
    point(page, "14.00")
    expect(choice).to_contain_text("Deep shade, No feed")
    point(page, "16.25")
    expect(heading).to_contain_text("Difference of differences: Feed A − No feed, with Deep shade against with Full sun")
    driving.settle(page)
    assert in_sight(page) == []
    assert found.interaction_contrasts is not None
    told = next(
        c for c in found.interaction_contrasts.itertuples() if c.rows == ["Full sun", "Deep shade"] and c.columns == ["No feed", "Feed A"]
    )
    assert f"{told.difference:.1f}".replace("-", "−") in page.locator(".st-key-compare_table").inner_text()
