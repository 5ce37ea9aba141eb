"""What every test may ask for: the checkout's folder, the samples, and a browser where there is one."""

import os
from pathlib import Path

import hypothesis
import pytest

from analysis.refusals import NoBrowser
from app import keeping
from app.exports import images

ROOT = Path(__file__).resolve().parents[1]
NO_BROWSER = "no browser of the Chromium family was found on this machine: install one to run the browser tests"

# A search that varies from run to run would make a failure hard to show to somebody else; the clock of a busy machine is no evidence.
hypothesis.settings.register_profile("crossgrain", deadline=None, derandomize=True, print_blob=True)
hypothesis.settings.load_profile("crossgrain")


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    """Mark what lies in tests/browser, let long files start first, and skip what needs a browser where there is none."""
    for item in items:
        if ROOT / "tests" / "browser" in item.path.parents:
            item.add_marker(pytest.mark.browser)
    items.sort(key=lambda item: (item.get_closest_marker("browser") is None, item.path.stem != "test_linters"))
    wanting = [item for item in items if item.get_closest_marker("browser")]
    if wanting and browser_path() is None:
        for item in wanting:
            item.add_marker(pytest.mark.skip(reason=NO_BROWSER))


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter) -> None:
    """Print what a test recorded as worth reading even when it passes, such as the digits reached."""
    for report in terminalreporter.getreports("passed"):
        for name, value in report.user_properties:
            if name == "printed":
                terminalreporter.write_line(str(value))


def browser_path() -> str | None:
    """Return the browser that pictures are drawn with, or None."""
    try:
        return images.browser()
    except NoBrowser:
        return None


@pytest.fixture(scope="session", autouse=True)
def private_folder(tmp_path_factory: pytest.TempPathFactory) -> None:
    """Keep the studies that tests open out of the user's own folder, also those of servers that a test starts."""
    os.environ[keeping.HOME] = str(tmp_path_factory.mktemp("home"))


@pytest.fixture(scope="session")
def root() -> Path:
    """The checkout."""
    return ROOT


@pytest.fixture(scope="session")
def samples() -> Path:
    """The folder of the sample experiments."""
    return ROOT / "sample_data"


@pytest.fixture(scope="session")
def chromium() -> str:
    """The path of an installed browser of the Chromium family; only for tests marked `browser`."""
    return images.browser()
