"""How findings become plain values for JSON."""

import dataclasses
import math
from collections.abc import Mapping
from typing import Any

import numpy as np
import pandas as pd


def plain(value: Any) -> Any:
    """Return a value as dicts, lists, text, numbers and None; whole-number columns stay whole, NaN becomes None."""
    if isinstance(value, pd.DataFrame):
        return _records(value)
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        return plain({field.name: getattr(value, field.name) for field in dataclasses.fields(value)})
    if isinstance(value, Mapping):
        return {str(key): plain(part) for key, part in value.items()}
    if isinstance(value, (list, tuple, np.ndarray)):
        return [plain(part) for part in value]
    return _scalar(value)


def _scalar(value: Any) -> Any:
    if isinstance(value, (bool, np.bool_)):
        return bool(value)
    if isinstance(value, (int, np.integer)):
        return int(value)
    if isinstance(value, (float, np.floating)):
        return float(value) if math.isfinite(value) else None
    return None if value is None or value is pd.NaT else value


WHOLE = frozenset({"df", "residual_df", "n", "df1", "df2", "row", "family_size"})  # counts, even where a gap made them floats


def _records(frame: pd.DataFrame) -> list[dict[str, Any]]:
    columns = {str(name): _column(str(name), frame[name]) for name in frame.columns}
    return [dict(zip(columns, row, strict=True)) for row in zip(*columns.values(), strict=True)]


def _column(name: str, column: pd.Series) -> list[Any]:
    """Return a column's values, a whole column at a time where its type allows: families can hold 100,000 rows."""
    if column.dtype.kind in "iub":
        return list(column.tolist())
    if column.dtype.kind != "f":
        return [value if type(value) is str else plain(value) for value in column.tolist()]
    values = column.to_numpy(float)
    known = np.isfinite(values)
    if name in WHOLE and known.any():
        return [int(value) if ok else None for value, ok in zip(values.tolist(), known.tolist(), strict=True)]
    return values.tolist() if known.all() else [value if ok else None for value, ok in zip(values.tolist(), known.tolist(), strict=True)]
