"""How the observations of each cell are distributed: lowest, quartiles, median and highest."""

import numpy as np
import pandas as pd

from analysis.observations import Observations

COLUMNS = ("lowest", "lower_quartile", "median", "upper_quartile", "highest")
SHARES = (0.0, 0.25, 0.5, 0.75, 1.0)


def by_cell(observed: Observations) -> pd.DataFrame:
    """Return one row a cell with n and five numbers in original units, whatever the scale analysed; NaN in an empty cell.

    Between two observations a quartile is interpolated. Source: Hyndman and Fan (1996), The American Statistician 50, 361-365,
    definition 7.
    """
    a, b = observed.shape
    cell = observed.row.codes.astype(np.intp) * b + observed.column.codes
    values = observed.scale.back(observed.values)
    order = np.argsort(cell, kind="stable")
    groups = np.split(values[order], np.cumsum(np.bincount(cell, minlength=a * b))[:-1])
    numbers = np.array([np.quantile(group, SHARES) if group.size else np.full(len(SHARES), np.nan) for group in groups])
    names = {
        "row": np.repeat(np.array(observed.row.levels, dtype=object), b),
        "column": np.tile(np.array(observed.column.levels, dtype=object), a),
        "n": np.array([group.size for group in groups]),
    }
    return pd.DataFrame({**names, **dict(zip(COLUMNS, numbers.T, strict=True))})
