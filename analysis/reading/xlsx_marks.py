"""Where an .xlsx file keeps the marks of its cells, and how they are found."""

import posixpath
import re
from xml.parsers import expat

from analysis import refusals
from analysis.reading import archives, xlsx_scan
from analysis.reading.archives import local
from analysis.reading.sheet_marks import Marks

_VAST = 20_000_000  # cells of the rectangle that a sheet spans
_PERCENT_FORMATS = frozenset((9, 10))  # the built-in formats 0% and 0.00%
_LITERAL = re.compile(r'"[^"]*"|\\.')  # text in a number format that is shown as it stands
_REFERENCE = re.compile(r"([A-Z]{1,3})([0-9]{1,7})")


def read(data: bytes, sheet: str) -> Marks:
    """Return the marks of one sheet of an .xlsx file, checked against the zip limit before."""
    xml = archives.part(data, _sheet_path(data, sheet))
    percent = _percent_styles(data)
    if not xml:
        return Marks()
    if b"<!DOCTYPE" in xml:
        raise refusals.DamagedFile("workbook")
    marks = xlsx_scan.scan(xml, percent)
    if marks is None or marks.rows * marks.columns > _VAST:
        marks = Marks()  # the walk is slower and exact: blank cells that only carry a format do not count
        archives.parse(xml, _SheetParser(marks, percent).parser)
    return marks


def _sheet_path(data: bytes, sheet: str) -> str:
    """The part that holds a sheet, by way of the workbook's list and its relations; "" where it is not found."""
    book = next((path for path in ("xl/workbook.xml", "xl/Workbook.xml") if archives.part(data, path)), "")
    sheets = {a.get("name"): a for a in _elements(archives.part(data, book), "sheet")} if book else {}
    relation = next((value for key, value in sheets.get(sheet, {}).items() if local(key) == "id"), None)
    relations = _elements(archives.part(data, "xl/_rels/workbook.xml.rels"), "Relationship")
    target = next((a.get("Target", "") for a in relations if a.get("Id") == relation), "")
    if not target:
        return ""
    return target.lstrip("/") if target.startswith("/") else posixpath.normpath(posixpath.join("xl", target))


def _elements(xml: bytes, name: str) -> list[dict[str, str]]:
    """The attributes of every element of a name, in order."""
    found: list[dict[str, str]] = []
    parser = expat.ParserCreate()
    parser.StartElementHandler = lambda tag, attributes: found.append(attributes) if local(tag) == name else None
    if xml:
        archives.parse(xml, parser)
    return found


def _percent_styles(data: bytes) -> frozenset[str]:
    """The numbers of the cell styles that show a percent sign."""
    parser = expat.ParserCreate()
    formats, styles, inside = {}, [], [""]

    def start(tag: str, attributes: dict[str, str]) -> None:
        name = local(tag)
        if name == "numFmt":
            formats[attributes.get("numFmtId", "")] = "%" in _LITERAL.sub("", attributes.get("formatCode", ""))
        elif name in ("cellXfs", "cellStyleXfs", "dxfs"):
            inside[0] = name
        elif name == "xf" and inside[0] == "cellXfs":
            styles.append(attributes.get("numFmtId", "0"))

    parser.StartElementHandler = start
    xml = archives.part(data, "xl/styles.xml")
    if xml:
        archives.parse(xml, parser)
    percent = {str(number) for number in _PERCENT_FORMATS} | {number for number, shown in formats.items() if shown}
    return frozenset(str(index) for index, number in enumerate(styles) if number in percent)


class _SheetParser:
    """Walks through the cells of a sheet and notes their marks."""

    def __init__(self, marks: Marks, percent: frozenset[str]) -> None:
        self.marks, self.percent = marks, percent
        self.row = self.column = -1
        self.kind, self.style, self.formula, self.filled = "", "", False, False
        self.error: list[str] = []
        self.parser = expat.ParserCreate()
        self.parser.StartElementHandler = self.start
        self.parser.EndElementHandler = self.end

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        """Note where a row or a cell begins and of what kind it is."""
        name = local(tag)
        if name == "c":
            self._start_cell(attributes)
        elif name == "row":
            self.row, self.column = int(attributes.get("r", self.row + 2)) - 1, -1
            if attributes.get("hidden") in ("1", "true"):
                self.marks.hidden.append(self.row + 1)
        elif name == "f":
            self.formula = True
        elif name in ("v", "is"):
            self.parser.CharacterDataHandler = self.text

    def _start_cell(self, attributes: dict[str, str]) -> None:
        match = _REFERENCE.fullmatch(attributes.get("r", ""))
        self.column = column_number(match[1]) if match else self.column + 1
        if match:
            self.row = int(match[2]) - 1
        self.kind, self.style = attributes.get("t", "n"), attributes.get("s", "")
        self.formula, self.filled, self.error = False, False, []

    def text(self, text: str) -> None:
        """Note that a cell holds something, and what, where it is an error."""
        self.filled = self.filled or bool(text)
        if self.kind == "e":
            self.error.append(text)

    def end(self, tag: str) -> None:
        """Sum up a cell that ends."""
        name = local(tag)
        if name in ("v", "is"):
            self.parser.CharacterDataHandler = None
        elif name == "c":
            self._end_cell((self.row, self.column))

    def _end_cell(self, cell: tuple[int, int]) -> None:
        if self.filled:
            self.marks.reach(*cell)
            if self.style in self.percent and self.kind == "n":
                self.marks.percent.add(cell)
            if self.kind == "e":
                self.marks.errors[cell] = "".join(self.error)
        elif self.formula and self.kind != "str":
            self.marks.unsaved.append(cell)


def column_number(letters: str) -> int:
    """The number, counted from 0, of a column named by letters."""
    number = 0
    for letter in letters:
        number = 26 * number + ord(letter) - 64
    return number - 1
