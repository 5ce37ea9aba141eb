"""Whoever works with a screen reader or the keyboard finds every control named, every text legible and the focus in sight."""

import pytest
from axe_playwright_python.sync_playwright import Axe
from playwright.sync_api import Browser, Page

from app.stations import STATIONS
from tests.browser import driving

GRAVE = {"serious", "critical"}  # how axe-core, the rules of the WCAG as a script, ranks what keeps somebody out
STEPS = 40  # of the tabulator key; the longest station has fewer controls in its first screens
PATIENCE = 10_000  # ms

# What has the focus without showing it: no outline, no shadow, and no edge in the accent colour on it or on the field around it.
UNSEEN = """() => {
    const at = document.activeElement;
    if (!at || at === document.body) return null;
    const accent = getComputedStyle(document.documentElement).getPropertyValue('--accent').trim();
    const probe = document.body.appendChild(document.createElement('i'));
    probe.style.color = accent;
    const colour = getComputedStyle(probe).color;
    probe.remove();
    const around = [at, at.firstElementChild];
    for (let part = at.parentElement, k = 0; part && k < 5; part = part.parentElement, k++) around.push(part);
    const seen = around.filter(part => part).map(part => getComputedStyle(part)).some(style =>
        (style.outlineStyle !== 'none' && parseFloat(style.outlineWidth) > 0) || style.boxShadow !== 'none'
        || (parseFloat(style.borderTopWidth) > 0 && style.borderTopColor === colour));
    return seen ? null : at.outerHTML.slice(0, 200);
}"""


def grave(page: Page) -> list[str]:
    """Return what axe-core holds against a page, with the first element of each kind."""
    found = Axe().run(page).response["violations"]
    return [f"{v['id']}: {v['nodes'][0]['html'][:200]} ({len(v['nodes'])})" for v in found if v["impact"] in GRAVE]


@pytest.mark.parametrize("scheme", ["light", "dark"])
def test_no_station_keeps_anybody_out(running: Browser, address: str, scheme: str) -> None:
    page = driving.open_page(running, address, scheme=scheme)
    assert grave(page) == []
    driving.open_sample(page, 1)
    for station in STATIONS:
        driving.go(page, station.title)
        assert grave(page) == [], station.title
    page.context.close()


def test_the_focus_is_always_in_sight(running: Browser, address: str) -> None:
    page = driving.open_page(running, address)
    driving.open_sample(page)
    for station in STATIONS:
        driving.go(page, station.title)
        for _ in range(STEPS):
            page.keyboard.press("Tab")
            page.wait_for_function(f"({UNSEEN})() === null", timeout=PATIENCE)  # an edge may take a moment to turn its colour
    page.context.close()
