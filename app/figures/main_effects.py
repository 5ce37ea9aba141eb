"""Each factor averaged over the other: equal-weight means with intervals, and behind them the cells that they average."""

from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis.findings import Findings
from app import answer_words, original, records, words
from app.figures import along, lettering, lines, ticks
from app.figures.scene import View
from app.look import Look

PANELS = ((0.0, 0.47), (0.53, 1.0))  # of the row factor and of the column factor, as shares of the width


def main_effects(findings: Findings, look: Look) -> go.Figure:
    """Draw the means of both factors side by side on one scale; hollow marks are the cells behind each mean."""
    views = [View(findings, turned=True), View(findings)]  # in each, the factor shown runs along the axis
    traces = [trace for panel, view in enumerate(views) for trace in (_cells(view, look, panel), _means(view, look, panel))]
    return go.Figure(traces, _ground(views, look))


def means_of(findings: Findings, factor: str) -> pd.DataFrame:
    """Return the means of a factor in the units told: level, estimate, lower, upper, n."""
    return original.means(findings, findings.marginal_means[factor].rename(columns={"mean": "estimate"}))


def _factor(view: View) -> str:
    return str(view.findings.design[f"{view.along}_factor"])


def _ground(views: list[View], look: Look) -> dict[str, Any]:
    findings = views[0].findings
    bars = [means_of(findings, _factor(view))[["lower", "upper", "estimate"]].to_numpy(float).ravel() for view in views]
    places = views[0].places(np.concatenate([*bars, views[0].means["estimate"].to_numpy(float)]))
    low, high = float(np.nanmin(places)), float(np.nanmax(places))
    air = 0.06 * (high - low) or 1.0
    response = lines.response_axis(views[0], (low - air, high + air))
    names = [name for view in views for name in _names(view)]
    ground = look.layout(yaxis=response, margin={"l": ticks.left(response, look), "b": ticks.below(names, look)})
    axes = {f"xaxis{'' if panel == 0 else 2}": _axis(view, look, panel, ground["xaxis"]) for panel, view in enumerate(views)}
    return {**ground, **axes}


def _axis(view: View, look: Look, panel: int, bare: dict[str, Any]) -> dict[str, Any]:
    last = float(view.axis.places[-1])
    return {
        **bare,
        "domain": PANELS[panel],
        "anchor": "y",
        "tickvals": view.axis.places,
        "ticktext": _names(view),
        "automargin": False,
        "range": [-0.5, last + 0.5],
        "showgrid": False,
        "title": {**bare["title"], "text": lettering.plain(words.factor_in_units(view.findings, _factor(view)))},
    }


def _names(view: View) -> list[str]:
    letters = max(6, int(44 / len(view.columns)))
    return [lettering.wrapped(level, letters) for level in view.columns]


def _cells(view: View, look: Look, panel: int) -> dict[str, Any]:
    """Return the means of single cells, hollow and small, beside the mean of their level."""
    means = view.means.dropna(subset=["estimate"])
    place = dict(zip(view.columns, view.axis.places.tolist(), strict=True))
    return {
        "type": "scatter",
        "x": [place[level] + 0.14 * view.axis.step for level in means[view.along]],
        "y": means["estimate"].to_numpy(float),
        "xaxis": "x" if panel == 0 else "x2",
        "mode": "markers",
        "marker": {"symbol": "circle-open", "size": look.point + 1, "color": look.quiet, "line": {"width": 1}},
        "customdata": [[lettering.plain(c.row), lettering.plain(c.column), original.number(view.findings, c.estimate, c.se)]
                       for c in records.lines(means)],
        "hovertemplate": "%{customdata[0]} · %{customdata[1]}<br>mean of the cell %{customdata[2]}<extra></extra>",
    }  # fmt: skip


def _means(view: View, look: Look, panel: int) -> dict[str, Any]:
    means = means_of(view.findings, _factor(view))
    estimate = means["estimate"].to_numpy(float)
    return {
        "type": "scatter",
        "x": view.axis.places,
        "y": estimate,
        "xaxis": "x" if panel == 0 else "x2",
        "mode": "markers",
        "marker": {"symbol": "circle", "size": look.marker + 2, "color": look.accent, "line": {"color": look.paper, "width": 1}},
        "error_y": {
            "array": means["upper"].to_numpy(float) - estimate,
            "arrayminus": estimate - means["lower"].to_numpy(float),
            "color": look.accent,
            "thickness": look.line,
            "width": 0,
        },
        "customdata": [
            [lettering.plain(m.level), *(original.number(view.findings, value, m.se) for value in (m.estimate, m.lower, m.upper)), int(m.n)]
            for m in records.lines(means)
        ],
        "hovertemplate": "%{customdata[0]}<br>mean %{customdata[1]}, n %{customdata[4]}"
        "<br>interval %{customdata[2]} to %{customdata[3]}<extra></extra>",
    }


def main_effects_caption(findings: Findings) -> str:
    """Say what the marks are and over what they average."""
    every = all(bool(findings.marginal_means[factor]["estimable"].all()) for factor in findings.study.factors)
    missing = "" if every else " An average over an empty combination cannot be estimated and is left out."
    mean = original.mean_word(findings)
    spacing = dict.fromkeys(along.along(findings, factor).told for factor in findings.study.factors)
    return (
        f"Filled marks: {mean}s of each level, every combination counted the same, with {words.intervals(findings)}. "
        f"Hollow marks: the cells that they average.{missing}{lines.scale_told(findings)}{''.join(spacing)}"
    )


def main_effects_alt(findings: Findings) -> str:
    """Read the means of both factors out for someone who does not see the figure."""
    told = " ".join(
        f"{factor}: "
        + "; ".join(f"{m.level} {original.with_interval(findings, m, 'mean')}" for m in records.lines(findings.marginal_means[factor]))
        + "."
        for factor in findings.study.factors
    )
    warning = answer_words.over_interaction(findings)
    return f"Averages of {original.label(findings)} by factor. {told}{f' {warning}' if warning else ''}"
