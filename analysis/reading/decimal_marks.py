"""Which decimal mark the numbers of a file are written with, as its first rows tell, and how that is told."""

from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from analysis.reading import marks, numerals, spaces
from analysis.reading.choices import Reading
from analysis.reading.marks import Known
from analysis.reading.records import Body
from analysis.table import Alternative, Decision

_ROWS = 200  # looked at
_COLUMNS = 40
_BY_COLUMN = "column by column"
_TOLD = {
    "point": "Numbers are read with the point as decimal mark.",
    "comma": "Numbers are read with the comma as decimal mark.",
    _BY_COLUMN: "Some columns are read with the point and some with the comma as decimal mark.",
}


def decision(body: Body, known: Known, reading: Reading) -> Decision | None:
    """Tell the decimal mark and what could have been read instead; None for a workbook without a mark in any text."""
    found = {mark for column in _texts(body) for mark in _marks(column, replace(known, decimal=None))}
    if not found and reading.decimal is None and any(numbers is not None for numbers in body.numbers):
        return None
    itself = _BY_COLUMN if len(found) > 1 else "comma" if found == {","} else "point"
    now = reading.decimal or itself
    words = dict.fromkeys([itself, "point", "comma"])
    alternatives = [Alternative(word, replace(reading, decimal=None if word == itself else word)) for word in words if word != now]
    return Decision("decimal", _TOLD[now], tuple(alternatives), ordinary=True)


def _texts(body: Body) -> Iterator[list[str]]:
    """The first cells of each column that came as text."""
    for texts, numbers in list(zip(body.columns, body.numbers, strict=True))[:_COLUMNS]:
        cells = texts.slice(0, _ROWS).to_pylist()
        is_text = np.ones(len(cells), dtype=bool) if numbers is None else np.isnan(numbers[:_ROWS])
        yield [spaces.tidy(cell) for cell, text in zip(cells, is_text, strict=True) if text and ("," in cell or "." in cell)]


def _marks(cells: list[str], known: Known) -> set[str]:
    """The marks that stand before decimals in these cells."""
    shapes = {numeral.shape for cell in cells if (numeral := numerals.find(cell)) is not None}
    decided = marks.decide(shapes, known)
    open_marks = {shape.either for shape in shapes if shape.either and decided.role(shape.either) == "decimal"}
    return ({shape.decimal for shape in shapes} | open_marks) - {""}
