"""How a column of text is read as measurements: numbers, units, missing words, detection limits, and a note on each."""

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis import refusals
from analysis.reading import marks, missing, odd_cells, offsets, response_notes, spaces, units
from analysis.reading.half_read import HalfRead, Written
from analysis.reading.numerals import Shape
from analysis.table import Floats, LeftOut, Response, frozen

_PLAIN = r"^[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?$"  # what Arrow and Python read alike
_PLAIN_EITHER = r"^[+-]?[1-9][0-9]{0,2}\.[0-9]{3}$"  # a point with three digits after it
_POINT = Shape(decimal=".")
_EITHER = Shape(either=".")


def read(written: Written) -> Response:
    """Read a column of text as measurements.

    Raises MixedUnits where numbers carry different units, ResponseIsText where more than half of the rows hold text, and
    NoNumbers where no row holds a number.
    """
    reading = _begin(written)
    reading.decided = marks.decide(_shapes(reading), written.known)
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
    """Cast what Arrow can cast and set the rest apart."""
    if written.numbers is None:
        whole = _cast(written.texts)
        if whole is not None:
            return HalfRead(written, np.ones(whole.size, dtype=bool), whole, odd_cells.of(written.texts, np.empty(0, dtype=np.intp)))
    plain = pc.match_substring_regex(written.texts, _PLAIN).to_numpy(zero_copy_only=False).astype(bool)
    values = np.full(len(written.texts), np.nan)
    values[plain] = pc.cast(written.texts.filter(pa.array(plain)), pa.float64()).to_numpy(zero_copy_only=False)
    if written.numbers is not None:
        native = ~np.isnan(written.numbers)
        values[native], plain = written.numbers[native], plain | native
    return HalfRead(written, plain, values, odd_cells.of(written.texts, np.flatnonzero(~plain)))


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
    return shapes | _plain_shapes(reading, 200) or shapes | _plain_shapes(reading, None)


def _plain_shapes(reading: HalfRead, most: int | None) -> set[Shape]:
    """Shapes among the plain text cells; the numbers of a workbook have no marks. Empty where a sample is not decisive."""
    texts = _plain_texts(reading)
    if most is not None:
        texts = texts.slice(0, most)
    pointed = texts.filter(pc.match_substring(texts, "."))
    either = pc.sum(pc.match_substring_regex(pointed, _PLAIN_EITHER)).as_py() or 0
    if either < len(pointed):
        return {_POINT, _EITHER} if either else {_POINT}
    if most is not None:
        return set()
    return {_EITHER} if either else set()


def _plain_texts(reading: HalfRead) -> pa.StringArray:
    """The plain cells that are text: in a workbook those that are not its numbers."""
    chosen = reading.plain
    if reading.written.numbers is not None:
        chosen = chosen & np.isnan(reading.written.numbers)
    return reading.written.texts if chosen.all() else reading.written.texts.filter(pa.array(chosen))


def _settle_plain_thousands(reading: HalfRead) -> None:
    """Read “1.234” among the plain cells once more where the column's point is a thousands mark."""
    if reading.decided.point != "thousands":
        return
    either = pc.match_substring_regex(reading.written.texts, _PLAIN_EITHER).to_numpy(zero_copy_only=False).astype(bool)
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
    found: dict[str, int] = {}
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
    texts = reading.written.texts.to_pylist() if native is None else [repr(float(value)) for value in reading.values]
    if reading.decided.point == "thousands":
        texts = [repr(float(value)) if plain else text for value, plain, text in zip(reading.values, reading.plain, texts, strict=True)]
    for place, text in zip(reading.odd.where.tolist(), reading.odd.decimals(reading.decided).to_pylist(), strict=True):
        texts[place] = text
    return texts


def _missing(reading: HalfRead) -> tuple[LeftOut, ...]:
    """One entry with its reason for every value that is not there."""
    rows = reading.written.rows
    why = [_why(reading, index) for index in range(len(reading.odd.texts))]
    reasons = {int(place): why[code] for place, code in zip(reading.odd.where, reading.odd.codes, strict=True)}
    lost = np.flatnonzero(np.isnan(reading.values))
    return tuple(LeftOut(int(rows[index]), reasons.get(int(index), "not a finite number")) for index in lost)


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
