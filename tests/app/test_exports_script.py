"""The script that is taken away computes the engine's numbers again, by another route and without the program."""

import ast
import re
import runpy
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pandas as pd
import pytest

from analysis.findings import Findings
from app import words
from app.exports import csv_files, script, sheets
from tests.app import designs, opening

UNEQUAL = designs.frame(designs.LIGHT, designs.FEED, lambda i, j: designs.MEANS[i, j], lambda i, j: 2 + (2 * i + j) % 4, 1.5)
AWKWARD = ("a \"b\" \\ '''", "−5 ü,;", "-5", "+x")
CASES: dict[str, Callable[[], Findings]] = {
    "equal cells": lambda: designs.design("3 by 4"),
    "unequal cells": lambda: designs.findings_of(UNEQUAL),
    "unequal cells, additive": lambda: designs.findings_of(UNEQUAL, model="additive"),
    "unequal cells, against controls": lambda: designs.findings_of(
        UNEQUAL, adjust="dunnett", control={"light": "Half shade", "feed": "Feed A"}
    ),
    "unequal cells, Šidák, 90 percent": lambda: designs.findings_of(UNEQUAL, adjust="sidak", confidence=0.9),
    "unequal cells, Bonferroni": lambda: designs.findings_of(UNEQUAL, adjust="bonferroni"),
    "unequal cells, not adjusted": lambda: designs.findings_of(UNEQUAL, adjust="none"),
    "an empty cell": lambda: designs.design("an empty cell"),
    "an empty cell, additive": lambda: designs.findings_of(
        designs.frame(designs.LIGHT, designs.FEED, lambda i, j: designs.MEANS[i, j], lambda i, j: 0 if (i, j) == (1, 2) else 3, 1.5),
        model="additive",
    ),
    "names like formulas": lambda: designs.design("2 by 2, names like formulas"),
    "names that a file has to quote": lambda: designs.findings_of(
        designs.frame(AWKWARD[:2], AWKWARD[2:], lambda i, j: i + j, lambda i, j: 3, 1.0, ('"q"', "analysed", "fitted"))
    ),
    "logarithm, Holm": lambda: designs.basil(scale="log", adjust="holm"),
    "reciprocal": lambda: designs.basil(scale="reciprocal"),
    "one value a cell": lambda: designs.design("one value a cell"),
    "one value a cell, interaction asked for": lambda: designs.findings_of(
        designs.frame(designs.LIGHT, designs.FEED, lambda i, j: designs.MEANS[i, j], lambda i, j: 1, 1.0)
    ),
    "blocks, Scheffé": lambda: opening.findings(opening.sample("coating_primer_cure.csv")),
    "units averaged": lambda: opening.findings(opening.sample("yeast_sugar.xlsx")),
}
# Two routes in double precision; against a control the script's probability is a quasi-random integral.
CLOSE, CLOSE_AGAINST_CONTROL = 1e-6, 2e-3
TABLES = ("anova", "cells", "means", "comparisons")


def run(findings: Findings, folder: Path, monkeypatch: pytest.MonkeyPatch, *data: str) -> dict[str, pd.DataFrame]:
    """Run the script and return what it wrote."""
    (folder / "recompute.py").write_bytes(script.build(findings))
    monkeypatch.chdir(folder)
    monkeypatch.setattr(sys, "argv", ["recompute.py", *data])
    runpy.run_path("recompute.py", run_name="__main__")
    return written(folder)


def written(folder: Path) -> dict[str, pd.DataFrame]:
    """Return the tables that the script left in a folder."""
    return {name: pd.read_csv(folder / f"recomputed_{name}.csv", keep_default_na=False) for name in TABLES}


def numbers(column: pd.Series) -> list[float]:
    return pd.to_numeric(column.replace("", np.nan)).astype(float).tolist()


@pytest.mark.parametrize("case", CASES)
def test_the_script_computes_the_engines_numbers(case: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    findings = CASES[case]()
    told = run(findings, tmp_path, monkeypatch)
    the_same_tables(findings, told["anova"])
    for name in ("estimate", "se", "lower", "upper", "mean", "sd", "n"):
        wanted = findings.cells[name].astype(float).tolist()
        assert numbers(told["cells"][name]) == pytest.approx(wanted, rel=CLOSE, nan_ok=True), name
    for factor, frame in findings.marginal_means.items():
        ours = told["means"][told["means"]["factor"] == factor]
        for name in ("mean", "se", "lower", "upper"):
            assert numbers(ours[name]) == pytest.approx(frame[name].astype(float).tolist(), rel=CLOSE, nan_ok=True), (factor, name)
    the_same_comparisons(findings, told["comparisons"])


def the_same_tables(findings: Findings, told: pd.DataFrame) -> None:
    """Find every term of every table that the script gives; the one that the answers read is among them."""
    assert set(told.loc[told["used_for_the_answers"] == "yes", "table"]) == {findings.used["table"]}
    for kind, ours in told.groupby("table"):
        wanted = findings.tables[kind].set_index("term")
        assert set(ours["term"]) == set(wanted.index) - {"total"}
        for name in ("df", "ss", "ms", "f", "p"):
            theirs = wanted.loc[ours["term"], name].astype(float).tolist()
            assert numbers(ours[name]) == pytest.approx(theirs, rel=CLOSE, abs=1e-12, nan_ok=True), (kind, name)


def the_same_comparisons(findings: Findings, told: pd.DataFrame) -> None:
    """Find every comparison of the engine among those of the script."""
    close = CLOSE_AGAINST_CONTROL if findings.study.adjust == "dunnett" else CLOSE
    known = {(c.family, c.within, c.left, c.right): c for c in told.itertuples()}
    count = 0
    for family, frame in findings.comparisons.items():
        for c in frame[frame["difference"].notna()].itertuples():
            ours = known[family, c.within or "", words.cell_name(c.left), words.cell_name(c.right)]
            count += 1
            for name in ("difference", "se", "t", "p", "lower", "upper"):
                assert float(getattr(ours, name)) == pytest.approx(getattr(c, name), rel=CLOSE, abs=1e-8), (family, name)
            for name in ("p_adjusted", "lower_adjusted", "upper_adjusted"):
                assert float(getattr(ours, name)) == pytest.approx(getattr(c, name), rel=close, abs=max(1e-8, close * c.se)), (family, name)
    assert count == len(told)


def test_the_script_runs_in_a_python_of_its_own(tmp_path: Path) -> None:
    findings = designs.design("2 by 2, names like formulas")
    (tmp_path / "script.py").write_bytes(script.build(findings, "script.py"))
    ran = subprocess.run([sys.executable, "-I", "script.py"], cwd=tmp_path, check=True, capture_output=True, timeout=240)
    the_same_tables(findings, written(tmp_path)["anova"])
    assert b"anova" in ran.stdout
    assert not ran.stderr


def test_geometric_means_and_ratios_stand_beside_logarithms(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    findings = designs.design("logarithm")
    told = run(findings, tmp_path, monkeypatch)
    cells = pd.DataFrame(findings.cells["told"].tolist())
    assert numbers(told["cells"]["estimate in original units"]) == pytest.approx(cells["estimate"].tolist(), rel=CLOSE)
    assert numbers(told["cells"]["lower in original units"]) == pytest.approx(cells["lower"].tolist(), rel=CLOSE)
    first = findings.comparisons["light"].iloc[0]
    assert numbers(told["comparisons"]["difference in original units"])[0] == pytest.approx(first["told"]["estimate"], rel=CLOSE)


@pytest.mark.parametrize("case", ["names like formulas", "names that a file has to quote", "blocks, Scheffé"])
def test_the_script_reads_the_exported_data(case: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    findings = CASES[case]()
    (tmp_path / "own").mkdir()
    (tmp_path / "data as analysed.csv").write_text(csv_files.MARK + csv_files.text(sheets.data(findings)), encoding="utf-8")
    exported = run(findings, tmp_path, monkeypatch, "data as analysed.csv")
    own = run(findings, tmp_path / "own", monkeypatch)
    for name in TABLES:
        pd.testing.assert_frame_equal(exported[name], own[name])


def test_the_script_needs_three_libraries_and_says_which_releases() -> None:
    findings = designs.design("3 by 4")
    text = script.build(findings, "yield-recompute.py").decode("utf-8")
    imported = {
        (node.module if isinstance(node, ast.ImportFrom) else name.name).partition(".")[0]
        for node in ast.walk(ast.parse(text))
        if isinstance(node, ast.Import | ast.ImportFrom)
        for name in node.names
    }
    assert imported - sys.stdlib_module_names == {"numpy", "pandas", "scipy", "statsmodels"}  # numpy comes with each of the others
    assert all(f"{name}=={findings.versions[name]}" in text for name in ("pandas", "statsmodels", "scipy"))
    assert "python yield-recompute.py" in text
    assert not re.search(r"@[A-Z]+@", text), "every place of the script is filled in"
