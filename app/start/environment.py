"""The private environment in the checkout: where it lies, which pins it holds, and how it comes to hold them.

Both commands need this module before anything is installed, so it and what it imports use the standard library alone.
"""

import hashlib
import importlib.util
import os
import shutil
import subprocess
import sys
import venv
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

from app.start import installer, turns
from app.start.problems import SetupProblem

ROOT = Path(__file__).resolve().parents[2]
APP_PINS = ROOT / "requirements.txt"
TEST_PINS = ROOT / "tests" / "requirements.txt"

DROPPED = (
    "PYTHONHOME",
    "PYTHONSAFEPATH",
    "PYTHONDONTWRITEBYTECODE",  # a start that compiles every package again takes ten seconds instead of two
)

Install = Callable[[Path, Sequence[Path], Path], None]  # (the environment's Python, the files of pins, the log to write)


@dataclass(frozen=True)
class Environment:
    """A folder with a Python of its own, and a stamp that says which pins were installed whole."""

    folder: Path

    @property
    def home(self) -> Path:
        """The folder that the standard library's venv makes and may clear."""
        return self.folder / "venv"

    @property
    def python(self) -> Path:
        """The environment's own Python."""
        return self.home / ("Scripts/python.exe" if os.name == "nt" else "bin/python")

    @property
    def stamp(self) -> Path:
        """A line for each file of pins: the digest of its pins. Written last, so that it vouches for the whole."""
        return self.folder / "installed.txt"

    def stands(self) -> bool:
        """Whether the environment's Python and the one that it was made from are both still there."""
        settings = self.home / "pyvenv.cfg"
        if not (self.python.exists() and settings.exists()):
            return False
        values = dict(line.partition(" = ")[::2] for line in settings.read_text(encoding="utf-8").splitlines())
        return Path(values.get("home", "")).is_dir()

    def holds(self, pins: Sequence[Path]) -> bool:
        """Whether exactly these pins, among others or alone, were installed to the end."""
        if not (self.stamp.exists() and self.stands()):
            return False
        return {digest(file) for file in pins} <= set(self.stamp.read_text(encoding="utf-8").split())


PRIVATE = Environment(ROOT / ".environment")


def digest(pins: Path) -> str:
    """Return a digest of the pins in a file; comments, order and line ends do not count."""
    lines = (line.partition("#")[0].strip() for line in pins.read_text(encoding="utf-8").splitlines())
    return hashlib.sha256("\n".join(sorted(filter(None, lines))).encode()).hexdigest()


def prepare(pins: Sequence[Path], environment: Environment = PRIVATE, install: Install = installer.install) -> Path:
    """Return the environment's Python once it holds the pins; what it holds already is not installed again.

    Raises SetupProblem, one sentence, when it cannot be done.
    """
    if not environment.holds(pins):
        try:
            with turns.taken(environment.folder):
                if not environment.holds(pins):  # somebody else may have done it while this process waited
                    _bring_up_to_date(environment, pins, install)
        except OSError as error:
            raise SetupProblem(
                f"The private environment in {environment.folder} could not be written ({error.strerror or error}): "
                "see that the folder may be changed and that there is about 1 GB of free space."
            ) from error
    return environment.python


def _bring_up_to_date(environment: Environment, pins: Sequence[Path], install: Install) -> None:
    """Install the pins into the environment as it stands, or into a new one where no stamp vouches for it."""
    vouched = environment.stamp.read_text(encoding="utf-8") if environment.stamp.exists() and environment.stands() else None
    environment.stamp.unlink(missing_ok=True)
    if vouched is None:
        _make_anew(environment)
    try:
        install(environment.python, pins, environment.folder / "pip.log")
    except installer.NothingChanged:
        if vouched is not None:
            _write_stamp(environment, vouched)
        raise
    _write_stamp(environment, "".join(f"{digest(file)}\n" for file in pins))


def _make_anew(environment: Environment) -> None:
    """Make an empty environment; whatever an interrupted set-up left behind is removed first."""
    if importlib.util.find_spec("ensurepip") is None:
        raise SetupProblem(
            "This Python lacks ensurepip, which makes private environments: install the package python3-venv "
            "(Debian, Ubuntu) or use a Python that has it."
        )
    sys.stderr.write(f"Making a private environment in {environment.folder.name} (removing that folder takes everything away again).\n")
    if environment.home.exists():
        shutil.rmtree(environment.home)
    try:
        venv.EnvBuilder(with_pip=True, symlinks=os.name != "nt").create(environment.home)
    except subprocess.CalledProcessError as error:
        raise SetupProblem(
            f"Python {sys.version_info.major}.{sys.version_info.minor} could not make a private environment in "
            f"{environment.home}: its module venv failed with status {error.returncode}."
        ) from error


def _write_stamp(environment: Environment, text: str) -> None:
    unfinished = environment.stamp.with_suffix(".new")
    unfinished.write_text(text, encoding="utf-8")
    unfinished.replace(environment.stamp)


def variables() -> dict[str, str]:
    """Return the variables for a process in the environment: the checkout is importable, a user's own packages are not."""
    kept = {name: value for name, value in os.environ.items() if name not in DROPPED}
    return kept | {"PYTHONPATH": str(ROOT), "PYTHONNOUSERSITE": "1"}


def become(python: Path, *arguments: str) -> int:
    """Go on as another process in the checkout; where the system cannot do that, wait for it and return its status."""
    command = [str(python), *arguments]
    os.chdir(ROOT)
    sys.stdout.flush()
    sys.stderr.flush()
    if os.name != "nt":
        os.execve(command[0], command, variables())
    with subprocess.Popen(command, env=variables()) as process:
        while True:
            try:
                return process.wait()
            except KeyboardInterrupt:
                continue  # the process heard it as well and ends in its own way
