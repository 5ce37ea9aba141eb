"""Tables as plain text: comma-separated, numbers in full, text that starts like a formula kept from becoming one."""

import io
import zipfile
from collections.abc import Mapping

import pandas as pd

from app.exports import zips

FORMULA = tuple("=+-@\t\r")  # how spreadsheets recognise a formula
MARK = "\ufeff"  # tells spreadsheets that letters are UTF-8


def inert(value: object) -> object:
    """Return text that no spreadsheet takes for a formula, an apostrophe before it; a number, in words or not, stays as it is."""
    if not isinstance(value, str) or not value.lstrip("'").startswith(FORMULA) or _is_number(value):
        return value
    return f"'{value}"


def _is_number(text: str) -> bool:
    try:
        float(text)
    except ValueError:
        return False
    return True


def text(frame: pd.DataFrame) -> str:
    """Return a frame as comma-separated text; numbers read back to the last bit."""
    safe = frame.astype(object).map(inert).set_axis([inert(str(name)) for name in frame.columns], axis=1)
    return safe.to_csv(index=False, lineterminator="\n")


def archive(frames: Mapping[str, pd.DataFrame]) -> bytes:
    """Return frames as one archive of .csv files, the same bytes for the same frames."""
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w") as parts:
        for name, frame in frames.items():
            parts.writestr(f"{name}.csv", MARK + text(frame))
    return zips.settled(packed.getvalue())
