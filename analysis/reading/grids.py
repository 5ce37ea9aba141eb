"""How a grid is turned into rows, one for each cell that holds an observation."""

from dataclasses import dataclass

import numpy as np
import pyarrow as pa

from analysis.reading import footers, spaces
from analysis.reading.filling import Fill
from analysis.reading.grid_signs import Signs
from analysis.reading.headers import Heading
from analysis.reading.records import Body
from analysis.reading.words import counted, several
from analysis.table import Codes, Decision, Floats

RESPONSE = "value"
_SAMPLE = 400  # rows that show what a column holds


@dataclass(frozen=True, eq=False)
class Grid:
    """A grid turned into rows: the row factor, a replicate where it has a column, the column factor, and the value."""

    names: tuple[str, ...]
    body: Body
    decisions: tuple[Decision, ...]


def find(heading: Heading, body: Body, fills: tuple[Fill, ...], layout: str) -> Grid | None:
    """Turn a grid into rows; None where the table is none, or where the layout "rows" is asked for."""
    if layout == "rows":
        return None
    columns = tuple(tuple(map(spaces.tidy, column.slice(0, _SAMPLE).to_pylist())) for column in body.columns)
    signs = Signs(heading, columns)
    if not (signs.is_likely() or (layout == "grid" and signs.is_possible())):
        return None
    return _rows(signs, body, fills)


def _rows(signs: Signs, body: Body, fills: tuple[Fill, ...]) -> Grid:
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
    return Grid((row, *extra, column, RESPONSE), turned, _decisions(signs, levels, row, column, down.size))


def _taken(texts: pa.StringArray, indices: Codes) -> pa.StringArray:
    return texts.take(pa.array(indices))


def _numbers(body: Body, places: list[int], down: Codes, across: Codes) -> Floats | None:
    """The values of number cells, in the order of the rows."""
    found = [body.numbers[place] for place in places]
    if all(numbers is None for numbers in found):
        return None
    blank = np.full(body.rows.size, np.nan)
    return np.column_stack([blank if numbers is None else numbers for numbers in found])[down, across]


def _decisions(signs: Signs, levels: list[str], row: str, column: str, observations: int) -> tuple[Decision, ...]:
    across = several(list(dict.fromkeys(levels)), 8)
    sentence = (
        f"The table was read as a grid with “{row}” down the side and “{column}” across the top ({across}): "
        f"{counted(observations, 'observation')}, one for each filled cell."
    )
    decisions = [Decision("layout", sentence, ("rows",))]
    totals = [level or low for level, low, total in zip(signs.levels, signs.under, signs.totals, strict=True) if total]
    if totals:
        decisions.append(Decision("total", f"{counted(len(totals), 'column')} of totals or means ({several(totals)}) passed over."))
    return tuple(decisions)
