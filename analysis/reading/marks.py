"""Whether the commas and points in the numbers of one column are decimal or thousands marks."""

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

from analysis.reading.numerals import Shape

Role = Literal["decimal", "thousands"]


@dataclass(frozen=True)
class Marks:
    """The meaning of a mark with three digits after it, and of which marks that had to be assumed."""

    comma: Role = "decimal"
    point: Role = "decimal"
    assumed: frozenset[str] = frozenset()  # marks that nothing in the column settles

    def role(self, mark: str) -> Role:
        """The meaning of "," or "." where three digits follow."""
        return self.comma if mark == "," else self.point


@dataclass(frozen=True)
class Known:
    """What is known of the marks in all numbers of a file."""

    comma_separated: bool = False  # whether commas separate its cells
    decimal: str | None = None  # "point" or "comma" where the user said so


NOTHING_KNOWN = Known()


def decide(shapes: Iterable[Shape], known: Known) -> Marks:
    """Decide from all numbers of a column what its ambiguous marks mean.

    What the user said comes first, then the column's other numbers. Where they are silent the point is decimal, and so is the
    comma unless commas also separate the cells of the file: there the comma can only be a thousands mark.
    """
    if known.decimal is not None:
        return Marks("decimal", "thousands") if known.decimal == "comma" else Marks("thousands", "decimal")
    comma_separated = known.comma_separated
    shapes = set(shapes)
    decimal = {shape.decimal for shape in shapes} - {""}
    thousands = {shape.thousands for shape in shapes} - {""}
    open_marks = {shape.either for shape in shapes} - {""}
    silent: dict[str, Role] = {",": "thousands" if comma_separated else "decimal", ".": "decimal"}
    roles: dict[str, Role] = {}
    assumed = set()
    for mark, other in ((",", "."), (".", ",")):
        settled = _settled(mark, other, decimal, thousands)
        roles[mark] = settled or silent[mark]
        if mark in open_marks and settled is None:
            assumed.add(mark)
    if assumed == {",", "."}:  # "1,234" beside "5.678" and nothing else: one of them has to be the decimal mark
        roles["," if comma_separated else "."] = "thousands"
    return Marks(roles[","], roles["."], frozenset(assumed))


def _settled(mark: str, other: str, decimal: set[str], thousands: set[str]) -> Role | None:
    if mark in decimal:
        return "decimal"
    if mark in thousands or other in decimal:
        return "thousands"
    return "decimal" if other in thousands else None
