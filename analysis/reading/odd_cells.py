"""The cells of a response that are not plain numbers: each different text once, long runs of alike numbers by their pattern."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt
import pyarrow as pa
import pyarrow.compute as pc

from analysis.reading import numerals, spaces
from analysis.reading.marks import Marks
from analysis.reading.numerals import Numeral
from analysis.table import Floats

_MANY = 2000  # cells from which patterns are looked for
_MOST_ENDINGS = 200  # different texts behind the digits; with more, the cells are not alike
_ALIKE = (
    r"^[ \t\x{a0}]*(?P<sign>[+\-\x{2212}\x{2013}]?)(?P<digits>[0-9]+(?:[.,][0-9]+)?)(?P<exponent>(?:[eE][+-]?[0-9]+)?)"
    r"(?P<ending>(?:[ \x{a0}]?[^0-9.,'\x{2019} \x{a0}\t+\-][^\n]*)?)[ \t\x{a0}]*$"
)
_EITHER = r"^[1-9][0-9]{0,2}[.,][0-9]{3}$"
_SAMPLES = ("1", "1,5", "1,555", "1.5", "1.555")  # one number for each way in which a mark can stand


@dataclass(frozen=True, eq=False)
class Odd:
    """Cells that are not plain numbers.

    Where many cells are alike, digits holds the number of each ("" for the others) and their text is a sample of the pattern.
    """

    where: npt.NDArray[np.intp]  # rows of the table
    codes: npt.NDArray[np.intp]  # for each of those rows, the index of its text
    texts: tuple[str, ...]  # tidy
    numerals: tuple[Numeral | None, ...]
    digits: pa.StringArray | None = None

    @cached_property
    def first(self) -> npt.NDArray[np.intp]:
        """For each text, the first row of the table that holds it."""
        first = np.zeros(len(self.texts), dtype=np.intp)
        first[self.codes[::-1]] = self.where[::-1]
        return first

    def rows_of(self, chosen: npt.NDArray[np.bool_]) -> npt.NDArray[np.intp]:
        """Rows of the table whose text is chosen (a mask over texts)."""
        return self.where[chosen[self.codes]]

    def mask(self, chosen: Sequence[bool]) -> npt.NDArray[np.bool_]:
        """A mask over texts."""
        return np.array(chosen, dtype=bool).reshape(len(self.texts))

    def decimals(self, decided: Marks) -> pa.StringArray:
        """Every cell as a plain decimal, "nan" where it is no number."""
        plain = [
            numeral.plain(decided.comma, decided.point) if numeral is not None and not numeral.bound else "nan" for numeral in self.numerals
        ]
        found = pa.array(plain, pa.string()).take(pa.array(self.codes))
        return found if self.digits is None else pc.if_else(pc.equal(self.digits, ""), found, self._alike(decided, self.digits))

    def _alike(self, decided: Marks, digits: pa.StringArray) -> pa.StringArray:
        """The digits with their marks read: a thousands mark dropped, a decimal comma turned into a point."""
        grouped = [n is not None and bool(n.shape.either) and decided.role(n.shape.either) == "thousands" for n in self.numerals]
        drop = pa.array(self.mask(grouped)[self.codes])
        return pc.if_else(drop, pc.replace_substring_regex(digits, "[.,]", ""), pc.replace_substring(digits, ",", "."))

    def values(self, decided: Marks) -> Floats:
        """The value of every cell, NaN where it is no number."""
        values: Floats = pc.cast(self.decimals(decided), pa.float64()).to_numpy(zero_copy_only=False)
        return values


def of(texts: pa.StringArray, where: npt.NDArray[np.intp]) -> Odd:
    """Gather the cells of these rows."""
    cells = texts.take(pa.array(where))
    alike = _patterns(cells) if len(cells) > _MANY else None
    if alike is None:
        return _by_text(cells, where)
    codes, samples, digits = alike
    rest = np.flatnonzero(codes < 0)
    others = _by_text(cells.take(pa.array(rest)), rest)
    codes[rest] = others.codes + len(samples)
    found = tuple(numerals.find(text) for text in samples)
    return Odd(where, codes, (*samples, *others.texts), (*found, *others.numerals), digits)


def _by_text(cells: pa.StringArray, where: npt.NDArray[np.intp]) -> Odd:
    encoded = cells.dictionary_encode()
    tidy = tuple(spaces.tidy(text) for text in encoded.dictionary.to_pylist())
    codes = encoded.indices.to_numpy(zero_copy_only=False).astype(np.intp)
    return Odd(where, codes, tidy, tuple(numerals.find(text) for text in tidy))


def _patterns(cells: pa.StringArray) -> tuple[npt.NDArray[np.intp], tuple[str, ...], pa.StringArray] | None:
    """Tell the pattern of each cell (-1 for none), a sample of each pattern, and the digits; None where endings differ too much."""
    parts = pc.extract_regex(cells, _ALIKE)
    fields = {name: parts.field(name).fill_null("") for name in ("sign", "digits", "exponent", "ending")}
    endings = fields["ending"].dictionary_encode()
    if len(endings.dictionary) > _MOST_ENDINGS:
        return None
    tidy = [spaces.tidy(text) for text in endings.dictionary.to_pylist()]
    samples = tuple(f"{number}{ending}" for number in _SAMPLES for ending in tidy)
    known = np.array([(found := numerals.find(text)) is not None and not found.bound for text in samples])
    codes = _marks_of(fields) * len(tidy) + endings.indices.to_numpy(zero_copy_only=False)
    alike = pc.not_equal(fields["digits"], "").to_numpy(zero_copy_only=False) & known[codes]
    codes = np.where(alike, codes, -1).astype(np.intp)
    sign = pc.if_else(pc.is_in(fields["sign"], pa.array(["", "+"])), "", "-")
    whole = pc.binary_join_element_wise(sign, fields["digits"], fields["exponent"], "")
    used, codes = _used(codes, samples)
    return codes, used, pc.if_else(pa.array(alike), whole, "")


def _marks_of(fields: dict[str, pa.StringArray]) -> npt.NDArray[np.intp]:
    """For each cell, which of the sample numbers stands for its mark."""
    comma, point = (pc.match_substring(fields["digits"], mark).to_numpy(zero_copy_only=False) for mark in ",.")
    either = pc.match_substring_regex(fields["digits"], _EITHER).to_numpy(zero_copy_only=False)
    either = either & pc.equal(fields["exponent"], "").to_numpy(zero_copy_only=False)
    return np.where(comma, 1 + either, np.where(point, 3 + either, 0)).astype(np.intp)


def _used(codes: npt.NDArray[np.intp], samples: tuple[str, ...]) -> tuple[tuple[str, ...], npt.NDArray[np.intp]]:
    """Keep the samples that occur."""
    occurring = np.flatnonzero(np.bincount(codes[codes >= 0], minlength=len(samples)))
    rank = np.full(len(samples) + 1, -1, dtype=np.intp)
    rank[occurring] = np.arange(occurring.size)
    return tuple(samples[index] for index in occurring), rank[codes]
