"""How a study becomes observations: which rows are analysed, which are left out and why."""

from collections.abc import Mapping
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from analysis.amounts import spacing
from analysis.observations import Factor, Observations
from analysis.reading import limits
from analysis.refusals import LevelForEveryRow, NoUsableRow, SpanOutOfReach, TooManyCells, UnknownLevel
from analysis.relabelling import relabelled
from analysis.scales import NAMED, scale_named, transformed
from analysis.study import Study
from analysis.table import LeftOut, Levels, Response, counts
from analysis.units import averaged_to_units

NOT_KEPT = "which is not among the levels kept"
SMALLEST_SPAN, LARGEST_SPAN = 1e-70, 1e70  # the fourth powers of what lies between stay within double precision
Chosen = slice | NDArray[np.intp]  # the table rows analysed; a slice takes all of them without a copy
Kept = Mapping[str, tuple[int, ...] | None]


def lay_out(study: Study) -> Observations:
    """Return the observations of a study, every row of the table either among them or left out with its reason.

    Raises a Refusal where a role is open, a level is unknown, no row is usable, a factor has a level for every row, the
    scale cannot take a value, or a unit lies in several cells.
    """
    study.require_roles()
    table = study.table
    response = table.column(str(study.response)).as_response()
    parts = {name: relabelled(table.column(name).as_levels(), study.relabel.get(name, {})) for name in _level_columns(study)}
    kept = {name: _kept(name, levels, study.keep.get(name)) for name, levels in parts.items()}
    usable, reasons = _usable(study, response, parts, kept)
    if not usable.any():
        raise NoUsableRow(str(study.response), table.rows)
    rows: Chosen = slice(None) if usable.all() else np.flatnonzero(usable)
    amounts = {name: spacing(table.column(name), parts[name], study.amounts) for name in _role_columns(study)}
    factors = {name: _factor(name, replace(parts[name], amounts=amounts[name]), kept[name], rows) for name in _role_columns(study)}
    _refuse_labels(factors, study)
    notes = (*table.notes, *response.notes, *(n for levels in parts.values() for n in levels.notes), *_dropped(study, parts, factors))
    left_out = tuple(sorted((*table.left_out, *reasons), key=lambda entry: entry.row))
    observed = _observed(study, response, factors, rows)
    observed = replace(observed, left_out=left_out, notes=notes)
    if study.unit is not None:
        observed = averaged_to_units(observed, study.unit, parts[study.unit], rows)
    return _on_scale(observed, study.scale)


def _role_columns(study: Study) -> tuple[str, ...]:
    return tuple(name for name in (study.row_factor, study.column_factor, study.block) if name is not None)


def _level_columns(study: Study) -> tuple[str, ...]:
    """Columns whose levels decide which rows are used: the roles, the unit, and any column with levels to keep."""
    names = [*_role_columns(study), *([study.unit] if study.unit else []), *study.keep]
    return tuple(dict.fromkeys(names))


def _kept(name: str, levels: Levels, asked: object) -> tuple[int, ...] | None:
    """Return the codes of the levels to keep, in the order asked for, or None to keep all."""
    if asked is None:
        return None
    place = {label: code for code, label in enumerate(levels.labels)}
    wanted = tuple(str(level) for level in asked) if isinstance(asked, tuple) else (str(asked),)
    for level in wanted:
        if level not in place:
            raise UnknownLevel(name, level, levels.labels)
    return tuple(place[level] for level in wanted)


def _usable(study: Study, response: Response, parts: Mapping[str, Levels], kept: Kept) -> tuple[NDArray[np.bool_], tuple[LeftOut, ...]]:
    """Return which table rows are analysed, and the first reason that applies to each that is not."""
    table = study.table
    usable = np.isfinite(response.values)
    reasons = list(response.missing)
    if study.set_aside:
        aside = usable & np.isin(table.file_rows, list(study.set_aside))
        reasons += [LeftOut(int(row), f"set aside: {study.set_aside[int(row)]}") for row in table.file_rows[aside]]
        usable &= ~aside
    for name, levels in parts.items():
        empty = usable & (levels.codes < 0)
        reasons += [LeftOut(int(table.file_rows[i]), f"“{name}” is empty") for i in np.flatnonzero(empty)]
        usable &= ~empty
        codes = kept[name]
        if codes is not None:
            other = usable & ~np.isin(levels.codes, codes)
            reasons += [LeftOut(int(table.file_rows[i]), _not_kept(name, levels, int(i))) for i in np.flatnonzero(other)]
            usable &= ~other
    return usable, tuple(reasons)


def _not_kept(name: str, levels: Levels, i: int) -> str:
    return f"“{name}” is “{levels.labels[levels.codes[i]]}”, {NOT_KEPT}"


def _factor(name: str, levels: Levels, kept: tuple[int, ...] | None, rows: Chosen) -> Factor:
    """Return the factor over the usable rows, holding only levels that still occur, in the order kept."""
    codes = levels.codes[rows]
    present = counts(codes, len(levels.labels)) > 0
    order = [code for code in (range(len(levels.labels)) if kept is None else kept) if present[code]]
    if order != list(range(len(levels.labels))):
        place = np.full(len(levels.labels), -1, dtype=codes.dtype)
        place[order] = np.arange(len(order))
        codes = place[codes]
    amounts = None if levels.amounts is None else tuple(levels.amounts[code] for code in order)
    return Factor(name, tuple(levels.labels[code] for code in order), codes, amounts)


def _refuse_labels(factors: Mapping[str, Factor], study: Study) -> None:
    """Raise for a factor that has a level for every row, or a layout with more cells than can be handled."""
    row, column = (factors[name] for name in study.factors)
    n = row.codes.size
    for factor in (row, column):
        if n > 2 and factor.size == n:
            raise LevelForEveryRow(factor.name, factor.size)
    if row.size * column.size > limits.COMBINATIONS:
        raise TooManyCells(row.name, row.size, column.name, column.size, limits.COMBINATIONS)


def _dropped(study: Study, parts: Mapping[str, Levels], factors: Mapping[str, Factor]) -> tuple[str, ...]:
    """Name the levels that no usable row holds."""
    notes = []
    for name, factor in factors.items():
        gone = [level for level in study.keep.get(name, parts[name].labels) if level not in factor.levels]
        if gone:
            told = ", ".join(f"“{level}”" for level in gone)
            notes.append(f"No usable row holds {told} of “{name}”, so the layout goes without.")
    return tuple(notes)


def _observed(study: Study, response: Response, factors: Mapping[str, Factor], rows: Chosen) -> Observations:
    """Return the usable values about a pivot, still on the scale as measured."""
    offsets, pivot = response.offsets[rows], response.pivot
    if pivot == 0.0:
        # Centre before you square: where the spread is small against the magnitude, squares of the values themselves lose it.
        pivot = _pivot(offsets)
        offsets = offsets - pivot if pivot else offsets
    return Observations(
        response=str(study.response),
        response_unit=response.unit,
        row=factors[study.factors[0]],
        column=factors[study.factors[1]],
        block=factors[study.block] if study.block is not None else None,
        scale=NAMED["none"],
        pivot=pivot,
        offsets=offsets,
        file_rows=study.table.file_rows[rows],
        readings=int(offsets.size),
        left_out=(),
        notes=(),
    )


def _pivot(values: NDArray[np.float64]) -> float:
    """Return a value to subtract before squaring where the spread is small against the magnitude, else 0."""
    low, high = float(values.min()), float(values.max())
    return low if max(abs(low), abs(high)) > 100 * (high - low) > 0 else 0.0


def _on_scale(observed: Observations, choice: str) -> Observations:
    scale = scale_named(choice)
    if not scale.is_identity:
        on_scale = transformed(scale, observed.values, observed.response, observed.file_rows)
        pivot = float(on_scale[0])
        observed = replace(observed, scale=scale, pivot=pivot, offsets=on_scale - pivot)
    span = float(np.ptp(observed.offsets))
    if span != 0 and not SMALLEST_SPAN < span < LARGEST_SPAN:
        raise SpanOutOfReach(observed.response, scale.name)
    return observed
