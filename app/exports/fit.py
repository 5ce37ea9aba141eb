"""How much text fits where type must not get smaller: widths of words, lines they need, names made shorter."""

import bisect
import math
import re
import unicodedata
from collections.abc import Mapping, Sequence
from types import MappingProxyType

POINTS_PER_INCH = 72
LINE_HEIGHT = 1.2  # baseline to baseline, in type sizes; what office programs use for single spacing
ELLIPSIS = "…"
# Widths of the usual sans serif faces in type sizes, as their makers publish them; bold type takes about a tenth more.
_EMS: Mapping[str, float] = MappingProxyType(
    {
        character: ems
        for ems, characters in {
            0.23: "ijl'’|",
            0.29: " .,:;!/\\[]ftI\u00a0\u202f·",
            0.34: "()-r`{}",
            0.39: '*"“”',
            0.51: "cksvxyzJ",
            0.57: "abdeghnopqu0123456789$#?_L–",
            0.60: "+<>=~−×÷±",
            0.62: "FTZ",
            0.68: "ABEKPSVXY&",
            0.74: "CDHNRUw",
            0.80: "GOQ",
            0.86: "mM",
            0.96: "W%",
            1.03: "@—…",
        }.items()
        for character in characters
    }
)
OTHER, FULL_WIDTH = 0.65, 1.03
BOLD = 1.1


def _ems(character: str) -> float:
    """Return the width of one character in type sizes."""
    known = _EMS.get(character)
    if known is not None:
        return known
    if unicodedata.combining(character):
        return 0.0
    return FULL_WIDTH if unicodedata.east_asian_width(character) in "WF" else OTHER


def width(text: str, points: float) -> float:
    """Return the width of one line of text in inches."""
    return sum(map(_ems, text)) * points / POINTS_PER_INCH


def height(lines: int, points: float) -> float:
    """Return the height of some lines of text in inches."""
    return lines * points * LINE_HEIGHT / POINTS_PER_INCH


def _pieces(word: str, points: float, inches: float) -> list[str]:
    """Break a word that is wider than the line."""
    pieces, piece = [], ""
    for character in word:
        if piece and width(piece + character, points) > inches:
            pieces.append(piece)
            piece = ""
        piece += character
    return [*pieces, piece]


def spaced(text: str) -> list[str]:
    """Return the words of a text; spaces that hold a number together do not part words."""
    return [word for word in re.split("[ \t\r\n]+", text) if word]


def wrap(text: str, points: float, inches: float) -> tuple[str, ...]:
    """Return the lines that a text takes in a column so many inches wide."""
    lines = [""]
    for word in spaced(text):
        for number, piece in enumerate(_pieces(word, points, inches)):
            joined = f"{lines[-1]} {piece}" if lines[-1] and number == 0 else lines[-1] + piece
            if lines[-1] and (number or width(joined, points) > inches):
                lines.append(piece)
            else:
                lines[-1] = joined
    return tuple(lines)


def fits(text: str, points: float, inches: float, lines: int) -> bool:
    """Return whether a text needs no more lines than there are, and no word has to be broken."""
    wrapped = wrap(text, points, inches)
    return len(wrapped) <= lines and " ".join(wrapped) == " ".join(spaced(text))


def _kept(text: str, count: int, from_end: int) -> str:
    """Keep so many characters of a text, some of them its last."""
    tail = text[len(text) - from_end :] if from_end else ""
    return text[: count - from_end].rstrip() + ELLIPSIS + tail.lstrip()


def shorten(text: str, points: float, inches: float, lines: int = 1, from_end: int = 0) -> str:
    """Return the text, or the longest beginning of it (with so many of its last characters) that fits."""
    text = " ".join(spaced(text))
    if len(wrap(text, points, inches)) <= lines:
        return text
    counts = range(len(text) - 1, from_end, -1)
    at = bisect.bisect_left(counts, True, key=lambda count: len(wrap(_kept(text, count, from_end), points, inches)) <= lines)
    return _kept(text, counts[at], from_end) if at < len(counts) else ELLIPSIS


def names(labels: Sequence[str], points: float, inches: float, lines: int = 1) -> tuple[str, ...]:
    """Return labels short enough for their places and still all different.

    A label that fits stays as it is. One that does not loses its middle and keeps its last two words, which tell levels apart most often;
    where two would still read the same, one word, three words or only the beginning is kept; where nothing of this tells them apart, all
    labels become their numbers, 1, 2, 3 and so on.
    """
    for kept in (2, 1, 3, 0):
        tails = [len(" ".join(spaced(label)[-kept:])) if kept else 0 for label in labels]
        shorter = tuple(
            label if fits(label, points, inches, lines) else shorten(label, points, inches, lines, tail)
            for label, tail in zip(labels, tails, strict=True)
        )
        if len(set(shorter)) == len(set(labels)) and ELLIPSIS not in shorter:
            return shorter
    return tuple(str(number) for number in range(1, len(labels) + 1))


def largest_type(text: str, sizes: Sequence[int], inches: float, tall: float) -> int:
    """Return the largest of the type sizes (points, falling) at which a text fits its box; the smallest if none does."""
    for points in sizes:
        if height(len(wrap(text, points, inches)), points) <= tall:
            return points
    return sizes[-1]


def lines_in(tall: float, points: float) -> int:
    """Return how many lines of a type size stand in a box so many inches high."""
    return max(1, math.floor(tall / height(1, points) + 1e-9))
