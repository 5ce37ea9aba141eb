"""Which means share a letter: the compact display of a pattern of decisions."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

ALPHABET = "abcdefghijklmnopqrstuvwxyz"


def letters(order: Sequence[int], different: NDArray[np.bool_]) -> tuple[str, ...]:
    """Return the letters of each of k means: two share one exactly when they are not decided different.

    order lists the means from the one that gets "a" first; different is (k, k), symmetric. Beyond 26 letters they carry
    a number: "a1", "b1" and so on. Source: insert and absorb, Piepho (2004), J. Comput. Graph. Statist. 13, 456-466.
    """
    k = len(order)
    columns = [frozenset(range(k))] if k else []
    for i in range(k):
        for j in range(i):
            if different[i, j]:
                columns = _split(columns, i, j)
    columns = _needed(columns, k)
    place = {mean: rank for rank, mean in enumerate(order)}
    columns.sort(key=lambda column: sorted(place[mean] for mean in column))
    names = [ALPHABET[c % 26] + (str(c // 26) if c >= 26 else "") for c in range(len(columns))]
    return tuple("".join(name for name, column in zip(names, columns, strict=True) if mean in column) for mean in range(k))


def _split(columns: list[frozenset[int]], i: int, j: int) -> list[frozenset[int]]:
    """Separate two means in every column that holds both, and drop what other columns then hold anyway."""
    parted = [column for column in columns if not (i in column and j in column)]
    for column in columns:
        if i in column and j in column:
            parted += [column - {i}, column - {j}]
    parted = list(dict.fromkeys(parted))
    return [column for column in parted if not any(column < other for other in parted)]


def _needed(columns: list[frozenset[int]], k: int) -> list[frozenset[int]]:
    """Drop columns whose every pair, and whose every mean, another column shows too."""
    kept = list(columns)
    for column in sorted(columns, key=len):
        rest = [other for other in kept if other is not column]
        pairs = [(a, b) for a in column for b in column if a < b] or [(a, a) for a in column]
        if all(any(a in other and b in other for other in rest) for a, b in pairs):
            kept = rest
    return kept
