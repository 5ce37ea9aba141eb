"""Which letters tell that means are not different: two share one exactly when they are not."""

from collections import defaultdict
from collections.abc import Sequence
from functools import reduce
from operator import or_

import numpy as np
from numpy.typing import NDArray

ALPHABET = "abcdefghijklmnopqrstuvwxyz"


def letters(order: Sequence[int], different: NDArray[np.bool_]) -> tuple[str, ...]:
    """Return the letters of each of k means, in the order of the matrix.

    order lists the means from the largest to the smallest; different (k, k) is symmetric. "a" stands at the largest mean. Letters
    follow one another without a mark; where more than 26 are needed they go on with aa, ab … and are set apart by
    spaces. No letter can be left away from any mean. Source: Piepho (2004), J. Comput. Graph. Stat. 13, 456-466, for the display and
    its sweep; the columns are grown one by one instead of split at every difference, which can double their number each time.
    """
    same = _sets(~different[np.ix_(order, order)])
    columns = sorted(_swept(_grown(same)), key=lambda column: [*_members(column), len(same)])
    separator = "" if len(columns) <= len(ALPHABET) else " "
    text = [separator.join(_name(i) for i, column in enumerate(columns) if column >> place & 1) for place in range(len(same))]
    placed = dict(zip(order, text, strict=True))
    return tuple(placed[mean] for mean in range(len(same)))


def _sets(related: NDArray[np.bool_]) -> list[int]:
    """Return each row of a square matrix as a set of places, the bits of an integer, its own place included."""
    filled = related | np.eye(len(related), dtype=bool)
    return [int.from_bytes(np.packbits(row, bitorder="little").tobytes(), "little") for row in filled]


def _members(places: int) -> list[int]:
    """Return the places of a set, rising."""
    found = []
    while places:
        low = places & -places
        found.append(low.bit_length() - 1)
        places ^= low
    return found


def _grown(same: list[int]) -> list[int]:
    """Return columns, sets of means all alike, that cover every pair of the same and every mean.

    Each starts at the first mean with a pair not yet covered and takes in the next means that are like all in it and bring such a pair.
    """
    open_pairs = [members & ~(1 << place) for place, members in enumerate(same)]
    columns = []
    for place in range(len(same)):
        while open_pairs[place]:
            columns.append(_column_from(place, same, open_pairs))
            for member in _members(columns[-1]):
                open_pairs[member] &= ~columns[-1]
        if not same[place] & ~(1 << place):
            columns.append(1 << place)
    return columns


def _column_from(place: int, same: list[int], open_pairs: list[int]) -> int:
    """Return one column with the place, grown from its nearest open partner on."""
    column, candidates = 1 << place, same[place]
    for member in _members(candidates & ~column):
        if candidates >> member & 1 and open_pairs[member] & column:
            column |= 1 << member
            candidates &= same[member]
    return column


def _swept(columns: list[int]) -> list[int]:
    """Return the columns without members and without columns that no pair needs.

    A member leaves a column when each of its pairs there stands in another column too; its last column it never leaves.
    """
    columns = columns.copy()
    holding: defaultdict[int, list[int]] = defaultdict(list)
    for i, column in enumerate(columns):
        for member in _members(column):
            holding[member].append(i)
    for i, column in enumerate(columns):
        for member in reversed(_members(column)):
            elsewhere = reduce(or_, (columns[j] for j in holding[member] if j != i), 0)
            if elsewhere and not columns[i] & ~elsewhere:
                columns[i] &= ~(1 << member)
                holding[member].remove(i)
    return [column for column in columns if column]


def _name(i: int) -> str:
    """Return a … z, aa, ab … for 0, 1 …"""
    name = ""
    while i >= 0:
        name, i = ALPHABET[i % 26] + name, i // 26 - 1
    return name
