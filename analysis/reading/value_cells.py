"""Columns that came as values and not as text: numbers, truth values, categories and plain strings, taken as they are."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from hashlib import sha256

import numpy as np
import pandas as pd

from analysis import refusals
from analysis.reading import level_order, look_alikes, offsets
from analysis.table import Codes, Floats, LeftOut, Levels, Response, counts, frozen


@dataclass(frozen=True, eq=False)
class NumberCells:
    """A column of numbers; values is shared with the frame it came from and never written to."""

    name: str
    values: pd.Series
    unit: str | None = None

    @property
    def looks_numeric(self) -> bool:
        """Always: every cell is a number or missing."""
        return True

    @cached_property
    def floats(self) -> Floats:
        """The cells as doubles, NaN where missing; without a copy where they are doubles already."""
        if self.values.hasnans:
            return frozen(self.values.to_numpy(dtype=np.float64, na_value=np.nan))
        return frozen(np.asarray(self.values, dtype=np.float64))

    def response(self) -> Response:
        """Take the numbers as measurements; infinite ones are missing. Raises NoNumbers where none is finite."""
        finite = np.isfinite(self.floats)
        if not finite.any():
            raise refusals.NoNumbers(self.name, int(finite.size))
        values = self.floats if finite.all() else frozen(np.where(finite, self.floats, np.nan))
        lost = np.flatnonzero(~finite)
        why = (f"no value of {self.name}", "not a finite number")
        missing = tuple(LeftOut(int(index) + 1, why[int(np.isinf(self.floats[index]))]) for index in lost)
        pivot, differences = offsets.in_doubles(values)
        return Response(values, pivot, differences, self.unit, missing, ())

    def levels(self) -> Levels:
        """Take the numbers as levels in numeric order; a whole number is shown without decimals."""
        codes, found = pd.factorize(self.values, sort=True, use_na_sentinel=True)
        amounts = tuple(float(value) for value in found)
        return Levels(_codes(codes), tuple(number_text(value) for value in found), amounts, ())

    def text(self, start: int, stop: int) -> list[str]:
        """The numbers of these rows as text, "" where missing."""
        return ["" if pd.isna(value) else number_text(value) for value in self.values.iloc[start:stop]]

    def digest(self) -> bytes:
        """A digest of every number."""
        return sha256(np.ascontiguousarray(self.floats).data).digest()


@dataclass(frozen=True, eq=False)
class CategoryCells:
    """A categorical column, whose categories keep their order."""

    name: str
    values: pd.Series
    unit: str | None = None

    @property
    def looks_numeric(self) -> bool:
        """Never: categories are levels."""
        return False

    def response(self) -> Response:
        """Categories are no measurements: raises ResponseIsText."""
        raise _not_numbers(self.name, self.values)

    def levels(self) -> Levels:
        """The categories that occur, in their own order."""
        codes = self.values.cat.codes.to_numpy()
        categories = self.values.cat.categories
        occurring = np.flatnonzero(counts(codes, len(categories)))
        found = list(categories[occurring])
        amounts = tuple(float(value) for value in found) if found and all(_is_number(value) for value in found) else None
        labels, merged = _merged(tuple(level_text(value) for value in found))
        if len(labels) < len(categories):
            rank = np.full(len(categories) + 1, -1, dtype=codes.dtype)
            rank[occurring] = merged
            codes = rank[codes]
        return Levels(_codes(codes), labels, amounts if len(labels) == len(found) else None, ())

    def text(self, start: int, stop: int) -> list[str]:
        """The categories of these rows, "" where missing."""
        return ["" if pd.isna(value) else level_text(value) for value in self.values.iloc[start:stop]]

    def digest(self) -> bytes:
        """A digest of every category and of where it stands."""
        seal = sha256("\0".join(map(str, self.values.cat.categories)).encode("utf-8", "surrogatepass"))
        seal.update(np.ascontiguousarray(self.values.cat.codes).data)
        return seal.digest()


@dataclass(frozen=True, eq=False)
class ObjectCells:
    """A column of strings, dates, truth values or mixed objects; nothing in it is parsed."""

    name: str
    values: pd.Series
    unit: str | None = None

    @cached_property
    def looks_numeric(self) -> bool:
        """Whether most of the first filled cells are number objects."""
        filled = [value for value in self.values.iloc[:2000] if not _is_empty(value)]
        return 2 * sum(_is_number(value) for value in filled) > len(filled)

    def response(self) -> Response:
        """Take number objects as measurements; raises ResponseIsText where more than half are something else."""
        odd = np.array([not (_is_empty(value) or _is_number(value)) for value in self.values], dtype=bool)
        if 2 * odd.sum() > odd.size:
            raise _not_numbers(self.name, self.values[odd])
        values = np.array([float(value) if _is_number(value) else np.nan for value in self.values], dtype=np.float64)
        if not np.isfinite(values).any():
            raise refusals.NoNumbers(self.name, int(values.size))
        whole = NumberCells(self.name, pd.Series(values)).response()
        texts = {int(index) + 1: f"“{str(self.values.iloc[index])[:60]}” is not a number" for index in np.flatnonzero(odd)}
        missing = tuple(LeftOut(entry.row, texts.get(entry.row, entry.why)) for entry in whole.missing)
        return Response(whole.values, whole.pivot, whole.offsets, self.unit, missing, ())

    def levels(self) -> Levels:
        """The different objects as levels in natural order; only what is empty is missing."""
        codes, found = pd.factorize(self.values, use_na_sentinel=True)
        labels, place = _merged(tuple(level_text(value) for value in found))
        order = level_order.natural([label for label in labels if label])
        filled = [index for index, label in enumerate(labels) if label]
        rank = np.full(len(labels) + 1, -1, dtype=np.intp)
        rank[[filled[index] for index in order]] = np.arange(len(order))
        ordered = tuple(labels[filled[index]] for index in order)
        return Levels(_codes(rank[np.append(place, len(labels))[codes]]), ordered, None, look_alikes.notes(self.name, ordered))

    def text(self, start: int, stop: int) -> list[str]:
        """The cells of these rows, "" where missing."""
        return ["" if _is_empty(value) else level_text(value) for value in self.values.iloc[start:stop]]

    def digest(self) -> bytes:
        """A digest of every cell."""
        hashed = pd.util.hash_pandas_object(self.values.astype(str), index=False)
        return sha256(np.ascontiguousarray(hashed).data).digest()


Cells = NumberCells | CategoryCells | ObjectCells


def cells_of(name: str, values: pd.Series) -> Cells:
    """Choose how a column of a frame is kept, by its type."""
    if isinstance(values.dtype, pd.CategoricalDtype):
        return CategoryCells(name, values)
    if pd.api.types.is_numeric_dtype(values.dtype) and not pd.api.types.is_bool_dtype(values.dtype) and values.dtype.kind != "c":
        return NumberCells(name, values)
    return ObjectCells(name, values)


def number_text(value: object) -> str:
    """Write a number level: 1.0 is shown as 1, other numbers with the fewest digits that give them."""
    number = float(value)  # type: ignore[arg-type]
    return str(int(number)) if number.is_integer() and abs(number) < 1e15 else repr(number).removesuffix(".0")


def level_text(value: object) -> str:
    """Write any object as a level."""
    if _is_number(value):
        return number_text(value)
    if isinstance(value, pd.Timestamp):
        return value.isoformat(sep=" ").removesuffix(" 00:00:00")
    return str(value)


def _is_number(value: object) -> bool:
    return isinstance(value, (int, float, np.integer, np.floating)) and not isinstance(value, bool) and not pd.isna(value)


def _is_empty(value: object) -> bool:
    return value is None or value is pd.NA or value is pd.NaT or (isinstance(value, float) and np.isnan(value)) or value == ""


def _codes(codes: Codes) -> Codes:
    """Return a read-only view of codes, in the narrowest type that holds them."""
    most = int(codes.max(initial=0))
    view = codes.astype(np.min_scalar_type(-most - 1), copy=False).view()
    view.flags.writeable = False
    return view


def _merged(labels: Sequence[str]) -> tuple[tuple[str, ...], Codes]:
    """Give equal labels (1 and "1" among objects) one place."""
    places: dict[str, int] = {}
    place = [places.setdefault(label, len(places)) for label in labels]
    return tuple(places), np.array(place, dtype=np.intp)


def _not_numbers(name: str, values: pd.Series) -> refusals.ResponseIsText:
    filled = values[values.notna()]
    first = [(str(value), place + 1) for place, value in zip(np.flatnonzero(values.notna())[:3], filled.iloc[:3], strict=True)]
    return refusals.ResponseIsText(name, first, len(filled), len(values))
