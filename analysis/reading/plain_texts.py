"""How numbers that are plain but for a decimal comma, or for one unit behind them, become plain, a whole column at once."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import pyarrow as pa
import pyarrow.compute as pc

from analysis.reading import numerals, spaces

_SAMPLE = 100  # cells from which the unit is taken
_BEFORE_UNIT = "+-0123456789.,"


@dataclass(frozen=True, eq=False)
class Plain:
    """The cells of a column, plain wherever they could be made so; the others are of no use."""

    texts: pa.StringArray
    mark: str  # what the point stands for: "." as written, or ","
    unit: str  # taken off, "" where there was none
    with_unit: npt.NDArray[np.bool_] | None  # which cells had it


def of(texts: pa.StringArray) -> Plain:
    """Take the unit of the first numbers off, and turn commas into points where the column has no point."""
    ending, unit = _ending([text for text in texts.slice(0, _SAMPLE).to_pylist() if text])
    with_unit = None
    if ending:
        having = pc.ends_with(texts, ending)
        texts = pc.if_else(having, pc.utf8_slice_codeunits(texts, 0, stop=-len(ending)), texts)
        with_unit = having.to_numpy(zero_copy_only=False).astype(bool)
    mark = "," if _holds(texts, ",") and not _holds(texts, ".") else "."
    if mark == ",":
        texts = pc.replace_substring(texts, ",", ".", max_replacements=1)
    return Plain(texts, mark, unit, with_unit)


def _ending(sample: Sequence[str]) -> tuple[str, str]:
    """What stands behind the digits of most of these cells, and the unit that it is; "" where that is not one unit."""
    numbers = ((text, numerals.find(spaces.tidy(text))) for text in sample)
    first = next((text for text, numeral in numbers if numeral is not None and numeral.unit), "")
    ending = first.lstrip(_BEFORE_UNIT)
    numeral = numerals.find(spaces.tidy(f"1{ending}"))
    is_unit = ending and numeral is not None and numeral.unit and not numeral.footnote and not numeral.exponent
    if numeral is None or not is_unit or 2 * sum(text.endswith(ending) for text in sample) < len(sample):
        return "", ""
    return ending, numeral.unit


def _holds(texts: pa.StringArray, mark: str) -> bool:
    return bool(pc.any(pc.match_substring(texts, mark)).as_py())
