"""The sample experiments: made by their script, told by their text, and the text says what a model finds."""

import runpy
from pathlib import Path
from typing import Any

import numpy as np
import openpyxl
import pandas as pd
import pytest
import statsmodels.api as sm
import statsmodels.formula.api as smf
from scipy import stats

from tests.sources import ROOT

FOLDER = ROOT / "sample_data"
TABLES = sorted(file for file in FOLDER.iterdir() if file.suffix in {".csv", ".xlsx"})
SPELLINGS = {"maltose ": "Maltose", "Maltos": "Maltose"}


@pytest.fixture(scope="module")
def script() -> dict[str, Any]:
    return runpy.run_path(str(FOLDER / "make_samples.py"))


def basil() -> pd.DataFrame:
    return pd.read_csv(FOLDER / "basil_light_feed.csv").set_axis(["pot", "bench", "row", "column", "y"], axis=1)


def coating() -> pd.DataFrame:
    frame = pd.read_csv(FOLDER / "coating_primer_cure.csv", na_values=["n.d."])
    return frame.set_axis(["panel", "block", "row", "column", "y"], axis=1).dropna()


def yeast() -> pd.DataFrame:
    rows = list(openpyxl.load_workbook(FOLDER / "yeast_sugar.xlsx")["Trial 7"].values)
    frame = pd.DataFrame(rows[5:-1], columns=["flask", "row", "column", "y", "by"])
    return frame.assign(y=frame["y"].str.replace(",", ".").astype(float), column=frame["column"].replace(SPELLINGS))


def p_values(frame: pd.DataFrame, model: str = "y ~ C(row, Sum) * C(column, Sum)") -> tuple[float, float, float]:
    """Return p for the rows, the columns and the interaction, by statsmodels' Type III table."""
    table = sm.stats.anova_lm(smf.ols(model, frame).fit(), typ=3)["PR(>F)"]
    return tuple(table[term] for term in ("C(row, Sum)", "C(column, Sum)", "C(row, Sum):C(column, Sum)"))


@pytest.mark.parametrize("table", TABLES, ids=lambda file: file.stem)
def test_every_sample_is_told(table: Path) -> None:
    title, *paragraphs = table.with_suffix(".txt").read_text(encoding="utf-8").strip().split("\n\n")
    assert title.endswith("?")
    assert paragraphs[-1].startswith("Invented for Crossgrain")


def test_the_script_makes_the_tables(script: dict[str, Any]) -> None:
    for name, rows in (("basil_light_feed.csv", script["basil"]()), ("coating_primer_cure.csv", script["coating"]())):
        text = "\n".join(",".join(map(str, row)) for row in rows) + "\n"
        assert (FOLDER / name).read_text(encoding="utf-8") == text
    book = openpyxl.load_workbook(FOLDER / "yeast_sugar.xlsx")
    for sheet, rows in (("Trial 7", script["yeast"]()), ("Notes", script["NOTES"])):
        kept = [tuple(value for value in row if value is not None) for row in book[sheet].values]
        assert kept == [tuple(value for value in row if value != "") for row in rows]


def test_feeding_basil_pays_with_light() -> None:
    frame = basil()
    assert (frame.groupby(["row", "column"]).size() == 6).all()
    assert max(p_values(frame)) < 0.001
    assert p_values(frame.assign(y=np.log(frame["y"])))[2] < 0.001  # not a matter of the scale alone
    means = frame.groupby(["row", "column"])["y"].mean().unstack()
    gain = means["Feed A+B"] - means["No feed"]
    assert gain.round().to_dict() == {"Full sun": 19, "Half shade": 8, "Deep shade": 2}
    assert p_values_within(frame, "Deep shade") > 0.1


def p_values_within(frame: pd.DataFrame, light: str) -> float:
    """Return p for the columns within one row, with the error of the whole trial."""
    model = smf.ols("y ~ C(row) * C(column)", frame).fit()
    part = frame[frame["row"] == light].groupby("column")["y"]
    f = part.size().mean() * part.mean().var() / model.mse_resid
    return float(stats.f.sf(f, part.ngroups - 1, model.df_resid))


def test_primer_and_cure_add_up() -> None:
    frame = coating()
    rows, columns, interaction = p_values(frame, "y ~ C(block, Sum) + C(row, Sum) * C(column, Sum)")
    assert max(rows, columns) < 0.001
    assert interaction > 0.2
    counts = frame.groupby(["row", "column"]).size()
    assert (len(frame), counts.min(), counts.max()) == (52, 3, 5)


def test_one_strain_leaves_maltose() -> None:
    frame = yeast()
    assert len(frame) == 45
    assert max(p_values(frame)) < 0.001
    means = frame.groupby(["row", "column"])["y"].mean().unstack()["Maltose"]
    assert means["Y-47"] < 25 < 45 < means[["Y-12", "Y-31"]].min()
