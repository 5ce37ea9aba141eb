"""Which letters tell that means are not different: two share one exactly when they are not."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

ALPHABET = "abcdefghijklmnopqrstuvwxyz"
Flags = NDArray[np.bool_]


def letters(order: Sequence[int], different: Flags) -> tuple[str, ...]:
    """Return the letters of each of k means, in the order of the matrix.

    order lists the means from the largest to the smallest; different (k, k) is symmetric. "a" stands at the largest mean. Letters
    follow one another without a mark; where more than 26 are needed they go on with aa, ab … and are set apart by
    spaces. No letter can be left away from any mean. Source: Piepho (2004), J. Comput. Graph. Stat. 13, 456-466, for the display and
    its sweep; the columns are grown one by one instead of split at every difference, which can double their number each time.
    """
    columns = _swept(_grown(~different[np.ix_(order, order)]))
    columns = sorted(columns, key=lambda column: [*np.flatnonzero(column), column.size])
    names = [_name(i) for i in range(len(columns))]
    separator = "" if len(names) <= len(ALPHABET) else " "
    by_mean = np.array(columns).reshape(len(columns), len(different)).T
    text = [separator.join(names[i] for i in np.flatnonzero(row)) for row in by_mean]
    placed = dict(zip(order, text, strict=True))
    return tuple(placed[mean] for mean in range(len(different)))


def _grown(alike: Flags) -> Flags:
    """Return columns (columns, k), sets of means all alike, that cover every alike pair and every mean.

    Each starts at the first mean with a pair not yet covered and takes in the next means that are like all in it and bring such a pair.
    """
    same = [_as_bits(row) for row in alike | np.eye(len(alike), dtype=bool)]
    open_pairs = [members & ~(1 << place) for place, members in enumerate(same)]
    columns = []
    for place, partners in enumerate(list(open_pairs)):
        while open_pairs[place]:
            column = _column_from(place, same, open_pairs)
            columns.append(_as_flags(column, len(same)))
            for member in np.flatnonzero(columns[-1]):
                open_pairs[member] &= ~column
        if not partners:
            columns.append(_as_flags(1 << place, len(same)))
    return np.array(columns, dtype=bool).reshape(len(columns), len(same))


def _column_from(place: int, same: list[int], open_pairs: list[int]) -> int:
    """Return one column with the place, grown from its nearest open partner on, as the bits of an integer."""
    column, candidates = 1 << place, same[place]
    for member in np.flatnonzero(_as_flags(candidates & ~column, len(same))).tolist():
        if candidates >> member & 1 and open_pairs[member] & column:
            column |= 1 << member
            candidates &= same[member]
    return column


def _swept(columns: Flags) -> list[Flags]:
    """Return the columns without members and without columns that no pair needs.

    A member leaves a column when each of its pairs there stands in another column too; its last column it never leaves.
    """
    held = columns.astype(np.float32)  # exact for counts, and many times faster to multiply than integers
    shared = (held.T @ held).astype(np.intp)  # in how many columns two means stand together
    for column in columns:
        for member in np.flatnonzero(column)[::-1]:
            if shared[member, column].min() > 1:
                column[member] = False
                shared[member, member] -= 1
                shared[member, column] -= 1
                shared[column, member] -= 1
    return [column for column in columns if column.any()]


def _as_bits(flags: Flags) -> int:
    return int.from_bytes(np.packbits(flags, bitorder="little").tobytes(), "little")


def _as_flags(bits: int, size: int) -> Flags:
    raw = np.frombuffer(bits.to_bytes((size + 7) // 8, "little"), dtype=np.uint8)
    return np.unpackbits(raw, count=size, bitorder="little").astype(bool)


def _name(i: int) -> str:
    """Return a … z, aa, ab … for 0, 1 …"""
    name = ""
    while i >= 0:
        name, i = ALPHABET[i % 26] + name, i // 26 - 1
    return name
