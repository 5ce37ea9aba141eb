"""What may be asked of the reader in place of its own decisions: separator, decimal mark, header row, sheet, table, layout, hidden rows."""

from collections.abc import Mapping
from dataclasses import dataclass, fields
from typing import Any

from analysis import refusals

SEPARATORS: Mapping[str, str] = {",": "commas", ";": "semicolons", "\t": "tabs", "|": "pipes", " ": "spaces", "  ": "runs of spaces"}
DECIMALS = ("point", "comma")
LAYOUTS = ("auto", "rows", "grid")
HIDDEN = ("keep", "leave out")
WHOLE = "the whole sheet"  # read as one table, although it looks like several


@dataclass(frozen=True)
class Reading:
    """What the user asked of the reader; None, and "auto", leave it to the reader.

    Raises UnknownChoice where a choice is none of those that there are.
    """

    separator: str | None = None  # one of the names in SEPARATORS
    decimal: str | None = None  # "point" or "comma"
    header_row: int | None = None  # number of the row in the file, 0 where the file has no header
    sheet: str | None = None
    table: str | None = None  # the name of one of several tables on a sheet, or WHOLE
    layout: str = "auto"
    hidden: str | None = None  # "keep", as None does, or "leave out"

    def __post_init__(self) -> None:
        for name, known in (
            ("separator", tuple(SEPARATORS.values())),
            ("decimal", DECIMALS),
            ("hidden", HIDDEN),
            ("layout", LAYOUTS),
        ):
            value = getattr(self, name)
            if value not in known and (value is not None or name == "layout"):
                raise refusals.UnknownChoice(name, str(value), known)
        if self.header_row is not None and (type(self.header_row) is not int or self.header_row < 0):
            raise refusals.UnknownChoice("header row", str(self.header_row), ("the number of a row", "0 for none"))
        for name in ("sheet", "table"):
            if not isinstance(getattr(self, name), str | None):
                raise refusals.UnknownChoice(name, str(getattr(self, name)), ("a name", "none"))

    def to_plain(self) -> dict[str, Any]:
        """Return the choices that were made, as values that JSON knows."""
        return {field.name: value for field in fields(self) if (value := getattr(self, field.name)) != field.default}

    @classmethod
    def from_plain(cls, plain: Mapping[str, Any]) -> "Reading":
        """Return the choices that `to_plain` gave; raises UnknownChoice where there is no such choice."""
        known = [field.name for field in fields(cls)]
        for name in plain:
            if name not in known:
                raise refusals.UnknownChoice("choice of the reader", str(name), known)
        return cls(**plain)


NOTHING_ASKED = Reading()
