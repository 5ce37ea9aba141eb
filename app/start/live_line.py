"""One line on the terminal that is written over while something lasts; in a log, a new line every few seconds."""

import shutil
import time
from typing import TextIO

LOG_SECONDS = 5.0  # where lines cannot be written over, news is told no more often than this


class LiveLine:
    """The line and the time since it was begun."""

    def __init__(self, out: TextIO) -> None:
        self._out = out
        self._over = out.isatty()
        self._begun = self._told = time.monotonic()
        self._news = ""

    @property
    def seconds(self) -> float:
        """Seconds since the line was begun."""
        return time.monotonic() - self._begun

    def show(self, news: str) -> None:
        """Write the news over what stood there."""
        self._news = news
        self.tick()

    def tick(self) -> None:
        """Write the news again with the seconds gone by, so that one sees it is alive."""
        text = f"  {self._news} · {self.seconds:.0f} s"
        if self._over:
            width = _width()
            self._write(f"\r{text[:width]:<{width}}")  # spaces, since not every terminal takes a code that clears the line
        elif time.monotonic() - self._told >= LOG_SECONDS:
            self._told = time.monotonic()
            self._write(f"{text}\n")

    def clear(self) -> None:
        """Take the news away."""
        if self._over:
            self._write(f"\r{'':{_width()}}\r")

    def keep(self, text: str) -> None:
        """Write a line that stays."""
        self.clear()
        self._write(f"{text}\n")

    def _write(self, text: str) -> None:
        self._out.write(text)
        self._out.flush()


def _width() -> int:
    return shutil.get_terminal_size().columns - 1
