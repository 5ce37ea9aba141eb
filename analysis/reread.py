"""What of a study still stands when its file is read another way: roles, changes of levels, rows set aside."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, fields
from typing import Any

import numpy as np

from analysis.naming import listed
from analysis.refusals import Refusal, rows_told
from analysis.relabelling import relabelled
from analysis.roles import Roles
from analysis.study import NEEDED_ROLES, ROLES, Study
from analysis.table import Table

OF_COLUMNS = ("keep", "relabel", "control", "apart", "amounts")  # choices that are kept by column
GONE = "not there as the file is read now"


@dataclass(frozen=True)
class Carried:
    """A study of the table as it is read now, and what had to be dropped on the way, a sentence each."""

    study: Study
    dropped: tuple[str, ...]


def carried(study: Study, table: Table, guessed: Roles) -> Carried:
    """Return what a study becomes on another reading of its file: what still holds is kept, roles without a column are guessed."""
    dropped: list[str] = []
    roles = _roles(study, table, guessed, dropped)
    choices: dict[str, Any] = {f.name: getattr(study, f.name) for f in fields(study) if f.name not in ("table", *ROLES)}
    choices |= _levels(study, table, dropped)
    choices["set_aside"] = _aside(study, table, dropped)
    if roles["response"] != study.response and study.matters is not None:
        choices["matters"] = None
        dropped.append("The smallest difference that matters belonged to another response.")
    return Carried(Study(table, **{**choices, **roles}), tuple(dropped))


def _roles(study: Study, table: Table, guessed: Roles, dropped: list[str]) -> dict[str, str | None]:
    """Return the column of each role: the one it had where that still serves, else a guess that no other role has taken."""
    had = {role: getattr(study, role) for role in ROLES}
    roles: dict[str, str | None] = {role: column if _serves(table, role, column) else None for role, column in had.items()}
    whole = all(had[role] is not None for role in NEEDED_ROLES)
    for role, word in ROLES.items():
        if roles[role] is None and not (whole and had[role] is None):
            guess = getattr(guessed, role)
            roles[role] = guess if guess not in roles.values() else None
        if had[role] is not None and had[role] != roles[role]:
            now = "no column" if roles[role] is None else f"“{roles[role]}”"
            dropped.append(f"{word.capitalize()} was “{had[role]}”, which is {GONE}; it is {now} now.")
    return roles


def _serves(table: Table, role: str, column: str | None) -> bool:
    if column not in table.names:
        return False
    if role != "response":
        return True
    try:
        table.column(str(column)).as_response()
    except Refusal:
        return False
    return True


def _levels(study: Study, table: Table, dropped: list[str]) -> dict[str, Any]:
    """Return the choices that are kept by column, without columns and levels that are gone."""
    kept: dict[str, dict[str, Any]] = {name: {} for name in OF_COLUMNS}
    for column in dict.fromkeys(column for name in OF_COLUMNS for column in getattr(study, name)):
        if column not in table.names:
            dropped.append(f"Column “{column}”, whose levels had been looked after, is {GONE}.")
            continue
        for name, value in _of_column(study, table, column, dropped).items():
            if value not in (None, {}, ()):
                kept[name][column] = value
    return kept


def _of_column(study: Study, table: Table, column: str, dropped: list[str]) -> dict[str, Any]:
    """Return what is kept of one column's choices: names, order, control, look-alikes kept apart, and whether its numbers are amounts."""
    read, names = table.column(column).as_levels(), study.relabel.get(column, {})
    relabel = {level: name for level, name in names.items() if level in read.labels}
    now = relabelled(read, relabel).labels
    before = relabelled(study.table.column(column).as_levels(), names).labels
    order = study.keep.get(column)
    apart = {level: other for level, other in study.apart.get(column, {}).items() if {level, other} <= set(now)}
    control = study.control.get(column)
    _told_gone(column, [*names, *(order or ()), *([] if control is None else [control])], {*read.labels, *now}, dropped)
    return {
        "relabel": relabel,
        "keep": None if order is None else _order(order, before, now),
        "control": control if control in now else None,
        "apart": apart,
        "amounts": study.amounts.get(column),
    }


def _order(order: Iterable[str], before: tuple[str, ...], now: tuple[str, ...]) -> tuple[str, ...] | None:
    """Return the levels kept in their order, with levels that were not there before at the end; None where that is nothing or nature's."""
    kept = tuple(level for level in order if level in now) + tuple(level for level in now if level not in before)
    return None if kept in (now, ()) else kept


def _told_gone(column: str, levels: Iterable[str], now: set[str], dropped: list[str]) -> None:
    gone = [f"“{level}”" for level in dict.fromkeys(levels) if level not in now]
    if gone:
        dropped.append(f"{listed(gone)} of “{column}” {'is' if len(gone) == 1 else 'are'} {GONE}.")


def _aside(study: Study, table: Table, dropped: list[str]) -> Mapping[int, str]:
    """Return the rows set aside that are rows of the table still; on another sheet, or in another table, none is."""
    old, new = study.table.reading, table.reading
    same = (old.sheet, old.table) == (new.sheet, new.table)
    rows = set(np.asarray(table.file_rows)[np.isin(table.file_rows, list(study.set_aside))].tolist()) if same and study.set_aside else set()
    gone = [row for row in study.set_aside if row not in rows]
    if gone:
        are = "is" if len(gone) == 1 else "are"
        dropped.append(f"{rows_told(gone).capitalize()}, set aside before, {are} {GONE}.")
    return {row: why for row, why in study.set_aside.items() if row in rows}
