"""How a grid is turned into rows, one for each cell that holds an observation."""

from dataclasses import dataclass, replace

import numpy as np
import pyarrow as pa

from analysis.reading import footers
from analysis.reading.choices import Reading
from analysis.reading.filling import Fill
from analysis.reading.grid_signs import Signs
from analysis.reading.records import Body
from analysis.reading.words import counted, several
from analysis.table import Alternative, Codes, Decision, Floats

RESPONSE = "value"


@dataclass(frozen=True, eq=False)
class Grid:
    """A grid turned into rows: the row factor, a replicate where it has a column, the column factor, and the value."""

    names: tuple[str, ...]
    body: Body
    decisions: tuple[Decision, ...]


def find(signs: Signs, body: Body, fills: tuple[Fill, ...], itself: str, reading: Reading) -> Grid | None:
    """Turn a grid into rows; None where the table is none, or where the layout "rows" is asked for.

    itself is the layout, "rows" or "grid", in which the table is read where nothing is asked.
    """
    if (itself if reading.layout == "auto" else reading.layout) == "rows" or not signs.is_possible():
        return None
    return _rows(signs, body, fills, Alternative("rows", _asking("rows", itself, reading)))


def _asking(layout: str, itself: str, reading: Reading) -> Reading:
    return replace(reading, layout="auto" if layout == itself else layout)


def told_in_rows(signs: Signs, itself: str, reading: Reading) -> Decision:
    """Tell that a table was read in rows, and offer the grid where it could be one."""
    grid = Alternative("a grid", _asking("grid", itself, reading))
    if reading.layout == "grid":
        sentence = "A grid was asked for, but without levels across the top over columns of numbers: each row was read as one observation."
        return Decision("layout", sentence, (Alternative("rows", replace(reading, layout="auto")),))
    return Decision("layout", "Each row was read as one observation.", (grid,) if signs.is_possible() else (), ordinary=True)


def _rows(signs: Signs, body: Body, fills: tuple[Fill, ...], instead: Alternative) -> Grid:
    kept = [(place, level) for place, level, total in zip(signs.places, signs.levels, signs.totals, strict=True) if not total]
    places, levels = [place for place, _ in kept], [level for _, level in kept]
    filled = ~np.column_stack([footers.blank_cells(body.columns[place]) for place in places])
    down, across = np.nonzero(filled)
    labels = tuple(
        _taken(texts, down if fill is None else fill[down]) for texts, fill in list(zip(body.columns, fills, strict=True))[: signs.labels]
    )
    values = _taken(pa.concat_arrays([body.columns[place] for place in places]), across * body.rows.size + down)
    extra = tuple(signs.heading.cells[index] or f"column {index + 1}" for index in range(1, signs.labels))
    row, column = signs.factor_names
    columns = (*labels, _taken(pa.array(levels, pa.string()), across), values)
    nothing: tuple[None, ...] = (None,) * (len(columns) - 1)
    units = {body.units[place] for place in places}
    unit = units.pop() if len(units) == 1 else None
    turned = Body(columns, body.rows[down], (*nothing, _numbers(body, places, down, across)), (*nothing, unit))
    decisions = (_told(levels, row, column, down.size, instead), *_totals(signs))
    return Grid((row, *extra, column, RESPONSE), turned, decisions)


def _taken(texts: pa.StringArray, indices: Codes) -> pa.StringArray:
    return texts.take(pa.array(indices))


def _numbers(body: Body, places: list[int], down: Codes, across: Codes) -> Floats | None:
    """The values of number cells, in the order of the rows."""
    found = [body.numbers[place] for place in places]
    if all(numbers is None for numbers in found):
        return None
    blank = np.full(body.rows.size, np.nan)
    return np.column_stack([blank if numbers is None else numbers for numbers in found])[down, across]


def _told(levels: list[str], row: str, column: str, observations: int, instead: Alternative) -> Decision:
    across = several(list(dict.fromkeys(levels)), 8)
    sentence = (
        f"The table was read as a grid with “{row}” down the side and “{column}” across the top ({across}): "
        f"{counted(observations, 'observation')}, one for each filled cell."
    )
    return Decision("layout", sentence, (instead,))


def _totals(signs: Signs) -> tuple[Decision, ...]:
    totals = [level or low for level, low, total in zip(signs.levels, signs.under, signs.totals, strict=True) if total]
    return (Decision("total", f"{counted(len(totals), 'column')} of totals or means ({several(totals)}) passed over."),) if totals else ()
