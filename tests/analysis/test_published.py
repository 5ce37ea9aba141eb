"""Published analyses, every printed digit: each case names its source and provenance in its about.json."""

import json
import math
import subprocess
import sys
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import pandas as pd
import pytest
from scipy import stats

import analysis
from tests.oracle import paths

ROOT = Path(__file__).resolve().parents[2]
REFERENCE = ROOT / "tests" / "reference"


@dataclass(frozen=True)
class Run:
    """One set of choices on one published table, with the values printed for it."""

    case: str
    place: int
    about: dict[str, Any]

    @property
    def told(self) -> dict[str, Any]:
        """The run as written in about.json."""
        return self.about["runs"][self.place]

    @property
    def choices(self) -> dict[str, Any]:
        """The choices, without the response."""
        return {key: value for key, value in self.told["choices"].items() if key != "response"}

    @property
    def roles(self) -> dict[str, Any]:
        """Columns and the order of levels, as arguments of Study."""
        roles = self.about["roles"]
        row, column = roles["factors"]
        response = self.told["choices"].get("response", roles["response"])
        extra = {role: roles[role] for role in ("block", "unit") if role in roles}
        return {"response": response, "row_factor": row, "column_factor": column, "keep": roles.get("levels", {}), **extra}

    def __str__(self) -> str:
        return f"{self.case}-{self.place}"


def runs() -> Iterator[Run]:
    """Every run of every case that has one."""
    for file in sorted(REFERENCE.glob("*/about.json")):
        about = json.loads(file.read_text(encoding="utf-8"))
        yield from (Run(file.parent.name, place, about) for place in range(len(about.get("runs", ()))))


@cache
def found(run: str) -> dict[str, Any]:
    """The engine's object for a run."""
    return next(solve(one) for one in runs() if str(one) == run)


def solve(run: Run) -> dict[str, Any]:
    """Read the table as its run says and analyse it."""
    study = analysis.Study(table=analysis.read_table(source(run), name="data.csv"), **{**run.roles, **run.choices})
    return analysis.analyse(study).to_dict()


def source(run: Run) -> Path | pd.DataFrame:
    """The file, or its values as doubles where the run is about those, or with a second factor of one level for the one-way case."""
    file = REFERENCE / run.case / "data.csv"
    constant = run.about["roles"].get("constant")
    if constant is not None:
        return pd.read_csv(file).assign(**{constant: "all"})
    return pd.read_csv(file) if run.told["reading"] == "double" else file


def total_of(whole: dict[str, Any], key: str) -> float:
    """Sum over the factors and the interaction."""
    kept = [row for row in whole["tables"]["type_1"] if row["term"] not in ("residual", "total")]
    return sum(row[key] for row in kept)


def model_f(whole: dict[str, Any]) -> float:
    """F of the whole model without blocks."""
    return total_of(whole, "ss") / total_of(whole, "df") / whole["fit"]["residual_ms"]


def four_times(term: str) -> Callable[[dict[str, Any]], float]:
    """Means of four have a quarter of the sums of squares of the single values."""
    return lambda whole: 4 * paths.at(whole, f"tables/type_3/term={term}/ss")


def half_width(whole: dict[str, Any]) -> float:
    """Half the adjusted interval between two materials at 70 degrees."""
    row = next(row for row in whole["comparisons"]["material within temperature"] if row["within"] == "70")
    return (row["upper_adjusted"] - row["lower_adjusted"]) / 2


# Simple functions of the object that a source prints in place of a value of the object itself.
DERIVED: dict[str, Callable[[dict[str, Any]], float]] = {
    "model_ss": lambda whole: total_of(whole, "ss"),
    "model_f": model_f,
    "model_p": lambda whole: stats.f.sf(model_f(whole), total_of(whole, "df"), whole["fit"]["residual_df"]),
    "within_ss": lambda whole: sum(paths.at(whole, f"tables/type_1/term={term}/ss") for term in ("run", "residual")),
    "4 x shade ss": four_times("shade"),
    "4 x block ss": four_times("block"),
    "4 x residual ss": four_times("residual"),
    "half_width material within temperature 70": half_width,
    "box_cox interval": lambda whole: (whole["checks"]["box_cox"]["lower"], whole["checks"]["box_cox"]["upper"]),
}


def value_at(whole: dict[str, Any], path: str) -> Any:
    """The value under a path, derived ones by their function, None where there is none."""
    if path.startswith("derived/"):
        return DERIVED[path.removeprefix("derived/")](whole)
    try:
        return paths.at(whole, path)
    except (LookupError, TypeError):
        return turned_round(whole, path) if path.startswith("comparisons/cells/") else None


def turned_round(whole: dict[str, Any], path: str) -> float:
    """A comparison of two cells that is printed the other way round: its sign turns and its bounds change places."""
    _, _, pair, key = path.split("/")
    left, right = (part.split("=", 1)[1] for part in pair.split("&"))
    twin = {"lower_adjusted": "upper_adjusted", "upper_adjusted": "lower_adjusted"}.get(key, key)
    value = paths.at(whole, f"comparisons/cells/left={right}&right={left}/{twin}")
    return value if key == "p_adjusted" else -value


def agrees(value: Any, printed: dict[str, Any]) -> bool:
    """Whether a value is what was printed, within the tolerance that the printed digits leave."""
    if "below" in printed:
        return value < float(printed["below"])
    if "contains" in printed:
        return value[0] <= printed["contains"] <= value[1]
    return abs(value - float(printed["value"])) <= printed["tolerance"]


@pytest.mark.parametrize("run", list(runs()), ids=str)
def test_every_printed_digit(run):
    whole = found(str(run))
    wrong = {path: (value_at(whole, path), printed) for path, printed in run.told["published"].items()}
    assert {path: pair for path, pair in wrong.items() if pair[0] is None or not agrees(*pair)} == {}


def test_the_shell_prints_the_same_object():
    # the yarn table (Tippett 1950), model without interaction, Scheffe
    run = next(run for run in runs() if run.case == "warpbreaks" and run.choices.get("adjust") == "scheffe")
    words = [str(REFERENCE / "warpbreaks" / "data.csv"), "--response", "breaks", "--factors", "wool", "tension"]
    words += ["--keep", "wool=A,B", "--keep", "tension=L,M,H", "--model", "additive", "--adjust", "scheffe"]
    printed = subprocess.run([sys.executable, "-m", "analysis", *words], cwd=ROOT, capture_output=True, text=True, check=True).stdout
    whole = json.loads(printed)
    assert all(agrees(value_at(whole, path), value) for path, value in run.told["published"].items())
    assert whole["tables"] == found(str(run))["tables"]


NIST = [run for run in runs() if run.case.startswith("nist-smls") and run.told["reading"] != "double"]


@pytest.mark.parametrize("run", NIST, ids=str)
def test_certified_values_to_thirteen_digits(run, record_property):
    # NIST Statistical Reference Datasets, analysis of variance; the decimals are read as written, so that even the sets of higher
    # difficulty (offset 1e6 and 1e12) reach what the certified digits allow
    certified = {path: float(printed["value"]) for path, printed in run.told["published"].items()}
    errors = {path: abs(value_at(found(str(run)), path) - value) / value for path, value in certified.items()}
    record_property("printed", f"{run.case}: at least {-math.log10(max(*errors.values(), 1e-16)):.1f} digits of every certified value")
    assert max(errors.values()) < 1e-13, errors
