"""The options of `python app`, and the port that it takes."""

import ast
import importlib
import socket
from collections.abc import Iterator
from pathlib import Path

import pytest

from app.start import launch
from app.start.problems import SetupProblem


@pytest.fixture
def taken() -> Iterator[int]:
    """A port at which somebody listens."""
    with socket.create_server((launch.HOST, 0)) as server:
        yield server.getsockname()[1]


def test_a_taken_port_is_told_in_one_sentence(taken: int, capsys: pytest.CaptureFixture[str]) -> None:
    assert launch.main(["--port", str(taken), "--no-browser"]) == 1
    told = capsys.readouterr()
    assert told.err.startswith(f"Port {taken} is taken")
    assert told.err.count("\n") == 1
    assert not told.out


@pytest.mark.parametrize("port", [0, -1, 65536])
def test_a_number_that_is_no_port_is_told(port: int) -> None:
    with pytest.raises(SetupProblem, match="takes a number from 1 to 65535"):
        launch.asked_port(port)


def test_a_free_port_is_looked_for_past_taken_ones(taken: int, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(launch, "FIRST_PORT", taken)
    assert taken < launch.free_port() < taken + launch.PORTS_TRIED


def test_a_long_run_of_taken_ports_is_told(taken: int, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(launch, "FIRST_PORT", taken)
    monkeypatch.setattr(launch, "PORTS_TRIED", 1)
    with pytest.raises(SetupProblem, match="name a free one with --port"):
        launch.free_port()


def test_nothing_else_is_passed_on() -> None:
    with pytest.raises(SystemExit):
        launch.parse(["--server.address", "0.0.0.0"])


def test_a_browser_is_fetched_into_the_environment_and_nothing_is_served(monkeypatch: pytest.MonkeyPatch) -> None:
    became: list[str] = []
    monkeypatch.setattr(launch.environment, "prepare", lambda pins: Path("python"))
    monkeypatch.setattr(launch.environment, "become", lambda python, *words: became.extend(words) or 0)
    assert launch.main(["--fetch-browser"]) == 0
    assert became == ["-c", launch.FETCH]
    names = [node for node in ast.walk(ast.parse(launch.FETCH)) if isinstance(node, ast.ImportFrom)]
    assert all(hasattr(importlib.import_module(str(node.module)), name.name) for node in names for name in node.names)
