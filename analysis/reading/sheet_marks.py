"""What a sheet says about its cells beside their values: percent formats, merged ranges, hidden rows, errors, unsaved formulas."""

from dataclasses import dataclass, field

from analysis.reading.records import Span

Cell = tuple[int, int]  # row and column, both counted from 0


@dataclass(eq=False)
class Marks:
    """The marks of one sheet; filled while its XML is read."""

    percent: set[Cell] = field(default_factory=set)
    errors: dict[Cell, str] = field(default_factory=dict)
    unsaved: list[Cell] = field(default_factory=list)  # formulas without a stored value
    hidden: list[int] = field(default_factory=list)  # rows counted from 1
    spans: list[Span] = field(default_factory=list)
    rows: int = 0  # extent of the filled cells
    columns: int = 0

    def reach(self, row: int, column: int) -> None:
        """Note that a cell (counted from 0) is filled."""
        self.rows = max(self.rows, row + 1)
        self.columns = max(self.columns, column + 1)
