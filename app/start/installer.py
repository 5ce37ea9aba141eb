"""How pip is run, and how its talk becomes one live line and, when it fails, one sentence."""

import queue
import re
import subprocess
import sys
import threading
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path

from app.start.live_line import LiveLine
from app.start.problems import SetupProblem

OPTIONS = (
    "--disable-pip-version-check",
    "--no-input",
    "--progress-bar=off",
    "--only-binary=:all:",  # nothing is compiled on a user's machine; a missing wheel is told in a sentence
    "--no-compile",  # Python compiles what is imported; compiling every module of every package takes longer than the rest
    "--retries=3",
)
FETCHED = re.compile(
    r"^\s*(?:Downloading|Using cached|Processing) (?:\S*/)?(?P<name>[\w.]+)-(?P<version>[\w.!+]+)-[^ ]+\.whl"
    r"(?: \((?P<size>\d[^)]*)\))?(?: \(from .*)?$"
)
INSTALLING = "Installing collected packages: "
UNREACHABLE = ("Retrying (", "ConnectionError", "NewConnectionError", "NameResolutionError", "ProxyError", "ConnectTimeoutError")


class NothingChanged(SetupProblem):
    """pip gave up before it touched the environment."""


def install(python: Path, pins: Sequence[Path], log: Path) -> None:
    """Install files of pins with the pip of a Python; progress goes to standard error, pip's own words to the log.

    Raises SetupProblem, and its kind NothingChanged when the environment is as it was.
    """
    listed = [part for file in pins for part in ("-r", str(file))]
    command = [str(python), "-I", "-m", "pip", "install", *OPTIONS, *listed]
    line = LiveLine(sys.stderr)
    line.keep(f"Fetching and installing the packages listed in {named(pins)}.")
    talk: list[str] = []
    status = _run(command, lambda text: _hear(text, talk, line), line.tick)
    log.write_text("\n".join(talk) + "\n", encoding="utf-8")
    if status != 0:
        line.clear()
        raise _problem(talk, pins, log)
    line.keep(f"Set up in {line.seconds:.0f} s.")


def _run(command: Sequence[str], hear: Callable[[str], None], tick: Callable[[], None]) -> int:
    """Run a command; hand on each line that it says, and tick once a second while it is silent."""
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, stdin=subprocess.DEVNULL) as process:
        assert process.stdout is not None  # asked for above
        lines: queue.SimpleQueue[str | None] = queue.SimpleQueue()
        threading.Thread(target=_pass_on, args=(process.stdout, lines), daemon=True).start()
        for text in _ticking(lines, tick):
            hear(text)
    return process.returncode


def _pass_on(source: Iterator[bytes], lines: "queue.SimpleQueue[str | None]") -> None:
    for raw in source:
        lines.put(raw.decode("utf-8", "replace").rstrip())
    lines.put(None)


def _ticking(lines: "queue.SimpleQueue[str | None]", tick: Callable[[], None]) -> Iterator[str]:
    while True:
        try:
            text = lines.get(timeout=1)
        except queue.Empty:
            tick()
            continue
        if text is None:
            return
        yield text


def _hear(text: str, talk: list[str], line: LiveLine) -> None:
    talk.append(text)
    news = told(text)
    if news:
        line.show(news)


def told(text: str) -> str | None:
    """Return the news in a line of pip's, in a few words, or None where there is none for the user."""
    if fetched := FETCHED.match(text):
        name, version, size = fetched.groups()
        return f"fetching {name} {version}" + (f" ({size})" if size else "")
    if text.startswith(INSTALLING):
        return f"installing {text.count(',') + 1} packages"
    if text.startswith("Collecting "):
        return f"looking up {re.split(r'[^A-Za-z0-9._-]', text.split()[1])[0]}"
    if "Retrying (" in text:
        return "the package index does not answer, trying again"
    return None


def _problem(talk: Sequence[str], pins: Sequence[Path], log: Path) -> SetupProblem:
    kind = SetupProblem if any(text.startswith(INSTALLING) for text in talk) else NothingChanged
    return kind(reason(talk, pins, log))


def reason(talk: Sequence[str], pins: Sequence[Path], log: Path) -> str:
    """Return one sentence on why pip failed and what would help."""
    files = named(pins)
    everything = "\n".join(talk)
    if any(word in everything for word in UNREACHABLE):
        return (
            f"The packages listed in {files} are not installed yet and no package index can be reached: "
            "connect this computer to a network and run the same command again."
        )
    if "No space left on device" in everything:
        return "The disk is full: the packages need about 1 GB; make room and run the same command again."
    if missing := re.search(r"No matching distribution found for (\S+)", everything):
        name, _, version = missing[1].partition("==")
        return (
            f"The package {name} {version}".rstrip() + f" is not installed yet and pip finds none for Python {sys.version_info.major}."
            f"{sys.version_info.minor} on this system: check the network and pip's settings, or use Python 3.11 to 3.14."
        )
    errors = [text.removeprefix("ERROR: ") for text in talk if text.startswith("ERROR: ")]
    said = errors[-1][:300].rstrip(".") if errors else "nothing that explains it"
    return f"The packages listed in {files} could not be installed; pip said “{said}”, and all of its words are in {log}."


def named(pins: Sequence[Path]) -> str:
    """Return the names of files of pins as a person says them: "requirements.txt and tests/requirements.txt"."""
    return " and ".join(f"tests/{file.name}" if file.parent.name == "tests" else file.name for file in pins)
