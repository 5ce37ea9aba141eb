"""How a real browser is driven through the dashboard: the server started on a free port, the page opened, a station reached."""

import itertools
import socket
import subprocess
import sys
import time
import urllib.error
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from playwright.sync_api import Browser, Page, sync_playwright

ROOT = Path(__file__).resolve().parents[2]
PATIENCE = 60  # seconds before something counts as never coming
ARGUMENTS = ["--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage"]
READY = "h1.station"
ASKED = itertools.count()  # which wait a moment of stillness belongs to


def free_port() -> int:
    """Return a port of this machine that nobody listens at."""
    with socket.socket() as free:
        free.bind(("127.0.0.1", 0))
        return int(free.getsockname()[1])


@contextmanager
def dashboard(script: str = "app/main.py", port: int | None = None) -> Iterator[str]:
    """Run the dashboard, or another page, on a port of this machine, a free one unless one is given, and tell its address."""
    port = port or free_port()
    words = ["-m", "streamlit", "run", script, f"--server.port={port}", "--server.headless=true", "--server.fileWatcherType=none"]
    server = subprocess.Popen([sys.executable, *words], cwd=ROOT, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    try:
        address = f"http://127.0.0.1:{port}"
        _wait_for(address, server)
        yield address
    finally:
        server.terminate()
        server.wait(timeout=PATIENCE)


def _wait_for(address: str, server: subprocess.Popen[bytes]) -> None:
    """Return when the server answers; raise where it ends or never does."""
    give_up = time.monotonic() + PATIENCE
    while time.monotonic() < give_up:
        if server.poll() is not None:
            raise RuntimeError("the dashboard ended before it answered")
        try:
            urllib.request.urlopen(f"{address}/_stcore/health", timeout=1).close()
            return
        except (urllib.error.URLError, TimeoutError):
            time.sleep(0.1)  # between two knocks at the door of a server that is starting
    raise TimeoutError(f"no answer from {address}")


@contextmanager
def browser(path: str) -> Iterator[Browser]:
    """Run an installed browser of the Chromium family without a window."""
    with sync_playwright() as playwright:
        running = playwright.chromium.launch(executable_path=path, args=ARGUMENTS)
        try:
            yield running
        finally:
            running.close()


def open_page(running: Browser, address: str, width: int = 1366, height: int = 768, scheme: str = "light") -> Page:
    """Open the dashboard in a page of its own and wait until it is there."""
    context = running.new_context(viewport={"width": width, "height": height}, color_scheme=scheme, accept_downloads=True)  # type: ignore[arg-type]
    page = context.new_page()
    page.set_default_timeout(PATIENCE * 1000)
    page.goto(address)
    page.locator(READY).first.wait_for()
    settle(page)
    return page


def go(page: Page, title: str) -> None:
    """Go to a station by the bar at the top, and wait until it is drawn."""
    page.get_by_role("link", name=title, exact=True).first.click()
    page.wait_for_function("title => document.title.includes(title)", arg=f"{title} ·")
    page.locator(READY).first.wait_for()
    settle(page)


def settle(page: Page) -> None:
    """Wait until no script has run for a moment, nothing is stale and every figure is drawn; a click takes a moment to reach the server."""
    page.wait_for_function(
        """asked => {
            const app = document.querySelector('[data-testid="stApp"]');
            const waiting = '[data-testid="stSkeleton"], [data-stale="true"], [data-testid="stStatusWidget"]';
            const figures = [...document.querySelectorAll('[data-testid="stPlotlyChart"]')];
            const still = app && app.dataset.testScriptState === 'notRunning' && !document.querySelector(waiting)
                && figures.every(figure => figure.querySelector('.main-svg'));
            if (!still || window.stillFor?.asked !== asked) window.stillFor = {asked, since: performance.now()};
            return still && performance.now() - window.stillFor.since > 250;
        }""",
        arg=next(ASKED),
    )


def drop(page: Page, file: Path, shows: str = ".sheet") -> None:
    """Drop a file on the uploader and wait for what it shows once it was read: the table, or a notice."""
    page.locator(".st-key-bring_file input[type=file]").set_input_files(file)
    page.locator('.st-key-bring_file [data-testid="stFileChipName"]').get_by_text(file.name, exact=True).wait_for()
    page.locator(shows).first.wait_for()
    settle(page)


def open_sample(page: Page, place: int = 0) -> None:
    """Open the sample at this place of the list."""
    page.locator(".st-key-bring_sample [role=radiogroup] label").nth(place).click()
    page.locator(".sheet").first.wait_for()
    settle(page)


def runs_out(page: Page) -> list[str]:
    """Return what is wider than the page, or than the place it was given."""
    told: list[str] = page.evaluate(
        """() => {
            const main = document.querySelector('[data-testid="stMain"]');
            const wide = main.scrollWidth > main.clientWidth ? ['the page'] : [];
            const parts = [...main.querySelectorAll('p, h1, h2, li, table, label, button, svg.main-svg')];
            const out = box => box.width && (box.right > innerWidth + 1 || box.left < -1);
            const name = part => `${part.tagName} ${part.textContent.slice(0, 40)}`;
            return wide.concat(parts.filter(part => out(part.getBoundingClientRect())).map(name));
        }"""
    )
    return told


def cut_letters(page: Page) -> list[str]:
    """Return the letters of figures that reach beyond the figure."""
    told: list[str] = page.evaluate(
        """() => [...document.querySelectorAll('.js-plotly-plot')].flatMap(plot => {
            const frame = plot.getBoundingClientRect();
            return [...plot.querySelectorAll('text')].filter(text => text.textContent.trim()).filter(text => {
                const box = text.getBoundingClientRect();
                return box.left < frame.left - 1 || box.right > frame.right + 1 || box.top < frame.top - 1 || box.bottom > frame.bottom + 1;
            }).map(text => text.textContent);
        })"""
    )
    return told


def choose(page: Page, key: str, option: str) -> None:
    """Choose an option of the select box with this key; what follows from it is for the caller to await."""
    page.locator(f".st-key-{key} [role=combobox]").click()
    page.get_by_role("option", name=option, exact=True).click()


def save(page: Page, key: str, folder: Path) -> Path:
    """Press a download button and return where its file was put."""
    with page.expect_download(timeout=PATIENCE * 1000) as coming:
        page.locator(f".st-key-{key} button").click()
    file = folder / coming.value.suggested_filename
    coming.value.save_as(file)
    return file
