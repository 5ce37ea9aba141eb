"""How the response follows amounts: means along the amount, the straight line and the curve through them, on average and by level."""

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis import trends
from analysis.findings import Findings
from analysis.rounding import p_value, significant
from app import original, records, words
from app.figures import along, lettering, lines, ticks
from app.figures.scene import View
from app.look import Look

STRAIGHT, CURVED = "solid", "dash"
MOST_LEVELS = 8  # of the other factor, drawn behind the average


@dataclass(frozen=True, eq=False)
class Amounts:
    """One factor of amounts as the figure needs it, every value in the units told."""

    findings: Findings
    factor: str

    @cached_property
    def view(self) -> View:
        """The scene with this factor along the axis."""
        return View(self.findings, turned=self.factor == self.findings.study.row_factor)

    @cached_property
    def places(self) -> np.ndarray:
        """The amounts, one for each level."""
        return np.asarray(self.findings.spacing(self.factor), dtype=np.float64)

    @cached_property
    def is_log(self) -> bool:
        """Whether the amounts stand on a logarithmic axis, as in the other figures."""
        return along.along(self.findings, self.factor).spacing == along.LOGARITHMIC

    @cached_property
    def means(self) -> pd.DataFrame:
        """The mean of each level, every level of the other factor counted the same."""
        return original.means(self.findings, self.findings.marginal_means[self.factor].rename(columns={"mean": "estimate"}))

    def curve(self, within: str | None) -> pd.DataFrame:
        """Return amount, straight and curved line, on average or within one level of the other factor."""
        frame = self.findings.trend_curves
        mine = frame[frame["factor"] == self.factor]
        part = mine[mine["within"].isna() if within is None else mine["within"] == within]
        return part.assign(**{way: self.findings.observed.scale.back(part[way].to_numpy(float)) for way in ("straight", "curved")})

    def tested(self, part: str) -> Any | None:
        """Return the test of one part of the trend on average, or None where there is none."""
        frame = self.findings.trends
        found = frame[(frame["factor"] == self.factor) & frame["within"].isna() & (frame["part"] == part)]
        return next(records.lines(found), None)


def trend(findings: Findings, look: Look, factor: str) -> go.Figure:
    """Draw means with intervals along the amounts, the straight line and the curve through them, and each level behind."""
    seen = Amounts(findings, factor)
    levels = list(seen.view.rows)[:MOST_LEVELS]
    traces = [trace for index, level in enumerate(levels) for trace in _of_level(seen, look, index, level)]
    average = seen.curve(None)
    traces += [
        _curve(average["amount"], average["curved"], look.ink, look.line, CURVED),
        _curve(average["amount"], average["straight"], look.ink, look.line, STRAIGHT),
        _means(seen, look),
    ]
    return go.Figure(traces, _ground(seen, look, levels))


def _of_level(seen: Amounts, look: Look, index: int, level: str) -> list[dict[str, Any]]:
    style, means, curve = look.style_of(index), seen.view.line_of(level), seen.curve(level)
    marks = {
        "type": "scatter",
        "x": seen.places,
        "y": means["estimate"].to_numpy(float),
        "mode": "markers",
        "marker": {"symbol": style.marker, "size": look.point + 2, "color": style.hue},
        "customdata": [[lettering.plain(m.row), lettering.plain(m.column), original.number(seen.findings, m.estimate, m.se)]
                       for m in records.lines(means)],
        "hovertemplate": "%{customdata[0]} · %{customdata[1]}<br>mean %{customdata[2]}<extra></extra>",
    }  # fmt: skip
    return [_curve(curve["amount"], curve["straight"], style.hue, look.line * 0.5, STRAIGHT), marks]


def _curve(x: pd.Series, y: pd.Series, colour: str, width: float, dash: str) -> dict[str, Any]:
    line = {"color": colour, "width": width, "dash": dash}
    return {"type": "scatter", "x": x.to_numpy(float), "y": y.to_numpy(float), "mode": "lines", "line": line, "hoverinfo": "skip"}


def _means(seen: Amounts, look: Look) -> dict[str, Any]:
    estimate = seen.means["estimate"].to_numpy(float)
    return {
        "type": "scatter",
        "x": seen.places,
        "y": estimate,
        "mode": "markers",
        "marker": {"symbol": "circle", "size": look.marker + 1, "color": look.ink, "line": {"color": look.paper, "width": 1}},
        "error_y": {
            "array": seen.means["upper"].to_numpy(float) - estimate,
            "arrayminus": estimate - seen.means["lower"].to_numpy(float),
            "color": look.ink,
            "thickness": look.line * 0.75,
            "width": 0,
        },
        "customdata": [
            [lettering.plain(m.level), *(original.number(seen.findings, v, m.se) for v in (m.estimate, m.lower, m.upper)), int(m.n)]
            for m in records.lines(seen.means)
        ],
        "hovertemplate": "%{customdata[0]}, on average<br>mean %{customdata[1]}, n %{customdata[4]}"
        "<br>interval %{customdata[2]} to %{customdata[3]}<extra></extra>",
    }


def _ground(seen: Amounts, look: Look, levels: list[str]) -> dict[str, Any]:
    at = np.log10(seen.places) if seen.is_log else seen.places
    air = 0.05 * (at[-1] - at[0])
    ends = [(float(seen.curve(level)["straight"].iloc[-1]), lettering.wrapped(level, 18, 1), look.style_of(k).ink)
            for k, level in enumerate(levels)]  # fmt: skip
    labels = [(float(seen.curve(None)["straight"].iloc[-1]), "on average", look.ink), *((y, name, ink) for y, name, ink in ends)]
    known = [label for label in labels if np.isfinite(label[0])]
    response = lines.response_axis(seen.view, _reach(seen))
    names = [lettering.wrapped(level, 10, 2) for level in seen.view.columns]
    return look.layout(
        xaxis={
            "range": [float(at[0] - air), float(at[-1] + air)],
            "tickvals": seen.places,
            "ticktext": names,
            "automargin": False,
            "title": {"text": lettering.plain(words.factor_in_units(seen.findings, seen.factor))},
            "showgrid": False,
            **({"type": "log"} if seen.is_log else {}),
        },
        yaxis=response,
        margin={
            "l": ticks.left(response, look), "r": lettering.widest([name for _, name, _ in known], look.text) + 12,
            "b": ticks.below(names, look),
        },
        annotations=lines.names_at(known, response["range"], look, seen.view.is_log),
        height=min(look.height, 330) if look.width is None else look.height,
    )  # fmt: skip


def _reach(seen: Amounts) -> tuple[float, float]:
    drawn = [seen.means[["lower", "upper", "estimate"]].to_numpy(float).ravel(), seen.view.means["estimate"].to_numpy(float)]
    drawn += [seen.curve(None)[way].to_numpy(float) for way in ("straight", "curved")]
    places = seen.view.places(np.concatenate(drawn))
    low, high = float(np.nanmin(places)), float(np.nanmax(places))
    air = 0.05 * (high - low) or 1.0
    return low - air, high + air


def trend_caption(findings: Findings, factor: str) -> str:
    """Say what marks and lines are, and whether a straight line or a curve leaves something over."""
    seen = Amounts(findings, factor)
    curve, beyond = seen.tested(trends.QUADRATIC), seen.tested(trends.DEPARTURE)
    bend = "" if curve is None else f", broken the curve (curvature {_test(curve)})"
    left = f" What a curve leaves over: {_test(beyond)}." if beyond is not None else " Two or three amounts leave nothing over beyond it."
    few = f" The first {MOST_LEVELS} levels are drawn." if len(seen.view.rows) > MOST_LEVELS else ""
    spacing = " Amounts stand on a logarithmic axis, on which a straight line bends." if seen.is_log else ""
    return (
        f"Dark: {original.mean_word(findings)}s averaged with equal weight, with {words.intervals(findings)}; the "
        f"solid line is the straight trend{bend}. In colour: the cells, with the straight trend of each level.{left}{few}{spacing}"
        f"{lines.scale_told(findings)}"
    )


def _test(line: Any) -> str:
    return f"F = {significant(line.f)}, {p_value(line.p)}"


def trend_alt(findings: Findings, factor: str) -> str:
    """Read the means along the amounts out for someone who does not see the figure."""
    seen = Amounts(findings, factor)
    told = "; ".join(f"{m.level}: {original.with_interval(findings, m, 'mean')}" for m in records.lines(findings.marginal_means[factor]))
    straight = seen.tested(trends.LINEAR)
    test = "" if straight is None else f" Straight trend {_test(straight)}."
    return f"{original.label(findings)} along {factor}, on average. {told}.{test}"
