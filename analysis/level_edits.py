"""What a change of one column's levels makes of a study: renamed, merged, moved, left out, taken back in."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from analysis import counted
from analysis.reading import look_alikes
from analysis.refusals import LevelNameMissing
from analysis.relabelling import relabelled
from analysis.study import Study
from analysis.table import Levels

Changes = Mapping[str, Any]  # fields of a study and their new values, as `dataclasses.replace` takes them


@dataclass(frozen=True)
class Level:
    """One level as it stands now."""

    name: str
    rows: int  # analysed; of a level left out, those that it would bring
    analysed: bool  # False where the level was left out


@dataclass(frozen=True)
class Suggestion:
    """Levels that may be another one written differently."""

    levels: tuple[Level, ...]
    into: Level  # the commonest
    ways: tuple[str, ...]  # in which each of the levels differs from it: "case", "one letter", …


def levels_of(study: Study, column: str) -> tuple[Level, ...]:
    """Return the levels of a column under their names of now: those analysed in their order, then those left out."""
    levels = _levels(study, column)
    rows = counted.level_rows(study, column)
    kept = _order(study, column, levels)
    gone = [label for label in levels.labels if label not in kept]
    return (*(Level(name, rows[name], True) for name in kept), *(Level(name, rows[name], False) for name in gone))


def suggestions(study: Study, column: str) -> tuple[Suggestion, ...]:
    """Return the merges that look-alike levels suggest, one for each level that stays, without those that were refused."""
    refused = study.apart.get(column, {})
    groups: dict[str, list[str]] = {}
    for rarer, into in look_alikes.merges(_levels(study, column)).items():
        if refused.get(rarer) != into:
            groups.setdefault(into, []).append(rarer)
    levels = {level.name: level for level in levels_of(study, column)} if groups else {}
    return tuple(Suggestion(tuple(levels[name] for name in names), levels[into], _ways(names, into)) for into, names in groups.items())


def _ways(names: Sequence[str], into: str) -> tuple[str, ...]:
    """Return in what each spelling differs from the one that stays; one that is like another spelling differs in several letters."""
    return tuple(look_alikes.difference(name, into) or "a few letters" for name in names)


def merge_notes(study: Study, column: str) -> frozenset[str]:
    """Return the notes that offer a merge, which the suggestions say better as long as they are open."""
    return frozenset(look_alikes.notes(column, study.table.column(column).as_levels().labels))


def merged(study: Study, column: str, levels: Sequence[str], into: str) -> Changes:
    """Return the changes that make levels part of another."""
    changes: dict[str, Any] = {}
    for level in levels:
        changes |= _named(replace(study, **changes), column, level, into)
    return changes


def kept_apart(study: Study, column: str, levels: Sequence[str], other: str) -> Changes:
    """Return the change that remembers that look-alike levels are not the other one."""
    return {"apart": {**study.apart, column: {**study.apart.get(column, {}), **dict.fromkeys(levels, other)}}}


def renamed(study: Study, column: str, level: str, name: str) -> Changes:
    """Return the changes that give a level another name; the name of another level makes the two one.

    Raises LevelNameMissing for a name without a letter.
    """
    if not name.strip():
        raise LevelNameMissing(column, level)
    return _named(study, column, level, " ".join(name.split()))


def moved(study: Study, column: str, level: str, places: int) -> Changes:
    """Return the change that moves an analysed level by some places, at most to either end."""
    order = list(_order(study, column, _levels(study, column)))
    place = order.index(level)
    order.insert(min(max(place + places, 0), len(order) - 1), order.pop(place))
    return _kept(study, column, order)


def left_out(study: Study, column: str, level: str) -> Changes:
    """Return the changes that leave a level out; a control level is one no longer."""
    order = [name for name in _order(study, column, _levels(study, column)) if name != level]
    control = {factor: name for factor, name in study.control.items() if (factor, name) != (column, level)}
    return {**_kept(study, column, order), "control": control}


def taken_back(study: Study, column: str, level: str) -> Changes:
    """Return the change that takes a level back in, before the first level that naturally follows it."""
    labels = _levels(study, column).labels
    order = list(_order(study, column, _levels(study, column)))
    later = (k for k, name in enumerate(order) if labels.index(name) > labels.index(level))
    order.insert(next(later, len(order)), level)
    return _kept(study, column, order)


def controlled(study: Study, column: str, level: str | None) -> Changes:
    """Make a level the one that the others of its factor are compared with; None for the first level."""
    others = {factor: name for factor, name in study.control.items() if factor != column}
    return {"control": others if level is None else {**others, column: level}}


def _levels(study: Study, column: str) -> Levels:
    return relabelled(study.table.column(column).as_levels(), study.relabel.get(column, {}))


def _order(study: Study, column: str, levels: Levels) -> Sequence[str]:
    return tuple(study.keep.get(column, levels.labels))


def _kept(study: Study, column: str, order: Sequence[str]) -> Changes:
    """Return the order to keep; the natural order of all levels needs no entry."""
    keep = {name: levels for name, levels in study.keep.items() if name != column}
    natural = tuple(order) == _levels(study, column).labels
    return {"keep": keep if natural else {**keep, column: tuple(order)}}


def _named(study: Study, column: str, level: str, name: str) -> Changes:
    read = study.table.column(column).as_levels().labels
    now = study.relabel.get(column, {})
    given = {label: name if now.get(label, label) == level else now.get(label, label) for label in read}
    names = {label: new for label, new in given.items() if new != label}
    others = {other: known for other, known in study.relabel.items() if other != column}
    changes: dict[str, Any] = {"relabel": {**others, column: names} if names else others}
    if column in study.keep:
        order = dict.fromkeys(name if kept == level else kept for kept in study.keep[column])
        changes["keep"] = {**study.keep, column: tuple(order)}
    if study.control.get(column) == level:
        changes["control"] = {**study.control, column: name}
    return changes
