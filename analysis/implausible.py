"""Which values deserve a second look before anything is computed; none is ever removed for it."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from analysis.layout import lay_out
from analysis.observations import Observations
from analysis.refusals import rows_told
from analysis.rounding import shortest
from analysis.study import Study

TIMES = 8.0  # from its cell mates: a slipped decimal mark makes ten, and replicates vary
ALIKE = 3.0  # the mates lie within this factor of each other, or nothing can be said
FEW_NEGATIVE = 0.05  # share of values below zero that makes them odd ones out
FEWEST = 8  # values before a sign is told as odd
MOST = 50  # told; with more, the column is not what it was taken for
Values = NDArray[np.float64]


@dataclass(frozen=True)
class Suspicion:
    """Rows with a value worth a look, and why."""

    kind: str  # "ten_times", "identical" or "negative"
    rows: tuple[int, ...]  # their numbers in the file
    sentence: str


def suspicions(study: Study) -> tuple[Suspicion, ...]:
    """Return what is worth a look among the values analysed, as measured and before readings are averaged, at most `MOST`.

    Raises a Refusal where the study cannot be laid out.
    """
    observed = lay_out(replace(study, unit=None, scale="none"))
    found = [*_negative(observed)]
    fine = 2 * np.unique(observed.values).size >= observed.size
    for cell, places in _cells(observed):
        found += [*_ten_times(observed, cell, places), *(_identical(observed, cell, places) if fine else ())]
        if len(found) >= MOST:
            break
    return tuple(found[:MOST])


def _cells(observed: Observations) -> Iterator[tuple[str, NDArray[np.intp]]]:
    """Yield each cell with three observations or more: its name, and the places of its observations by rising value."""
    cell = observed.row.codes.astype(np.intp) * observed.column.size + observed.column.codes
    order = np.lexsort((observed.values, cell))
    for places in np.split(order, np.flatnonzero(np.diff(cell[order])) + 1):
        if places.size >= 3:
            row, column = divmod(int(cell[places[0]]), observed.column.size)
            yield f"{observed.row.levels[row]} with {observed.column.levels[column]}", places


def _rows(observed: Observations, places: Sequence[int] | NDArray[np.intp]) -> tuple[int, ...]:
    return tuple(sorted(int(observed.file_rows[place]) for place in places))


def _ten_times(observed: Observations, cell: str, places: NDArray[np.intp]) -> Iterator[Suspicion]:
    """Yield the largest or smallest of a cell where it is many times its mates, or a small part of them."""
    values = observed.values[places]
    if values[0] <= 0:
        return
    for odd, mates in ((-1, values[:-1]), (0, values[1:])):
        ratio = max(values[odd] / mates[-1], mates[0] / values[odd])
        if ratio >= TIMES and mates[-1] <= ALIKE * mates[0]:
            row = int(observed.file_rows[places[odd]])
            yield Suspicion(
                "ten_times", (row,),
                f"Row {row}: {shortest(values[odd])}, while the others of {cell} lie between {shortest(mates[0])} and "
                f"{shortest(mates[-1])}. Is the decimal mark where it belongs?",
            )  # fmt: skip


def _identical(observed: Observations, cell: str, places: NDArray[np.intp]) -> Iterator[Suspicion]:
    """Yield a cell whose replicates are all the same, which is odd where values are fine."""
    values = observed.values[places]
    if values[0] == values[-1]:
        rows = _rows(observed, places)
        yield Suspicion(
            "identical", rows, f"All {places.size} values of {cell} are {shortest(values[0])} ({rows_told(rows)}). Was one value copied?"
        )


def _negative(observed: Observations) -> Iterator[Suspicion]:
    """Yield the few values below zero where all else is positive."""
    places = np.flatnonzero(observed.values < 0)
    if observed.size < FEWEST or not 0 < places.size <= max(1, FEW_NEGATIVE * observed.size) or (observed.values == 0).any():
        return
    rows = _rows(observed, places)
    one = places.size == 1
    what = f"{shortest(observed.values[places[0]])} is the only value below zero" if one else f"{places.size} values are below zero"
    yield Suspicion("negative", rows, f"{rows_told(rows).capitalize()}: {what} of {observed.size}. Is the sign right?")
