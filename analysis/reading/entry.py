"""The way from a path, the bytes of a file or a frame to a table: here reading starts."""

import json
from dataclasses import replace
from hashlib import sha256
from pathlib import Path

import pandas as pd

from analysis import refusals
from analysis.reading import delimited, encoding, frames, layouts, limits, parquet, separators, signatures, table_choice, workbooks
from analysis.reading.choices import NOTHING_ASKED, Reading
from analysis.reading.marks import Known
from analysis.reading.records import RAW, RAW_BYTES, Found, Source, raw_line
from analysis.reading.sheet_marks import Marks
from analysis.reading.sheets import Sheet
from analysis.reading.signatures import Kind
from analysis.table import NO_ROWS, Decision, Table

_ENDINGS: dict[str, tuple[Kind, ...]] = {  # what the ending of a name promises
    **dict.fromkeys((".csv", ".tsv", ".txt", ".tab", ".dat"), ("text",)),
    **dict.fromkeys((".xlsx", ".xlsm"), ("xlsx",)),
    ".xls": ("xls",),
    ".ods": ("ods",),
    **dict.fromkeys((".parquet", ".pq"), ("parquet",)),
}
_TOLD: dict[Kind, str] = {
    "text": "delimited text",
    "xlsx": "an .xlsx workbook",
    "xls": "an .xls workbook",
    "ods": "an .ods workbook",
    "parquet": "a Parquet file",
}


def read_table(
    source: str | Path | bytes | bytearray | memoryview | pd.DataFrame,
    name: str | None = None,
    sheet: str | None = None,
    layout: str = "auto",
    reading: Reading | None = None,
) -> Table:
    """Read a table from a path, from the bytes of a file, or from a pandas frame, which is taken as it is.

    sheet names the sheet of a workbook (the first with a table where None); layout is "auto", "rows" or "grid"; reading asks for
    these and for more, and yields to them. Raises a refusal, one sentence, for whatever holds no usable table.
    """
    reading = _asked(reading or NOTHING_ASKED, sheet, layout)
    if isinstance(source, pd.DataFrame):
        return layouts.of_values(replace(frames.read(source, name or "table"), reading=reading))
    if isinstance(source, (str, Path)):
        data, name = _loaded(Path(source)), name or Path(source).name
    else:
        data, name = bytes(source), name or "table"
    _refuse_large(len(data))
    kind = signatures.kind_of(data)
    seal = _fingerprint(data, reading)
    if reading.sheet is not None and kind in ("text", "parquet"):
        raise refusals.SheetOutsideWorkbook(reading.sheet)
    if kind == "parquet":
        return layouts.of_values(parquet.read(data, name, _mislabelled(name, kind), seal, reading))
    found: Source = _text(data, reading) if kind == "text" else workbooks.read(data, kind, reading)
    return layouts.read(found, Table(name, (), NO_ROWS, (), _mislabelled(name, kind), seal, reading, found.found.raw))


def _asked(reading: Reading, sheet: str | None, layout: str) -> Reading:
    """What was asked in either way."""
    reading = reading if sheet is None else replace(reading, sheet=sheet)
    return reading if layout == "auto" else replace(reading, layout=layout)


def _loaded(path: Path) -> bytes:
    try:
        _refuse_large(path.stat().st_size)
        return path.read_bytes()
    except (OSError, ValueError) as error:
        raise refusals.MissingFile(str(path)) from error


def _refuse_large(size: int) -> None:
    if size > limits.FILE_BYTES:
        raise refusals.FileTooLarge(size, limits.FILE_BYTES)


def _mislabelled(name: str, kind: Kind) -> tuple[Decision, ...]:
    """A note where the content is not what the ending of the name promises."""
    ending = Path(name).suffix.lower()
    if kind in _ENDINGS.get(ending, (kind,)):
        return ()
    return (Decision("format", f"The name ends in {ending}, but the file is {_TOLD[kind]} and was read as that."),)


def _text(data: bytes, reading: Reading) -> Source:
    decoded = encoding.decode(data)
    separated = separators.find(decoded.data, reading)
    known = Known(separated.delimiter == ",", reading.decimal)
    first = enumerate(decoded.data[:RAW_BYTES].decode("utf-8", "replace").split("\n")[:RAW])
    raw = tuple(raw_line(index + 1, line) for index, line in first)
    found = Found((*decoded.decisions, separated.decision), known, raw=raw)
    source = delimited.Delimited(separated.data, separated.delimiter, found, separated.declared)
    if source.lines > limits.ROWS:
        raise refusals.TooManyRows(source.lines, limits.ROWS)
    part = table_choice.chosen(Sheet(source.loose, Marks(), found), reading)
    return replace(source, found=part.found) if part.values is source.loose else part


def _fingerprint(data: bytes, reading: Reading) -> str:
    """A seal on the content and on what was asked of the reader."""
    others = {name: value for name, value in reading.to_plain().items() if name not in ("sheet", "layout")}
    seal = sha256(data)
    seal.update(f"\0{reading.sheet}\0{reading.layout}{json.dumps(others) if others else ''}".encode("utf-8", "surrogatepass"))
    return seal.hexdigest()
