"""Pictures of every station for people to look at, and the one that README shows: `python -m tests.browser.take_screenshots FOLDER`."""

import argparse
from pathlib import Path

from playwright.sync_api import Browser, Page

from app import samples
from app.exports import images
from app.stations import STATIONS
from tests.browser import driving

SIZES = ((1366, 768), (1920, 1080))
SCHEMES = ("light", "dark")
SHOWN = driving.ROOT / "app" / "assets" / "answer.png"  # what README shows
SHOWN_STATION, SHOWN_SIZE = "answer", SIZES[0]


def main() -> None:
    """Take the pictures."""
    asked = argparse.ArgumentParser(description=__doc__)
    asked.add_argument("folder", type=Path, help="where the pictures go")
    asked.add_argument("--whole", action="store_true", help="whole pages, not only what a screen shows")
    options = asked.parse_args()
    options.folder.mkdir(parents=True, exist_ok=True)
    with driving.dashboard() as address, driving.browser(images.browser()) as running:
        for scheme in SCHEMES:
            for size in SIZES:
                for place in range(len(samples.SAMPLES)):
                    walk(running, address, size, scheme, place, options)


def walk(running: Browser, address: str, size: tuple[int, int], scheme: str, place: int, options: argparse.Namespace) -> None:
    """Open a sample and picture each station at one size in one scheme."""
    page = driving.open_page(running, address, *size, scheme=scheme)
    driving.open_sample(page, place)
    for number, station in enumerate(STATIONS, start=1):
        driving.go(page, station.title)
        name = f"sample{place + 1}-{scheme}-{size[0]}-{number}-{station.name}.png"
        if options.whole:
            grow(page, size)
        page.screenshot(path=options.folder / name)
        if options.whole:
            page.set_viewport_size({"width": size[0], "height": size[1]})
        elif (station.name, size, scheme, place) == (SHOWN_STATION, SHOWN_SIZE, "light", 0):
            page.screenshot(path=SHOWN)
    page.context.close()


def grow(page: Page, size: tuple[int, int]) -> None:
    """Make the window as high as its page."""
    height = page.evaluate("""document.querySelector('[data-testid="stMain"]').scrollHeight""")
    page.set_viewport_size({"width": size[0], "height": max(height, size[1])})
    driving.settle(page)


if __name__ == "__main__":
    main()
