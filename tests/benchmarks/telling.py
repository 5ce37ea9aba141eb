"""How long the slides take, and a key of the walk-through against a bare page with one chart: `python -m tests.benchmarks.telling`."""

import statistics
import tempfile
import time
from pathlib import Path

from playwright.sync_api import Browser, Page

from app import boards
from app.exports import deck, images
from tests.app import designs
from tests.browser import driving

TURNS = 12
BARE = """
import plotly.graph_objects as go
import streamlit as st

def go_to(place):
    st.query_params["board"] = str(place)

place = int(st.query_params.get("board", "1"))
st.html(f"<h1 class='station'>Bare</h1><p class='place'>{place} of 99</p>")
drawn = go.Figure(go.Scatter(x=list(range(72)), y=[(k * 7) % 11 for k in range(72)], mode="markers"))
st.plotly_chart(drawn.update_layout(title=str(place)))
st.button("Next", key="tell_next", shortcut="Right", on_click=go_to, args=(place + 1,))
"""


def main() -> None:
    """Print the times of the slides of a 3 × 4 study, and of a key on both pages with their ratio."""
    findings = designs.basil()
    for turn in ("first", "again"):
        start = time.perf_counter()
        size = len(deck.build(boards.story(findings), findings))
        print(f"slides of a 3 × 4 study, {turn}: {time.perf_counter() - start:.2f} s, {size // 1024} kB")
    with tempfile.TemporaryDirectory() as folder, driving.browser(images.browser()) as running:
        script = Path(folder) / "bare.py"
        script.write_text(BARE, encoding="utf-8")
        with driving.dashboard(str(script)) as plain, driving.dashboard() as whole:
            bare, walk = timed(driving.open_page(running, plain), walk_on(running, whole))
    print(f"key to painted board: {walk * 1000:.0f} ms, bare page {bare * 1000:.0f} ms, ratio {walk / bare:.2f}")


def walk_on(running: Browser, address: str) -> Page:
    """Return a page that stands in the walk-through, where the boards of the slices begin, each with one chart as on the bare page."""
    page = driving.open_page(running, address)
    driving.open_sample(page)
    driving.go(page, "Tell")
    page.locator(".st-key-tell_start button").click()
    page.locator("h1.claim").wait_for()
    driving.settle(page)
    for place in range(2, 7):
        turn(page, place)
    return page


def timed(bare: Page, walk: Page) -> tuple[float, float]:
    """Return the median times in seconds from the key to the next board painted, on both pages turn by turn, so that both wait alike."""
    taken: tuple[list[float], list[float]] = ([], [])
    for step in range(TURNS):
        taken[0].append(turn(bare, step + 2))
        up = (step // 3) % 2 == 1
        taken[1].append(turn(walk, 4 + step % 3 if up else 5 - step % 3, "ArrowRight" if up else "ArrowLeft"))
    return statistics.median(taken[0]), statistics.median(taken[1])


def turn(page: Page, to: int, key: str = "ArrowRight") -> float:
    """Press a key and wait until the board is painted; return how long it took."""
    start = time.perf_counter()
    page.keyboard.press(key)
    page.wait_for_function("place => document.querySelector('.place')?.textContent.startsWith(place + ' of')", arg=str(to))
    driving.settle(page)
    return time.perf_counter() - start


if __name__ == "__main__":
    main()
