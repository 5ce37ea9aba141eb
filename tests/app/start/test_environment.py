"""The private environment: set up once, again when the pins change, and anew after an interruption."""

import threading
import venv
from collections.abc import Sequence
from pathlib import Path

import pytest

from app.start import environment, installer
from app.start.environment import Environment
from app.start.problems import SetupProblem


class Installs:
    """An installer that writes down what it was asked for, and fails once where it is told to."""

    def __init__(self) -> None:
        self.asked: list[tuple[str, ...]] = []
        self.failure: BaseException | None = None

    def __call__(self, python: Path, pins: Sequence[Path], log: Path) -> None:
        assert python.exists()
        self.asked.append(tuple(file.name for file in pins))
        (python.parents[1] / "installed").touch()
        if self.failure:
            failure, self.failure = self.failure, None
            raise failure


@pytest.fixture
def installs() -> Installs:
    return Installs()


@pytest.fixture
def private(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Environment:
    """An environment of its own, made without pip, which takes most of the time."""
    whole = venv.EnvBuilder
    monkeypatch.setattr(environment.venv, "EnvBuilder", lambda with_pip, symlinks: whole(with_pip=False, symlinks=symlinks))
    return Environment(tmp_path / ".environment")


@pytest.fixture
def pins(tmp_path: Path) -> list[Path]:
    file = tmp_path / "requirements.txt"
    file.write_text("numpy==1.0\npandas==2.0\n", encoding="utf-8")
    return [file]


def test_a_second_start_installs_nothing(private: Environment, pins: list[Path], installs: Installs) -> None:
    first = environment.prepare(pins, private, installs)
    assert environment.prepare(pins, private, installs) == first == private.python
    assert installs.asked == [("requirements.txt",)]


def test_changed_pins_are_installed_into_the_same_environment(private: Environment, pins: list[Path], installs: Installs) -> None:
    environment.prepare(pins, private, installs)
    kept = private.home / "kept"
    kept.touch()
    pins[0].write_text("numpy==1.1\npandas==2.0\n", encoding="utf-8")
    environment.prepare(pins, private, installs)
    assert len(installs.asked) == 2
    assert kept.exists()


@pytest.mark.parametrize("text", ["# a remark\npandas==2.0  # why\n\nnumpy==1.0\n", "numpy==1.0\r\npandas==2.0\r\n"])
def test_remarks_order_and_line_ends_are_no_change(private: Environment, pins: list[Path], installs: Installs, text: str) -> None:
    environment.prepare(pins, private, installs)
    pins[0].write_text(text, encoding="utf-8", newline="")
    environment.prepare(pins, private, installs)
    assert len(installs.asked) == 1


def test_an_interrupted_set_up_starts_afresh(private: Environment, pins: list[Path], installs: Installs) -> None:
    installs.failure = KeyboardInterrupt()
    with pytest.raises(KeyboardInterrupt):
        environment.prepare(pins, private, installs)
    half = private.home / "half a package"
    half.touch()
    environment.prepare(pins, private, installs)
    assert not half.exists()
    assert private.holds(pins)


def test_an_update_that_changed_nothing_leaves_what_was_there(private: Environment, pins: list[Path], installs: Installs) -> None:
    before = pins[0].read_text(encoding="utf-8")
    environment.prepare(pins, private, installs)
    pins[0].write_text("numpy==9.9\n", encoding="utf-8")
    installs.failure = installer.NothingChanged("No package index can be reached.")
    with pytest.raises(SetupProblem, match="No package index"):
        environment.prepare(pins, private, installs)
    pins[0].write_text(before, encoding="utf-8")
    assert private.holds(pins)


def test_an_update_that_stopped_half_way_is_done_afresh(private: Environment, pins: list[Path], installs: Installs) -> None:
    environment.prepare(pins, private, installs)
    before = pins[0].read_text(encoding="utf-8")
    pins[0].write_text("numpy==9.9\n", encoding="utf-8")
    installs.failure = SetupProblem("The disk is full.")
    with pytest.raises(SetupProblem, match="disk is full"):
        environment.prepare(pins, private, installs)
    pins[0].write_text(before, encoding="utf-8")
    assert not private.holds(pins)


def test_the_app_starts_from_what_the_tests_set_up(private: Environment, pins: list[Path], installs: Installs, tmp_path: Path) -> None:
    more = tmp_path / "more.txt"
    more.write_text("pytest==1.0\n", encoding="utf-8")
    environment.prepare([*pins, more], private, installs)
    environment.prepare(pins, private, installs)
    assert installs.asked == [("requirements.txt", "more.txt")]


def test_an_environment_whose_python_went_away_is_made_anew(private: Environment, pins: list[Path], installs: Installs) -> None:
    environment.prepare(pins, private, installs)
    private.python.unlink()
    environment.prepare(pins, private, installs)
    assert len(installs.asked) == 2
    assert private.python.exists()


def test_two_starts_at_once_set_up_once(private: Environment, pins: list[Path], installs: Installs) -> None:
    second = threading.Thread(target=environment.prepare, args=(pins, private, installs))

    def begin_another_meanwhile(python: Path, pins: Sequence[Path], log: Path) -> None:
        second.start()
        installs(python, pins, log)

    environment.prepare(pins, private, begin_another_meanwhile)
    second.join()
    assert len(installs.asked) == 1


def test_a_python_without_ensurepip_is_told(
    private: Environment, pins: list[Path], installs: Installs, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(environment.importlib.util, "find_spec", lambda name: None)
    with pytest.raises(SetupProblem, match="install the package python3-venv"):
        environment.prepare(pins, private, installs)


def test_a_folder_that_cannot_be_written_is_told(private: Environment, pins: list[Path], installs: Installs) -> None:
    private.folder.write_text("a file stands in the way", encoding="utf-8")
    with pytest.raises(SetupProblem, match=r"could not be written .* free space\.$"):
        environment.prepare(pins, private, installs)


def test_a_process_in_the_environment_sees_the_checkout_alone(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("PYTHONPATH", "elsewhere")
    monkeypatch.setenv("PYTHONHOME", "elsewhere")
    told = environment.variables()
    assert told["PYTHONPATH"] == str(environment.ROOT)
    assert "PYTHONHOME" not in told
