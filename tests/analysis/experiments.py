"""Small experiments for the engine's tests, and the short way from a frame to findings."""

from typing import Any

import numpy as np
import pandas as pd

import analysis


def analysed(frame: pd.DataFrame, row: str = "a", column: str = "b", response: str = "y", **choices: Any) -> analysis.Findings:
    """Return the findings of a frame with plain roles."""
    table = analysis.read_table(frame, name="experiment")
    return analysis.analyse(analysis.Study(table=table, response=response, row_factor=row, column_factor=column, **choices))


def crossed(counts: list[list[int]], seed: int = 7, spread: float = 1.0) -> pd.DataFrame:
    """Return an invented experiment with these counts a cell, both effects and an interaction."""
    rng = np.random.default_rng(seed)
    rows = [
        (f"a{i}", f"b{j}", 10 + 2 * i + j + 0.5 * i * j + spread * rng.normal())
        for i, line in enumerate(counts)
        for j, n in enumerate(line)
        for _ in range(n)
    ]
    return pd.DataFrame(rows, columns=["a", "b", "y"])
