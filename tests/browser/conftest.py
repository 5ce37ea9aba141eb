"""What every browser test may ask for: the dashboard on a port of its own, a browser, and a page that is opened for one test."""

from collections.abc import Iterator

import pytest
from playwright.sync_api import Browser, Page

from tests.browser import driving


@pytest.fixture(scope="module")
def address() -> Iterator[str]:
    """The address of a dashboard that the tests of one file share."""
    with driving.dashboard() as told:
        yield told


@pytest.fixture(scope="module")
def running(chromium: str) -> Iterator[Browser]:
    """A browser that the tests of one file share."""
    with driving.browser(chromium) as started:
        yield started


@pytest.fixture
def page(running: Browser, address: str) -> Iterator[Page]:
    """A page of the dashboard, with nothing opened yet."""
    opened = driving.open_page(running, address)
    yield opened
    opened.context.close()
