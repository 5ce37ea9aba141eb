"""What pointing at the grid asks: which marks lead to which question, and which of the engine's numbers answer it."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
import pandas as pd

from analysis.families import CELLS, COLUMNS, within_name
from analysis.findings import Findings
from analysis.verdicts import verdicts
from app import records, tabled

Cell = tuple[int, int]  # places of a row level and a column level
MOST_CELLS = 4
CHOSEN = "chosen cells"  # the question of the cells pointed at
TREND = "trend of "  # before the factor whose levels are amounts
HEAD = -1  # the place of a head or margin, where a cell has a level


@dataclass(frozen=True)
class Asked:
    """One question: a family, or one slice of it, or the cells pointed at."""

    family: str  # a family of the findings, CHOSEN, or TREND and a factor
    within: str | None = None  # the slice asked about, None for all
    cells: tuple[Cell, ...] = ()


def pointed(now: Asked, place: Cell, factors: Sequence[str], rows: Sequence[str], columns: Sequence[str]) -> Asked:
    """Return the question after pointing at a place of the grid.

    place is (row, column); HEAD for the row stands for the head of a column, HEAD for the column for the head of a row, and
    (HEAD, HEAD) and (HEAD, HEAD - 1) for the margins of the column and of the row factor.
    """
    row, column = place
    row_factor, column_factor = factors
    if row == HEAD and column <= HEAD:
        return Asked(column_factor if column == HEAD else row_factor)
    if column == HEAD:
        return Asked(within_name(column_factor, row_factor), rows[row])
    if row == HEAD:
        return Asked(within_name(row_factor, column_factor), columns[column])
    return replace(Asked(CHOSEN), cells=with_cell(now.cells if now.family == CHOSEN else (), place))


def with_cell(chosen: tuple[Cell, ...], cell: Cell) -> tuple[Cell, ...]:
    """Return the cells chosen after pointing at one: taken out where it was in, begun anew where the cells no longer make a question."""
    if cell in chosen:
        return tuple(other for other in chosen if other != cell)
    together = (*chosen, cell)
    return together if can_lead(together) else (cell,)


def can_lead(cells: tuple[Cell, ...]) -> bool:
    """Return whether cells are a pair, or corners of one block of two rows and two columns."""
    if len(cells) <= 2:
        return True
    sides = len({row for row, _ in cells}), len({column for _, column in cells})
    return len(cells) <= MOST_CELLS and sides == (2, 2)


def families(findings: Findings) -> list[str]:
    """Return the questions that the selector offers: every family, the trends of amounts, and cells of one's own choice."""
    factors = (findings.observed.row, findings.observed.column)
    trends = [f"{TREND}{factor.name}" for factor in factors if factor.amounts is not None and factor.size > 1]
    return [*findings.comparisons, *trends, CHOSEN]


def slices(findings: Findings, family: str) -> list[str]:
    """Return the slices of a family, none where it has none."""
    row, column = findings.study.factors
    levels = {within_name(row, column): findings.design["column_levels"], within_name(column, row): findings.design["row_levels"]}
    return list(levels.get(family, ()))


def factor_of(findings: Findings, asked: Asked) -> str | None:
    """Return the factor whose levels a question compares; None where it compares combinations."""
    row, column = findings.study.factors
    within = {within_name(row, column): row, within_name(column, row): column}
    return within.get(asked.family, asked.family if asked.family in (row, column) else None)


def valid(findings: Findings, asked: Asked) -> Asked:
    """Return the question as far as the findings know its names, else the question of the first family."""
    a, b = findings.observed.shape
    if asked.family not in families(findings):
        return Asked(next(iter(findings.comparisons)))
    cells = tuple(cell for cell in asked.cells if cell[0] < a and cell[1] < b)
    within = asked.within if asked.within in slices(findings, asked.family) else None
    return Asked(asked.family, within, cells if can_lead(cells) else cells[-1:])


def places(findings: Findings, asked: Asked) -> frozenset[Cell]:
    """Return the places of the grid that a question is asked at."""
    row, column = findings.study.factors
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    if asked.family == within_name(column, row):
        return frozenset((i, HEAD) for i, level in enumerate(rows) if asked.within in (None, level))
    if asked.family == within_name(row, column):
        return frozenset((HEAD, j) for j, level in enumerate(columns) if asked.within in (None, level))
    margins = {column: (HEAD, HEAD), row: (HEAD, HEAD - 1)}
    factor = asked.family.removeprefix(TREND)
    return frozenset({margins[factor]} if factor in margins else asked.cells)


def compared(findings: Findings, asked: Asked) -> pd.DataFrame | None:
    """Return the comparisons that answer a question, as lines of a family; None where there is none or it is too large."""
    if asked.family == CHOSEN:
        answer = {2: pair, MOST_CELLS: block}.get(len(asked.cells))
        return None if answer is None else answer(findings, asked.cells)
    frame = findings.comparisons.get(asked.family)
    if frame is None or asked.within is None:
        return frame
    return frame[frame["within"] == asked.within]


def pair(findings: Findings, cells: tuple[Cell, ...]) -> pd.DataFrame:
    """Return the difference of two cells: from the smallest family that holds it, else asked on its own."""
    family, within = family_of(findings, cells)
    frame = records.family(findings, family) if family in findings.comparisons else pd.DataFrame(columns=list(COLUMNS))
    sides: list[object] = [_names(findings, cell) for cell in cells]
    if within is not None:
        along = 1 if cells[0][0] == cells[1][0] else 0
        frame, sides = frame[frame["within"] == within], [_names(findings, cell)[along] for cell in cells]
    at = [k for k, (left, right) in enumerate(zip(frame["left"], frame["right"], strict=True)) if left in sides and right in sides]
    return frame.iloc[at] if at else _on_its_own(findings, cells)


def family_of(findings: Findings, cells: tuple[Cell, ...]) -> tuple[str, str | None]:
    """Return the smallest family that holds the difference of two cells, and its slice."""
    (r1, c1), (r2, c2) = cells
    row, column = findings.study.factors
    if r1 == r2:
        return within_name(column, row), findings.design["row_levels"][r1]
    if c1 == c2:
        return within_name(row, column), findings.design["column_levels"][c1]
    return CELLS, None


def _names(findings: Findings, cell: Cell) -> list[str]:
    return [findings.design["row_levels"][cell[0]], findings.design["column_levels"][cell[1]]]


def _on_its_own(findings: Findings, cells: tuple[Cell, ...]) -> pd.DataFrame:
    """Return the difference of two cells that no family of the study holds, the later cell minus the earlier, as a family of one."""
    right, left = (_names(findings, cell) for cell in sorted(cells))
    found = findings.contrast({(left[0], left[1]): 1.0, (right[0], right[1]): -1.0})
    return _line(findings, {"left": left, "right": right, "within": None, "difference": found.estimate, **_tested(found)})


def block(findings: Findings, cells: tuple[Cell, ...]) -> pd.DataFrame:
    """Return the difference of differences of four cells, asked on its own: (r2c2 − r2c1) − (r1c2 − r1c1)."""
    first, last = _names(findings, min(cells)), _names(findings, max(cells))
    (r1, c1), (r2, c2) = first, last
    found = findings.contrast({(r2, c2): 1.0, (r2, c1): -1.0, (r1, c2): -1.0, (r1, c1): 1.0})
    across = tabled.pair(c2, c1, findings.observed.scale.tells_ratios)
    return _line(findings, {"left": r2, "right": r1, "within": across, "difference": found.estimate, **_tested(found)})


def _tested(found: Any) -> dict[str, Any]:
    return {name: getattr(found, name) for name in ("se", "df", "t", "p", "lower", "upper")}


def _line(findings: Findings, line: dict[str, Any]) -> pd.DataFrame:
    """Return one comparison asked on its own as a family of one: nothing to adjust for."""
    whole = {**line, "p_adjusted": line["p"], "lower_adjusted": line["lower"], "upper_adjusted": line["upper"]}
    reading = verdicts(np.array([line["lower"]]), np.array([line["upper"]]), findings.choices.matters)[0]
    frame = pd.DataFrame([{**whole, "verdict": reading, "family_size": 1}])
    scale = findings.observed.scale
    if not scale.tells_ratios:
        return frame
    ends = {"estimate": "difference", "lower": "lower", "upper": "upper", "lower_adjusted": "lower", "upper_adjusted": "upper"}
    told = {name: float(scale.back(np.array([whole[column]]))[0]) for name, column in ends.items()}
    return frame.assign(told=pd.Series([told], dtype=object))


def trend(findings: Findings, asked: Asked) -> pd.DataFrame:
    """Return the lines on the trend of the factor asked about."""
    return findings.trends[findings.trends["factor"] == asked.family.removeprefix(TREND)]
