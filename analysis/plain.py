"""How findings become plain values for JSON."""

import dataclasses
import math
from collections.abc import Mapping
from typing import Any

import numpy as np
import pandas as pd

PLAIN = frozenset({str, int, bool, type(None)})
WHOLE = frozenset({"df", "residual_df", "n", "df1", "df2", "row", "family_size"})  # counts, even where a gap made them floats


def plain(value: Any) -> Any:
    """Return a value as dicts, lists, text, numbers and None; whole-number columns stay whole, NaN becomes None."""
    if type(value) in PLAIN:
        return value
    if isinstance(value, (list, tuple, np.ndarray)):
        return [plain(part) for part in value]
    if isinstance(value, pd.DataFrame):
        return _records(value)
    if isinstance(value, Mapping):
        return {str(key): plain(part) for key, part in value.items()}
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        return plain({field.name: getattr(value, field.name) for field in dataclasses.fields(value)})
    return _scalar(value)


def _scalar(value: Any) -> Any:
    if isinstance(value, (bool, np.bool_)):
        return bool(value)
    if isinstance(value, (int, np.integer)):
        return int(value)
    if isinstance(value, (float, np.floating)):
        return float(value) if math.isfinite(value) else None
    return None if value is None or value is pd.NaT else value


def _records(frame: pd.DataFrame) -> list[dict[str, Any]]:
    names = [str(name) for name in frame.columns]
    columns = [_column(name, column) for name, (_, column) in zip(names, frame.items(), strict=True)]
    return [dict(zip(names, row, strict=True)) for row in zip(*columns, strict=True)]


def _column(name: str, column: pd.Series) -> list[Any]:
    """Return a column's values, a whole column at a time: families can hold 100,000 rows."""
    values, kind = column.tolist(), column.dtype.kind
    if kind in "iub":
        return list(values)
    if kind != "f":
        return [value if type(value) is str else plain(value) for value in values]
    # What is infinite or missing is not 0 when it is taken from itself.
    if name in WHOLE:
        return [int(value) if value - value == 0 else None for value in values]
    return [value if value - value == 0 else None for value in values]
