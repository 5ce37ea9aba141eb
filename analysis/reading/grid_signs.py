"""By which signs a table is a grid: one factor down the side, the other across the top, and values inside."""

import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from analysis.reading import footers, level_order, missing, numerals, spaces
from analysis.reading.headers import Heading
from analysis.reading.records import Body
from analysis.reading.words import MEASURED, NUMBERED_THING

_CORNER = re.compile(r"\s*(?P<row>[^\\/]*?)\s*[\\/]\s*(?P<column>[^\\/]*?)\s*")
_REPEAT = re.compile(
    r"(?:rep|reps|replicates?|replication|repeat|plot|pot|sample|obs|observation|run|reading|r|n|no|nr|trial|block|plant)\.?"
    r"[ _-]?#?[0-9]{1,3}",
    re.IGNORECASE,
)
_COUNT = re.compile(r"#?[0-9]{1,2}|[a-h]", re.IGNORECASE)
_FEW = 6  # different whole numbers up to which a column looks like coded levels
SAMPLE = 400  # rows that show what a column holds
_APART = 5.0  # times by which the medians of value columns may differ and still measure the same thing


@dataclass(frozen=True, eq=False)
class Signs:
    """What the header and the first rows of a table say about its layout."""

    heading: Heading
    columns: tuple[tuple[str, ...], ...]  # the first cells of each column, tidy

    @cached_property
    def labels(self) -> int:
        """How many leading columns hold labels: words, or a replicate number beside them."""
        texts = 0
        while texts < len(self.columns) and not numeric(self.columns[texts]):
            texts += 1
        if texts == 0:
            return 1
        numbered = texts < len(self.columns) and NUMBERED_THING.fullmatch(self.heading.cells[texts])
        return texts + 1 if texts == 1 and numbered else texts

    @cached_property
    def places(self) -> tuple[int, ...]:
        """The columns behind the labels."""
        return tuple(range(self.labels, len(self.columns)))

    @cached_property
    def over(self) -> tuple[str, ...]:
        """The spanning names over the value columns, blank where there are none."""
        spanning = self.heading.spanning
        return tuple(spanning[place] if spanning else "" for place in self.places)

    @cached_property
    def under(self) -> tuple[str, ...]:
        """The headings of the value columns; a blank one repeats the heading to its left."""
        found: list[str] = []
        for place in self.places:
            cell = self.heading.cells[place]
            found.append(cell if cell or not found or self.heading.spanning else found[-1])
        return tuple(found)

    @cached_property
    def spans_repeats(self) -> bool:
        """Whether levels span repeated readings (rep 1, rep 2) in the row under them."""
        groups = {name: [low for high, low in zip(self.over, self.under, strict=True) if high == name] for name in self.over}
        if len(groups) < 2 or "" in groups:
            return False
        repeats = all(is_repeat(cell) or not cell for cell in self.under)
        return repeats and (len(self.under) > len(groups) or all(_REPEAT.fullmatch(cell) for cell in self.under))

    @cached_property
    def spanned_by_name(self) -> bool:
        """Whether one name spans all value columns: the column factor's."""
        return len(self.places) > 1 and len(set(self.over)) == 1 and bool(self.over[0]) and len(set(self.under)) > 1

    @cached_property
    def levels(self) -> tuple[str, ...]:
        """The level of the column factor over each value column."""
        return self.over if self.spans_repeats else self.under

    @cached_property
    def totals(self) -> tuple[bool, ...]:
        """Which value columns hold totals or means of the others."""
        return tuple(footers.is_total(level) or footers.is_total(low) for level, low in zip(self.levels, self.under, strict=True))

    @property
    def corner(self) -> tuple[str, str]:
        """The cells where the two sets of headings meet: of the spanning row, and of the header."""
        return (self.heading.spanning or ("",))[0], self.heading.cells[0]

    @cached_property
    def factor_names(self) -> tuple[str, str]:
        """The names of the row factor and the column factor."""
        upper, lower = self.corner
        for cell in (lower, upper):
            match = _CORNER.fullmatch(cell)
            if match:
                return match["row"] or "row", match["column"] or "column"
        column = self.over[0] if self.spanned_by_name and not self.spans_repeats else upper if lower else ""
        return lower or upper or "row", column if column and column != lower else "column"

    def is_possible(self) -> bool:
        """Whether there are labels, at least two levels across the top, and numbers under all of them."""
        kept = [level for level, total in zip(self.levels, self.totals, strict=True) if not total]
        return len(set(kept)) > 1 and all(kept) and all(numeric(self.columns[place]) for place in self.places)

    def is_likely(self) -> bool:
        """Whether the table shows a sure sign of a grid, or looks like one in every respect."""
        single = self.labels == 1 or (self.labels == 2 and NUMBERED_THING.fullmatch(self.heading.cells[1]) is not None)
        if not single or not self.is_possible():
            return False
        if len(set(self.over) - {""}) > 1 and not self.spans_repeats:
            return False  # several measurements or levels under each of several others: names of two rows
        kept = [level for level, total in zip(self.levels, self.totals, strict=True) if not total]
        if self.spans_repeats or self.spanned_by_name or any(_CORNER.fullmatch(cell) for cell in self.corner):
            return True
        if all(is_repeat(level) and not numerals.find(level) for level in kept):
            return False
        return self._has_level_headings(kept) or self._looks_alike(kept)

    def _has_level_headings(self, kept: Sequence[str]) -> bool:
        """Whether the headings are levels by their form: repeated, numbers, ordered words, or under a blank corner."""
        words = not numeric(self.columns[0])
        counts = Counter(kept)
        if min(counts.values()) > 1 and words:
            return True
        if all(numerals.find(level) for level in kept):
            return True
        if words and (level_order.by_words(kept) is not None or _one_stem(kept)):
            return True
        return not self.heading.cells[0] and not self._is_index()

    def _is_index(self) -> bool:
        """Whether a first column without a name merely counts the rows."""
        cells = [numerals.find(cell) for cell in self.columns[0] if cell]
        if not all(cell is not None and cell.body.isdigit() for cell in cells):
            return False
        numbers = [int(cell.body) for cell in cells if cell is not None]
        return numbers == list(range(len(numbers))) or (len(numbers) > 8 and numbers == list(range(1, len(numbers) + 1)))

    def _looks_alike(self, kept: Sequence[str]) -> bool:
        """Without a sure sign: labels of words, headings that name no measurement, and columns that measure the same thing."""
        if numeric(self.columns[0]) or any(MEASURED.search(level) or NUMBERED_THING.fullmatch(level) for level in kept):
            return False
        if len(set(self.columns[0])) < 2 or any("(" in level or "[" in level for level in kept):
            return False
        values = [values_of(self.columns[place]) for place, total in zip(self.places, self.totals, strict=True) if not total]
        if any(_looks_coded(column) for column in values):
            return False
        medians = [float(np.median(np.abs(column))) for column in values if column.size]
        return len(medians) > 1 and min(medians) > 0 and max(medians) <= _APART * min(medians)


def of(heading: Heading, body: Body) -> Signs:
    """The signs of the first rows of a table."""
    return Signs(heading, tuple(tuple(map(spaces.tidy, column.slice(0, SAMPLE).to_pylist())) for column in body.columns))


def is_repeat(cell: str) -> bool:
    """Whether a heading counts repeated readings: rep 2, plot 3, 2, b."""
    return _REPEAT.fullmatch(cell) is not None or _COUNT.fullmatch(cell) is not None


def _one_stem(levels: Sequence[str]) -> bool:
    """Whether headings are one word with different numbers (T1, T2), other than counted readings."""
    stems = {re.sub(r"[0-9]+(?:[.,][0-9]+)?", "#", level.casefold()) for level in levels}
    return len(stems) == 1 and "#" in next(iter(stems)) and not all(_REPEAT.fullmatch(level) for level in levels)


def numeric(cells: Sequence[str]) -> bool:
    """Whether most of the filled cells are numbers; a column without any filled cell counts as one of values."""
    filled = [cell for cell in cells if cell and not missing.is_missing(cell) and not missing.is_beyond_limit(cell)]
    return 2 * sum(numerals.find(cell) is not None for cell in filled) >= len(filled)


def values_of(cells: Sequence[str]) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
    """The numbers among the first cells of a column."""
    found = [numerals.find(cell) for cell in cells]
    return np.array([float(numeral.plain("decimal", "decimal")) for numeral in found if numeral is not None], dtype=np.float64)


def _looks_coded(values: np.ndarray[tuple[int], np.dtype[np.float64]]) -> bool:
    """Whether a few whole numbers recur, as codes of a factor do."""
    different = np.unique(values)
    return bool(values.size >= 4 and different.size <= min(_FEW, values.size / 2) and (np.mod(different, 1) == 0).all())
