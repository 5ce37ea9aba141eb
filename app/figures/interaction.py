"""The interaction figure: every observation, the means of the model with their intervals, lines named where they end."""

import numpy as np
import plotly.graph_objects as go

from analysis.findings import Findings
from analysis.rounding import measured
from app import records, words
from app.figures import lettering, placing
from app.figures.scene import Scene
from app.look import Look

MANY_POINTS = 3_000  # beyond this the browser paints points as one picture instead of one element each


def interaction(findings: Findings, look: Look) -> go.Figure:
    """Draw observations, means and intervals; each line is named where it ends, so no legend is needed."""
    scene = Scene(findings)
    labels = [lettering.wrapped(level, 18, 2) for level in scene.rows]
    figure = go.Figure(layout=_ground(scene, look, labels))
    figure.add_traces([_points(scene, look, index, level) for index, level in enumerate(scene.rows)])
    figure.add_traces([_line(scene, look, index, level) for index, level in enumerate(scene.rows)])
    _name_lines(figure, scene, look, labels)
    return figure


def _ground(scene: Scene, look: Look, labels: list[str]) -> go.Layout:
    places, design = np.arange(len(scene.columns)), scene.findings.design
    letters = max(6, int(90 / len(places)))
    return look.layout(
        xaxis={
            "tickvals": places,
            "ticktext": [lettering.wrapped(level, letters) for level in scene.columns],
            "range": [-0.5, scene.label_place],
            "showgrid": False,
            "title": {"text": lettering.plain(design["column_factor"])},
        },
        yaxis={
            "range": scene.reach,
            "title": {"text": lettering.plain(words.response_label(scene.findings))},
            "nticks": 10,
            "showline": False,
        },
        margin={"r": lettering.widest(labels, look.text) + 10},
    )


def _points(scene: Scene, look: Look, index: int, level: str) -> go.Scatter | go.Scattergl:
    style = look.style_of(index)
    points = scene.observations[scene.observations["row"] == level]
    turn = points.groupby("column", sort=False, observed=True).cumcount().to_numpy()
    aside = placing.spread(int(turn.max(initial=0)) + 1, 0.36 * placing.step(len(scene.rows)))[turn]
    place = {column: k for k, column in enumerate(scene.columns)}
    many = look.width is None and len(scene.observations) > MANY_POINTS
    kind = go.Scattergl if many else go.Scatter
    return kind(
        name=lettering.plain(level),
        x=points["column"].astype(object).map(place).to_numpy(float) + scene.offsets[index] + aside,
        y=points["value"].to_numpy(float),
        mode="markers",
        marker={"symbol": style.marker, "size": look.point, "color": style.hue, "opacity": 0.18 if many else 0.42, "line": {"width": 0}},
        customdata=[[lettering.plain(p.row), lettering.plain(p.column), p.file_row] for p in records.lines(points)],
        hovertemplate=words.POINT_HOVER,
    )


def _line(scene: Scene, look: Look, index: int, level: str) -> go.Scatter:
    style, means = look.style_of(index), scene.line_of(level)
    estimate = means["estimate"].to_numpy(float)
    return go.Scatter(
        name=lettering.plain(level),
        x=np.arange(len(means)) + scene.offsets[index],
        y=estimate,
        mode="lines+markers",
        line={"color": style.hue, "width": look.line, "dash": style.dash},
        marker={"symbol": style.marker, "size": look.marker, "color": style.hue, "line": {"color": look.paper, "width": 1}},
        error_y={
            "array": means["upper"].to_numpy(float) - estimate,
            "arrayminus": estimate - means["lower"].to_numpy(float),
            "color": style.hue,
            "thickness": look.line * 0.75,
            "width": 0,
        },
        customdata=[
            [
                lettering.plain(level),
                lettering.plain(m.column),
                measured(m.estimate, m.se),
                measured(m.lower, m.se),
                measured(m.upper, m.se),
                m.n,
            ]
            for m in records.lines(means)
        ],
        hovertemplate=words.mean_hover(scene.findings.study.confidence),
    )


def _name_lines(figure: go.Figure, scene: Scene, look: Look, labels: list[str]) -> None:
    """Write each level beside the end of its line; where ends lie close the names move apart, with a thin lead to the end."""
    per_px = (scene.reach[1] - scene.reach[0]) / (look.height - 5.5 * look.text)
    ends = [_end(scene, level) for level in scene.rows]
    gaps = np.array([lettering.line_count(label) for label in labels]) * look.text * 1.25 * per_px
    for index, y in enumerate(placing.apart(np.array([end[1] for end in ends]), gaps)):
        style = look.style_of(index)
        if abs(y - ends[index][1]) > 4 * per_px:
            start = ends[index][0] + scene.offsets[index]
            lead = {"x0": start, "y0": ends[index][1], "x1": scene.label_place, "y1": y}
            figure.add_shape(type="line", **lead, line={"color": style.hue, "width": 0.8}, layer="below")
        figure.add_annotation(
            x=scene.label_place, y=y, text=labels[index], font={"color": style.ink, "size": look.text},
            xanchor="left", yanchor="middle", align="left", xshift=3, showarrow=False,
        )  # fmt: skip


def _end(scene: Scene, level: str) -> tuple[float, float]:
    """Return place and height of the last mean of a line, or the middle of the figure where it has none."""
    estimates = scene.line_of(level)["estimate"].to_numpy(float)
    known = np.flatnonzero(np.isfinite(estimates))
    if known.size == 0:
        return 0.0, (scene.reach[0] + scene.reach[1]) / 2
    return float(known[-1]), float(estimates[known[-1]])


def interaction_caption(findings: Findings) -> str:
    """Say what points, lines and bars are, of which model, at which level, with how many observations."""
    scene = Scene(findings)
    every = f"every {words.unit_word(findings)}"
    some = f"{words.units_word(findings)}, of a cell with more than {placing.MOST_POINTS} only so many, evenly by size"
    return (
        f"Points: {some if scene.is_thinned else every}. Lines: cell means{words.of_model(findings)} with "
        f"{words.intervals(findings)} from the pooled spread, {words.n_per_cell(findings)}."
    )


def interaction_alt(findings: Findings) -> str:
    """Describe the figure for someone who does not see it: axes, lines, highest and lowest mean, n."""
    scene, design = Scene(findings), findings.design
    means = sorted(records.lines(scene.means.dropna(subset=["estimate"])), key=lambda cell: float(cell.estimate))
    ends = ", ".join(
        f"{word} for {cell.row} with {cell.column} at {words.with_interval(cell.estimate, cell.lower, cell.upper, cell.se)}"
        for word, cell in (("highest", means[-1]), ("lowest", means[0]))
    )
    return (
        f"Interaction figure: {words.response_label(findings)} by {design['column_factor']} ({', '.join(scene.columns)}), "
        f"one line for each level of {design['row_factor']} ({', '.join(scene.rows)}). Cell means are {ends}; {words.n_per_cell(findings)}."
    )
