"""The interaction figure: every observation, the means of the model with their intervals, lines named where they end."""

import numpy as np
import plotly.graph_objects as go

from analysis.findings import Findings
from app import original, records, words
from app.figures import lettering, placing
from app.figures.scene import View
from app.look import Look

ON_LOG_AXIS = " In original units on a logarithmic axis: equal steps are equal ratios."
MOST_TICKS = 11
MANY_POINTS = 3_000  # beyond this the browser paints points as one picture instead of one element each


def interaction(findings: Findings, look: Look, turned: bool = False) -> go.Figure:
    """Draw observations, means and intervals; each line is named where it ends, so no legend is needed.

    Levels of the row factor are lines, or those of the column factor where it is turned.
    """
    scene = View(findings, turned)
    labels = [lettering.wrapped(level, 18, 2) for level in scene.rows]
    figure = go.Figure(layout=_ground(scene, look, labels))
    figure.add_traces([_points(scene, look, index, level) for index, level in enumerate(scene.rows)])
    figure.add_traces([_line(scene, look, index, level) for index, level in enumerate(scene.rows)])
    _name_lines(figure, scene, look, labels)
    return figure


def _ground(scene: View, look: Look, labels: list[str]) -> go.Layout:
    places, design = np.arange(len(scene.columns)), scene.findings.design
    letters = max(6, int(90 / len(places)))
    return look.layout(
        xaxis={
            "tickvals": places,
            "ticktext": [lettering.wrapped(level, letters) for level in scene.columns],
            "range": [-0.5, scene.label_place],
            "showgrid": False,
            "title": {"text": lettering.plain(design[f"{scene.along}_factor"])},
        },
        yaxis={
            "range": scene.reach,
            "title": {"text": lettering.plain(original.label(scene.findings))},
            **({"type": "log", **_round_ticks(scene.reach)} if scene.is_log else {"nticks": 10}),
            "showline": False,
        },
        margin={"r": lettering.widest(labels, look.text) + 10},
    )


def _round_ticks(reach: tuple[float, float]) -> dict[str, list[float]]:
    """Return round values between two powers of ten, the fewer of each decade the more decades there are."""
    low, high = reach
    for firsts in ((1, 1.2, 1.4, 1.6, 1.8, 2, 2.5, 3, 3.5, 4, 5, 6, 7, 8, 9), (1, 1.5, 2, 3, 4, 5, 7), (1, 2, 5), (1,)):
        values = [first * 10.0**power for power in range(int(np.floor(low)), int(np.ceil(high)) + 1) for first in firsts]
        shown = [value for value in values if low <= np.log10(value) <= high]
        if len(shown) <= MOST_TICKS:
            break
    return {"tickvals": shown}


def _points(scene: View, look: Look, index: int, level: str) -> go.Scatter | go.Scattergl:
    style = look.style_of(index)
    points = scene.observations[scene.observations[scene.line] == level]
    turn = points.groupby(scene.along, sort=False, observed=True).cumcount().to_numpy()
    aside = placing.spread(int(turn.max(initial=0)) + 1, 0.36 * placing.step(len(scene.rows)))[turn]
    place = {column: k for k, column in enumerate(scene.columns)}
    many = look.width is None and len(scene.observations) > MANY_POINTS
    kind = go.Scattergl if many else go.Scatter
    return kind(
        name=lettering.plain(level),
        x=points[scene.along].astype(object).map(place).to_numpy(float) + scene.offsets[index] + aside,
        y=points["value"].to_numpy(float),
        mode="markers",
        marker={"symbol": style.marker, "size": look.point, "color": style.hue, "opacity": 0.18 if many else 0.42, "line": {"width": 0}},
        customdata=[[lettering.plain(p.row), lettering.plain(p.column), p.file_row] for p in records.lines(points)],
        hovertemplate=words.POINT_HOVER,
    )


def _line(scene: View, look: Look, index: int, level: str) -> go.Scatter:
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
                lettering.plain(m.row),
                lettering.plain(m.column),
                *(original.number(scene.findings, value, m.se) for value in (m.estimate, m.lower, m.upper)),
                m.n,
            ]
            for m in records.lines(means)
        ],
        hovertemplate=words.mean_hover(scene.findings.study.confidence),
    )


def _name_lines(figure: go.Figure, scene: View, look: Look, labels: list[str]) -> None:
    """Write each level beside the end of its line; where ends lie close the names move apart, with a thin lead to the end."""
    per_px = (scene.reach[1] - scene.reach[0]) / (look.height - 5.5 * look.text)
    ends = [_end(scene, level) for level in scene.rows]
    gaps = np.array([lettering.line_count(label) for label in labels]) * look.text * 1.25 * per_px
    for index, y in enumerate(placing.apart(np.array([end[1] for end in ends]), gaps)):
        style = look.style_of(index)
        if abs(y - ends[index][1]) > 4 * per_px:
            start = ends[index][0] + scene.offsets[index]
            # On a logarithmic axis a shape is placed by values, an annotation by their powers of ten.
            low, high = (10.0**place if scene.is_log else place for place in (ends[index][1], float(y)))
            lead = {"x0": start, "y0": low, "x1": scene.label_place, "y1": high}
            figure.add_shape(type="line", **lead, line={"color": style.hue, "width": 0.8}, layer="below")
        figure.add_annotation(
            x=scene.label_place, y=y, text=labels[index], font={"color": style.ink, "size": look.text},
            xanchor="left", yanchor="middle", align="left", xshift=3, showarrow=False,
        )  # fmt: skip


def _end(scene: View, level: str) -> tuple[float, float]:
    """Return place and height of the last mean of a line, or the middle of the figure where it has none."""
    estimates = scene.places(scene.line_of(level)["estimate"].to_numpy(float))
    known = np.flatnonzero(np.isfinite(estimates))
    if known.size == 0:
        return 0.0, (scene.reach[0] + scene.reach[1]) / 2
    return float(known[-1]), float(estimates[known[-1]])


def interaction_caption(findings: Findings) -> str:
    """Say what points, lines and bars are, of which model, at which level, with how many observations."""
    scene = View(findings)
    every = f"every {words.unit_word(findings)}"
    some = f"{words.units_word(findings)}, of a cell with more than {placing.MOST_POINTS} only so many, evenly by size"
    return (
        f"Points: {some if scene.is_thinned else every}. Lines: {'geometric ' if scene.is_log else 'cell '}means{words.of_model(findings)} "
        f"with {words.intervals(findings)} from the pooled spread, {words.n_per_cell(findings)}.{ON_LOG_AXIS if scene.is_log else ''}"
    )


def interaction_alt(findings: Findings, turned: bool = False) -> str:
    """Describe the figure for someone who does not see it: axes, lines, highest and lowest mean, n."""
    scene, design = View(findings, turned), findings.design
    means = sorted(records.lines(scene.means.dropna(subset=["estimate"])), key=lambda cell: float(cell.estimate))
    ends = ", ".join(
        f"{word} for {cell.row} with {cell.column} at {original.with_interval(findings, cell)}"
        for word, cell in (("highest", means[-1]), ("lowest", means[0]))
    )
    return (
        f"Interaction figure: {original.label(findings)}{', logarithmic axis,' if scene.is_log else ''} by "
        f"{design[f'{scene.along}_factor']} ({', '.join(scene.columns)}), one line for each level of {design[f'{scene.line}_factor']} "
        f"({', '.join(scene.rows)}). {'Geometric' if scene.is_log else 'Cell'} means are {ends}; {words.n_per_cell(findings)}."
    )
