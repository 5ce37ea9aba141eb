"""The grid: the crossed design drawn as rows by columns, a field for each combination with its mean, count and spread."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
import pandas as pd
import plotly.graph_objects as go

from analysis.findings import Findings
from app import original, records, words
from app.figures import lettering
from app.look import Look, shade, text_on

GAP = 0.03  # between fields, as a share of a field
TALLEST, LOWEST = 66, 20  # px, of a field
ONE_LINE = 40  # px; a lower field has room for one line only
READ_OUT = 200  # combinations read out one by one
LETTERS = 98  # across all fields of a row, where a second line has room
EMPTY, SINGLE, PLAIN = "empty", "single", "plain"


@dataclass(frozen=True)
class Field:
    """One field of the grid: its colour, its lines of text, and what hovering tells."""

    row: int
    column: int
    colour: str
    lines: tuple[str, ...]  # the first in bold
    told: str


def grid(findings: Findings, look: Look, height: int = 174) -> go.Figure:
    """Draw the cells with mean, n and standard deviation, shaded by the mean."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    return _drawn(mean_fields(findings, look), rows, columns, findings.design, look, height)


def mean_fields(findings: Findings, look: Look) -> list[Field]:
    """Return the field of each cell, shaded by its mean, row by row."""
    low, high = findings.cells["mean"].min(), findings.cells["mean"].max()
    return [_mean_field(findings, cell, k, _share(cell.mean, low, high), look) for k, cell in enumerate(records.lines(findings.cells))]


def counts(design: Mapping[str, Any], look: Look, height: int = 300) -> go.Figure:
    """Draw how many observations each combination holds, empty, single and unequal ones named in words."""
    n = np.asarray(design["counts"])
    rows, columns = design["row_levels"], design["column_levels"]
    fields = [_count_field(i, j, int(n[i, j]), words.count_word(int(n[i, j]), n), look) for i, j in np.ndindex(n.shape)]
    return _drawn(fields, rows, columns, design, look, height)


def height_of_field(rows: int, look: Look, height: int) -> float:
    """Return the height in px of one field of so many rows."""
    return min(max(height // rows, LOWEST), TALLEST) * look.text / 14


def _share(mean: float, low: float, high: float) -> float:
    return 0.5 if not high > low else (mean - low) / (high - low)


def _mean_field(findings: Findings, cell: Any, place: int, share: float, look: Look) -> Field:
    row, column = divmod(place, len(findings.design["column_levels"]))
    head = f"{lettering.plain(cell.row)} · {lettering.plain(cell.column)}"
    if cell.n == 0:
        return Field(row, column, look.paper, (words.EMPTY,), f"{head}<br>{words.EMPTY}")
    spread = words.spread(cell.sd, cell.se)
    lines = (original.number(findings, original.back(findings, cell.mean), cell.se), f"n {cell.n}{spread and f' · sd {spread}'}")
    return Field(row, column, shade(look.shades, share), lines, f"{head}<br>{original.mean_word(findings)} {lines[0]}<br>{lines[1]}")


def _count_field(row: int, column: int, n: int, word: str, look: Look) -> Field:
    colour = look.paper if n == 0 else look.shades[2] if n == 1 else look.shades[0]
    lines = (words.EMPTY,) if n == 0 else (word, "n 1") if n == 1 else (f"n {n}", word) if word else (f"n {n}",)
    return Field(row, column, colour, lines, " · ".join(lines))


def _drawn(
    fields: Sequence[Field], rows: Sequence[str], columns: Sequence[str], design: Mapping[str, Any], look: Look, height: int
) -> go.Figure:
    tall = height_of_field(len(rows), look, height)
    names = [lettering.wrapped(level, 14, max(1, int(tall // (look.text * 1.3)))) for level in rows]
    heads = [lettering.wrapped(level, max(5, int(58 / len(columns))), 2) for level in columns]
    ground = _ground(names, heads, design, look, tall)
    return go.Figure([texts(fields, len(columns), look, tall)], {**ground, "shapes": [_box(field, look) for field in fields]})


def _ground(names: list[str], heads: list[str], design: Mapping[str, Any], look: Look, tall: float) -> dict[str, Any]:
    top = (max(lettering.line_count(head) for head in heads) * 1.3 + 0.8) * look.small
    left = lettering.widest(names, look.small) + 12
    ticks = {"showgrid": False, "showline": False, "title": None, "automargin": False}
    quiet = {"size": look.small, "color": look.quiet}
    return look.layout(
        xaxis={
            **ticks,
            "tickvals": list(range(len(heads))),
            "ticktext": heads,
            "range": [-0.5, len(heads) - 0.5],
            "side": "top",
            "tickfont": quiet,
        },
        yaxis={**ticks, "tickvals": list(range(len(names))), "ticktext": names, "range": [len(names) - 0.5, -0.5], "tickfont": quiet},
        margin={"l": left, "r": 2, "t": top, "b": 2},
        height=round(tall * len(names) + top + 2),
    )


def _box(field: Field, look: Look) -> dict[str, Any]:
    half = 0.5 - GAP / 2
    empty = field.lines[0] == words.EMPTY or field.colour == look.paper
    line = {"color": look.quiet, "width": 1, "dash": "dot"} if empty else {"width": 0}
    sides = {"x0": field.column - half, "x1": field.column + half, "y0": field.row - half, "y1": field.row + half}
    return {"type": "rect", **sides, "fillcolor": field.colour, "line": line, "layer": "below"}


def texts(fields: Sequence[Field], columns: int, look: Look, tall: float) -> dict[str, Any]:
    """Return the lettering of the fields; hovering tells the whole of each."""
    room = tall >= ONE_LINE and columns * max(len(line) for f in fields for line in f.lines) <= LETTERS
    shown = [f.lines if room else f.lines[:1] for f in fields]
    size = look.text if columns <= 8 else look.small * 8 / columns + 2
    return {
        "type": "scatter",
        "x": [f.column for f in fields],
        "y": [f.row for f in fields],
        "mode": "text",
        "text": [_lettered(lines, size, look) for lines in shown],
        "textfont": {"size": size, "color": [text_on(f.colour) if f.colour != look.paper else look.quiet for f in fields]},
        "hovertext": [f.told for f in fields],
        "hoverinfo": "text",
        "customdata": [[f.row, f.column] for f in fields],
    }


def _lettered(lines: tuple[str, ...], size: float, look: Look) -> str:
    rest = "".join(f'<br><span style="font-size:{min(size, look.small)}px">{line}</span>' for line in lines[1:])
    return f"<b>{lines[0]}</b>{rest}"


def grid_caption(findings: Findings) -> str:
    """Say what stands in a field."""
    design = findings.design
    what = "" if findings.study.scale == "none" else f" of {words.response_label(findings)}"
    unit = " in original units" if original.is_told(findings) else ""
    means = f"{original.mean_word(findings)}{unit}, n and standard deviation (sd){what}"
    return f"{design['row_factor']} down, {design['column_factor']} across. In each cell {means}."


def grid_alt(findings: Findings) -> str:
    """Read the grid out, cell by cell, for someone who does not see it."""
    cells: pd.DataFrame = findings.cells
    told = "; ".join(f"{c.row} with {c.column}: {words.EMPTY if c.n == 0 else _read(findings, c)}" for c in records.lines(cells.head(36)))
    rest = f"; and {len(cells) - 36} more cells" if len(cells) > 36 else ""
    return f"Grid of cell means of {original.label(findings)}. {told}{rest}."


def _read(findings: Findings, cell: Any) -> str:
    return f"{original.mean_word(findings)} {original.number(findings, original.back(findings, cell.mean), cell.se)}, n {cell.n}"


def counts_alt(design: Mapping[str, Any]) -> str:
    """Read the counts out, combination by combination, for someone who does not see the grid."""
    told = [
        f"{row} with {column}: {n or words.EMPTY}"
        for row, line in zip(design["row_levels"], design["counts"], strict=True)
        for column, n in zip(design["column_levels"], line, strict=True)
    ]
    rest = f"; and {len(told) - READ_OUT} more combinations" if len(told) > READ_OUT else ""
    return f"Grid of counts, {design['row_factor']} by {design['column_factor']}. {'; '.join(told[:READ_OUT])}{rest}."
