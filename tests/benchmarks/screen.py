"""How long a switch takes to repaint Answer, against a bare page with one chart: `python -m tests.benchmarks.screen`."""

import statistics
import tempfile
import time
from pathlib import Path

import numpy as np
import pandas as pd
from playwright.sync_api import Browser, Page

from app.exports import images
from tests.browser import driving

ROWS = (60, 1_000)
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


def main() -> None:
    """Time both pages for each number of rows and print the ratio."""
    with tempfile.TemporaryDirectory() as folder, driving.browser(images.browser()) as running:
        for rows in ROWS:
            file = Path(folder) / f"{rows}.csv"
            invented(rows).to_csv(file, index=False)
            bare = Path(folder) / f"bare_{rows}.py"
            bare.write_text(BARE.format(file=file, rows=rows), encoding="utf-8")
            plain, whole = on_bare_page(running, str(bare)), on_answer(running, file)
            print(f"{rows} rows: {whole:.2f} s, bare page {plain:.2f} s, ratio {whole / plain:.2f}")


def invented(rows: int) -> pd.DataFrame:
    """Return an invented experiment of 3 × 4 with so many rows."""
    chance, at = np.random.default_rng(5), np.arange(rows)
    a, b = at % 3, at // 3 % 4
    return pd.DataFrame({"y": np.round(10 + a * b + chance.normal(size=rows), 3), "a": [f"a{k}" for k in a], "b": [f"b{k}" for k in b]})


def on_bare_page(running: Browser, script: str) -> float:
    """Return the time of a switch on a page with one chart and nothing else."""
    with driving.dashboard(script) as address:
        page = driving.open_page(running, address)
        return timed(page)


def on_answer(running: Browser, file: Path) -> float:
    """Return the time of a switch on the station Answer."""
    with driving.dashboard() as address:
        page = driving.open_page(running, address)
        driving.drop(page, file)
        driving.go(page, "Answer")
        return timed(page)


def timed(page: Page) -> float:
    """Return the median time in seconds from choosing a confidence to the page at rest, both choices seen once before."""
    taken = []
    for turn in range(TIMES + 2):
        level = ("90", "95")[turn % 2]
        page.locator(".st-key-choice_confidence [role=combobox]").click()
        option = page.get_by_role("option", name=f"{level} %", exact=True)
        option.wait_for()
        start = time.perf_counter()
        option.click()
        page.locator(".caption").get_by_text(f"{level}\u202f% confidence").first.wait_for()
        driving.settle(page)
        taken.append(time.perf_counter() - start)
    page.context.close()
    return statistics.median(taken[2:])


if __name__ == "__main__":
    main()
