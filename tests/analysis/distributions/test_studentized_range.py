"""The studentised range against printed tables, against 40-digit arithmetic, against scipy, and against what must hold."""

import csv
import json
import math
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from analysis.distributions import studentized_range

HERE = Path(__file__).parent
REFERENCE = HERE.parents[1] / "reference"


def printed(case: str) -> list[tuple[int, float, float, float]]:
    """Return k, df, alpha and q of a printed table."""
    with (REFERENCE / case / "data.csv").open(encoding="utf-8") as file:
        return [(int(row["k"]), float(row["df"]), float(row["alpha"]), float(row["q"])) for row in csv.DictReader(file)]


@pytest.mark.parametrize(("k", "df", "alpha", "q"), printed("studentized-range-harter"))
def test_points_of_harters_table(k: int, df: float, alpha: float, q: float) -> None:
    # Harter (1960), Ann. Math. Statist. 31, 1122-1147, Table 3, four digits: half a unit of the fourth is 0.0005 relative at most;
    # 0.0006 leaves room for the rounding of the table itself.
    assert studentized_range.ppf_upper(alpha, k, df) == pytest.approx(q, rel=0.0006)


@pytest.mark.parametrize(("k", "df", "alpha", "q"), printed("studentized-range-05"))
def test_points_of_the_classical_table(k: int, df: float, alpha: float, q: float) -> None:
    # Pearson and Hartley; Harter (1960): two decimals, and tables of this age differ by a unit in the last place.
    assert studentized_range.ppf_upper(alpha, k, df) == pytest.approx(q, abs=0.0101)


@pytest.mark.parametrize("case", json.loads((HERE / "high_precision.json").read_text(encoding="utf-8"))["range"], ids=str)
def test_tails_at_many_digits(case: dict[str, str]) -> None:
    # high_precision.json by mpmath (make_high_precision.py), down to 1e-13; beyond, the t test below goes further.
    found = studentized_range.sf(float(case["q"]), int(case["k"]), float(case["df"]))
    assert float(found) == pytest.approx(float(case["sf"]), rel=1e-9)


@pytest.mark.parametrize(("k", "df"), [(3, 2), (4, 7), (10, 20), (30, 90)])
def test_tails_agree_with_scipy(k: int, df: float) -> None:
    # scipy integrates the distribution function to about 1e-10 absolute.
    q = np.array([0.5, 2.0, 3.5, 5.0])
    assert studentized_range.sf(q, k, df) == pytest.approx(stats.studentized_range.sf(q, k, df), abs=1e-9)


@pytest.mark.parametrize("df", [1, 2, 5, 30, 1e4, 1e8, math.inf])
def test_two_means_are_a_t_test(df: float) -> None:
    # The range of two is √2 |t|; the tail keeps its digits far beyond 1e-14.
    q = np.array([0.01, 1.0, 3.0, 8.0, 15.0, 40.0])
    t = 2 * (stats.t.sf(q / np.sqrt(2), df) if np.isfinite(df) else stats.norm.sf(q / np.sqrt(2)))
    assert studentized_range.sf(q, 2, df) == pytest.approx(t, rel=1e-9)


@pytest.mark.parametrize(("k", "df"), [(2, 1), (3, math.inf), (12, 24), (200, 3), (2500, 1), (2500, 1e5), (20000, 40)])
def test_the_point_is_where_the_tail_is_alpha(k: int, df: float) -> None:
    for alpha in (0.3, 0.05, 1e-3, 1e-9):
        assert float(studentized_range.sf(studentized_range.ppf_upper(alpha, k, df), k, df)) == pytest.approx(alpha, rel=1e-9)


@pytest.mark.parametrize(("k", "df"), [(2, 1), (12, 24), (50, 2), (2500, 7), (2500, 1e5), (6, math.inf)])
def test_many_at_once_are_the_same_as_few(k: int, df: float) -> None:
    # More than 2,000 are read from a table in q.
    q = np.concatenate([np.geomspace(1e-4, 45, 2500), [0.0, 900.0]])
    few = np.concatenate([studentized_range.sf(part, k, df) for part in np.array_split(q, 4)])
    assert studentized_range.sf(q, k, df) == pytest.approx(few, rel=1e-9, abs=1e-290)


def test_a_tail_falls_and_stays_within_bounds() -> None:
    q = np.linspace(0, 60, 1201)
    for k, df in ((3, 4.0), (40, 500.0)):
        tail = studentized_range.sf(q, k, df)
        assert tail[0] == 1
        assert np.all(np.diff(tail) <= 1e-12)
        one_pair = 2 * stats.t.sf(q / np.sqrt(2), df)
        assert np.all(tail >= one_pair * (1 - 1e-9))
        assert np.all(tail <= k * (k - 1) / 2 * one_pair * (1 + 1e-9))


def test_what_is_no_number_stays_none() -> None:
    found = studentized_range.sf([[np.nan, np.inf], [-1.0, 0.0]], 4, 10)
    assert found.shape == (2, 2)
    assert np.isnan(found[0, 0])
    assert found[0, 1] == 0
    assert found[1].tolist() == [1, 1]


def test_a_repeated_call_gives_the_same_bits() -> None:
    q = np.linspace(0.1, 9, 50)
    first = studentized_range.sf(q, 7, 33)
    studentized_range.range_tail.cache_clear()
    assert np.array_equal(first, studentized_range.sf(q, 7, 33))
