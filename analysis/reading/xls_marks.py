"""Where an .xls file keeps the marks of its cells, and how they are found (records of the published binary format)."""

import re
import struct
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass

from analysis import refusals
from analysis.reading import ole
from analysis.reading.sheet_marks import Marks

STREAMS = ("Workbook", "Book")
_PERCENT_FORMATS = (9, 10)
_LITERAL = re.compile(r'"[^"]*"|\\.')
_ERRORS: Mapping[int, str] = {0: "#NULL!", 7: "#DIV/0!", 15: "#VALUE!", 23: "#REF!", 29: "#NAME?", 36: "#NUM!", 42: "#N/A"}
_BOF, _EOF, _SHEET, _FORMAT, _STYLE = 0x0809, 0x000A, 0x0085, 0x041E, 0x00E0
_ROW, _NUMBER, _RK, _MANY_RK, _FORMULA, _ERROR = 0x0208, 0x0203, 0x027E, 0x00BD, 0x0006, 0x0205
_UNICODE = 0x0600  # the version from which text may have two bytes for a character


def read(data: bytes, sheet: str) -> Marks:
    """Return the marks of one sheet of an .xls file; raises DamagedFile where its records do not hold."""
    book = ole.stream(data, STREAMS)
    try:
        return _read(book, sheet)
    except (struct.error, IndexError) as error:
        raise refusals.DamagedFile("workbook") from error


def _read(book: bytes, sheet: str) -> Marks:
    unicode = len(book) > 6 and struct.unpack_from("<H", book, 4)[0] >= _UNICODE
    formats = {number: number in _PERCENT_FORMATS for number in range(64)}
    styles: list[int] = []
    start = None
    for kind, body in _records(book, 0):
        if kind == _FORMAT:
            formats[struct.unpack_from("<H", body)[0]] = "%" in _LITERAL.sub("", _text(body, 2, unicode, wide=unicode))
        elif kind == _STYLE:
            styles.append(struct.unpack_from("<H", body, 2)[0])
        elif kind == _SHEET and _text(body, 6, unicode, wide=False) == sheet:
            start = struct.unpack_from("<I", body)[0]
    marks = Marks()
    if start is not None:
        reader = _SheetReader(marks, [formats.get(number, False) for number in styles])
        for kind, body in _records(book, start):
            reader.take(kind, body)
    return marks


def _records(book: bytes, place: int) -> Iterator[tuple[int, bytes]]:
    """The records from a place to the end of that part of the workbook."""
    depth = 0
    while place + 4 <= len(book):
        kind, length = struct.unpack_from("<HH", book, place)
        depth += (kind == _BOF) - (kind == _EOF)
        yield kind, book[place + 4 : place + 4 + length]
        if depth <= 0:
            return
        place += 4 + length


def _text(body: bytes, place: int, unicode: bool, wide: bool) -> str:
    """Text with its length before it, in one byte or (wide) two."""
    length = struct.unpack_from("<H" if wide else "<B", body, place)[0]
    place += 2 if wide else 1
    if not unicode:
        return body[place : place + length].decode("windows-1252", errors="replace")
    if body[place] & 1:
        return body[place + 1 : place + 1 + 2 * length].decode("utf-16-le", errors="replace")
    return body[place + 1 : place + 1 + length].decode("latin-1")


@dataclass(eq=False)
class _SheetReader:
    """Notes the marks that the records of one sheet tell."""

    marks: Marks
    percent: list[bool]  # for each cell style

    def take(self, kind: int, body: bytes) -> None:
        """Note what one record says."""
        takers: dict[int, Callable[[bytes], None]] = {
            _ROW: self._row,
            _NUMBER: self._number,
            _RK: self._number,
            _MANY_RK: self._numbers,
            _FORMULA: self._formula,
            _ERROR: self._error,
        }
        if kind in takers:
            takers[kind](body)

    def _row(self, body: bytes) -> None:
        if struct.unpack_from("<H", body, 12)[0] & 0x20:
            self.marks.hidden.append(struct.unpack_from("<H", body)[0] + 1)

    def _cell(self, row: int, column: int, style: int) -> None:
        self.marks.reach(row, column)
        if style < len(self.percent) and self.percent[style]:
            self.marks.percent.add((row, column))

    def _number(self, body: bytes) -> None:
        self._cell(*struct.unpack_from("<HHH", body))

    def _numbers(self, body: bytes) -> None:
        row, first = struct.unpack_from("<HH", body)
        for index in range((len(body) - 6) // 6):
            self._cell(row, first + index, struct.unpack_from("<H", body, 4 + 6 * index)[0])

    def _formula(self, body: bytes) -> None:
        row, column, style = struct.unpack_from("<HHH", body)
        if body[12:14] != b"\xff\xff":
            self._cell(row, column, style)
        elif body[6] == 2:
            self.marks.errors[row, column] = _ERRORS.get(body[8], "#ERROR!")

    def _error(self, body: bytes) -> None:
        if body[7]:
            row, column = struct.unpack_from("<HH", body)
            self.marks.errors[row, column] = _ERRORS.get(body[6], "#ERROR!")
