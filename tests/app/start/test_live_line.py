"""The live line: written over on a terminal, sparse in a log."""

import io

import pytest

from app.start import live_line
from app.start.live_line import LiveLine


class Terminal(io.StringIO):
    """Text that says it is a terminal."""

    def isatty(self) -> bool:
        return True


def test_a_terminal_is_written_over() -> None:
    out = Terminal()
    line = LiveLine(out)
    line.show("fetching one")
    line.show("fetching two")
    line.keep("Done.")
    shown = [text.strip() for text in out.getvalue().split("\r") if text.strip()]
    assert [text.partition(" ·")[0] for text in shown] == ["fetching one", "fetching two", "Done."]
    assert out.getvalue().count("\n") == 1


def test_a_log_gets_news_every_few_seconds(monkeypatch: pytest.MonkeyPatch) -> None:
    clock = iter([0.0, 1.0, 1.0, 6.0, 6.0, 6.0])
    monkeypatch.setattr(live_line.time, "monotonic", lambda: next(clock))
    out = io.StringIO()
    line = LiveLine(out)
    line.show("fetching one")
    line.show("fetching two")
    assert out.getvalue() == "  fetching two · 6 s\n"
