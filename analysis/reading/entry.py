"""The way from a path, the bytes of a file or a frame to a table: here reading starts."""

from hashlib import sha256
from pathlib import Path

import pandas as pd

from analysis import refusals
from analysis.reading import delimited, encoding, frames, layouts, parquet, separators, signatures, workbooks
from analysis.reading.records import Found, Source
from analysis.reading.signatures import Kind
from analysis.table import Decision, Table

LAYOUTS = ("auto", "rows", "grid")
LARGEST = 2**30  # bytes of a file
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
) -> Table:
    """Read a table from a path, from the bytes of a file, or from a pandas frame, which is taken as it is.

    sheet names the sheet of a workbook (the first with a table where None); layout is "auto", "rows" or "grid". Raises a
    refusal, one sentence, for whatever holds no usable table.
    """
    if layout not in LAYOUTS:
        raise refusals.UnknownChoice("layout", layout, LAYOUTS)
    if isinstance(source, pd.DataFrame):
        return _laid_out(frames.read(source, name or "table"), layout)
    if isinstance(source, (str, Path)):
        data, name = _loaded(Path(source)), name or Path(source).name
    else:
        data, name = bytes(source), name or "table"
    if len(data) > LARGEST:
        raise refusals.FileTooLarge(len(data), LARGEST)
    kind = signatures.kind_of(data)
    seal = _fingerprint(data, sheet, layout)
    if sheet is not None and kind in ("text", "parquet"):
        raise refusals.SheetOutsideWorkbook(sheet)
    if kind == "parquet":
        return _laid_out(parquet.read(data, name, _mislabelled(name, kind), seal), layout)
    found = _text(data) if kind == "text" else workbooks.read(data, kind, sheet)
    return layouts.read(found, name, layout, _mislabelled(name, kind), seal)


def _laid_out(table: Table, layout: str) -> Table:
    """A frame or Parquet file is one row for each observation unless a grid is asked for."""
    return layouts.as_grid(table) if layout == "grid" else table


def _loaded(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except (OSError, ValueError) as error:
        raise refusals.MissingFile(str(path)) from error


def _mislabelled(name: str, kind: Kind) -> tuple[Decision, ...]:
    """A note where the content is not what the ending of the name promises."""
    ending = Path(name).suffix.lower()
    if kind in _ENDINGS.get(ending, (kind,)):
        return ()
    return (Decision("format", f"The name ends in {ending}, but the file is {_TOLD[kind]} and was read as that."),)


def _text(data: bytes) -> Source:
    decoded = encoding.decode(data)
    separated = separators.find(decoded.data)
    found = Found((*decoded.decisions, *separated.decisions), comma_separated=separated.delimiter == ",")
    return delimited.Delimited(separated.data, separated.delimiter, found, separated.declared)


def _fingerprint(data: bytes, sheet: str | None, layout: str) -> str:
    seal = sha256(data)
    seal.update(f"\0{sheet}\0{layout}".encode("utf-8", "surrogatepass"))
    return seal.hexdigest()
