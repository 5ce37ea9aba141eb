"""Where studies are kept on this machine between two visits: a private folder of the user, a folder in it for each study."""

import hashlib
import json
import os
import re
import secrets
import shutil
import sys
import time
from collections.abc import Mapping
from dataclasses import dataclass
from itertools import accumulate
from pathlib import Path

from analysis import study_file
from analysis.refusals import StudyNotKept
from analysis.study_file import Saved

HOME = "CROSSGRAIN_HOME"  # the variable that names another folder
MOST, MOST_BYTES = 20, 2_000_000_000  # studies kept, and the size of their tables together; the oldest go first
_RECORD, _CONTENT = "study.json", "table"
_NAME = re.compile(r"[0-9a-f]{12}")


@dataclass(frozen=True)
class Earlier:
    """One study that is kept, as it is offered."""

    place: str  # its name in the folder, and in the address
    name: str  # of the file that was brought
    factors: tuple[str, ...]
    steps: int  # studies in its history
    content: str  # digest of the file that was brought
    when: float  # seconds since 1970, of the last change
    size: int  # bytes of the file that was brought


def folder() -> Path:
    """Return the folder that holds the studies; nothing is made."""
    asked = os.environ.get(HOME)
    return (Path(asked).expanduser() if asked else _data_folder()) / "studies"


def _data_folder() -> Path:
    """Return where programs keep a user's data on this system."""
    if sys.platform == "win32":
        return Path(os.environ.get("LOCALAPPDATA") or Path.home() / "AppData" / "Local") / "Crossgrain"
    if sys.platform == "darwin":
        return Path.home() / "Library" / "Application Support" / "Crossgrain"
    return Path(os.environ.get("XDG_DATA_HOME") or Path.home() / ".local" / "share") / "crossgrain"


def new_place() -> str:
    """Return a name for a study that is not kept yet."""
    return secrets.token_hex(6)


def keep(place: str, saved: Saved) -> str:
    """Write a study as it stands now and return the stamp of what was written; the table it was made of is written once.

    Raises OSError where that cannot be.
    """
    home = folder() / place
    known = home.is_dir()
    home.mkdir(mode=0o700, parents=True, exist_ok=True)
    content = home / _CONTENT
    if not content.exists() or content.stat().st_size != len(saved.content):
        _write(content, saved.content)
    _write(home / _RECORD, study_file.record(saved))
    if not known:
        _tidy(place)
    return stamp(place) or ""


def stamp(place: str) -> str | None:
    """Return what tells one writing of a study from another, None where it is not kept."""
    if not _NAME.fullmatch(place):
        return None
    try:
        return hashlib.sha256((folder() / place / _RECORD).read_bytes()).hexdigest()
    except OSError:  # not there, or not to be read
        return None


def _write(file: Path, data: bytes) -> None:
    """Write a file whole or not at all, for the user's eyes only."""
    unfinished = file.with_name(f"{file.name}.{secrets.token_hex(4)}.new")
    try:
        with open(os.open(unfinished, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600), "wb") as written:
            written.write(data)
        unfinished.replace(file)
    finally:
        unfinished.unlink(missing_ok=True)


def _tidy(place: str) -> None:
    """Remove the oldest studies beyond those kept, and others of the same file that were opened and never changed."""
    found = earlier()
    content = next((one.content for one in found if one.place == place), None)
    together = accumulate(one.size for one in found)
    for rank, (one, size) in enumerate(zip(found, together, strict=True)):
        untouched = one.content == content and one.steps == 1
        if one.place != place and (untouched or rank >= MOST or size > MOST_BYTES):
            forget(one.place)


def kept(place: str) -> Saved:
    """Return a study that is kept; raises StudyNotKept, or what a damaged record is refused with."""
    home = folder() / place
    if not _NAME.fullmatch(place) or not (home / _RECORD).is_file() or not (home / _CONTENT).is_file():
        raise StudyNotKept
    return study_file.restored((home / _RECORD).read_bytes(), (home / _CONTENT).read_bytes())


def forget(place: str) -> None:
    """Remove a study that is kept."""
    if _NAME.fullmatch(place):
        shutil.rmtree(folder() / place, ignore_errors=True)


def earlier() -> tuple[Earlier, ...]:
    """Return the studies that are kept, the latest first; what cannot be understood is passed over."""
    home = folder()
    if not home.is_dir():
        return ()
    found = [_told(one) for one in home.iterdir() if _NAME.fullmatch(one.name)]
    return tuple(sorted((one for one in found if one is not None), key=lambda one: one.when, reverse=True))


def _told(home: Path) -> Earlier | None:
    file = home / _RECORD
    try:
        record = json.loads(file.read_bytes())
        choices: dict[str, object] = {}
        for step in record["studies"][: record["open"] + 1]:
            choices |= step["changes"]
        factors = tuple(str(choices[role]) for role in ("row_factor", "column_factor") if choices.get(role))
        return Earlier(
            home.name, str(record["name"]), factors, len(record["studies"]), str(record["content"]), file.stat().st_mtime,
            (home / _CONTENT).stat().st_size,
        )  # fmt: skip
    except (OSError, ValueError, KeyError, TypeError):  # another program's file, or one that another window is removing now
        return None


def ago(when: float, now: float | None = None) -> Mapping[str, int]:
    """Return how long ago something was, in whole days, hours and minutes."""
    minutes = max(0, int((time.time() if now is None else now) - when) // 60)
    return {"days": minutes // 1440, "hours": minutes // 60 % 24, "minutes": minutes % 60}
