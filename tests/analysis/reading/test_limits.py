"""Files beyond a limit are turned down at once, and the README states the limits that hold."""

import io
from pathlib import Path

import pandas as pd
import pytest

from analysis import refusals
from analysis.reading import limits
from analysis.reading.entry import read_table
from tests.analysis.reading.files import BALANCED, text, xlsx
from tests.sources import ROOT

STATED = next(line for line in (ROOT / "README.md").read_text(encoding="utf-8").splitlines() if "unpack to" in line)


@pytest.mark.parametrize(
    "words",
    [
        f"up to {limits.FILE_BYTES // 2**30} GiB",
        f"{limits.ROWS:,} rows",
        f"{limits.COLUMNS:,} columns",
        f"{limits.CELL_CHARACTERS:,} characters",
        f"unpack to {limits.UNPACKED_BYTES // 2**20} MiB",
        f"{limits.SHEET_CELLS:,} cells",
        f"{limits.COMBINATIONS:,} combinations",
        f"{limits.LEVELS:,} levels",
    ],
)
def test_the_readme_states_the_limits(words: str) -> None:
    assert words in STATED


def test_a_large_file_is_not_even_opened(tmp_path: Path) -> None:
    path = tmp_path / "large.csv"
    with path.open("wb") as file:
        file.truncate(limits.FILE_BYTES + 1)  # takes no room on the disk
    with pytest.raises(refusals.FileTooLarge, match="the limit is 1,024 MiB"):
        read_table(path)


def test_too_many_rows(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "ROWS", 5)
    with pytest.raises(refusals.TooManyRows, match="has 9 rows and the limit is 5"):
        read_table(text(BALANCED).encode())
    stream = io.BytesIO()
    pd.DataFrame({"a": range(6), "y": range(6)}).to_parquet(stream)
    with pytest.raises(refusals.TooManyRows, match="has 6 rows and the limit is 5"):
        read_table(stream.getvalue())


WIDE = [[f"c{i}" for i in range(limits.COLUMNS + 1)], *[[1.5] * (limits.COLUMNS + 1)] * 3]


def test_too_many_columns() -> None:
    with pytest.raises(refusals.TooManyColumns, match="Row 1 fills 1,001 columns and the limit is 1,000"):
        read_table(text(WIDE).encode())
    with pytest.raises(refusals.TooManyColumns, match="The table fills 1,001 columns"):
        read_table(xlsx(WIDE))
    stream = io.BytesIO()
    pd.DataFrame([WIDE[1]], columns=WIDE[0]).to_parquet(stream)
    with pytest.raises(refusals.TooManyColumns, match="1,001 columns"):
        read_table(stream.getvalue())


def test_blank_columns_do_not_count() -> None:
    assert read_table("".join(line + "," * 2000 + "\n" for line in text(BALANCED).splitlines()).encode()).rows == 8
