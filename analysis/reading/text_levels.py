"""How a column of text is read as levels: which texts are one level, their natural order, and a note on each decision."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc

from analysis.reading import level_order, look_alikes, marks, missing, numerals, spaces
from analysis.reading.numerals import Numeral
from analysis.reading.words import several
from analysis.table import Codes, Levels

_MANY = 20_000  # different texts; beyond, they are running numbers or identifiers and not looked at one by one
Identity = tuple[str, Decimal | str, str]


@dataclass(frozen=True)
class Level:
    """One level: as it was written first, and its number and unit where it is one."""

    label: str
    amount: Decimal | None
    unit: str


def read(name: str, texts: pa.StringArray, known: marks.Known) -> Levels:
    """Read a column of text as levels; only an empty cell is missing, and any text that is a number is that number."""
    encoded = texts.dictionary_encode()
    raw: list[str] = encoded.dictionary.to_pylist()
    tidy = spaces.tidy_array(encoded.dictionary).to_pylist()
    levels, place = _distinct(tidy, known) if len(tidy) <= _MANY else _distinct_many(tidy)
    order = _order(levels)
    rank = np.full(len(levels) + 1, -1, dtype=np.intp)  # the last entry serves the blank, whose place is -1
    rank[order] = np.arange(len(levels))
    codes: Codes = (
        rank[np.asarray(place, dtype=np.intp)][encoded.indices.to_numpy(zero_copy_only=False)] if raw else np.empty(0, dtype=np.intp)
    )
    codes.flags.writeable = False
    ordered = [levels[index] for index in order]
    notes = tuple(_notes(name, raw, tidy, tuple(level.label for level in ordered)))
    return Levels(codes, tuple(level.label for level in ordered), _amounts(ordered), notes)


def _distinct(texts: Sequence[str], known: marks.Known) -> tuple[list[Level], list[int]]:
    """Return the different levels in the order of the file, and for each text the place of its level (-1 for blank)."""
    found = [numerals.find(text) for text in texts]
    decided = marks.decide((numeral.shape for numeral in found if numeral is not None), known)
    places: dict[Identity, int] = {}
    levels: list[Level] = []
    place = []
    for text, numeral in zip(texts, found, strict=True):
        level = _level(text, numeral, decided)
        identity: Identity = ("number", level.amount, level.unit) if level.amount is not None else ("text", text, "")
        if text and identity not in places:
            places[identity] = len(levels)
            levels.append(level)
        place.append(places[identity] if text else -1)
    return levels, place


def _distinct_many(texts: Sequence[str]) -> tuple[list[Level], list[int]]:
    """The same for a great many texts: plain numbers by value where all are, else each text as it stands."""
    filled = list(dict.fromkeys(text for text in texts if text))
    keys: Sequence[float | str] = filled
    amounts: Sequence[Decimal | None] = [None] * len(filled)
    if _all_numbers(filled):
        amounts = [Decimal(text) for text in filled]
        keys = [float(text) for text in filled]
    places: dict[float | str, int] = {}
    levels: list[Level] = []
    of_text: dict[str, int] = {}
    for text, key, amount in zip(filled, keys, amounts, strict=True):
        if key not in places:
            places[key] = len(levels)
            levels.append(Level(text, amount, ""))
        of_text[text] = places[key]
    return levels, [of_text[text] if text else -1 for text in texts]


def _all_numbers(texts: Sequence[str]) -> bool:
    """Whether all texts are plain finite numbers."""
    try:
        values = pc.cast(pa.array(texts, pa.string()), pa.float64())
    except pa.ArrowInvalid:
        return False
    return bool(pc.all(pc.is_finite(values)).as_py())


def _level(text: str, numeral: Numeral | None, decided: marks.Marks) -> Level:
    if numeral is None or numeral.bound or numeral.footnote or abs(numeral.exponent) > 400:
        return Level(text, None, "")
    return Level(text, Decimal(numeral.plain(decided.comma, decided.point)), numeral.unit)


def _order(levels: Sequence[Level]) -> list[int]:
    """Numbers of one unit by value, everything else by its words."""
    amounts = [level.amount for level in levels if level.amount is not None]
    if len(amounts) == len(levels) and len({level.unit for level in levels} - {""}) <= 1:
        return sorted(range(len(levels)), key=lambda index: amounts[index])
    return level_order.natural([level.label for level in levels]) if len(levels) <= _MANY else list(range(len(levels)))


def _amounts(levels: Sequence[Level]) -> tuple[float, ...] | None:
    amounts = tuple(float(level.amount) for level in levels if level.amount is not None)
    one_unit = len({level.unit for level in levels} - {""}) <= 1
    return amounts if levels and len(amounts) == len(levels) and one_unit else None


def _notes(name: str, raw: Sequence[str], tidy: Sequence[str], labels: Sequence[str]) -> Iterator[str]:
    changed = sum(before != after for before, after in zip(raw, tidy, strict=True) if after)
    if changed:
        yield f"Column “{name}”: white space in and around its levels was trimmed."
    words = [label for label in labels if missing.is_missing(label)]
    if words:
        kept = f"{several(words)} kept as {'a level' if len(words) == 1 else 'levels'}"
        yield f"Column “{name}”: {kept}, because only an empty cell is missing in a factor."
    yield from look_alikes.notes(name, labels)
