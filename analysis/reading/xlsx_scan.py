"""A quick look at the XML of a sheet: its marks by their spelling, without walking through every cell."""

import re

from analysis.reading.sheet_marks import Cell, Marks

_TAG = rb"<(?:\w+:)?"
_CELLS = re.compile(_TAG + rb"c[\s/>]")
_REFERENCES = re.compile(rb"\sr=[\"']([A-Z]{1,3}[0-9]{1,7})[\"']")
_USUAL = b'<c r="'  # how programs write the start of a cell
_LETTERS = b"ABCDEFGHIJKLMNOPQRSTUVWXYZ"
_HIDDEN = re.compile(_TAG + rb"row\s([^>]*\shidden=[\"'](?:1|true)[\"'][^>]*)>")
_ROW = re.compile(rb"\sr=[\"']([0-9]{1,7})[\"']")
_FORMULA = _TAG + rb"f(?:\s[^>]*)?(?:/>|>[^<]*</(?:\w+:)?f>)"
_ERROR = re.compile(_TAG + rb"c\s([^>]*\bt=[\"']e[\"'][^>]*)>\s*(?:" + _FORMULA + rb")?\s*" + _TAG + rb"v>([^<]*)<")
_BLANK = rb"(?:" + _TAG + rb"v\s*/>|" + _TAG + rb"v></(?:\w+:)?v>)?"
_UNSAVED = re.compile(_TAG + rb"c\s([^>]*[^/>])>\s*" + _FORMULA + rb"\s*" + _BLANK + rb"\s*</(?:\w+:)?c>")
_STRING = re.compile(rb"\bt=[\"']str[\"']")  # a formula whose stored value is an empty text
_TEXT = re.compile(rb"\bt=[\"'](?!n[\"'])")


def scan(xml: bytes, percent: frozenset[str]) -> Marks | None:
    """Return the marks of a sheet, or None where only a walk through its cells can tell them.

    The extent is that of all cells named, blank ones among them.
    """
    references = _references(xml)
    if not references:
        return None  # cells without a reference of their own, or text in two bytes a letter
    marks = Marks()
    letters = set(references.translate(None, b"0123456789").split(b","))
    numbers = set(references.translate(None, _LETTERS).split(b","))
    if not all(0 < len(column) < 4 for column in letters) or not all(0 < len(row) < 8 for row in numbers):
        return None
    marks.reach(max(map(int, numbers)) - 1, max(map(_column, letters)))
    if b"hidden=" in xml:
        marks.hidden.extend(int(row[1]) for row in (_ROW.search(b" " + match[1]) for match in _HIDDEN.finditer(xml)) if row)
    if b't="e"' in xml or b"t='e'" in xml:
        marks.errors.update({_cell_of(match[1]): match[2].decode("utf-8", errors="replace") for match in _ERROR.finditer(xml)})
    if b"<f" in xml or b":f" in xml:
        marks.unsaved.extend(_cell_of(match[1]) for match in _UNSAVED.finditer(xml) if not _STRING.search(match[1]))
    if percent:
        marks.percent.update(_percent_cells(xml, percent))
    return marks


def _references(xml: bytes) -> bytes:
    """The references of all cells with commas between them, b"" where a cell has none."""
    pieces = xml.split(_USUAL)
    if len(pieces) - 1 == len(_CELLS.findall(xml)):
        references = b",".join([piece[: piece.find(b'"')] for piece in pieces[1:]])
    else:
        found = _REFERENCES.findall(xml)
        references = b",".join(found) if len(found) == len(_CELLS.findall(xml)) else b""
    return b"" if references.translate(None, _LETTERS + b"0123456789,") else references


def _percent_cells(xml: bytes, percent: frozenset[str]) -> list[Cell]:
    styles = b"|".join(style.encode() for style in sorted(percent))
    found = re.finditer(_TAG + rb"c\s([^>]*\bs=[\"'](?:" + styles + rb")[\"'][^>]*[^/>])>", xml)
    return [_cell_of(match[1]) for match in found if not _TEXT.search(match[1])]


def _cell_of(attributes: bytes) -> Cell:
    match = _REFERENCES.search(b" " + attributes)
    return _cell(match[1]) if match else (0, 0)


def _cell(reference: bytes) -> Cell:
    """Row and column, counted from 0, of a reference such as AB12."""
    letters = reference.rstrip(b"0123456789")
    return int(reference[len(letters) :]) - 1, _column(letters)


def _column(letters: bytes) -> int:
    column = 0
    for letter in letters:
        column = 26 * column + letter - 64
    return column - 1
