"""What can be counted of a study before, or without, an analysis: rows of each level, observations of each combination."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from analysis.design import design_over
from analysis.layout import NOT_KEPT, lay_out
from analysis.observations import Observations
from analysis.refusals import Refusal
from analysis.relabelling import relabelled
from analysis.study import Study
from analysis.table import Table, counts

LOOKED_AT = 1000  # rows, to see whether one row of the file holds several observations


@dataclass(frozen=True)
class Account:
    """Where every observation of a file went; the parts add up to what the file holds."""

    analysed: int
    aside: int  # set aside by the user
    unkept: int  # of levels that are left out
    unusable: int
    in_grid: bool  # a row of the file holds several observations

    @property
    def whole(self) -> int:
        """Everything that the file holds."""
        return self.analysed + self.aside + self.unkept + self.unusable


def account(study: Study, analysed: int, left_out: Sequence[Mapping[str, Any]]) -> Account:
    """Return the account of a study's file, given how many were analysed and what was left out with which reason."""
    aside = sum(f"set aside: {study.set_aside.get(int(entry['row']))}" == entry["why"] for entry in left_out)
    unkept = sum(str(entry["why"]).endswith(NOT_KEPT) for entry in left_out)
    return Account(analysed, aside, unkept, len(left_out) - aside - unkept, in_grid(study.table))


def in_grid(table: Table) -> bool:
    """Return whether a row of the file holds several observations."""
    first = table.file_rows[:LOOKED_AT]
    return np.unique(first).size < first.size


def level_rows(study: Study, column: str) -> dict[str, int]:
    """Return, for each level of a column under its name of now, how many rows that hold it are analysed.

    A level that is left out counts the rows that it would bring; where no layout stands yet, every row counts.
    """
    levels = relabelled(study.table.column(column).as_levels(), study.relabel.get(column, {}))
    codes = levels.codes
    others = {name: kept for name, kept in study.keep.items() if name != column}
    try:
        out = [entry.row for entry in _readings(replace(study, keep=others)).left_out]
    except Refusal:
        out = []
    if out:
        codes = np.where(np.isin(study.table.file_rows, out), -1, codes)
    return dict(zip(levels.labels, counts(codes, len(levels.labels)).tolist(), strict=True))


def crossing(study: Study) -> Mapping[str, Any]:
    """Return the part of the object's design that needs no model: factors, levels, counts, balance, empty cells and the account of rows.

    Raises a Refusal where there is no layout to count in.
    """
    try:
        observed = lay_out(study)
    except Refusal:
        observed = _readings(study)
    design = design_over(observed, study.model == "full")
    return {
        "row_factor": observed.row.name,
        "column_factor": observed.column.name,
        "row_levels": list(observed.row.levels),
        "column_levels": list(observed.column.levels),
        "counts": design.cells.n.tolist(),
        "balanced": design.balanced,
        "empty_cells": [list(cell) for cell in design.empty_cells],
        "observations": observed.readings,
        "left_out": [{"row": entry.row, "why": entry.why} for entry in observed.left_out],
    }


def _readings(study: Study) -> Observations:
    """Return every usable row on the scale as measured: units and scales decide over nothing that is counted here."""
    return lay_out(replace(study, unit=None, scale="none"))
