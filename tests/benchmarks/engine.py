"""How fast the engine is, as ratios against named references measured in the same run: `python -m tests.benchmarks.engine`."""

import argparse
import time
import tracemalloc
from collections.abc import Callable

import numpy as np
import pandas as pd
import statsmodels.api as sm
import statsmodels.formula.api as smf

import analysis

ROUNDS = 5


def frame_of(rows: int, a: int, b: int, seed: int = 1) -> pd.DataFrame:
    """Return a random unequal layout of a × b cells with both effects and an interaction."""
    rng = np.random.default_rng(seed)
    row, column = rng.integers(0, a, rows), rng.integers(0, b, rows)
    y = 10 + 0.3 * row + 0.2 * column + 0.1 * row * column + rng.normal(size=rows)
    return pd.DataFrame(
        {
            "a": pd.Categorical.from_codes(row, [f"a{i}" for i in range(a)]),
            "b": pd.Categorical.from_codes(column, [f"b{j}" for j in range(b)]),
            "y": y,
        }
    )


def seconds(work: Callable[[], object], rounds: int = ROUNDS) -> float:
    """Return the shortest of some runs, after one that is not counted."""
    work()
    times = []
    for _ in range(rounds):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def study_of(frame: pd.DataFrame) -> analysis.Study:
    """Return the plain study of a benchmark frame."""
    return analysis.Study(table=analysis.read_table(frame, name="benchmark"), response="y", row_factor="a", column_factor="b")


def core(frame: pd.DataFrame) -> None:
    """Compute Type I to III, means and effects from the frame itself."""
    findings = analysis.analyse(study_of(frame))
    _ = findings.tables, findings.cells, findings.marginal_means, findings.effects


def whole(frame: pd.DataFrame) -> None:
    """Compute the whole object."""
    analysis.analyse(study_of(frame)).to_dict()


def general_library(frame: pd.DataFrame) -> None:
    """Fit the same model by statsmodels' formula OLS and take its Type III table."""
    fit = smf.ols("y ~ C(a, Sum) * C(b, Sum)", frame).fit()
    sm.stats.anova_lm(fit, typ=3)


def grouped(frame: pd.DataFrame) -> None:
    """Group once by both factors with count, mean and variance, by pandas."""
    frame.groupby(["a", "b"], observed=True)["y"].agg(["count", "mean", "var"])


def told(what: str, ours: float, reference: str, theirs: float, wanted: str) -> None:
    """Print one ratio."""
    print(f"{what:<58} {ours * 1e3:10.1f} ms   {reference:<34} {theirs * 1e3:10.1f} ms   ratio {ours / theirs:8.4f}   wanted {wanted}")


def compare_million() -> None:
    """Compare the core at 1,000,000 rows × 3×4 with both references."""
    frame = frame_of(1_000_000, 3, 4)
    ours = seconds(lambda: core(frame))
    told(
        "Type I to III, means, effects: 1,000,000 rows, 3×4",
        ours,
        "statsmodels OLS + Type III",
        seconds(lambda: general_library(frame), 1),
        "<= 0.01",
    )
    told("the same", ours, "one pandas group-by", seconds(lambda: grouped(frame)), "<= 3")


def compare_whole() -> None:
    """Compare the whole object at 1,000 rows with one general fit and table."""
    frame = frame_of(1_000, 3, 4)
    told(
        "the whole object: 1,000 rows, 3×4",
        seconds(lambda: whole(frame)),
        "statsmodels OLS + Type III",
        seconds(lambda: general_library(frame)),
        "<= 5",
    )


def large_layout() -> None:
    """Time 50×50 cells, the whole object."""
    frame = frame_of(10_000, 50, 50)
    start = time.perf_counter()
    whole(frame)
    print(f"the whole object: 10,000 rows, 50×50 cells {time.perf_counter() - start:.2f} s")


def time_per_row(most: int) -> None:
    """Print the time per row of the core from 10,000 rows up."""
    rows = 10_000
    while rows <= most:
        frame = frame_of(rows, 3, 4)
        print(f"{rows:>12,} rows: {seconds(lambda frame=frame: core(frame), 3) / rows * 1e9:8.1f} ns per row")
        rows *= 10


def memory(rows: int) -> None:
    """Print the peak of the working memory beside the frame's own size."""
    frame = frame_of(rows, 3, 4)
    own = int(frame.memory_usage(deep=True).sum())
    tracemalloc.start()
    core(frame)
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    print(f"{rows:,} rows: frame {own / 1e6:.0f} MB, working memory {peak / 1e6:.0f} MB, ratio {peak / own:.2f}   wanted < 2")


def main() -> None:
    """Run all of it; `--rows` bounds the largest frame."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--rows", type=int, default=10_000_000)
    most = parser.parse_args().rows
    compare_whole()
    compare_million()
    large_layout()
    time_per_row(most)
    memory(most)


if __name__ == "__main__":
    main()
