"""Doubts about independence: residuals that follow an order, a block or a column beside, and rows that look like readings of one unit."""

import math

import numpy as np
from scipy import stats

from analysis import tails
from analysis.cells import Matrix, Vector
from analysis.coding import sum_to_zero
from analysis.doubting.beside import Beside
from analysis.doubting.signs import AMBER, NOTE, Doubt, Left, Signs
from analysis.doubting.spreads import STRICT, Spread
from analysis.rounding import p_value, percent

ENOUGH = 10  # observations from which a drift can be seen
LARGEST_GROUP = 12  # readings of one unit that are looked for
ALIKE = 0.001  # p below which neighbours are more alike than chance makes them


def drift(signs: Signs, _: Spread | None) -> Doubt | None:
    """Doubt independent residuals where they follow the rows of the file or a column that speaks of order, time or place."""
    if signs.whole.n < ENOUGH:
        return None
    orders = {"the rows of the file": signs.file_rows.astype(float)}
    orders |= {f"“{b.name}”": b.amounts for b in signs.beside if b.amounts is not None and np.isfinite(b.amounts).all()}
    found = {name: _along(signs, stats.rankdata(place)) for name, place in orders.items() if np.ptp(place) > 0}
    if not found:
        return None
    name = min(found, key=lambda name: found[name][0])
    p, slope = found[name]
    if p * len(found) >= STRICT:
        return None
    told = (
        f"Residuals {'rise' if slope > 0 else 'fall'} along {name}" if slope else f"Neighbours along {name} have residuals of the same sign"
    )
    return Doubt(
        "order",
        AMBER,
        f"{told} ({p_value(p)}): something drifted while it was measured, and what was measured late is compared with what was measured "
        "early. If that order is the order of measuring, find out what drifted, and use run, day or tray as a block.",
    )


def _along(signs: Signs, rank: Vector) -> tuple[float, float]:
    """Return the smaller p-value of a trend along a rank and of neighbours that are alike, and the trend's direction (0: neighbours)."""
    trend = signs.added_p(rank[:, None])
    left = signs.rest
    place = rank[signs.in_rest]
    by_place = left.residual[np.argsort(place, kind="stable")]
    alike = _serial(by_place) if not _grouped(left, place) else 1.0
    slope = float(left.residual @ (place - place.mean()))
    if trend is not None and 2 * trend <= 2 * alike:
        return min(1.0, 2 * trend), math.copysign(1.0, slope)
    return min(1.0, 2 * alike), 0.0


def _serial(residual: Vector) -> float:
    """Return the one-sided p-value of neighbours that are alike. Source: von Neumann (1941), Ann. Math. Stat. 12, 367-395."""
    n, total = residual.size, float(residual @ residual)
    if n < 20 or total == 0:
        return 1.0
    ratio = float(np.sum(np.diff(residual) ** 2)) / total
    return float(stats.norm.sf((2 - ratio) / (2 * math.sqrt((n - 2) / (n * n - 1)))))


def _grouped(left: Left, place: Vector) -> bool:
    """Return whether the rows of a cell mostly stand one after another, so that neighbours say nothing of the order."""
    cells = left.cell[np.argsort(place, kind="stable")]
    return bool(np.mean(cells[1:] == cells[:-1]) > 0.5)


def block_pattern(signs: Signs, _: Spread | None) -> Doubt | None:
    """Doubt blocks that only shift the level, or a column beside the factors whose levels shift it."""
    layout = signs.layout
    strata, observed = layout.strata, layout.observed
    if strata.has_blocks and observed.block is not None:
        block = sum_to_zero(observed.block.codes, observed.block.size)
        for factor in (observed.row, observed.column):
            p = signs.added_p(_products(block, sum_to_zero(factor.codes, factor.size)))
            if p is not None and 2 * p < STRICT:
                return _block_changes(observed.block.word, factor.word, p)
    found = [(p, one) for one in signs.beside if (p := _of_levels(signs, one)) is not None]
    if not found:
        return None
    p, one = min(found, key=lambda pair: pair[0])
    if p * len(found) >= STRICT:
        return None
    return Doubt(
        "block_pattern",
        AMBER,
        f"“{one.name}” takes no part in the analysis, but the residuals differ between its levels ({p_value(p)}). What differs between "
        "them counts as chance so far, and may be shared unevenly between the cells: take it as the block and compare.",
    )


def _block_changes(block: str, factor: str, p: float) -> Doubt:
    return Doubt(
        "block_pattern",
        AMBER,
        f"What {factor} does differs from {block} to {block} ({p_value(p)}), while the model takes a block only to shift the level. The "
        "answers are averages over these blocks: look at the rows without each block before carrying them over to others.",
    )


def _products(one: Matrix, other: Matrix) -> Matrix:
    return np.asarray((one[:, :, None] * other[:, None, :]).reshape(len(one), -1))


def _of_levels(signs: Signs, one: Beside) -> float | None:
    if one.amounts is not None or not 2 <= one.levels <= signs.whole.n // 3 or (one.codes < 0).any() or _inside_cells(signs, one):
        return None
    return signs.added_p(sum_to_zero(one.codes.astype(np.intp), one.levels))


def _inside_cells(signs: Signs, one: Beside) -> bool:
    """Return whether every level of a column lies in one cell, as the name of a unit does."""
    pairs = np.unique(np.column_stack([one.codes, signs.whole.cell]), axis=0)
    return len(pairs) == np.unique(one.codes).size


def alike_readings(signs: Signs, _: Spread | None) -> Doubt | None:
    """Doubt that rows are independent units where groups of them are more alike than the units of a cell should be."""
    return _named_units(signs) or _neighbours(signs)


def _named_units(signs: Signs) -> Doubt | None:
    for one in signs.beside:
        if one.amounts is not None or (one.codes < 0).any() or not _inside_cells(signs, one) or not 2 <= one.levels < signs.whole.n:
            continue
        if one.levels <= signs.whole.counts.size:  # one label a cell: that is the cell itself
            continue
        p = signs.added_p(sum_to_zero(one.codes.astype(np.intp), one.levels))
        alike = p is not None and p < STRICT
        seen = f", and readings of one are more alike than others ({p_value(p)})" if alike else ""
        return Doubt(
            "unit",
            AMBER if alike else NOTE,
            f"“{one.name}” names {one.levels} units for {signs.whole.n} rows{seen}. If these are repeated readings of one unit, counting "
            "them as independent makes chance look smaller than it is: name it as the unit at Lay out, and readings are averaged first.",
        )
    return None


def _neighbours(signs: Signs) -> Doubt | None:
    """Look for groups of consecutive rows of one cell that are alike."""
    left = signs.whole
    order = np.lexsort((signs.file_rows, left.cell))
    sizes = [m for m in range(2, LARGEST_GROUP + 1) if (left.counts % m == 0).all() and (left.counts > m).all()]
    found = {m: _alike(left.residual[order], left.counts, m) for m in sizes if _adjacent(signs.file_rows[order], m)}
    if not found:
        return None
    m = min(found, key=lambda size: found[size])
    p = min(1.0, found[m] * len(found))
    if p >= ALIKE:
        return None
    share = _shared(left.residual[order], m)
    return Doubt(
        "unit",
        AMBER,
        f"Rows look like {m} readings of one unit each: {m} rows that follow one another are more alike than the rest of their cell "
        f"({p_value(p)}; they share {percent(share)} of the residual variation). If so, chance looks smaller than it is: add "
        "a column that names the unit and set it at Lay out, so that readings are averaged first.",
    )


def _adjacent(rows: np.ndarray, m: int) -> bool:
    return bool(np.all(np.diff(rows.reshape(-1, m), axis=1) == 1))


def _alike(residual: Vector, counts: Vector, m: int) -> float:
    """Return the p-value of the F test between consecutive groups of m inside cells."""
    groups = residual.reshape(-1, m)
    between = float(m * np.sum(groups.mean(axis=1) ** 2))
    within = float(np.sum((groups - groups.mean(axis=1, keepdims=True)) ** 2))
    df1, df2 = len(groups) - counts.size, groups.size - len(groups)
    return float(tails.f_upper(between / df1 / (within / df2), df1, df2)) if within > 0 and df1 > 0 else 1.0


def _shared(residual: Vector, m: int) -> float:
    groups = residual.reshape(-1, m)
    within = float(groups.var(axis=1, ddof=1).mean())
    between = max(0.0, float(np.mean(groups.mean(axis=1) ** 2)) - within / m)
    return between / (between + within)
