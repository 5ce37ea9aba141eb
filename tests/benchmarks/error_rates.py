"""How often families of comparisons raise a false alarm, and how often intervals cover: `python -m tests.benchmarks.error_rates`.

Every design is fitted once by the engine. For each simulated data set the estimates and the residual variance are drawn from
their joint distribution under no effects, and judged by the engine's own standard errors and critical values. A few data
sets are also taken the whole way through the engine to confirm that the short way gives the same t.

With very unequal counts the Tukey-Kramer method is known to stay below its nominal rate (Hayter 1984, Ann. Statist. 12, 61-75);
Bonferroni, Šidák and Scheffé stay below it always.
"""

import argparse
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import pandas as pd
from numpy.typing import NDArray

import analysis
from analysis.families import Slice

CONFIDENCE = 0.95


@dataclass(frozen=True)
class Layout:
    """A design by its counts a cell, with blocks or without."""

    name: str
    counts: tuple[tuple[int, ...], ...]
    blocks: int = 1

    def frame(self, rng: np.random.Generator) -> pd.DataFrame:
        """Return a data set without any effect."""
        cells = [
            (i, j, block)
            for i, line in enumerate(self.counts)
            for j, n in enumerate(line)
            for block in range(self.blocks)
            for _ in range(n)
        ]
        rows = pd.DataFrame(cells, columns=["a", "b", "block"]).astype(str)
        return rows.assign(y=rng.normal(size=len(rows)))


LAYOUTS = (
    Layout("balanced 3×4, 5 a cell", ((5,) * 4,) * 3),
    Layout("unequal 3×4, 4 to 8 a cell", ((4, 6, 8, 5), (7, 4, 5, 8), (5, 8, 4, 6))),
    Layout("unequal 3×4, 2 to 12 a cell", ((2, 5, 12, 3), (7, 2, 4, 9), (3, 8, 2, 6))),
    Layout("unequal 2×6, 2 to 20 a cell", ((20, 2, 5, 2, 9, 3), (2, 14, 3, 8, 2, 4))),
    Layout("blocks 3×3, 1 a cell and block", ((1,) * 3,) * 3, blocks=5),
)


def findings_of(layout: Layout, rng: np.random.Generator, adjust: str) -> analysis.Findings:
    """Return the engine's findings for one data set of a layout."""
    table = analysis.read_table(layout.frame(rng), name=layout.name)
    block = "block" if layout.blocks > 1 else None
    return analysis.analyse(analysis.Study(table=table, response="y", row_factor="a", column_factor="b", block=block, adjust=adjust))


def roots(part: Slice) -> NDArray[np.float64]:
    """Return a root R of the covariance of a slice's estimates, R Rᵀ = covariance."""
    covariance = part.estimates.covariance
    if covariance.ndim == 1:
        return np.diag(np.sqrt(covariance))
    values, vectors = np.linalg.eigh(covariance)
    return vectors * np.sqrt(np.clip(values, 0, None))


def largest_t(part: Slice, df: int, sets: int, rng: np.random.Generator) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Return the largest |t| of each simulated data set, and the |t| of the first comparison."""
    left, right = part.pairs()
    _, variance = part.estimates.differences(left, right)
    drawn = rng.normal(size=(sets, part.estimates.value.size)) @ roots(part).T
    s = np.sqrt(rng.chisquare(df, size=sets) / df)
    t = np.abs(drawn[:, left] - drawn[:, right]) / np.sqrt(variance) / s[:, None]
    return t.max(axis=1), t[:, 0]


def critical(frame: pd.DataFrame) -> float:
    """Return the critical value that a family's adjusted intervals were made with."""
    row = frame.iloc[0]
    return float((row["upper_adjusted"] - row["difference"]) / row["se"])


def rates(layout: Layout, adjust: str, sets: int, rng: np.random.Generator) -> Mapping[str, tuple[float, float]]:
    """Return, by family, the false-alarm rate of the family (its first slice) and the coverage of one plain interval."""
    findings = findings_of(layout, rng, adjust)
    found = {}
    for family, slices in findings.families.items():
        most, one = largest_t(slices[0], findings.model.residual_df, sets, rng)
        plain = findings.model.quantile(CONFIDENCE)
        found[family] = float((most > critical(findings.comparisons[family])).mean()), float((one <= plain).mean())
    return found


def confirm(layout: Layout, rng: np.random.Generator) -> None:
    """Hold the adjusted p-values of one whole data set against the critical value used above."""
    findings = findings_of(layout, rng, "tukey")
    for family, frame in findings.comparisons.items():
        first = frame[frame["within"].isna() | (frame["within"] == frame["within"].iloc[0])]
        alarms = first["t"].abs() > critical(first)
        if not (alarms == (first["p_adjusted"] < 1 - CONFIDENCE)).all():
            raise SystemExit(f"p and interval disagree in {family} of {layout.name}")


def main() -> None:
    """Print the table of rates."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--sets", type=int, default=200_000)
    parser.add_argument("--seed", type=int, default=20)
    chosen = parser.parse_args()
    rng = np.random.default_rng(chosen.seed)
    print(f"{chosen.sets:,} data sets a row; nominal 0.050 and 0.950; Monte Carlo error {np.sqrt(0.05 * 0.95 / chosen.sets):.4f}")
    print(f"{'layout':<34}{'method':<12}{'family':<14}{'false alarms':>14}{'coverage':>12}")
    for layout in LAYOUTS:
        confirm(layout, rng)
        for adjust in ("tukey", "dunnett", "scheffe", "sidak", "bonferroni"):
            for family, (alarms, coverage) in rates(layout, adjust, chosen.sets, rng).items():
                print(f"{layout.name:<34}{adjust:<12}{family:<14}{alarms:>14.4f}{coverage:>12.4f}")


if __name__ == "__main__":
    main()
