"""Quartiles are those of the definition, in original units, cell by cell."""

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis import five_numbers
from analysis.study import Study


def found(frame: pd.DataFrame, **choices: object) -> pd.DataFrame:
    study = Study(analysis.read_table(frame, name="frame"), "y", "a", "b", **choices)  # type: ignore[arg-type]
    return analysis.analyse(study).five_numbers


def frame_of(cells: dict[tuple[str, str], list[float]]) -> pd.DataFrame:
    return pd.DataFrame([(a, b, y) for (a, b), values in cells.items() for y in values], columns=["a", "b", "y"])


CELLS = {("u", "p"): [8.0, 1, 2, 7, 3, 4, 6, 5], ("u", "q"): [2.0, 4], ("v", "p"): [3.0], ("v", "q"): [1.0, 9, 5]}


def test_quartiles_are_those_of_the_definition() -> None:
    """Definition 7 of Hyndman and Fan puts the p-th quantile of n values at place 1 + (n - 1) p: 2.75, 4.5 and 6.25 among 1 to 8."""
    numbers = found(frame_of(CELLS)).set_index(["row", "column"])
    assert numbers.loc[("u", "p"), list(five_numbers.COLUMNS)].tolist() == [1, 2.75, 4.5, 6.25, 8]
    assert numbers.loc[("u", "q"), list(five_numbers.COLUMNS)].tolist() == [2, 2.5, 3, 3.5, 4]
    assert numbers.loc[("v", "p"), list(five_numbers.COLUMNS)].tolist() == [3] * 5
    assert numbers["n"].tolist() == [8, 2, 1, 3]


def test_an_empty_cell_has_no_numbers() -> None:
    rest = {cell: values for cell, values in CELLS.items() if cell != ("v", "p")}
    numbers = found(frame_of(rest), model="additive").set_index(["row", "column"])
    assert numbers.loc[("v", "p"), "n"] == 0
    assert numbers.loc[("v", "p"), list(five_numbers.COLUMNS)].isna().all()


@pytest.mark.parametrize("scale", ["log", "sqrt", "reciprocal", "power=0.3"])
def test_the_scale_analysed_leaves_them_in_original_units(scale: str) -> None:
    plain, scaled = found(frame_of(CELLS)), found(frame_of(CELLS), scale=scale)
    np.testing.assert_allclose(scaled[list(five_numbers.COLUMNS)], plain[list(five_numbers.COLUMNS)], rtol=1e-12)
