"""How often tests of the interaction and checks raise false alarms at 5 %, on simulated data: `python -m tests.benchmarks.false_alarms`."""

import argparse
import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace

import numpy as np
import pandas as pd

from analysis import checking
from analysis.anova import INTERACTION, Names, parts
from analysis.checks.shape import shapiro
from analysis.design import Design, design_over
from analysis.doubting.signs import left_of
from analysis.holding.bases import bases_of
from analysis.holding.hypotheses import hypotheses
from analysis.holding.permutation import permuted
from analysis.holding.welch import welch_james
from analysis.means import stratum_of
from analysis.tails import f_upper
from tests.analysis.experiments import analysed

Random = np.random.Generator
Errors = Callable[[Random, int], np.ndarray]
ALPHA, NAMES = 0.05, Names("a", "b", None)
WIDE = 4  # observations in a cell that spreads four times as much as one of twelve


def layouts(n: Sequence[Sequence[int]], errors: Errors, rng: Random, runs: int) -> Iterator[Design]:
    """Yield experiments with strong effects of both factors and no interaction; errors are drawn cell by cell."""
    cells = [(i, j, m) for i, line in enumerate(n) for j, m in enumerate(line)]
    rows = [(f"a{i}", f"b{j}", 6.0 * i + 4.0 * j + k / 100) for i, j, m in cells for k in range(m)]
    first = analysed(pd.DataFrame(rows, columns=["a", "b", "y"])).layout.observed
    means = np.concatenate([np.full(m, 6.0 * i + 4.0 * j) for i, j, m in cells])
    for _ in range(runs):
        drawn = np.concatenate([errors(rng, m) for _, _, m in cells])
        yield design_over(replace(first, offsets=means + drawn, pivot=0.0), True)


def classical(layout: Design) -> float:
    """Return the p-value of the ordinary test."""
    part = next(part for part in parts(layout.analysed, NAMES, "type_3") if part.term == INTERACTION)
    assert part.df is not None
    assert part.ss is not None
    return float(f_upper(part.ss / part.df / layout.analysed.residual_ms, part.df, layout.analysed.residual_df))


def hc3(layout: Design) -> float:
    """Return the p-value of the HC3 test."""
    found = checking.robust_tests(layout, checking.Residuals(layout, stratum_of(layout.observed, layout.strata)))
    return float(found["p"].to_numpy(float)[found["term"].tolist().index(INTERACTION)])


def welch(layout: Design) -> float:
    """Return the p-value of the Welch-James test."""
    cells = layout.cells
    test = welch_james(
        cells.mean.ravel(), cells.sd.ravel() ** 2, cells.n.ravel().astype(float), hypotheses(layout.observed.shape, NAMES)[INTERACTION]
    )
    assert test is not None
    return test.p


def permutation(layout: Design) -> float:
    """Return the permutation p-value."""
    bases = bases_of(layout, NAMES)
    assert bases is not None
    return permuted(bases)[INTERACTION].p


def shape(layout: Design) -> float:
    """Return the Shapiro-Wilk p-value of the residuals."""
    found = shapiro(left_of(layout).residual)
    assert found is not None
    return found.p


def uneven(rng: Random, n: int) -> np.ndarray:
    """Draw normal errors that spread four times as much in the small cells."""
    return (4.0 if n == WIDE else 1.0) * rng.normal(size=n)


def normal(rng: Random, n: int) -> np.ndarray:
    """Draw normal errors."""
    return rng.normal(size=n)


def log_normal(rng: Random, n: int) -> np.ndarray:
    """Draw skewed errors."""
    return rng.lognormal(size=n)


def heavy(rng: Random, n: int) -> np.ndarray:
    """Draw errors with heavy tails."""
    return rng.standard_t(3, size=n)


ROWS = (
    ("classical, 2×2, SD 1:4 against n 12:4", classical, [[12, 4], [4, 12]], uneven, "above 20 %"),
    ("HC3, the same", hc3, [[12, 4], [4, 12]], uneven, "4 to 7 %"),
    ("Welch-James, the same", welch, [[12, 4], [4, 12]], uneven, "4 to 7 %"),
    ("classical, 3×4, SD 1:4 against n 12:4", classical, [[12, 4, 12, 4]] * 3, uneven, "above 20 %"),
    ("HC3, the same", hc3, [[12, 4, 12, 4]] * 3, uneven, "told as it is"),
    ("Welch-James, the same", welch, [[12, 4, 12, 4]] * 3, uneven, "4 to 7 %"),
    ("permutation, 2×3, normal, unequal n", permutation, [[6, 4, 5], [3, 6, 4]], normal, "4 to 6 %"),
    ("permutation, 2×3, log-normal", permutation, [[5, 5, 5], [5, 5, 5]], log_normal, "4 to 6 %"),
    ("permutation, 2×3, t with 3 df, unequal n", permutation, [[6, 4, 5], [3, 6, 4]], heavy, "4 to 6 %"),
    ("Shapiro-Wilk on residuals, 3×4, strong effects", shape, [[8] * 4] * 3, normal, "about 5 %"),
)


def rates(runs: int) -> Iterator[tuple[str, float, str]]:
    """Yield what each test is, how often it is below 5 %, and what is wanted."""
    for name, test, n, errors, wanted in ROWS:
        rng = np.random.default_rng(len(name))
        yield name, sum(test(layout) < ALPHA for layout in layouts(n, errors, rng, runs)) / runs, wanted


def main() -> None:
    """Print the table; `--runs` experiments a line."""
    asked = argparse.ArgumentParser(description=__doc__)
    asked.add_argument("--runs", type=int, default=4000)
    runs = asked.parse_args().runs
    print(f"{runs} experiments a line; standard error of a rate of 5 %: {100 * math.sqrt(0.05 * 0.95 / runs):.2f} points")
    for name, rate, wanted in rates(runs):
        print(f"{name:<52} {100 * rate:5.1f} %   wanted {wanted}")


if __name__ == "__main__":
    main()
