"""The differences of a family against zero: one line each, with the interval that is adjusted for the size of the family."""

from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis import verdicts
from analysis.findings import Findings
from analysis.rounding import measured, p_value, percent
from app import original, records, tabled, words
from app.figures import lettering, ticks
from app.look import Look

MOST_LINES = 24  # a longer figure is no figure; the table holds all of them
SYMBOLS = dict.fromkeys(verdicts.VERDICTS, "circle") | {
    verdicts.UNDECIDED: "circle-open", verdicts.NONE_THAT_MATTERS: "diamond-open-dot"
}  # fmt: skip
LINE_HEIGHTS = ((8, 1.9), (14, 1.55), (10**6, 1.25))  # up to so many lines, the height of one, of the type size


def shown(findings: Findings, family: str, asked: pd.DataFrame | None = None) -> pd.DataFrame:
    """Return the comparisons that are drawn, in the order of the family: all, or those that lie farthest from zero for their error.

    asked holds the lines asked about where that is not the whole family.
    """
    frame = records.family(findings, family) if asked is None else asked
    frame = frame[frame["difference"].notna()]
    if len(frame) <= MOST_LINES:
        return frame
    return frame.loc[frame["t"].abs().nlargest(MOST_LINES).index.sort_values()]


def differences(findings: Findings, look: Look, family: str, asked: pd.DataFrame | None = None) -> go.Figure:
    """Draw each difference with its adjusted interval; filled marks exclude zero, hollow ones are undecided, diamonds too small to matter.

    Where the scale tells ratios they are drawn on a logarithmic axis, against one.
    """
    frame = shown(findings, family, asked)
    names, heights = _lines(frame, findings.observed.scale.tells_ratios)
    at = [height for name, height in zip(names, heights, strict=True) if not is_heading(name)]
    ground = _ground(findings, look, frame, names, heights)
    return go.Figure([_marks(findings, look, frame, at)], {**ground, "shapes": _standards(findings, look)})


def ends(findings: Findings, frame: pd.DataFrame) -> pd.DataFrame:
    """Return middle, lower and upper end of each bar: differences, or ratios where the scale tells them."""
    if findings.observed.scale.tells_ratios:
        told = pd.DataFrame(list(frame["told"]), index=frame.index, columns=["estimate", "lower_adjusted", "upper_adjusted"])
        return told.set_axis(["middle", "lower", "upper"], axis=1).astype(float)
    return frame[["difference", "lower_adjusted", "upper_adjusted"]].set_axis(["middle", "lower", "upper"], axis=1).astype(float)


def _lines(frame: pd.DataFrame, ratio: bool) -> tuple[list[str], list[float]]:
    """Return the names down the side and their heights, slices of the other factor under a heading each."""
    names: list[str] = []
    for within, part in frame.groupby("within", sort=False, dropna=False):
        if isinstance(within, str):
            names.append(f"<b>{lettering.wrapped(within, 30, 1)}</b>")
        names += [_pair(c.left, c.right, ratio) for c in records.lines(part)]
    return names, [-float(place) for place in range(len(names))]


def is_heading(name: str) -> bool:
    """Return whether a name down the side heads a slice."""
    return name.startswith("<b>")


def _pair(left: object, right: object, ratio: bool) -> str:
    return f"{lettering.wrapped(words.cell_name(left), 26, 1)} {'÷' if ratio else '−'} {lettering.wrapped(words.cell_name(right), 26, 1)}"


def _ground(findings: Findings, look: Look, frame: pd.DataFrame, names: list[str], heights: list[float]) -> dict[str, Any]:
    bars, ratio = ends(findings, frame), findings.observed.scale.tells_ratios
    places = np.log10(bars) if ratio else bars
    low, high = min(0.0, places["lower"].min()), max(0.0, places["upper"].max())
    air = 0.04 * (high - low) or 1.0
    what = f"ratio of {original.label(findings)}" if ratio else f"difference in {words.response_label(findings)}"
    reach = (low - air, high + air)
    tall = next(tall for most, tall in LINE_HEIGHTS if len(names) <= most)
    return look.layout(
        xaxis={
            "range": reach,
            "title": {"text": lettering.plain(what)},
            **({"type": "log", **ticks.logarithmic(reach)} if ratio else ticks.linear(reach)),
            "automargin": False,
        },
        yaxis={
            "tickvals": heights,
            "ticktext": names,
            "range": [min(heights, default=0) - 0.6, 0.6],
            "showgrid": False,
            "automargin": False,
        },
        margin={"l": lettering.widest(names, look.text) + 10, "b": ticks.below([], look)},
        height=round(max(len(names), 2) * look.text * tall + 4.5 * look.text + 24),
    )


def _standards(findings: Findings, look: Look) -> list[dict[str, Any]]:
    """Return what differences are held against: the line of no difference, and the band of those that do not matter."""
    nothing, matters = 1 if findings.observed.scale.tells_ratios else 0, findings.choices.matters
    upright = {"yref": "paper", "y0": 0, "y1": 1}
    line = {"type": "line", **upright, "x0": nothing, "x1": nothing, "line": {"color": look.ink, "width": 1}}
    if matters is None:
        return [line]
    band = {"type": "rect", **upright, "x0": -matters, "x1": matters, "fillcolor": look.rule, "opacity": 0.45, "line": {"width": 0}}
    return [{**band, "layer": "below"}, line]


def _marks(findings: Findings, look: Look, frame: pd.DataFrame, heights: list[float]) -> dict[str, Any]:
    bars, ratio = ends(findings, frame), findings.observed.scale.tells_ratios
    colours = [look.quiet if verdict == verdicts.UNDECIDED else look.accent for verdict in frame["verdict"]]
    told = [[_pair(c.left, c.right, ratio), tabled.size(c), p_value(c.p_adjusted), words.VERDICTS[c.verdict]] for c in records.lines(frame)]
    return {
        "type": "scatter",
        "x": bars["middle"].to_numpy(),
        "y": heights,
        "mode": "markers",
        "marker": {
            "symbol": [SYMBOLS[verdict] for verdict in frame["verdict"]],
            "size": look.marker,
            "color": colours,
            "line": {"width": look.line * 0.75, "color": colours},
        },
        "error_x": {
            "array": (bars["upper"] - bars["middle"]).to_numpy(),
            "arrayminus": (bars["middle"] - bars["lower"]).to_numpy(),
            "color": look.quiet,
            "thickness": look.line * 0.75,
            "width": 0,
        },
        "customdata": told,
        "hovertemplate": "%{customdata[0]}<br>%{customdata[1]}<br>adjusted %{customdata[2]}: %{customdata[3]}<extra></extra>",
    }


def differences_caption(findings: Findings, family: str, asked: pd.DataFrame | None = None) -> str:
    """Say what marks and bars are, how large the family is and how it was adjusted."""
    frame = records.family(findings, family) if asked is None else asked
    known, drawn = int(frame["difference"].notna().sum()), len(shown(findings, family, asked))
    cut = f" The {drawn} that lie farthest from zero for their error are drawn; the table holds all {known}." if drawn < known else ""
    matters = findings.choices.matters
    band = "" if matters is None else f" The band marks differences below {measured(matters, matters)}, which do not matter."
    alone = asked is not None and set(asked["family_size"]) == {1}
    size = words.family_size(findings, family) if asked is None else words.sizes_told(asked)
    how = "not adjusted" if alone else f"adjusted within the family ({words.adjusted_by(findings)}; {size})"
    nothing = "one" if findings.observed.scale.tells_ratios else "zero"
    return f"Bars: {percent(findings.study.confidence)} intervals, {how}.{_signs(frame, nothing)}{band}{scale_told(findings)}{cut}"


def _signs(frame: pd.DataFrame, nothing: str) -> str:
    """Return what the marks that occur mean."""
    said = {
        f"a filled mark’s interval excludes {nothing}": frame["verdict"].map(SYMBOLS).eq("circle").any(),
        "a hollow mark is undecided": (frame["verdict"] == verdicts.UNDECIDED).any(),
        "a diamond shows no difference that matters": (frame["verdict"] == verdicts.NONE_THAT_MATTERS).any(),
    }
    told = "; ".join(sign for sign, occurs in said.items() if occurs)
    return f" {told[:1].upper()}{told[1:]}." if told else ""


def scale_told(findings: Findings) -> str:
    """Return what a difference is where the scale analysed tells neither differences nor ratios of the response."""
    scale = findings.observed.scale
    if scale.is_identity or scale.tells_ratios:
        return ""
    named = words.scale_name(scale.name).lower()
    return f" Differences are on the scale analysed ({named}), where they were computed; they have no fixed size in original units."


def differences_alt(findings: Findings, family: str, asked: pd.DataFrame | None = None) -> str:
    """Read the differences out for someone who does not see the figure."""
    frame, ratio = shown(findings, family, asked), findings.observed.scale.tells_ratios
    told = "; ".join(
        f"{words.cell_name(c.left)} {'over' if ratio else 'minus'} {words.cell_name(c.right)}"
        f"{f' within {c.within}' if isinstance(c.within, str) else ''}: {tabled.size(c)}"
        for c in records.lines(frame.head(24))
    )
    more = f"; and {len(frame) - 24} more" if len(frame) > 24 else ""
    what = f"Ratios of {original.label(findings)}" if ratio else f"Differences in {words.response_label(findings)}"
    nothing = "one" if ratio else "zero"
    return f"{what} with adjusted intervals, against {nothing}. {told}{more}."
