"""Invented designs of many shapes for the tests of what is taken away: small, large, long-named, with holes, undecided."""

from collections.abc import Callable, Sequence
from functools import cache

import numpy as np
import pandas as pd

import analysis
from analysis.findings import Findings
from analysis.study import Study

LIGHT, FEED = ("Full sun", "Half shade", "Deep shade"), ("No feed", "Feed A", "Feed B", "Feed A+B")
MEANS = np.array([[11.2, 16.9, 15.3, 21.2], [11.4, 15.3, 14.7, 16.2], [9.2, 10.0, 11.0, 10.4]])
LONG_ROWS = (
    "Immediately after harvest, kept in the dark",
    "Immediately after harvest, kept in daylight",
    "One week after harvest, stored at four degrees",
)
LONG_COLUMNS = (
    "Control without any treatment at all",
    "Treated with compound alpha at full strength",
    "Treated with compound alpha at half strength",
)


def frame(
    rows: Sequence[str],
    columns: Sequence[str],
    mean: Callable[[int, int], float],
    n: Callable[[int, int], int],
    sd: float,
    names: Sequence[str] = ("light", "feed", "yield"),
) -> pd.DataFrame:
    """Return an experiment with these levels, means and counts; the spread is the same at every call."""
    chance = np.random.default_rng(20)
    cells = [(i, j) for i in range(len(rows)) for j in range(len(columns)) for _ in range(n(i, j))]
    table = pd.DataFrame([(rows[i], columns[j], round(mean(i, j) + sd * chance.normal(), 4)) for i, j in cells], columns=list(names))
    ordered = {names[0]: pd.CategoricalDtype(list(rows), ordered=True), names[1]: pd.CategoricalDtype(list(columns), ordered=True)}
    return table.astype(ordered)


def findings_of(table: pd.DataFrame, **choices: object) -> Findings:
    """Return the findings of a frame whose columns are the two factors and the response."""
    row, column, response = table.columns[:3]
    return analysis.analyse(Study(analysis.read_table(table, name="invented"), response, row, column, **choices))  # type: ignore[arg-type]


def basil(**choices: object) -> Findings:
    """3 × 4, six in a cell, a strong interaction."""
    return findings_of(frame(LIGHT, FEED, lambda i, j: MEANS[i, j], lambda i, j: 6, 1.5), **choices)


DESIGNS: dict[str, Callable[[], Findings]] = {
    "3 by 4": basil,
    "2 by 2, names like formulas": lambda: findings_of(
        frame(("=A1", "@plain"), ("-dry", "+wet"), lambda i, j: 5.0, lambda i, j: 3, 1.0, ("=soil", "@water", "+mass"))
    ),
    "6 by 8": lambda: findings_of(
        frame(
            [f"Variety {k}" for k in range(1, 7)],
            [f"{10 * k} kg/ha nitrogen" for k in range(8)],
            lambda i, j: 3000 + 120 * i + 90 * j + 60 * j * (i == 3),
            lambda i, j: 3,
            150.0,
            ("variety", "nitrogen supplied", "grain yield (kg/ha)"),
        )
    ),
    "long names": lambda: findings_of(
        frame(
            LONG_ROWS,
            LONG_COLUMNS,
            lambda i, j: 0.012 + 0.004 * i * j,
            lambda i, j: 4,
            0.004,
            ("time and conditions of storage before measurement", "treatment applied to the leaves", "chlorophyll content (mg per g)"),
        )
    ),
    "an empty cell": lambda: findings_of(
        frame(LIGHT, FEED, lambda i, j: MEANS[i, j], lambda i, j: 0 if (i, j) == (1, 2) else 2 + (i + j) % 4, 1.5)
    ),
    "undecided": lambda: findings_of(frame(LIGHT, FEED, lambda i, j: 10.0, lambda i, j: 2, 3.0)),
    "one value a cell": lambda: findings_of(frame(LIGHT, FEED, lambda i, j: MEANS[i, j], lambda i, j: 1, 1.0), model="additive"),
    "20 by 3": lambda: findings_of(
        frame([f"Line {k}" for k in range(20)], ("low", "mid", "high"), lambda i, j: i + j, lambda i, j: 2, 1.0, ("line", "dose", "length"))
    ),
    "logarithm": lambda: basil(scale="log"),
}


@cache
def design(name: str) -> Findings:
    """Return the findings of a design by its name."""
    return DESIGNS[name]()
