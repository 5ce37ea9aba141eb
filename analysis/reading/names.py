"""How columns get their names: a spanning row spread over its columns, repeated and missing names told apart."""

from collections import Counter
from collections.abc import Sequence

from analysis.reading.records import Record, Span
from analysis.reading.words import several
from analysis.table import Decision


def spread(over: Record, under: Sequence[str], spans: Sequence[Span], force: bool = False) -> tuple[str, ...] | None:
    """Return a row above the names with each of its cells repeated over the columns it spans, or None where it is a title."""
    width = max(len(under), len(over.cells))
    merged = {
        span.first_column: span for span in spans if span.first_row <= over.row <= span.last_row and span.last_column > span.first_column
    }
    if not force and not _spans_columns(over, under, merged):
        return None
    cells = [*over.cells, *[""] * (width - len(over.cells))]
    for index in range(1, width):
        if not cells[index] and cells[index - 1] and not _ends(index, merged):
            cells[index] = cells[index - 1]
    return tuple(cells)


def _ends(index: int, merged: dict[int, Span]) -> bool:
    """Whether a merged range says that the name before this column does not reach it."""
    return bool(merged) and not any(first < index <= span.last_column for first, span in merged.items())


def _spans_columns(over: Record, under: Sequence[str], merged: dict[int, Span]) -> bool:
    """A title fills cells from the left without a gap; a spanning row starts later or leaves gaps between its cells."""
    filled = [index for index, cell in enumerate(over.cells) if cell]
    if any(span.first_column > 0 for span in merged.values()):
        return True
    if filled[0] > 0:
        return filled[-1] < len(under)
    gaps = filled != list(range(len(filled)))
    completes = len(filled) > 1 and any(index < len(under) and not under[index] for index in filled)
    return gaps or completes


def distinct(wanted: Sequence[str]) -> tuple[tuple[str, ...], tuple[Decision, ...]]:
    """Give every column a name of its own: “column 3” for a blank, “reading 2” for the second “reading”."""
    given = [name or f"column {index + 1}" for index, name in enumerate(wanted)]
    counts = Counter(given)
    free = dict.fromkeys(given, 2)  # the next number for each repeated name
    taken, names = set(given), list[str]()
    for name, first in zip(given, _firsts(given), strict=True):
        while not first and f"{name} {free[name]}" in taken:
            free[name] += 1
        names.append(name if first else f"{name} {free[name]}")
        taken.add(names[-1])
    decisions = []
    blank = [name for name, before in zip(names, wanted, strict=True) if not before]
    if blank:
        decisions.append(Decision("names", f"{'A column' if len(blank) == 1 else 'Columns'} without a name became {several(blank)}."))
    repeated = [name for name, count in counts.items() if count > 1]
    if repeated:
        decisions.append(Decision("names", f"{several(repeated)} names several columns; a number tells them apart."))
    return tuple(names), tuple(decisions)


def _firsts(names: Sequence[str]) -> list[bool]:
    """For each name, whether it stands there for the first time."""
    seen: set[str] = set()
    return [not (name in seen or seen.add(name)) for name in names]  # type: ignore[func-returns-value]
