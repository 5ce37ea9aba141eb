"""How a column of text is read as measurements: numbers, units, missing words, detection limits, and a note on each."""

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis import refusals
from analysis.reading import marks, missing, odd_cells, offsets, plain_texts, response_notes, spaces, units
from analysis.reading.half_read import HalfRead, Written
from analysis.reading.numerals import Shape
from analysis.reading.plain_texts import Plain
from analysis.table import Floats, LeftOut, Response, frozen

_PLAIN = r"^[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?$"  # what Arrow and Python read alike
_PLAIN_EITHER = r"^[+-]?[1-9][0-9]{0,2}\.[0-9]{3}$"  # a point with three digits after it


def read(written: Written) -> Response:
    """Read a column of text as measurements.

    Raises MixedUnits where numbers carry different units, ResponseIsText where more than half of the rows hold text, and
    NoNumbers where no row holds a number.
    """
    reading = _begin(written)
    reading.shapes = frozenset(_shapes(reading))
    reading.decided = marks.decide(reading.shapes, written.known)
    _settle_plain_thousands(reading)
    reading.values[reading.odd.where] = reading.odd.values(reading.decided)
    _refuse_text(reading)
    unit = _unit(reading)
    reading.values[~np.isfinite(reading.values)] = np.nan
    pivot, differences = offsets.exact(reading.values, lambda: _decimals(reading))
    missing_rows = _missing(reading)
    notes = response_notes.notes(reading, unit)
    return Response(frozen(reading.values), pivot, differences, unit, missing_rows, notes)


def _begin(written: Written) -> HalfRead:
    """Cast what Arrow can cast, at once or after it was made plain, and set the rest apart."""
    if written.numbers is not None:
        return _begin_apart(written, Plain(written.texts, ".", "", None))
    whole = _cast(written.texts)
    plain = Plain(written.texts, ".", "", None) if whole is not None else plain_texts.of(written.texts)
    if whole is None and plain.texts is not written.texts:
        whole = _cast(plain.texts)
    if whole is None:
        return _begin_apart(written, plain)
    return HalfRead(written, plain, np.ones(whole.size, dtype=bool), whole, odd_cells.of(written.texts, np.empty(0, dtype=np.intp)))


def _begin_apart(written: Written, plain: Plain) -> HalfRead:
    """Cast the cells that are plain numbers; the numbers of a workbook are known."""
    is_plain = pc.match_substring_regex(plain.texts, _PLAIN).to_numpy(zero_copy_only=False).astype(bool)
    values = np.full(len(written.texts), np.nan)
    values[is_plain] = pc.cast(plain.texts.filter(pa.array(is_plain)), pa.float64()).to_numpy(zero_copy_only=False)
    if written.numbers is not None:
        native = ~np.isnan(written.numbers)
        values[native], is_plain = written.numbers[native], is_plain | native
    return HalfRead(written, plain, is_plain, values, odd_cells.of(written.texts, np.flatnonzero(~is_plain)))


def _cast(texts: pa.StringArray) -> Floats | None:
    """Cast a whole column, or return None where a cell is not a plain finite number."""
    try:
        values: Floats = pc.cast(texts, pa.float64()).to_numpy(zero_copy_only=False)
    except pa.ArrowInvalid:
        return None
    return values.copy() if np.isfinite(values).all() else None


def _shapes(reading: HalfRead) -> set[Shape]:
    """What the numbers of the column say about its marks; plain cells are looked at only as far as needed."""
    shapes = {numeral.shape for numeral in reading.odd.numerals if numeral is not None}
    first = _plain_shapes(reading, 200)
    settled = bool(first) or any(shape.decimal or shape.thousands for shape in shapes)
    return shapes | (first if settled else _plain_shapes(reading, None))


def _plain_shapes(reading: HalfRead, most: int | None) -> set[Shape]:
    """Shapes among the plain text cells; the numbers of a workbook have no marks. Empty where a sample is not decisive."""
    mark = reading.plain.mark
    texts = _plain_texts(reading)
    if most is not None:
        texts = texts.slice(0, most)
    pointed = texts.filter(pc.match_substring(texts, "."))
    either = pc.sum(pc.match_substring_regex(pointed, _PLAIN_EITHER)).as_py() or 0
    if either < len(pointed):
        return {Shape(decimal=mark), Shape(either=mark)} if either else {Shape(decimal=mark)}
    if most is not None:
        return set()
    return {Shape(either=mark)} if either else set()


def _plain_texts(reading: HalfRead) -> pa.StringArray:
    """The plain cells that are text: in a workbook those that are not its numbers."""
    chosen = reading.is_plain
    if reading.written.numbers is not None:
        chosen = chosen & np.isnan(reading.written.numbers)
    return reading.plain.texts if chosen.all() else reading.plain.texts.filter(pa.array(chosen))


def _settle_plain_thousands(reading: HalfRead) -> None:
    """Read “1.234” among the plain cells once more where the column's mark is a thousands mark."""
    if reading.decided.role(reading.plain.mark) != "thousands":
        return
    either = pc.match_substring_regex(reading.plain.texts, _PLAIN_EITHER).to_numpy(zero_copy_only=False).astype(bool)
    if reading.written.numbers is not None:
        either &= np.isnan(reading.written.numbers)
    reading.grouped = bool(either.any())
    reading.values[either] *= 1000.0
    reading.values[either] = np.round(reading.values[either])


def _refuse_text(reading: HalfRead) -> None:
    """Turn the column down where most of it is text, or where nothing in it is a number."""
    where = reading.odd.rows_of(reading.is_text)
    if 2 * where.size > reading.values.size:
        first = [(spaces.tidy(reading.written.texts[int(index)].as_py()), int(reading.written.rows[index])) for index in where[:3]]
        raise refusals.ResponseIsText(reading.written.name, first, int(where.size), int(reading.values.size))
    if not np.isfinite(reading.values).any():
        raise refusals.NoNumbers(reading.written.name, int(reading.values.size))


def _unit(reading: HalfRead) -> str | None:
    """The one unit of the column; raises MixedUnits where there are several."""
    found = {reading.plain.unit: int(reading.plain_with_unit[0])} if reading.plain_with_unit.size else {}
    for index in np.flatnonzero(reading.is_number | reading.is_limit):
        numeral = reading.odd.numerals[index]
        if numeral is not None and numeral.unit:
            first = int(reading.odd.first[index])
            found[numeral.unit] = min(first, found.get(numeral.unit, first))
    if len(found) > 1:
        spots = sorted(found.items(), key=lambda item: item[1])
        raise refusals.MixedUnits(reading.written.name, [(unit, int(reading.written.rows[row])) for unit, row in spots])
    named = next(iter(found), None)
    return named or (units.normal(reading.written.unit) if reading.written.unit else None) or reading.written.unit


def _decimals(reading: HalfRead) -> list[str]:
    """The decimal behind every value; a number of a workbook is the shortest decimal that gives it."""
    native = reading.written.numbers
    texts = reading.plain.texts.to_pylist() if native is None else [repr(float(value)) for value in reading.values]
    if reading.decided.role(reading.plain.mark) == "thousands":
        texts = [repr(float(value)) if plain else text for value, plain, text in zip(reading.values, reading.is_plain, texts, strict=True)]
    for place, text in zip(reading.odd.where.tolist(), reading.odd.decimals(reading.decided).to_pylist(), strict=True):
        texts[place] = text
    return texts


def _missing(reading: HalfRead) -> tuple[LeftOut, ...]:
    """One entry with its reason for every value that is not there."""
    lost = np.flatnonzero(np.isnan(reading.values))
    if not lost.size:
        return ()
    why = [*(_why(reading, index) for index in range(len(reading.odd.texts))), "not a finite number"]
    place = np.searchsorted(reading.odd.where, lost)
    place[place == reading.odd.where.size] = 0
    known = reading.odd.where[place] == lost if reading.odd.where.size else np.zeros(lost.size, dtype=bool)
    codes = np.where(known, reading.odd.codes[place], -1) if reading.odd.where.size else np.full(lost.size, -1)
    return tuple(LeftOut(row, why[code]) for row, code in zip(reading.written.rows[lost].tolist(), codes.tolist(), strict=True))


def _why(reading: HalfRead, index: int) -> str:
    text = reading.odd.texts[index]
    if not text:
        return f"no value of {reading.written.name}"
    if reading.is_limit[index]:
        return f"“{text}” is beyond a detection limit"
    if missing.is_missing(text):
        return f"“{text}” stands for a missing value"
    if reading.is_text[index]:
        return f"“{text[:60]}” is not a number"
    return f"“{text[:60]}” is not a finite number"
