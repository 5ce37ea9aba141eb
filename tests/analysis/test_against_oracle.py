"""Every number of the object against exact arithmetic on explicit design matrices (tests/oracle), on a fixed set of designs."""

import csv
import io
import json
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import pytest

import analysis
from tests.oracle import paths
from tests.oracle.cases import all_cases
from tests.oracle.whole import answer, written

STORED = Path(__file__).resolve().parents[1] / "reference" / "oracle"
NAMES = sorted(file.stem for file in STORED.glob("*.json"))
COLUMNS = ("a", "b", "block", "unit", "y")
ALIKE = {"p", "p_adjusted"}
RATIOS = {"ss", "ms", "f", "t", "se", "sd", "sigma", "residual_ms", "chi2", "cook", "student_internal", "student_external", "leverage"}
SHARES = {"partial_eta2", "partial_eta2_lower", "partial_eta2_upper", "omega2", "partial_omega2", "r2", "adjusted_r2"}
LABELS = {"scale", "term", "level", "row", "column", "factor", "within", "left", "right", "rows", "columns"}
BOUNDS = {"lower", "upper", "lower_adjusted", "upper_adjusted"}


@cache
def stored(name: str) -> dict[str, Any]:
    """A case with the oracle's answer."""
    return json.loads((STORED / f"{name}.json").read_text(encoding="utf-8"))


@cache
def found(name: str) -> dict[str, Any]:
    """The engine's answer to the same rows, read from text."""
    case = stored(name)
    used = [place for place in range(len(COLUMNS)) if case["rows"][0][place]]
    text = io.StringIO()
    csv.writer(text).writerows([[COLUMNS[place] for place in used], *([row[place] for place in used] for row in case["rows"])])
    table = analysis.read_table(text.getvalue().encode(), name=f"{name}.csv")
    extra = {role: role for role in ("block", "unit") if COLUMNS.index(role) in used}
    study = analysis.Study(table=table, response="y", row_factor="a", column_factor="b", **extra, **case["choices"])
    return analysis.analyse(study).to_dict()


def spread_of(name: str) -> float:
    """Standard deviation of the response on the analysed scale, about."""
    total = next(row for row in stored(name)["answer"]["tables_additive"]["type_1"] if row["term"] == "total")
    return (float(total["ss"]) / total["df"]) ** 0.5


def allowed(key: str, exact: float, spread: float, adjust: str) -> float:
    """How far a double may be from the exact value: 1e-10 of it, or of the spread of the data for what has a place on their axis."""
    if key in ALIKE:
        return (1e-6 if adjust == "dunnett" else 1e-8) * exact
    if key in RATIOS:
        return 1e-10 * abs(exact) + 1e-13 * (spread * spread if key in ("ss", "ms") else 1)
    if key in SHARES:
        return 1e-9
    quantile = {"dunnett": 1e-6, "tukey": 1e-9}.get(adjust, 1e-10) if key in BOUNDS else 1e-10
    return quantile * spread + 4e-16 * abs(exact)


def disagreements(name: str, part: str) -> Iterator[tuple[str, Any, Any]]:
    """Every value of a part of the object that is not what the oracle says."""
    case, spread = stored(name), spread_of(name)
    adjust = case["choices"].get("adjust", "tukey") if part == "comparisons" else "none"
    told = dict(paths.leaves(found(name)[part]))
    for path, exact in paths.leaves(case["answer"][part]):
        value = told.get(path, "nothing")
        key = path.rsplit("/")[-1]
        if not isinstance(exact, str) or key in LABELS:
            fits = value == exact
        else:
            fits = isinstance(value, float | int) and abs(value - float(exact)) <= allowed(key, float(exact), spread, adjust)
        if not fits:
            yield path, value, exact


PARTS = (
    "tables", "tables_additive", "fit", "cells", "marginal_means", "additive_means", "effects",
    "comparisons", "simple_effects", "interaction_contrasts",
)  # fmt: skip


@pytest.mark.parametrize("part", PARTS)
@pytest.mark.parametrize("name", NAMES)
def test_part_agrees(name, part):
    assert list(disagreements(name, part)) == []


@pytest.mark.parametrize("name", [name for name in NAMES if "checks" in stored(name)["answer"]])
def test_checks_agree(name):
    assert list(disagreements(name, "checks")) == []


@pytest.mark.parametrize("name", NAMES)
def test_every_comparison_told_is_one_the_oracle_knows(name):
    families = stored(name)["answer"]["comparisons"]
    told = {family: [row for row in rows if row["difference"] is not None] for family, rows in found(name)["comparisons"].items()}
    assert {family: len(rows) for family, rows in told.items()} == {family: len(rows) for family, rows in families.items()}


def test_stored_answers_are_the_ones_the_oracle_gives():
    # one small case afresh, lest the files and what made them drift apart
    case = next(case for case in all_cases() if case.name == "two-by-two-sidak-99")
    assert json.loads(json.dumps(written(answer(case)))) == stored(case.name)["answer"]
