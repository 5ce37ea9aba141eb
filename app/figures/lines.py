"""What the figures with a place for every cell share: axes, observations, and names of levels where their lines end."""

from typing import Any

import numpy as np
import pandas as pd

from analysis.findings import Findings
from app import original, words
from app.figures import lettering, placing, ticks
from app.figures.scene import Scene, View
from app.look import Look

ON_LOG_AXIS = " In original units on a logarithmic axis: equal steps are equal ratios."
ON_OTHER_SCALE = " In original units; analysed on another scale, so that intervals reach farther to one side."
LETTERS = 90  # side by side along the axis on a desk, in its type
MANY_POINTS = 3_000  # beyond this the browser paints points as one picture instead of one element each


def ground(scene: View, look: Look, labels: list[str]) -> dict[str, Any]:
    """Return axes, names at the ends of lines, and the room that they need at the right."""
    places, design = scene.axis.places, scene.findings.design
    letters = max(6, int(letters_along(look, lettering.widest(labels, look.text)) / len(places)))
    leads, names = names_of_lines(scene, look, labels)
    levels = [lettering.wrapped(level, letters) for level in scene.columns]
    response = response_axis(scene, scene.reach, int(1.3 * look.height / look.text))
    return look.layout(
        xaxis={
            "tickvals": places,
            "ticktext": levels,
            "range": [-0.5, scene.label_place],
            "showgrid": False,
            "tickangle": 0,
            "title": {"text": lettering.plain(words.factor_in_units(scene.findings, design[f"{scene.along}_factor"]))},
            "automargin": False,
        },
        yaxis=response,
        margin={
            "l": ticks.left(response, look), "r": lettering.widest(labels, look.text) + 10, "b": ticks.below(levels, look),
        },
        shapes=leads,
        annotations=names,
    )  # fmt: skip


def letters_along(look: Look, beside: float) -> float:
    """Return how many letters stand side by side along the axis; beside is the width in px that the names of the lines take."""
    return LETTERS * 14 / look.text if look.width is None else (look.width - beside - 5 * look.text) / (0.55 * look.text)


def response_axis(scene: View, reach: tuple[float, float], letters: int = LETTERS) -> dict[str, Any]:
    """Return the axis of the response over a reach, in powers of ten where it is logarithmic; its title breaks after so many letters."""
    return {
        "range": reach,
        "title": {"text": lettering.wrapped(original.label(scene.findings), letters, 2)},
        **({"type": "log", **ticks.logarithmic(reach)} if scene.is_log else ticks.linear(reach)),
        "showline": False,
        "automargin": False,
    }


def points(scene: View, look: Look, index: int, level: str) -> dict[str, Any]:
    """Return the observations of one line, each beside its level of the axis."""
    style = look.style_of(index)
    mine = scene.observations[scene.observations[scene.line] == level]
    turn = mine.groupby(scene.along, sort=False, observed=True).cumcount().to_numpy()
    place = dict(zip(scene.columns, scene.axis.places.tolist(), strict=True))
    many = look.width is None and len(scene.observations) > MANY_POINTS
    hover = {"hoverinfo": "skip"} if many else {"customdata": _names_of(mine), "hovertemplate": words.POINT_HOVER}
    return {
        "type": "scattergl" if many else "scatter",
        "name": lettering.plain(level),
        "x": mine[scene.along].astype(object).map(place).to_numpy(float)
        + scene.offsets[index]
        + placing.spread(int(turn.max(initial=0)) + 1, scene.room)[turn],
        "y": mine["value"].to_numpy(float),
        "mode": "markers",
        "marker": {
            "symbol": style.marker, "size": look.point, "color": style.hue, "opacity": 0.18 if many else 0.42, "line": {"width": 0},
        },
        **hover,
    }  # fmt: skip


def _names_of(seen: pd.DataFrame) -> list[tuple[str, str, int]]:
    """Return the levels of each observation and its row of the file."""
    names = {side: [lettering.plain(level) for level in seen[side]] for side in ("row", "column")}
    return list(zip(names["row"], names["column"], seen["file_row"].tolist(), strict=True))


def names_of_lines(scene: View, look: Look, labels: list[str]) -> tuple[list[dict[str, Any]], list[dict[str, Any]]]:
    """Return the name of each level beside the end of its line, and the leads to names that moved; where ends lie close names part."""
    per_px = (scene.reach[1] - scene.reach[0]) / (look.height - 5.5 * look.text)
    ends = [_end(scene, level) for level in scene.rows]
    gaps = np.array([lettering.line_count(label) for label in labels]) * look.text * 1.25 * per_px
    leads, names = [], []
    for index, y in enumerate(placing.apart(np.array([end[1] for end in ends]), gaps).tolist()):
        style = look.style_of(index)
        if abs(y - ends[index][1]) > 4 * per_px:
            start = ends[index][0] + scene.offsets[index]
            # On a logarithmic axis a shape is placed by values, an annotation by their powers of ten.
            low, high = (10.0**place if scene.is_log else place for place in (ends[index][1], y))
            lead = {"type": "line", "x0": start, "y0": low, "x1": scene.label_place, "y1": high, "layer": "below"}
            leads.append({**lead, "line": {"color": style.hue, "width": 0.8}})
        names.append(
            {
                "x": scene.label_place, "y": y, "text": labels[index], "font": {"color": style.ink, "size": look.text},
                "xanchor": "left", "yanchor": "middle", "align": "left", "xshift": 3, "showarrow": False,
            }
        )  # fmt: skip
    return leads, names


def names_at(ends: list[tuple[float, str, str]], reach: tuple[float, float], look: Look, is_log: bool) -> list[dict[str, Any]]:
    """Return names at the right edge beside the heights (values of the response) where lines end, moved apart where they are close."""
    per_px = (reach[1] - reach[0]) / (min(look.height, 330) - 5.5 * look.text)
    wanted = np.array([end[0] for end in ends], dtype=np.float64)
    heights = placing.apart(np.log10(wanted) if is_log else wanted, np.full(wanted.size, look.text * 1.25 * per_px))
    return [
        {
            "x": 1, "xref": "paper", "y": y, "text": name, "font": {"color": ink, "size": look.text},
            "xanchor": "left", "yanchor": "middle", "align": "left", "xshift": 4, "showarrow": False,
        }
        for y, (_, name, ink) in zip(heights.tolist(), ends, strict=True)
    ]  # fmt: skip


def _end(scene: View, level: str) -> tuple[float, float]:
    """Return place and height of the last mean of a line, or the middle of the figure where it has none."""
    estimates = scene.places(scene.line_of(level)["estimate"].to_numpy(float))
    known = np.flatnonzero(np.isfinite(estimates))
    if known.size == 0:
        return 0.0, (scene.reach[0] + scene.reach[1]) / 2
    return float(scene.axis.places[known[-1]]), float(estimates[known[-1]])


def points_told(scene: Scene) -> str:
    """Return what the points are: every observation, or how they were thinned."""
    several = words.units_word(scene.findings)
    some = f"{several}, of a cell with more than {scene.most} only so many, evenly by size"
    return some if scene.is_thinned else f"every {words.unit_word(scene.findings)}"


def scale_told(findings: Findings) -> str:
    """Return what a caption adds where another scale is analysed than the one drawn."""
    scale = findings.observed.scale
    return "" if scale.is_identity else ON_LOG_AXIS if scale.tells_ratios else ON_OTHER_SCALE
