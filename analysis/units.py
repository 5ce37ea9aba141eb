"""How repeated readings of one experimental unit become one observation."""

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from analysis.observations import Observations
from analysis.refusals import UnitInSeveralCells
from analysis.table import Levels


def averaged_to_units(observed: Observations, name: str, units: Levels, rows: slice | NDArray[np.intp]) -> Observations:
    """Return the observations with the readings of each unit averaged, as measured and before any change of scale.

    `units` holds the unit of every table row and `rows` the table rows analysed. A label that stands in several cells counts
    as several units when every cell uses the same labels; otherwise UnitInSeveralCells is raised. Source: common practice;
    Hurlbert (1984) on why readings are not replicates.
    """
    label = units.codes[rows].astype(np.intp)
    cell = observed.row.codes.astype(np.intp) * observed.column.size + observed.column.codes
    reused = _labels_reused(observed, name, units, label, cell)
    stratum = cell if observed.block is None else cell * observed.block.size + observed.block.codes
    _, first, unit, readings = np.unique(stratum * len(units.labels) + label, return_index=True, return_inverse=True, return_counts=True)
    order = np.argsort(first, kind="stable")  # units in the order in which the file first shows them
    means = np.bincount(unit, weights=observed.offsets) / readings
    chosen = first[order]
    notes = (*observed.notes, *_notes(name, readings, reused))
    return replace(
        observed,
        row=observed.row.at(chosen),
        column=observed.column.at(chosen),
        block=None if observed.block is None else observed.block.at(chosen),
        offsets=means[order],
        file_rows=observed.file_rows[chosen],
        notes=notes,
    )


def _labels_reused(observed: Observations, name: str, units: Levels, label: NDArray[np.intp], cell: NDArray[np.intp]) -> bool:
    """Return whether the cells share their unit labels; raise UnitInSeveralCells where only some do."""
    used = np.zeros((observed.row.size * observed.column.size, len(units.labels)), dtype=bool)
    used[cell, label] = True
    cells_of_label = used.sum(axis=0)
    if (cells_of_label <= 1).all():
        return False
    filled = used[used.any(axis=1)]
    if (filled == filled[0]).all():
        return True
    several = int(np.flatnonzero(cells_of_label > 1)[0])
    rows = tuple(int(row) for row in observed.file_rows[label == several])
    raise UnitInSeveralCells(name, units.labels[several], rows)


def _notes(name: str, readings: NDArray[np.intp], reused: bool) -> list[str]:
    notes = [f"{int(readings.sum())} readings were averaged to {readings.size} units of “{name}” first: the unit is the observation."]
    if readings.min() != readings.max():
        notes.append(
            f"The units of “{name}” have between {readings.min()} and {readings.max()} readings; each unit counts once all the same."
        )
    if reused:
        notes.append(f"Every cell uses the same labels in “{name}”, so a label counts as another unit in each cell.")
    return notes
