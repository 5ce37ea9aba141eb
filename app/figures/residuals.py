"""Residuals drawn as three questions ask for them: cell by cell, along the fitted values, and against a bell curve."""

from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis import envelope
from analysis.findings import Findings
from analysis.normal_scores import normal_scores
from analysis.rounding import percent
from app import records, words
from app.figures import lettering, placing
from app.figures.lines import MANY_POINTS
from app.figures.scene import Scene
from app.look import Look

MOST_CELLS = 24  # lines of the view by cell; beyond it the cells with the largest spread are drawn


def by_cell(findings: Findings, look: Look) -> go.Figure:
    """Draw one line of points for each cell, the cell's standard deviation at its end."""
    cells = cells_shown(findings)
    drawn = Scene(findings).observations
    heights = -np.arange(len(cells), dtype=float)
    figure = go.Figure(layout=_cell_ground(findings, look, cells, heights))
    figure.add_vline(x=0, line={"color": look.ink, "width": 1})
    for cell, height in zip(records.lines(cells), heights, strict=True):
        points = drawn[(drawn["row"] == cell.row) & (drawn["column"] == cell.column)]
        index = findings.design["row_levels"].index(cell.row)
        figure.add_trace(_dots(points, points["residual"], height + placing.spread(len(points), 0.22), look, index))
        spread = words.spread(cell.sd, cell.se)
        figure.add_annotation(
            x=1, xref="paper", y=height, text=spread and f"sd {spread}", font={"size": look.small, "color": look.quiet},
            xanchor="left", xshift=6, showarrow=False,
        )  # fmt: skip
    return figure


def cells_shown(findings: Findings) -> pd.DataFrame:
    """Return the filled cells that are drawn, in their order."""
    filled = findings.cells[findings.cells["n"] > 0]
    return filled if len(filled) <= MOST_CELLS else filled.loc[filled["sd"].nlargest(MOST_CELLS).index.sort_values()]


def _cell_ground(findings: Findings, look: Look, cells: pd.DataFrame, heights: placing.Positions) -> dict[str, Any]:
    names = [f"{lettering.wrapped(c.row, 20, 1)} · {lettering.wrapped(c.column, 20, 1)}" for c in records.lines(cells)]
    quiet = {"showgrid": False, "automargin": False}
    return look.layout(
        xaxis={"title": {"text": f"residual, {lettering.plain(words.response_label(findings))}"}, "nticks": 8},
        yaxis={"tickvals": heights, "ticktext": names, "range": [heights[-1] - 0.6, 0.6], "tickfont": {"size": look.small}, **quiet},
        height=round(len(names) * look.text * 1.55 + 4.5 * look.text),
        margin={"l": lettering.widest(names, look.small) + 10, "r": 5.5 * look.small, "t": 4},
    )


def _dots(points: pd.DataFrame, x: object, y: object, look: Look, index: int) -> go.Scatter | go.Scattergl:
    style = look.style_of(index)
    kind = go.Scattergl if look.width is None and len(points) > MANY_POINTS // 4 else go.Scatter
    return kind(
        x=np.asarray(x, dtype=float),
        y=np.asarray(y, dtype=float),
        mode="markers",
        marker={"symbol": style.marker, "size": look.point + 1, "color": style.hue, "opacity": 0.65, "line": {"width": 0}},
        customdata=[[lettering.plain(p.row), lettering.plain(p.column), p.file_row] for p in records.lines(points)],
        hovertemplate="%{customdata[0]} · %{customdata[1]}<br>row %{customdata[2]} of the file<extra></extra>",
    )


def along_fitted(findings: Findings, look: Look) -> go.Figure:
    """Draw residuals against fitted values, marked by the levels of the row factor."""
    drawn = Scene(findings).observations
    label = lettering.plain(words.response_label(findings))
    figure = go.Figure(
        layout=look.layout(
            xaxis={"title": {"text": f"fitted {label}"}, "nticks": 8, "showgrid": False},
            yaxis={"title": {"text": "residual"}, "nticks": 7},
            height=270,
        )
    )
    figure.add_hline(y=0, line={"color": look.ink, "width": 1})
    for index, level in enumerate(findings.design["row_levels"]):
        points = drawn[drawn["row"] == level]
        figure.add_trace(_dots(points, points["fitted"], points["residual"], look, index))
    return figure


def against_bell(findings: Findings, look: Look) -> go.Figure:
    """Draw the ordered residuals against the values that a bell curve of the model's spread would give on average."""
    ordered = findings.observations.sort_values("residual", kind="stable").reset_index(drop=True)
    scores = normal_scores(len(ordered)) * findings.fit["sigma"]
    kept = np.unique(np.linspace(0, len(ordered) - 1, placing.MOST_POINTS).round().astype(int))
    ordered, scores = ordered.iloc[kept], scores[kept]
    figure = go.Figure(
        layout=look.layout(
            xaxis={"title": {"text": "expected of a bell curve"}, "nticks": 8, "showgrid": False},
            yaxis={"title": {"text": "residual"}, "nticks": 7},
            height=270,
        )
    )
    ends = [float(scores[0]), float(scores[-1])]
    figure.add_trace(_band(findings, look, scores, len(findings.observations), kept))
    figure.add_trace(go.Scatter(x=ends, y=ends, mode="lines", line={"color": look.ink, "width": 1}, hoverinfo="skip"))
    figure.add_trace(_dots(ordered, scores, ordered["residual"], look, 0))
    return figure


def _band(findings: Findings, look: Look, scores: np.ndarray, count: int, kept: np.ndarray) -> go.Scatter:
    """Return the stretch in which all residuals would lie at once if they were normal."""
    low, high = (end[kept] * findings.residual_sd for end in envelope.envelope(count, findings.study.confidence))
    return go.Scatter(
        x=[*scores, *scores[::-1]], y=[*high, *low[::-1]], mode="lines", line={"width": 0}, fill="toself", fillcolor=look.shades[0],
        hoverinfo="skip",
    )  # fmt: skip


def by_cell_caption(findings: Findings) -> str:
    """Say what points and numbers are."""
    is_cut = len(cells_shown(findings)) < int((findings.cells["n"] > 0).sum())
    cut = f" The {MOST_CELLS} cells that spread most are drawn." if is_cut else ""
    return f"Each point: one {words.unit_word(findings)} minus its fitted value; sd: standard deviation inside the cell.{cut}"


def along_fitted_caption(findings: Findings) -> str:
    """Say what the points are and what to look for."""
    return "A fan that opens to one side: the spread changes with the level. A bend: the model misses a shape."


def against_bell_caption(findings: Findings) -> str:
    """Say what the line is and what to look for."""
    inside = f"{percent(findings.study.confidence)} of bell-shaped samples of this size lie wholly inside the shade"
    return f"The line is a bell curve of the model’s spread; {inside}. Ends that leave it are heavy tails, a bow is skew."


def by_cell_alt(findings: Findings) -> str:
    """Describe the view by cell for someone who does not see it."""
    cells = findings.cells[findings.cells["sd"].notna()]
    told = "; ".join(f"{c.row} with {c.column} {words.spread(c.sd, c.se)}" for c in records.lines(cells.head(36)))
    label, n = words.response_label(findings), words.n_per_cell(findings)
    return f"Residuals of {label} by cell, {n}. Standard deviations: {told or 'none defined'}."


def along_fitted_alt(findings: Findings) -> str:
    """Describe the view along the fitted values for someone who does not see it."""
    return f"Residuals of {words.response_label(findings)} against fitted values, {len(findings.observations)} points."


def against_bell_alt(findings: Findings) -> str:
    """Describe the normal quantiles for someone who does not see it."""
    return f"Ordered residuals of {words.response_label(findings)} against normal quantiles, {len(findings.observations)} points."
