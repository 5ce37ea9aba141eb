"""How columns become a frame as they are: text is not converted, which costs more than small frames themselves."""

from collections.abc import Mapping

import numpy as np
import pandas as pd


def frame_of(columns: Mapping[str, np.ndarray]) -> pd.DataFrame:
    """Return the frame of these columns of equal length; objects stay objects."""
    index = pd.RangeIndex(len(next(iter(columns.values()))))
    kept = {
        name: pd.Series(values, index=index, dtype=object, copy=False) if values.dtype == object else values
        for name, values in columns.items()
    }
    return pd.DataFrame(kept, index=index, copy=False)


def estimable(frame: pd.DataFrame, column: str) -> pd.DataFrame:
    """Return the rows in which a column of numbers is not missing: the frame itself where it nowhere is."""
    known = frame[column].notna().to_numpy(bool)
    return frame if known.all() else frame[known]
