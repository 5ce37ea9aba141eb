"""The interaction figure: every observation, the means of the model with their intervals, lines named where they end."""

from typing import Any

import plotly.graph_objects as go

from analysis.findings import Findings
from app import original, records, words
from app.figures import lettering, lines
from app.figures.scene import View
from app.look import Look


def interaction(findings: Findings, look: Look, turned: bool = False) -> go.Figure:
    """Draw observations, means and intervals; each line is named where it ends, so no legend is needed.

    Levels of the row factor are lines, or those of the column factor where it is turned.
    """
    scene = View(findings, turned)
    labels = lettering.kept_apart(scene.rows, 18)
    seen = [lines.points(scene, look, index, level) for index, level in enumerate(scene.rows)]
    means = [_line(scene, look, index, level) for index, level in enumerate(scene.rows)]
    return go.Figure([*seen, *means], lines.ground(scene, look, labels))


def _line(scene: View, look: Look, index: int, level: str) -> dict[str, Any]:
    style, means = look.style_of(index), scene.line_of(level)
    estimate = means["estimate"].to_numpy(float)
    return {
        "type": "scatter",
        "name": lettering.plain(level),
        "x": scene.axis.places + scene.offsets[index],
        "y": estimate,
        "mode": "lines+markers",
        "line": {"color": style.hue, "width": look.line, "dash": style.dash},
        "marker": {"symbol": style.marker, "size": look.marker, "color": style.hue, "line": {"color": look.paper, "width": 1}},
        "error_y": {
            "array": means["upper"].to_numpy(float) - estimate,
            "arrayminus": estimate - means["lower"].to_numpy(float),
            "color": style.hue,
            "thickness": look.line * 0.75,
            "width": 0,
        },
        "customdata": [
            [
                lettering.plain(m.row),
                lettering.plain(m.column),
                *(original.number(scene.findings, value, m.se) for value in (m.estimate, m.lower, m.upper)),
                m.n,
            ]
            for m in records.lines(means)
        ],
        "hovertemplate": words.mean_hover(scene.findings.study.confidence),
    }


def interaction_caption(findings: Findings, turned: bool = False) -> str:
    """Say what points, lines and bars are, of which model, at which level, with how many observations."""
    scene = View(findings, turned)
    means = "cell mean" if findings.observed.scale.is_identity else original.mean_word(findings)
    return (
        f"Points: {lines.points_told(scene)}. Lines: {means}s{words.of_model(findings)} with {words.intervals(findings)} "
        f"from the pooled spread, {words.n_per_cell(findings)}.{lines.scale_told(findings)}{scene.axis.told}"
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
        f"({', '.join(scene.rows)}). {_capital(original.mean_word(findings))}s by cell are {ends}; {words.n_per_cell(findings)}."
    )


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]
