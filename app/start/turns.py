"""Whose turn it is to change the private environment: one process at a time, the others wait."""

import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import IO

if sys.platform == "win32":
    import msvcrt

    def _try(file: IO[str]) -> None:
        msvcrt.locking(file.fileno(), msvcrt.LK_NBLCK, 1)

    def _wait(file: IO[str]) -> None:
        while True:
            try:
                msvcrt.locking(file.fileno(), msvcrt.LK_LOCK, 1)
            except OSError:
                continue  # LK_LOCK gives up after ten seconds; the other set-up may take longer
            return
else:
    import fcntl

    def _try(file: IO[str]) -> None:
        fcntl.flock(file, fcntl.LOCK_EX | fcntl.LOCK_NB)

    def _wait(file: IO[str]) -> None:
        fcntl.flock(file, fcntl.LOCK_EX)


@contextmanager
def taken(folder: Path) -> Iterator[None]:
    """Hold the turn for a folder, which is made if need be; the system ends the turn of a process that dies."""
    folder.mkdir(parents=True, exist_ok=True)
    with (folder / "turn.lock").open("w", encoding="utf-8") as file:
        try:
            _try(file)
        except OSError:
            sys.stderr.write("Another start is setting up; waiting for it.\n")
            _wait(file)
        yield
