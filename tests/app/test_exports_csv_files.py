"""Tables as plain text read back to the last bit, and no text in them becomes a formula."""

import csv
import io
import zipfile

import numpy as np
import pandas as pd
import pytest

from app.exports import csv_files, sheets
from tests.app import designs


def read(findings_name: str) -> dict[str, pd.DataFrame]:
    with zipfile.ZipFile(io.BytesIO(csv_files.archive(sheets.all_sheets(designs.design(findings_name))))) as parts:
        return {name.removesuffix(".csv"): pd.read_csv(io.BytesIO(parts.read(name)), encoding="utf-8-sig") for name in parts.namelist()}


@pytest.mark.parametrize("name", ["3 by 4", "an empty cell", "logarithm"])
def test_numbers_read_back_to_the_last_bit(name: str) -> None:
    told = read(name)
    for sheet, wanted in sheets.all_sheets(designs.design(name)).items():
        assert len(told[sheet]) == len(wanted)
        for column, head in enumerate(wanted.columns):
            if wanted.iloc[:, column].dtype == float:
                np.testing.assert_array_equal(told[sheet].iloc[:, column].to_numpy(float), wanted.iloc[:, column].to_numpy(), str(head))


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("=1+1", "'=1+1"),
        ("+A", "'+A"),
        ("@x", "'@x"),
        ("-dry", "'-dry"),
        ("'=x", "''=x"),
        ("-5", "-5"),
        ("+1.5e3", "+1.5e3"),
        ("plain", "plain"),
    ],
)
def test_text_that_starts_like_a_formula_is_inert(text: str, told: str) -> None:
    assert csv_files.inert(text) == told


def test_no_cell_of_any_table_starts_like_a_formula() -> None:
    frames = sheets.all_sheets(designs.design("2 by 2, names like formulas"))
    for frame in frames.values():
        for row in csv.reader(io.StringIO(csv_files.text(frame))):
            for cell in row:
                assert not cell.startswith(("=", "+", "@", "\t", "\r"))
                assert not cell.startswith("-") or float(cell) < 0
