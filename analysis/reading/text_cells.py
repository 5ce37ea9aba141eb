"""A column whose cells came as text, or as the values of a workbook: how they are kept until a role is given."""

from dataclasses import dataclass
from functools import cached_property
from hashlib import sha256

import numpy as np
import numpy.typing as npt
import pyarrow as pa

from analysis.reading import missing, numerals, responses, spaces, text_levels
from analysis.reading.half_read import Written
from analysis.reading.marks import NOTHING_KNOWN, Known
from analysis.table import Floats, Levels, Response, Rows

_SAMPLE = 2000  # cells looked at to tell whether a column holds numbers


@dataclass(frozen=True, eq=False)
class TextCells:
    """One column of text; every array has one entry for each row of the table."""

    name: str
    texts: pa.StringArray  # as in the file, "" where blank
    rows: Rows  # numbers of the rows in the file
    numbers: Floats | None = None  # the values of number cells in a workbook, NaN for its other cells
    unit: str | None = None  # from a row of units, or from the percent format of a workbook
    known: Known = NOTHING_KNOWN
    filled_from: npt.NDArray[np.intp] | None = None  # for levels: the row of the table whose cell stands for this one

    @cached_property
    def looks_numeric(self) -> bool:
        """Whether most of the filled cells, of those looked at, are numbers."""
        filled = [text for text in map(spaces.tidy, self.texts.slice(0, _SAMPLE).to_pylist()) if text and not missing.is_missing(text)]
        return 2 * sum(numerals.find(text) is not None for text in filled) > len(filled)

    def response(self) -> Response:
        """Read the cells as measurements."""
        return responses.read(Written(self.name, self.texts, self.numbers, self.rows, self.unit, self.known))

    def levels(self) -> Levels:
        """Read the cells as levels, filled down where the layout says so."""
        texts = self.texts if self.filled_from is None else self.texts.take(pa.array(self.filled_from))
        return text_levels.read(self.name, texts, self.known)

    def text(self, start: int, stop: int) -> list[str]:
        """The cells of these rows, tidied."""
        return [spaces.tidy(text) for text in self.texts.slice(start, stop - start).to_pylist()]

    def digest(self) -> bytes:
        """A digest of the text of every cell."""
        seal = sha256()
        for buffer in pa.concat_arrays([self.texts]).buffers():
            seal.update(b"" if buffer is None else memoryview(buffer))
        return seal.digest()
