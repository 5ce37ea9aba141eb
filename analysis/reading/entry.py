"""The way from a path, the bytes of a file or a frame to a table: here reading starts."""

from hashlib import sha256
from pathlib import Path

import pandas as pd

from analysis import refusals
from analysis.reading import delimited, encoding, frames, layouts, separators, signatures, workbooks
from analysis.reading.records import Found, Source
from analysis.table import Table

LAYOUTS = ("auto", "rows", "grid")


def read_table(source: str | Path | bytes | pd.DataFrame, name: str | None = None, sheet: str | None = None, layout: str = "auto") -> Table:
    """Read a table from a path, from the bytes of a file, or from a pandas frame, which is taken as it is.

    sheet names the sheet of a workbook (the first with a table where None); layout is "auto", "rows" or "grid". Raises a
    refusal, one sentence, for whatever holds no usable table.
    """
    if layout not in LAYOUTS:
        raise refusals.UnknownChoice("layout", layout, LAYOUTS)
    if isinstance(source, pd.DataFrame):
        return frames.read(source, name or "table")
    data = source if isinstance(source, bytes) else _loaded(Path(source))
    name = name or ("table" if isinstance(source, bytes) else Path(source).name)
    kind = signatures.kind_of(data)
    found: Source = workbooks.read(data, sheet) if kind != "text" else _text(data)
    return layouts.read(found, name, layout, _fingerprint(data, sheet, layout))


def _loaded(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        raise refusals.MissingFile(str(path)) from error


def _text(data: bytes) -> Source:
    decoded = encoding.decode(data)
    separated = separators.find(decoded.data)
    found = Found((*decoded.decisions, *separated.decisions), comma_separated=separated.delimiter == ",")
    return delimited.Delimited(separated.data, separated.delimiter, found, separated.declared)


def _fingerprint(data: bytes, sheet: str | None, layout: str) -> str:
    seal = sha256(data)
    seal.update(f"\0{sheet}\0{layout}".encode("utf-8", "surrogatepass"))
    return seal.hexdigest()
