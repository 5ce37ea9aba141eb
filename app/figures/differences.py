"""The differences of a family against zero: one line each, with the interval that is adjusted for the size of the family."""

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis.findings import Findings
from analysis.rounding import measured, p_value, percent
from app import records, words
from app.figures import lettering
from app.look import Look

MOST_LINES = 40  # a longer figure is no figure; the table holds all of them
FEW_LINES = 8
ROOMY, TIGHT = 1.9, 1.55  # height of a line, of the type size, for few lines and for more


def shown(findings: Findings, family: str) -> pd.DataFrame:
    """Return the comparisons that are drawn, in the order of the family: all, or those that lie farthest from zero for their error."""
    frame = records.family(findings, family)
    frame = frame[frame["difference"].notna()]
    if len(frame) <= MOST_LINES:
        return frame
    return frame.loc[frame["t"].abs().nlargest(MOST_LINES).index.sort_values()]


def differences(findings: Findings, look: Look, family: str) -> go.Figure:
    """Draw each difference with its adjusted interval; filled marks exclude zero, hollow ones do not."""
    frame = shown(findings, family)
    names, heights = _lines(frame)
    figure = go.Figure(layout=_ground(findings, look, frame, names, heights))
    figure.add_vline(x=0, line={"color": look.ink, "width": 1})
    _band_of_what_matters(figure, findings, look)
    figure.add_trace(_marks(findings, look, frame, [height for name, height in zip(names, heights, strict=True) if not is_heading(name)]))
    return figure


def _lines(frame: pd.DataFrame) -> tuple[list[str], list[float]]:
    """Return the names down the side and their heights, slices of the other factor under a heading each."""
    names: list[str] = []
    for within, part in frame.groupby("within", sort=False, dropna=False):
        if isinstance(within, str):
            names.append(f"<b>{lettering.wrapped(within, 30, 1)}</b>")
        names += [_pair(c.left, c.right) for c in records.lines(part)]
    return names, [-float(place) for place in range(len(names))]


def is_heading(name: str) -> bool:
    """Return whether a name down the side heads a slice."""
    return name.startswith("<b>")


def _pair(left: object, right: object) -> str:
    return f"{lettering.wrapped(words.cell_name(left), 26, 1)} − {lettering.wrapped(words.cell_name(right), 26, 1)}"


def _ground(findings: Findings, look: Look, frame: pd.DataFrame, names: list[str], heights: list[float]) -> go.Layout:
    low, high = min(0.0, frame["lower_adjusted"].min()), max(0.0, frame["upper_adjusted"].max())
    air = 0.04 * (high - low) or 1.0
    return look.layout(
        xaxis={
            "range": [low - air, high + air],
            "title": {"text": f"difference in {lettering.plain(words.response_label(findings))}"},
            "nticks": 9,
        },
        yaxis={
            "tickvals": heights,
            "ticktext": names,
            "range": [min(heights, default=0) - 0.6, 0.6],
            "showgrid": False,
            "automargin": False,
        },
        margin={"l": lettering.widest(names, look.text) + 10},
        height=round(max(len(names), 2) * look.text * (ROOMY if len(names) <= FEW_LINES else TIGHT) + 4.5 * look.text + 24),
    )


def _band_of_what_matters(figure: go.Figure, findings: Findings, look: Look) -> None:
    matters = findings.choices.matters
    if matters is not None:
        figure.add_vrect(x0=-matters, x1=matters, fillcolor=look.rule, opacity=0.45, line_width=0, layer="below")


def _marks(findings: Findings, look: Look, frame: pd.DataFrame, heights: list[float]) -> go.Scatter:
    decided = (frame["lower_adjusted"] > 0) | (frame["upper_adjusted"] < 0)
    difference = frame["difference"].to_numpy(float)
    told = [
        [
            _pair(c.left, c.right),
            words.with_interval(c.difference, c.lower_adjusted, c.upper_adjusted, c.se),
            p_value(c.p_adjusted),
            words.VERDICTS[c.verdict],
        ]
        for c in records.lines(frame)
    ]
    return go.Scatter(
        x=difference,
        y=heights,
        mode="markers",
        marker={
            "symbol": np.where(decided, "circle", "circle-open").tolist(),
            "size": look.marker,
            "color": np.where(decided, look.accent, look.quiet).tolist(),
            "line": {"width": look.line * 0.75, "color": np.where(decided, look.accent, look.quiet).tolist()},
        },
        error_x={
            "array": frame["upper_adjusted"].to_numpy(float) - difference,
            "arrayminus": difference - frame["lower_adjusted"].to_numpy(float),
            "color": look.quiet,
            "thickness": look.line * 0.75,
            "width": 0,
        },
        customdata=told,
        hovertemplate="%{customdata[0]}<br>%{customdata[1]}<br>adjusted %{customdata[2]}: %{customdata[3]}<extra></extra>",
    )


def differences_caption(findings: Findings, family: str) -> str:
    """Say what marks and bars are, how large the family is and how it was adjusted."""
    known, drawn = int(records.family(findings, family)["difference"].notna().sum()), len(shown(findings, family))
    cut = f" The {drawn} that lie farthest from zero for their error are drawn; the table holds all {known}." if drawn < known else ""
    matters = findings.choices.matters
    band = "" if matters is None else f" The band marks differences below {measured(matters, matters)}, which do not matter."
    return (
        f"Bars: {percent(findings.study.confidence)} intervals, adjusted within the family ({words.adjusted_by(findings)}; "
        f"{words.family_size(findings, family)}). A filled mark’s interval excludes zero.{band}{cut}"
    )


def differences_alt(findings: Findings, family: str) -> str:
    """Read the differences out for someone who does not see the figure."""
    frame = shown(findings, family)
    told = "; ".join(
        f"{words.cell_name(c.left)} minus {words.cell_name(c.right)}{f' within {c.within}' if isinstance(c.within, str) else ''}: "
        f"{words.with_interval(c.difference, c.lower_adjusted, c.upper_adjusted, c.se)}"
        for c in records.lines(frame.head(24))
    )
    more = f"; and {len(frame) - 24} more" if len(frame) > 24 else ""
    return f"Differences in {words.response_label(findings)} with adjusted intervals, against zero. {told}{more}."
