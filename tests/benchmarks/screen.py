"""How long a switch takes to repaint Answer or Compare, against a bare page with one chart: `python -m tests.benchmarks.screen`.

Both pages stand open in one browser and take turns, so that a busy machine slows both. Printed are medians and their ratio, for a
switch whose both choices were seen before and, as "first", for one that has to be computed.
"""

import argparse
import statistics
import tempfile
import time
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import pandas as pd
from playwright.sync_api import Browser, Page

from app.exports import images
from tests.browser import driving

ROWS = (60, 1_000, 100_000)
TIMES = 6
BARE = """
import pandas as pd
import plotly.graph_objects as go
import streamlit as st

st.html("<h1 class='station'>Bare</h1>")
picked = st.selectbox("Level", ["90 %", "95 %"], index=1, key="choice_confidence")
seen = st.cache_data(pd.read_csv)("{file}").iloc[:: max(1, {rows} // 12_000)]
places = seen["b"].str[1:].astype(int)
drawn = go.Figure((go.Scattergl if len(seen) > 3_000 else go.Scatter)(x=places, y=seen["y"], mode="markers"))
st.plotly_chart(drawn.update_layout(title=picked), key="interaction")
st.html(f"<p class='caption'>with {{picked[:2]}}\u202f% confidence</p>")
"""


@dataclass(frozen=True)
class Choice:
    """One option of a select box and what the page shows once it is repainted with it."""

    option: str
    shows: str  # a selector


@dataclass(frozen=True)
class Switch:
    """A select box of a station with two options to go to and fro between."""

    station: str
    key: str
    first: Choice
    second: Choice


def _caption(words: str) -> str:
    return f'.caption:has-text("{words}")'


CONFIDENCE = (Choice("90 %", _caption("90\u202f% confidence")), Choice("95 %", _caption("95\u202f% confidence")))
SWITCHES = (
    Switch("Answer", "choice_confidence", *CONFIDENCE),
    Switch(
        "Answer",
        "choice_model",
        Choice("Without", _caption("Lines: cell means of the model")),
        Choice("With interaction", _caption("Lines: cell means with")),
    ),
    Switch(
        "Answer",
        "choice_scale",
        Choice("Square root", _caption("Lines: back-transformed")),
        Choice("As measured", _caption("Lines: cell means with")),
    ),
    Switch(
        "Answer",
        "choice_axis",
        Choice("a", '.st-key-interaction .xtitle:text-is("a")'),
        Choice("b", '.st-key-interaction .xtitle:text-is("b")'),
    ),
    Switch(
        "Compare",
        "choice_adjust",
        Choice("Holm, step by step", _caption("Holm: the same")),
        Choice("Tukey-Kramer, all pairs", _caption("Tukey-Kramer: the")),
    ),
)
PLAIN = Switch("", "choice_confidence", Choice("90 %", _caption("with 90")), Choice("95 %", _caption("with 95")))


def main() -> None:
    """Time both pages for each number of rows and each switch, and print the ratios."""
    asked = argparse.ArgumentParser(description=__doc__)
    asked.add_argument("rows", nargs="*", type=int, default=ROWS)
    rows_asked = asked.parse_args().rows
    with tempfile.TemporaryDirectory() as folder, driving.browser(images.browser()) as running:
        for rows in rows_asked:
            file = Path(folder) / f"{rows}.csv"
            invented(rows).to_csv(file, index=False)
            bare = Path(folder) / f"bare_{rows}.py"
            bare.write_text(BARE.format(file=file, rows=rows), encoding="utf-8")
            for line in compared(running, str(bare), file):
                print(f"{rows:>7} rows, {line}", flush=True)


def invented(rows: int) -> pd.DataFrame:
    """Return an invented experiment of 3 × 4 with so many rows."""
    chance, at = np.random.default_rng(5), np.arange(rows)
    a, b = at % 3, at // 3 % 4
    return pd.DataFrame({"y": np.round(10 + a * b + chance.normal(size=rows), 3), "a": [f"a{k}" for k in a], "b": [f"b{k}" for k in b]})


def compared(running: Browser, script: str, file: Path) -> Iterator[str]:
    """Yield a line for each switch: the medians of both pages and their ratio."""
    with driving.dashboard(script) as bare_address, driving.dashboard() as address:
        plain, page = driving.open_page(running, bare_address), driving.open_page(running, address)
        driving.drop(page, file)
        for _ in range(2):
            turn(plain, PLAIN)
        for switch in SWITCHES:
            driving.go(page, switch.station)
            first, _ = turn(page, switch)
            taken = [(*turn(plain, PLAIN), *turn(page, switch)) for _ in range(TIMES)]
            bare = statistics.median(time for times in taken for time in times[:2])
            ours = statistics.median(time for times in taken for time in times[2:])
            told = f"{ours:.2f} s, bare page {bare:.2f} s, ratio {ours / bare:.2f}, first {first:.2f} s"
            yield f"{switch.station} {switch.key}: {told}"
        plain.context.close()
        page.context.close()


def turn(page: Page, switch: Switch) -> tuple[float, float]:
    """Return the seconds from choosing the first option to the page at rest, and from choosing the second."""
    return timed(page, switch.key, switch.first), timed(page, switch.key, switch.second)


def timed(page: Page, key: str, choice: Choice) -> float:
    """Return the seconds from choosing an option to the page at rest with what it shows."""
    page.bring_to_front()
    page.locator(f".st-key-{key} [role=combobox]").click()
    option = page.get_by_role("option", name=choice.option, exact=True)
    option.wait_for()
    start = time.perf_counter()
    option.click()
    page.locator(choice.shows).first.wait_for()
    driving.settle(page)
    return time.perf_counter() - start


if __name__ == "__main__":
    main()
