"""pip's talk: what is told of it while it runs, and the one sentence when it fails."""

import os
from pathlib import Path

import pytest

from app.start import installer
from app.start.problems import SetupProblem

PINS = [Path("requirements.txt"), Path("tests/requirements.txt")]
LOG = Path("pip.log")

# Lines as pip 23 and 25 print them.
TALK = {
    "Collecting numpy==2.4.6 (from -r requirements.txt (line 7))": "looking up numpy",
    "Collecting click<9,>=7.0 (from streamlit==1.67.0)": "looking up click",
    "Downloading pandas-3.1.1-cp311-cp311-manylinux_2_28_x86_64.whl (12.4 MB)": "fetching pandas 3.1.1 (12.4 MB)",
    "  Downloading kaleido-1.5.1-py3-none-any.whl (55 kB)": "fetching kaleido 1.5.1 (55 kB)",
    "Using cached python_docx-1.2.0-py3-none-any.whl (252 kB)": "fetching python_docx 1.2.0 (252 kB)",
    "Processing ./wheels/numpy-2.4.6-cp311-cp311-linux_x86_64.whl (from -r requirements.txt (line 7))": "fetching numpy 2.4.6",
    "Installing collected packages: pytz, numpy, pandas": "installing 3 packages",
    "WARNING: Retrying (Retry(total=2, connect=None)) after connection broken": "the package index does not answer, trying again",
}
QUIET = [
    "  Downloading pandas-3.1.1-cp311-cp311-manylinux_2_28_x86_64.whl.metadata (79 kB)",
    "Looking in links: ./wheels",
    "Successfully installed numpy-2.4.6",
    "",
]

FAILURES = {
    "no network": (
        ["WARNING: Retrying (Retry(total=0)) after connection broken", "ERROR: No matching distribution found for numpy==2.4.6"],
        "The packages listed in requirements.txt and tests/requirements.txt are not installed yet and no package index can be reached: "
        "connect this computer to a network and run the same command again.",
    ),
    "not offered": (
        ["ERROR: Could not find a version (from versions: none)", "ERROR: No matching distribution found for numpy==2.4.6"],
        "The package numpy 2.4.6 is not installed yet",
    ),
    "disk": (["ERROR: Could not install packages due to an OSError: [Errno 28] No space left on device"], "The disk is full"),
    "anything else": (["ERROR: first", "ERROR: The wheel is broken."], "pip said “The wheel is broken”, and all of its words are in"),
    "silence": ([], "pip said “nothing that explains it”"),
}


@pytest.mark.parametrize(("line", "news"), TALK.items())
def test_pip_is_told_in_a_few_words(line: str, news: str) -> None:
    assert installer.told(line) == news


@pytest.mark.parametrize("line", QUIET)
def test_the_rest_is_not_told(line: str) -> None:
    assert installer.told(line) is None


@pytest.mark.parametrize(("talk", "sentence"), FAILURES.values(), ids=FAILURES)
def test_a_failure_is_one_sentence(talk: list[str], sentence: str) -> None:
    told = installer.reason(talk, PINS, LOG)
    assert sentence in told
    assert "\n" not in told
    assert told.endswith(".")
    assert ". " not in told


def stand_in(folder: Path, talk: str, status: int) -> Path:
    """Make a program that says what pip would say, in place of the environment's Python."""
    program = folder / "python"
    program.write_text(f"#!/bin/sh\ncat <<'END'\n{talk}\nEND\nexit {status}\n", encoding="utf-8")
    program.chmod(0o755)
    return program


posix = pytest.mark.skipif(os.name == "nt", reason="the stand-in for pip is a shell script")


@posix
def test_a_good_run_keeps_pips_words(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    python = stand_in(tmp_path, "Collecting numpy==2.4.6\nInstalling collected packages: numpy", 0)
    installer.install(python, PINS, tmp_path / "pip.log")
    assert "Collecting numpy" in (tmp_path / "pip.log").read_text(encoding="utf-8")
    first, last = capsys.readouterr().err.splitlines()
    assert first == "Fetching and installing the packages listed in requirements.txt and tests/requirements.txt."
    assert last.startswith("Set up in ")


@posix
@pytest.mark.parametrize(
    ("talk", "kind"),
    [
        ("ERROR: No matching distribution found for numpy==2.4.6", installer.NothingChanged),
        ("Installing collected packages: numpy\nERROR: oh", SetupProblem),
    ],
)
def test_a_failed_run_says_whether_anything_was_touched(tmp_path: Path, talk: str, kind: type[SetupProblem]) -> None:
    with pytest.raises(SetupProblem) as told:
        installer.install(stand_in(tmp_path, talk, 1), PINS, tmp_path / "pip.log")
    assert type(told.value) is kind
