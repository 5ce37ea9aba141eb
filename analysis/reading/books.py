"""How a workbook is opened: the names of its sheets, and the values and merged ranges of each."""

import io
import pickle
import subprocess
import sys
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TypeVar

import python_calamine as calamine

from analysis import refusals
from analysis.reading.cell_values import Value
from analysis.reading.records import Span

T = TypeVar("T")
Values = list[list[Value]]
_CHILD = Path(__file__).with_name("xls_child.py")
_PATIENCE = 60.0  # seconds for the largest .xls


@dataclass(frozen=True, eq=False)
class Book:
    """An open workbook."""

    names: tuple[str, ...]  # of the sheets with cells, those in sight first
    load: Callable[[str], tuple[Values, list[Span]]]


def opened(data: bytes) -> Book:
    """Open an .xlsx or .ods workbook whose sizes have been checked; sheets are read when asked for."""
    book = _guarded(lambda: calamine.CalamineWorkbook.from_filelike(io.BytesIO(data)))
    sheets = [(about.name, about.visible == calamine.SheetVisibleEnum.Visible) for about in book.sheets_metadata if _has_cells(about)]

    def load(name: str) -> tuple[Values, list[Span]]:
        sheet = _guarded(lambda: book.get_sheet_by_name(name))
        values: Values = _guarded(lambda: sheet.to_python(skip_empty_area=False))
        return values, _spans(_guarded(lambda: list(sheet.merged_cell_ranges or [])))

    return Book(_in_sight_first(sheets), load)


def opened_apart(data: bytes) -> Book:
    """Open an .xls workbook in a process of its own, which alone suffers where the file is hostile."""
    try:
        done = subprocess.run([sys.executable, "-I", str(_CHILD)], input=data, capture_output=True, timeout=_PATIENCE, check=True)
    except subprocess.CalledProcessError as error:
        raise refusals.Encrypted() if b"PasswordError" in error.stderr else refusals.DamagedFile("workbook") from error
    except subprocess.TimeoutExpired as error:
        raise refusals.DamagedFile("workbook") from error
    sheets = {name: (shown, values, merged) for name, shown, values, merged in pickle.loads(done.stdout)}
    names = _in_sight_first([(name, shown) for name, (shown, _, _) in sheets.items()])
    return Book(names, lambda name: (sheets[name][1], _spans(sheets[name][2])))


def _has_cells(about: calamine.SheetMetadata) -> bool:
    return about.typ == calamine.SheetTypeEnum.WorkSheet


def _in_sight_first(sheets: list[tuple[str, bool]]) -> tuple[str, ...]:
    return tuple(name for name, _ in sorted(sheets, key=lambda sheet: not sheet[1]))


def _spans(ranges: list[tuple[tuple[int, int], tuple[int, int]]]) -> list[Span]:
    return [Span(first[0] + 1, last[0] + 1, first[1], last[1]) for first, last in ranges]


def _guarded(call: Callable[[], T]) -> T:
    """Run a part of the workbook library; whatever it stumbles over in a file means that the file is damaged."""
    try:
        return call()
    except calamine.PasswordError as error:
        raise refusals.Encrypted() from error
    except (KeyboardInterrupt, SystemExit, MemoryError):
        raise
    except BaseException as error:  # a fault inside the library is no ordinary exception
        raise refusals.DamagedFile("workbook") from error
