"""Invented situations for the sentences: exact cell means and spreads, so that nothing is left to chance."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Any

import numpy as np
import pandas as pd

import analysis

SOILS = ("dry", "moist", "wet")
FEEDS = ("none", "half dose", "full dose", "double")


@dataclass(frozen=True)
class Scenario:
    """One situation: cell means, counts and spread, and the choices of the study."""

    name: str
    means: Sequence[Sequence[float]]
    n: int | Sequence[Sequence[int]]
    sd: float
    choices: dict[str, Any] = field(default_factory=dict)
    feeds: Sequence[str] = FEEDS

    def __str__(self) -> str:
        return self.name

    def frame(self) -> pd.DataFrame:
        """Return the observations: in each cell evenly spaced about its mean, with exactly this standard deviation."""
        rows = []
        for i, line in enumerate(self.means):
            for j, mean in enumerate(line):
                count = self.n if isinstance(self.n, int) else self.n[i][j]
                rows += [(SOILS[i], self.feeds[j], mean + step) for step in spaced(count, self.sd, i + 2 * j)]
        return pd.DataFrame(rows, columns=["soil", "feed", "yield"])

    def findings(self) -> analysis.Findings:
        """Return what the engine finds."""
        table = analysis.read_table(self.frame(), name=self.name)
        return analysis.analyse(analysis.Study(table=table, response="yield", row_factor="soil", column_factor="feed", **self.choices))


def spaced(count: int, sd: float, turn: int) -> list[float]:
    """Return steps with mean 0 and the standard deviation asked for; a single one alternates by cell."""
    if count == 1:
        return [sd * (0.4 if turn % 2 else -0.4)]
    steps = np.linspace(-1, 1, count)
    return [float(step) for step in steps * (sd / steps.std(ddof=1))] if count else []


SCENARIOS = (
    Scenario("the effect grows", [[10, 12, 14], [10, 14, 18]], 6, 1),
    Scenario("the order turns", [[10, 14, 18], [18, 14, 10]], 6, 1),
    Scenario("only the row factor", [[10, 10.1, 10], [14, 14, 14.1], [18, 18.1, 18]], 5, 1),
    Scenario("only the column factor", [[10, 14, 18], [10.1, 14, 18.1]], 5, 1),
    Scenario("both, side by side", [[10, 14], [13, 17]], 8, 1),
    Scenario("nothing shown", [[10, 10.1], [10, 9.9]], 4, 2),
    Scenario("nothing that matters", [[10, 10.1], [10, 9.9]], 20, 1, {"matters": 3}),
    Scenario("nothing shown, and D leaves it open", [[10, 10.1], [10, 9.9]], 3, 2, {"matters": 1}),
    Scenario("many observations, tiny effects", [[10, 10.1], [10.05, 10.15]], 2000, 1, {"matters": 1}),
    Scenario("many observations, tiny interaction", [[10, 10.0], [10.0, 10.3]], 2000, 1, {"matters": 2}),
    Scenario("two a cell", [[10, 14], [12, 20]], 2, 3),
    Scenario("one a cell", [[10, 13, 15], [14, 16, 19], [19, 22, 23]], 1, 0.5),
    Scenario("an empty cell", [[10, 13, 15], [14, 16, 19]], [[4, 4, 4], [4, 0, 4]], 1),
    Scenario("unequal cells", [[10, 13, 15], [14, 17, 19]], [[4, 2, 9], [3, 8, 4]], 1),
    Scenario("log scale, ratios", [[10, 20, 40], [20, 40, 80]], 6, 2, {"scale": "log"}),
    Scenario("log scale, interaction", [[10, 20, 40], [20, 80, 400]], 6, 2, {"scale": "log"}),
    Scenario("without interaction by choice", [[10, 13], [14, 17]], 4, 1, {"model": "additive"}),
    Scenario("larger than matters", [[10, 13, 16], [20, 23, 26]], 6, 1, {"matters": 2}),
    Scenario("small in one slice", [[10, 10.1, 10.0], [10, 16, 20]], 12, 1, {"matters": 2}),
    Scenario("overall but no single pair", [[10, 10, 11.2, 11.2], [10, 10, 11.2, 11.2]], 6, 1.27),
    Scenario("levels that are numbers", [[10, 14, 18], [10.2, 14, 18]], 5, 1, feeds=("20", "40", "60")),
    Scenario("against a control", [[10, 14, 18], [11, 15, 19]], 6, 1, {"adjust": "dunnett"}),
)
