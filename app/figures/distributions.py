"""How the observations of every cell are distributed: a box of quartiles, or every point, as the reader picks."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis.findings import Findings
from analysis.rounding import measured
from app import original, records, words
from app.figures import lettering, lines, placing
from app.figures.scene import View
from app.look import Look

FEWEST = 5  # observations behind a box; a cell with fewer is drawn as points
WIDE = 580  # px between the axes of a figure that fills its place, on a small screen
MOST_POINTS = 20  # of a cell, up to which every point says more than a box


@dataclass(frozen=True, eq=False)
class Spread(View):
    """The scene with room for a box or a cloud of points at every cell, and medians where the other figure has means."""

    @property
    def step(self) -> float:
        """Distance of neighbouring lines at one place of the axis."""
        return 0.84 / max(len(self.rows), 2) * self.axis.step

    @cached_property
    def means(self) -> pd.DataFrame:
        """One line per cell: row, column, n and the five numbers, the median as the estimate."""
        numbers = self.findings.five_numbers
        return numbers.assign(estimate=numbers["median"])

    @cached_property
    def reach(self) -> tuple[float, float]:
        """Lowest and highest place drawn on the axis, with a little air."""
        places = self.places(self.means[["lowest", "highest"]].to_numpy(float))
        low, high = float(np.nanmin(places)), float(np.nanmax(places))
        air = 0.05 * (high - low) or 1.0
        return low - air, high + air


def suits_boxes(findings: Findings) -> bool:
    """Return whether boxes are the better first sight: where cells hold more points than can be told one by one."""
    return int(findings.five_numbers["n"].max()) > MOST_POINTS


def distributions(findings: Findings, look: Look, turned: bool = False, boxes: bool = False) -> go.Figure:
    """Draw the observations of each cell as a box of quartiles or as points about their median; lines are named where they end."""
    scene = Spread(findings, turned)
    labels = [lettering.wrapped(level, 18, 2) for level in scene.rows]
    traces = [trace for index, level in enumerate(scene.rows) for trace in _of_line(scene, look, index, level, boxes)]
    return go.Figure(traces, {**lines.ground(scene, look, labels), "boxmode": "overlay"})


def _of_line(scene: Spread, look: Look, index: int, level: str, boxes: bool) -> list[dict[str, Any]]:
    """Return what is drawn of one line: boxes where they were picked and a cell holds enough, points and medians for the rest."""
    numbers = scene.line_of(level)
    boxed = (numbers["n"] >= FEWEST).to_numpy() & boxes
    points = lines.points(scene, look, index, level)
    drawn = [_boxes(scene, look, index, numbers[boxed], scene.axis.places[boxed])] if boxed.any() else []
    if boxed.all():
        return drawn
    medians = _medians(scene, look, index, numbers[~boxed], scene.axis.places[~boxed])
    return [*drawn, _only(points, scene, level, numbers.loc[~boxed, scene.along].tolist()), medians]


def _only(points: Mapping[str, Any], scene: Spread, level: str, columns: list[str]) -> dict[str, Any]:
    """Return the points of some cells of a line."""
    mine = scene.observations[scene.observations[scene.line] == level]
    kept = mine[scene.along].isin(columns).to_numpy()
    marker = points["marker"] if points["type"] == "scattergl" else {**points["marker"], "opacity": 1}  # here points are the message
    named = {"customdata": [row for row, keep in zip(points["customdata"], kept, strict=True) if keep]} if "customdata" in points else {}
    return {**points, "x": points["x"][kept], "y": points["y"][kept], "marker": marker, **named}


def _boxes(scene: Spread, look: Look, index: int, numbers: pd.DataFrame, places: placing.Positions) -> dict[str, Any]:
    style = look.style_of(index)
    return {
        "type": "box",
        "name": lettering.plain(scene.rows[index]),
        "x": places + scene.offsets[index],
        "lowerfence": numbers["lowest"].to_numpy(float),
        "q1": numbers["lower_quartile"].to_numpy(float),
        "median": numbers["median"].to_numpy(float),
        "q3": numbers["upper_quartile"].to_numpy(float),
        "upperfence": numbers["highest"].to_numpy(float),
        "width": 0.72 * scene.step,
        "line": {"color": style.hue, "width": look.line * 0.6},
        "fillcolor": look.paper,
        "whiskerwidth": 0.4,
        "hoveron": "boxes",
    }


def _medians(scene: Spread, look: Look, index: int, numbers: pd.DataFrame, places: placing.Positions) -> dict[str, Any]:
    style = look.style_of(index)
    told = [
        [lettering.plain(c.row), lettering.plain(c.column), measured(c.median, c.upper_quartile - c.lower_quartile), int(c.n)]
        for c in records.lines(numbers)
    ]
    return {
        "type": "scatter",
        "name": lettering.plain(scene.rows[index]),
        "x": places + scene.offsets[index],
        "y": numbers["median"].to_numpy(float),
        "mode": "markers",
        "marker": {"symbol": "line-ew", "size": _stroke(scene, look), "line": {"color": style.hue, "width": look.line * 1.2}},
        "customdata": told,
        "hovertemplate": "%{customdata[0]} · %{customdata[1]}<br>median %{customdata[2]}, n %{customdata[3]}<extra></extra>",
    }


def _stroke(scene: Spread, look: Look) -> float:
    """Return the px of a median's stroke: as wide as the points of its cell at most."""
    return min(look.marker * 2.2, 0.8 * scene.step * (look.width or WIDE) / (scene.label_place + 0.5))


def distributions_caption(findings: Findings, turned: bool = False, boxes: bool = False) -> str:
    """Say what boxes, points and strokes are, and how many observations stand behind them."""
    scene, n = Spread(findings, turned), words.n_per_cell(findings)
    few = bool((findings.five_numbers["n"].between(1, FEWEST - 1)).any())
    if boxes:
        told = f"Boxes, {n}: from the lower to the upper quartile, a line at the median; strokes reach the lowest and highest observation."
        told += f" A cell with fewer than {FEWEST} shows its points." if few else ""
    else:
        told = f"Points: {lines.points_told(scene)}, {n}. A long stroke marks the median of each cell."
    scale = "" if findings.observed.scale.is_identity else " In original units, whatever scale is analysed."
    return f"{told}{scale}{scene.axis.told}"


def distributions_alt(findings: Findings) -> str:
    """Read the quartiles of every cell out for someone who does not see the figure."""
    numbers = findings.five_numbers[findings.five_numbers["n"] > 0]
    told = "; ".join(f"{c.row} with {c.column}: {_read(c)}" for c in records.lines(numbers.head(36)))
    more = f"; and {len(numbers) - 36} more cells" if len(numbers) > 36 else ""
    return f"Distribution of {original.label(findings)} by cell, {words.n_per_cell(findings)}. {told}{more}."


def _read(cell: Any) -> str:
    lower, middle, upper = (
        measured(value, cell.upper_quartile - cell.lower_quartile) for value in (cell.lower_quartile, cell.median, cell.upper_quartile)
    )
    return f"median {middle}, quartiles {lower} and {upper}"
