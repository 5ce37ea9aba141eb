"""Everything that the user decided about one table, as one value that never changes."""

import hashlib
import json
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, fields, replace
from functools import cached_property
from types import MappingProxyType
from typing import Any

from analysis.adjustments import ADJUSTMENTS
from analysis.refusals import LevelTwice, NameTaken, OutOfRange, ReasonMissing, RoleMissing, SameColumnTwice, UnknownChoice
from analysis.scales import scale_named
from analysis.story import Story, story_of
from analysis.table import Table

MODELS: Mapping[str, str] = MappingProxyType({"full": "with the interaction", "additive": "without the interaction"})
ROLES: Mapping[str, str] = MappingProxyType(
    {
        "response": "the response",
        "row_factor": "the first factor",
        "column_factor": "the second factor",
        "block": "the block",
        "unit": "the unit",
    }
)
NEEDED_ROLES = ("response", "row_factor", "column_factor")
TAKEN_NAMES = frozenset({"interaction", "residual", "total", "cells"})  # lines of the tables, and the family of all cells


def _frozen(choice: Mapping[str, Any]) -> Mapping[str, Any]:
    return MappingProxyType({str(k): tuple(v) if isinstance(v, (list, tuple)) else v for k, v in choice.items()})


@dataclass(frozen=True, eq=False)
class Study:
    """A table, the roles of its columns and every choice of the analysis; a change makes a new one by `replace`."""

    table: Table
    response: str | None = None
    row_factor: str | None = None
    column_factor: str | None = None
    block: str | None = None
    unit: str | None = None
    keep: Mapping[str, Sequence[str]] = field(default_factory=dict)  # column -> levels analysed, in this order
    model: str = "full"
    scale: str = "none"
    confidence: float = 0.95
    adjust: str = "tukey"
    control: Mapping[str, str] = field(default_factory=dict)  # factor -> level that the others are compared with
    matters: float | None = None  # smallest difference that matters, in units of the response
    relabel: Mapping[str, Mapping[str, str]] = field(default_factory=dict)  # column -> level as read -> level as used; equal ones merge
    set_aside: Mapping[int, str] = field(default_factory=dict)  # file row -> why it is not analysed
    apart: Mapping[str, Mapping[str, str]] = field(default_factory=dict)  # column -> level -> the look-alike that it was not merged with
    amounts: Mapping[str, bool] = field(default_factory=dict)  # column -> whether levels that are numbers count as amounts
    story: Story = field(default_factory=Story)  # changes to the telling, on which no number depends

    def __post_init__(self) -> None:
        """Freeze the mappings and raise a Refusal for a choice that does not exist."""
        object.__setattr__(self, "keep", _frozen(self.keep))
        object.__setattr__(self, "control", _frozen(self.control))
        object.__setattr__(self, "relabel", MappingProxyType({column: _frozen(names) for column, names in self.relabel.items()}))
        object.__setattr__(self, "apart", MappingProxyType({column: _frozen(names) for column, names in self.apart.items()}))
        object.__setattr__(self, "amounts", MappingProxyType({str(column): bool(are) for column, are in self.amounts.items()}))
        object.__setattr__(self, "set_aside", MappingProxyType({int(row): why.strip() for row, why in self.set_aside.items()}))
        object.__setattr__(self, "story", story_of(self.story))
        _check_choices(self)
        for column, levels in self.keep.items():
            twice = [level for k, level in enumerate(levels) if level in levels[:k]]
            if twice:
                raise LevelTwice(column, twice[0])

    def __repr__(self) -> str:
        return f"Study({self.response!r} by {self.row_factor!r} and {self.column_factor!r}, {self.model}, from {self.table.name!r})"

    @property
    def factors(self) -> tuple[str, str]:
        """Names of the row factor and the column factor; raises RoleMissing while either is open."""
        self.require_roles()
        return str(self.row_factor), str(self.column_factor)

    def require_roles(self) -> None:
        """Raise RoleMissing, SameColumnTwice or NameTaken unless the roles needed for an analysis stand."""
        taken: dict[str, str] = {}
        for role, word in ROLES.items():
            column = getattr(self, role)
            if column is None and role in NEEDED_ROLES:
                raise RoleMissing(word.removeprefix("the "))
            if column in taken:
                raise SameColumnTwice(column, taken[column], word)
            if column in TAKEN_NAMES and role in ("row_factor", "column_factor", "block"):
                raise NameTaken(column)
            if column is not None:
                taken[column] = word

    def choices(self) -> dict[str, Any]:
        """Return every decision but the table itself, in plain values."""
        plain = {f.name: getattr(self, f.name) for f in fields(self) if f.name != "table"}
        plain["keep"] = {column: list(levels) for column, levels in self.keep.items()}
        plain["control"] = dict(self.control)
        plain["relabel"] = {column: dict(names) for column, names in self.relabel.items()}
        plain["set_aside"] = dict(self.set_aside)
        plain["amounts"] = dict(self.amounts)
        plain["apart"] = {column: dict(names) for column, names in self.apart.items()}
        plain["story"] = self.story.plain()
        return plain

    def to_json(self) -> str:
        """Return the decisions as text, with the fingerprint of the table that they belong to."""
        return json.dumps({"table": self.table.fingerprint, **self.choices()}, ensure_ascii=False)

    @classmethod
    def from_json(cls, text: str, table: Table) -> "Study":
        """Return the study that `to_json` wrote, on the table given."""
        known = {f.name for f in fields(cls)} - {"table"}
        return cls(table=table, **{name: value for name, value in json.loads(text).items() if name in known})

    @cached_property
    def fingerprint(self) -> str:
        """A short text that two studies share exactly when table and decisions are the same, whatever story is made of them."""
        return hashlib.sha256(replace(self, story=Story()).to_json().encode()).hexdigest()


def _check_choices(study: Study) -> None:
    if study.model not in MODELS:
        raise UnknownChoice("the model", study.model, tuple(MODELS))
    if study.adjust not in ADJUSTMENTS:
        raise UnknownChoice("the adjustment", study.adjust, tuple(ADJUSTMENTS))
    scale_named(study.scale)
    if not (isinstance(study.confidence, (int, float)) and 0 < study.confidence < 1):
        raise OutOfRange("the confidence", study.confidence, "a number between 0 and 1, such as 0.95")
    unexplained = [row for row, why in study.set_aside.items() if not why]
    if unexplained:
        raise ReasonMissing(unexplained[0])
    if study.matters is not None and not (math.isfinite(study.matters) and study.matters > 0):
        raise OutOfRange("the smallest difference that matters", study.matters, "a number above 0, in units of the response")
