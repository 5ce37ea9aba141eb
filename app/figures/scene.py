"""What an interaction figure shows: which levels are lines, the means of the model analysed, the observations drawn."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import pandas as pd

from analysis.findings import Findings
from app import original
from app.figures import along, placing
from app.figures.along import Along


@dataclass(frozen=True, eq=False)
class Scene:
    """The findings as the figure needs them; levels of the row factor are lines, those of the column factor run along the axis."""

    findings: Findings

    @cached_property
    def rows(self) -> tuple[str, ...]:
        """Levels drawn as lines."""
        return tuple(self.findings.design["row_levels"])

    @cached_property
    def columns(self) -> tuple[str, ...]:
        """Levels along the axis."""
        return tuple(self.findings.design["column_levels"])

    @cached_property
    def means(self) -> pd.DataFrame:
        """One line per cell: row, column, n, estimate, se, lower and upper of the model analysed."""
        cells, additive = self.findings.cells, self.findings.additive_means
        if self.findings.study.model == "full" or additive is None:
            return cells
        return additive.rename(columns={"mean": "estimate"}).merge(cells[["row", "column", "n"]], on=["row", "column"], how="left")

    @cached_property
    def observations(self) -> pd.DataFrame:
        """The observations drawn, thinned where a cell holds very many."""
        cells = self.findings.observations.groupby(["row", "column"], sort=False, observed=True)
        return pd.concat([placing.thinned(points, self.most) for _, points in cells])

    @cached_property
    def most(self) -> int:
        """How many observations of a cell are drawn at most."""
        n = self.findings.cells["n"]
        return placing.most_of_a_cell(int(n.max()), int((n > 0).sum()))

    @property
    def is_thinned(self) -> bool:
        """Whether some observations are not drawn."""
        return len(self.observations) < len(self.findings.observations)

    @cached_property
    def offsets(self) -> placing.Positions:
        """How far each line stands from the place of its column level."""
        return placing.dodge(len(self.rows))

    @property
    def label_place(self) -> float:
        """Where the names of the lines begin: just right of the last cluster of points."""
        return len(self.columns) - 1 + len(self.rows) / 2 * placing.step(len(self.rows)) + 0.05

    def line_of(self, level: str) -> pd.DataFrame:
        """Return the means of one line in the order of the axis."""
        of_level = self.means[self.means["row"] == level]
        return of_level.set_index("column").reindex(list(self.columns)).reset_index()

    @cached_property
    def reach(self) -> tuple[float, float]:
        """Lowest and highest value drawn, with a little air."""
        bars = self.means[["lower", "upper", "estimate"]].to_numpy(float).ravel()
        drawn = np.concatenate([self.observations["value"].to_numpy(float), bars])
        low, high = float(np.nanmin(drawn)), float(np.nanmax(drawn))
        air = 0.05 * (high - low) or 1.0
        return low - air, high + air


@dataclass(frozen=True, eq=False)
class View(Scene):
    """The scene in the units that means are told in, the factors changing sides where it is turned."""

    turned: bool = False

    @property
    def line(self) -> str:
        """Which side of the design the lines are: row, or column where turned."""
        return "column" if self.turned else "row"

    @property
    def along(self) -> str:
        """Which side of the design runs along the axis."""
        return "row" if self.turned else "column"

    @property
    def is_log(self) -> bool:
        """Whether the axis of the response is logarithmic."""
        return bool(self.findings.observed.scale.tells_ratios)

    @cached_property
    def axis(self) -> Along:
        """Where the levels along the axis stand."""
        return along.along(self.findings, self.findings.design[f"{self.along}_factor"])

    @property
    def step(self) -> float:
        """Distance of neighbouring lines at one place of the axis."""
        return placing.step(len(self.rows)) * self.axis.step

    @property
    def room(self) -> float:
        """How far observations may stand to either side of their line."""
        return 0.36 * self.step

    @cached_property
    def offsets(self) -> placing.Positions:
        """How far each line stands from the place of its column level."""
        return (np.arange(len(self.rows), dtype=np.float64) - (len(self.rows) - 1) / 2) * self.step

    @property
    def label_place(self) -> float:
        """Where the names of the lines begin: just right of the last cluster of points."""
        return float(self.axis.places[-1]) + len(self.rows) / 2 * self.step + 0.05

    @cached_property
    def rows(self) -> tuple[str, ...]:
        """Levels drawn as lines."""
        return tuple(self.findings.design[f"{self.line}_levels"])

    @cached_property
    def columns(self) -> tuple[str, ...]:
        """Levels along the axis."""
        return tuple(self.findings.design[f"{self.along}_levels"])

    @cached_property
    def means(self) -> pd.DataFrame:
        """One line per cell, estimate, lower and upper in the units told."""
        return original.means(self.findings, super().means)

    @cached_property
    def observations(self) -> pd.DataFrame:
        """The observations drawn, values in the units told."""
        return original.observations(self.findings, super().observations)

    def line_of(self, level: str) -> pd.DataFrame:
        """Return the means of one line in the order of the axis."""
        return self.means[self.means[self.line] == level].set_index(self.along).reindex(list(self.columns)).reset_index()

    @cached_property
    def reach(self) -> tuple[float, float]:
        """Lowest and highest place drawn on the axis, with a little air; powers of ten where the axis is logarithmic."""
        bars = self.means[["lower", "upper", "estimate"]].to_numpy(float).ravel()
        places = self.places(np.concatenate([self.observations["value"].to_numpy(float), bars]))
        low, high = float(np.nanmin(places)), float(np.nanmax(places))
        air = 0.05 * (high - low) or 1.0
        return low - air, high + air

    def places(self, values: placing.Positions) -> placing.Positions:
        """Return where values stand along the axis: themselves, or their powers of ten."""
        return np.log10(values) if self.is_log else values
