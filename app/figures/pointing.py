"""The grid to point at: cells, heads and the names of the factors as marks that a click can choose, the chosen ones framed."""

from collections.abc import Set
from dataclasses import dataclass
from typing import Any

import plotly.graph_objects as go

from analysis.findings import Findings
from app import asking
from app.figures import grid, lettering
from app.look import Look

WIDE = 470  # px that the grid takes on a desk; heads keep their share of it on a wider one
HEADS = 50  # px, of the heads of the columns
FRAME = 3  # px, around what is chosen


@dataclass(frozen=True)
class Mark:
    """One thing to point at: where it stands, in fields, and what it asks."""

    place: asking.Cell
    x: float
    y: float  # its upper edge
    wide: float
    tall: float
    colour: str
    told: str
    text: str = ""  # of heads; the fields of cells have lettering of their own


def pointing(findings: Findings, look: Look, chosen: Set[asking.Cell], height: int = 174) -> go.Figure:
    """Draw the cells with their means between heads that can be pointed at; what the open question is about is framed."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    tall = grid.height_of_field(len(rows), look, height)
    names = [lettering.wrapped(level, 14, max(1, int(tall // (look.text * 1.3)))) for level in rows]
    corner = _factor_names(findings)
    left = max(lettering.widest([*names, *(f"{name} ↓" for name in corner)], look.small) + 18, 60.0)
    side, top = left * len(columns) / (WIDE - left), HEADS / tall
    fields = grid.mean_fields(findings, look)
    marks = [
        *_cells(fields),
        *_row_heads(findings, names, side, look),
        *_column_heads(findings, top, look),
        *_corner(findings, side, top, look),
    ]
    ground = _ground(look, (-0.5 - side, len(columns) - 0.5), (len(rows) - 0.5, -0.52 - top), tall * len(rows) + HEADS)
    letters = {**grid.texts(fields, len(columns), look, tall), "hoverinfo": "skip", "hovertext": None}
    return go.Figure([letters, _bars(marks, chosen, look), _names(marks, look)], ground)


def _ground(look: Look, across: tuple[float, float], down: tuple[float, float], height: float) -> dict[str, Any]:
    bare = {"showgrid": False, "showline": False, "showticklabels": False, "title": None, "automargin": False}
    return look.layout(
        xaxis={**bare, "range": across},
        yaxis={**bare, "range": down},
        margin={"l": 2, "r": 2, "t": 2, "b": 2},
        height=round(height + 4),
        bargap=0,
        barmode="overlay",
        clickmode="event+select",
    )


def _cells(fields: list[grid.Field]) -> list[Mark]:
    size = 1 - grid.GAP
    return [Mark((f.row, f.column), f.column, f.row - size / 2, size, size, f.colour, f.told) for f in fields]


def _row_heads(findings: Findings, names: list[str], side: float, look: Look) -> list[Mark]:
    size, (_, column) = 1 - grid.GAP, findings.study.factors
    return [
        Mark(
            (i, asking.HEAD), -0.5 - side / 2, i - size / 2, side - grid.GAP, size, look.panel,
            f"compare {lettering.plain(column)} within {name}", name,
        )
        for i, name in enumerate(names)
    ]  # fmt: skip


def _column_heads(findings: Findings, top: float, look: Look) -> list[Mark]:
    columns, (row, _) = findings.design["column_levels"], findings.study.factors
    heads = [lettering.wrapped(level, max(5, int(52 / len(columns))), 2) for level in columns]
    return [
        Mark(
            (asking.HEAD, j), j, -0.5 - top, 1 - grid.GAP, top - grid.GAP, look.panel,
            f"compare {lettering.plain(row)} within {head}", head,
        )
        for j, head in enumerate(heads)
    ]  # fmt: skip


def _corner(findings: Findings, side: float, top: float, look: Look) -> list[Mark]:
    row, column = _factor_names(findings)
    x, wide, half = -0.5 - side / 2, side - grid.GAP, top / 2
    return [
        Mark(
            (asking.HEAD, asking.HEAD), x, -0.5 - top, wide, half - grid.GAP, look.panel, f"compare the levels of {column}", f"{column} →"
        ),
        Mark((asking.HEAD, asking.HEAD - 1), x, -0.5 - half, wide, half - grid.GAP, look.panel, f"compare the levels of {row}", f"{row} ↓"),
    ]


def _factor_names(findings: Findings) -> list[str]:
    return [lettering.wrapped(findings.observed.factor(factor).word, 16, 1) for factor in findings.study.factors]


def _bars(marks: list[Mark], chosen: Set[asking.Cell], look: Look) -> dict[str, Any]:
    still = {"marker": {"opacity": 1}}  # what is chosen is framed, so nothing need fade
    return {
        "type": "bar",
        "x": [m.x for m in marks],
        "y": [m.tall for m in marks],
        "base": [m.y for m in marks],
        "width": [m.wide for m in marks],
        "marker": {
            "color": [m.colour for m in marks],
            "line": {
                "color": [look.ink if m.place in chosen else look.rule for m in marks],
                "width": [FRAME if m.place in chosen else 1 for m in marks],
            },
        },
        "hovertext": [m.told for m in marks],
        "hoverinfo": "text",
        "customdata": [list(m.place) for m in marks],
        "selected": still,
        "unselected": still,
    }


def _names(marks: list[Mark], look: Look) -> dict[str, Any]:
    heads = [m for m in marks if m.text]
    return {
        "type": "scatter",
        "x": [m.x for m in heads],
        "y": [m.y + m.tall / 2 for m in heads],
        "mode": "text",
        "text": [m.text for m in heads],
        "textfont": {"size": look.small, "color": look.ink},
        "hoverinfo": "skip",
    }
