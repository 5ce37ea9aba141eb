"""A response half read: its cells, the values found so far, and the texts that are not plain numbers."""

from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
import numpy.typing as npt
import pyarrow as pa

from analysis.reading import marks, missing
from analysis.reading.numerals import Shape
from analysis.reading.odd_cells import Odd
from analysis.reading.plain_texts import Plain
from analysis.table import Floats, Rows


@dataclass(frozen=True, eq=False)
class Written:
    """The cells of a column on their way to being measurements; one entry for each row of the table."""

    name: str
    texts: pa.StringArray
    numbers: Floats | None
    rows: Rows
    unit: str | None
    known: marks.Known


@dataclass(eq=False)
class HalfRead:
    """A column half read: values so far and why others are missing."""

    written: Written
    plain: Plain
    is_plain: npt.NDArray[np.bool_]
    values: Floats
    odd: Odd
    shapes: frozenset[Shape] = frozenset()  # of the numbers, as far as they were looked at
    decided: marks.Marks = field(default_factory=marks.Marks)
    grouped: bool = False  # whether plain cells turned out to hold a thousands mark (1.234)

    @cached_property
    def is_number(self) -> npt.NDArray[np.bool_]:
        """Which of the odd texts are numbers after all."""
        return self.odd.mask([numeral is not None and not numeral.bound for numeral in self.odd.numerals])

    @cached_property
    def plain_with_unit(self) -> npt.NDArray[np.intp]:
        """Rows of the table with a plain number whose unit was taken off."""
        having = self.plain.with_unit
        return np.empty(0, dtype=np.intp) if having is None else np.flatnonzero(having & self.is_plain)

    @cached_property
    def is_limit(self) -> npt.NDArray[np.bool_]:
        """Which of the odd texts name a detection limit."""
        bounds = [numeral is not None and bool(numeral.bound) for numeral in self.odd.numerals]
        return self.odd.mask([bound or missing.is_beyond_limit(text) for bound, text in zip(bounds, self.odd.texts, strict=True)])

    @cached_property
    def is_text(self) -> npt.NDArray[np.bool_]:
        """Which of the odd texts are neither numbers, limits, missing words nor infinite."""
        known = [not text or missing.is_missing(text) or missing.is_infinite(text) for text in self.odd.texts]
        return ~(self.odd.mask(known) | self.is_number | self.is_limit)
