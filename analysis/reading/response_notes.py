"""The sentences that say how a response was read: what was assumed, taken with a unit, left out, or looks odd."""

from collections.abc import Iterator

import numpy as np

from analysis import refusals
from analysis.reading import missing, sentinels
from analysis.reading.half_read import HalfRead
from analysis.reading.words import counted, several

_MARK_NAMES = {",": "comma", ".": "point"}


def notes(reading: HalfRead, unit: str | None) -> tuple[str, ...]:
    """Everything worth telling about how a response was read, a sentence each."""
    parts = (
        _marks(reading),
        _limits(reading),
        _missing_words(reading),
        _text(reading),
        _footnotes(reading),
        _bare(reading, unit),
        _sentinels(reading),
    )
    return tuple(sentence for part in parts for sentence in part)


def _rows(reading: HalfRead, chosen: np.ndarray[tuple[int], np.dtype[np.bool_]]) -> list[int]:
    return [int(row) for row in np.sort(reading.written.rows[reading.odd.rows_of(chosen)])]


def _marks(reading: HalfRead) -> Iterator[str]:
    name = reading.written.name
    for mark in sorted(reading.decided.assumed):
        role = reading.decided.role(mark)
        other = "thousands" if role == "decimal" else "decimal"
        yield (
            f"Column “{name}”: the {_MARK_NAMES[mark]} with three digits after it was read as a {role} mark; nothing in the "
            f"column tells whether it is a {other} mark."
        )
    shapes = reading.shapes
    if any(shape.decimal == "," for shape in shapes):
        yield f"Column “{name}”: decimal commas were read."
    for mark, role in ((",", reading.decided.comma), (".", reading.decided.point)):
        grouped = any(shape.thousands == mark or (shape.either == mark and role == "thousands") for shape in shapes)
        if (grouped or (mark == reading.plain.mark and reading.grouped)) and mark not in reading.decided.assumed:
            yield f"Column “{name}”: the {_MARK_NAMES[mark]} was read as a thousands mark."


def _limits(reading: HalfRead) -> Iterator[str]:
    rows = _rows(reading, reading.is_limit)
    if rows:
        texts = [text for text, limit in zip(reading.odd.texts, reading.is_limit, strict=True) if limit]
        yield (
            f"Column “{reading.written.name}”: {counted(len(rows), 'value')} beyond a detection limit ({several(texts)}; "
            f"{refusals.rows_told(rows)}) counted as missing; nothing was put in their place, and leaving them out shifts the means."
        )


def _missing_words(reading: HalfRead) -> Iterator[str]:
    found = reading.odd.mask([missing.is_missing(text) or missing.is_infinite(text) for text in reading.odd.texts])
    rows = _rows(reading, found)
    if rows:
        texts = [text for text, chosen in zip(reading.odd.texts, found, strict=True) if chosen]
        yield f"Column “{reading.written.name}”: {several(texts)} ({refusals.rows_told(rows)}) counted as missing."


def _text(reading: HalfRead) -> Iterator[str]:
    rows = _rows(reading, reading.is_text)
    if rows:
        texts = [text for text, chosen in zip(reading.odd.texts, reading.is_text, strict=True) if chosen]
        yield f"Column “{reading.written.name}”: {several(texts)} ({refusals.rows_told(rows)}) cannot be read as numbers: missing."


def _footnotes(reading: HalfRead) -> Iterator[str]:
    marked = reading.odd.mask([numeral is not None and numeral.footnote for numeral in reading.odd.numerals])
    rows = _rows(reading, marked)
    if rows:
        yield f"Column “{reading.written.name}”: footnote marks behind numbers were dropped ({refusals.rows_told(rows)})."


def _bare(reading: HalfRead, unit: str | None) -> Iterator[str]:
    """A unit on some numbers and none on the rest is taken for all of them."""
    with_unit = reading.odd.mask([numeral is not None and bool(numeral.unit) for numeral in reading.odd.numerals]) & reading.is_number
    if unit is None or not (with_unit.any() or reading.plain_with_unit.size):
        return
    numbers = int(np.isfinite(reading.values).sum())
    bare = numbers - reading.odd.rows_of(with_unit).size - reading.plain_with_unit.size
    if bare:
        yield f"Column “{reading.written.name}”: {bare} of {numbers} numbers carry no unit and were taken as {unit} like the rest."


def _sentinels(reading: HalfRead) -> Iterator[str]:
    """Codes such as -999 stay in, and are pointed out."""
    where = sentinels.find(reading.values)
    if where.size:
        value = f"{reading.values[where[0]]:g}"
        rows = [int(row) for row in reading.written.rows[where]]
        yield (
            f"Column “{reading.written.name}”: {value} ({refusals.rows_told(rows)}) stands far outside the rest and may be a code for "
            f"a missing value; it was kept as a number."
        )
