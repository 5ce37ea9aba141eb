"""Every decision that led to a study, in order and with its reason, and the way from the file through them to the study again."""

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from types import MappingProxyType
from typing import Any

from analysis.adjustments import ADJUSTMENTS
from analysis.reading.choices import Reading
from analysis.refusals import rows_told
from analysis.rounding import fixed, shortest
from analysis.study import MODELS, ROLES, Study
from analysis.table import Table

SUGGESTED, CHOSEN, READ_NOW = "suggested", "chosen", "as the file is read now"
READING = "reading"  # the field of an entry that says how the file is read
KINDS: Mapping[str, str] = MappingProxyType({"header_row": "header"})  # the reader's decision about a choice, where it has another name
Told = tuple[str, str]  # a sentence, and the reason or ""


@dataclass(frozen=True)
class Entry:
    """One decision: the sentence, why, and the field of the study that it set, with its value in plain values."""

    sentence: str
    reason: str = ""
    field: str | None = None  # READING for a way to read the file, None for what the reader decided by itself
    value: Any = None


def log(studies: Sequence[Study], suggested: Mapping[str, str]) -> tuple[Entry, ...]:
    """Return the decisions behind the last of some studies of one file, from the reading of the file on.

    `suggested` holds, for each column that a role was suggested for at first, the reason.
    """
    if not studies:
        return ()
    table = studies[0].table
    steps = zip([Study(table), *studies], studies, strict=False)
    decided = (entry for place, (before, after) in enumerate(steps) for entry in _step(before, after, suggested if place == 0 else {}))
    return (*_read(table), *decided)


def replayed(entries: Iterable[Entry], read: Callable[[Reading], Table]) -> Study:
    """Return the study that the recorded decisions make of a file, which `read` reads; it has the fingerprint of the one recorded."""
    study: Study | None = None
    for entry in entries:
        if entry.field == READING:
            table = read(Reading.from_plain(entry.value))
            study = Study(table) if study is None else replace(study, table=table)
        elif entry.field is not None and study is not None:
            study = replace(study, **{entry.field: entry.value})
    if study is None:
        raise ValueError("a log begins with the reading of its file")
    return study


def of_one_file(history: Iterable[Study | None], file_of: Callable[[Table], object]) -> list[Study]:
    """Return the last studies of a history that belong to one file, told by what `file_of` returns for their tables."""
    found: list[Study] = []
    for study in reversed(list(history)):
        if study is None or (found and file_of(study.table) != file_of(found[-1].table)):
            break
        found.append(study)
    return found[::-1]


def _read(table: Table) -> list[Entry]:
    rows = f"{fixed(table.rows, 0)} row{'' if table.rows == 1 else 's'}"
    start = Entry(f"“{table.name}” was read: {rows} of data.", "", READING, table.reading.to_plain())
    return [start, *(Entry(note, "read from the file") for note in table.notes)]


def _step(before: Study, after: Study, suggested: Mapping[str, str]) -> list[Entry]:
    """Return what was decided from one study to the next; what follows from another reading of the file gives that as its reason."""
    if before.table.reading == after.table.reading:
        return _between(before, after, suggested)
    follows = [replace(entry, reason=READ_NOW if entry.reason == CHOSEN else entry.reason) for entry in _between(before, after, suggested)]
    return [*_read_anew(before.table, after.table), *follows]


def _read_anew(before: Table, after: Table) -> list[Entry]:
    """Return the reader's choices that changed, in its own sentences; the last carries the whole reading."""
    old, new = before.reading.to_plain(), after.reading.to_plain()
    told = {decision.kind: decision.sentence for decision in after.decisions}
    sentences = [told.get(KINDS.get(name, name), f"The {name.replace('_', ' ')} is decided by the reader.") for name in _changed(old, new)]
    *first, last = sentences
    return [*(Entry(sentence, CHOSEN) for sentence in first), Entry(last, CHOSEN, READING, new)]


def _between(before: Study, after: Study, suggested: Mapping[str, str]) -> list[Entry]:
    """Return what was decided from one study to the next, an entry for each sentence; the last of a field carries its value."""
    old, new = before.choices(), after.choices()
    entries: list[Entry] = []
    for field in (name for name in new if old[name] != new[name]):
        told = _role(field, new[field], suggested) if field in ROLES else SENTENCES.get(field, _plain(field))(old[field], new[field])
        *first, (sentence, reason) = told or [(f"The choices of {field} were put in another order.", CHOSEN)]
        entries += [Entry(*other) for other in first]
        entries.append(Entry(sentence, reason, field, new[field]))
    return entries


def _role(field: str, column: str | None, suggested: Mapping[str, str]) -> list[Told]:
    word = ROLES[field].capitalize()
    if column is None:
        return [(f"{word} is no column any longer.", CHOSEN)]
    why = suggested.get(column)
    return [(f"{word} is “{column}”.", CHOSEN if why is None else f"{SUGGESTED}: {why}")]


def _plain(field: str) -> Callable[[Any, Any], list[Told]]:
    return lambda old, new: [(f"The {field.replace('_', ' ')} is {new}.", CHOSEN)]


def _keep(old: Mapping[str, Any], new: Mapping[str, Any]) -> list[Told]:
    told = []
    for column in _changed(old, new):
        levels = "all levels in their natural order" if column not in new else ", ".join(f"“{level}”" for level in new[column])
        told.append((f"Analysed of “{column}”: {levels}.", CHOSEN))
    return told


def _relabel(old: Mapping[str, Any], new: Mapping[str, Any]) -> list[Told]:
    told = []
    for column in _changed(old, new):
        names, earlier = new.get(column, {}), old.get(column, {})
        for level in _changed(earlier, names):
            what = f"is analysed as “{names[level]}”" if level in names else "goes by its own name again"
            told.append((f"“{level}” of “{column}” {what}.", CHOSEN))
    return told


def _apart(old: Mapping[str, Any], new: Mapping[str, Any]) -> list[Told]:
    pairs = [(column, level) for column in new for level in _changed(old.get(column, {}), new[column])]
    return [(f"“{level}” and “{new[column][level]}” of “{column}” are kept apart.", CHOSEN) for column, level in pairs]


def _control(old: Mapping[str, str], new: Mapping[str, str]) -> list[Told]:
    named = {column: f"“{new[column]}”" if column in new else "the first one again" for column in _changed(old, new)}
    return [(f"The control level of “{column}” is {level}.", CHOSEN) for column, level in named.items()]


def _amounts(old: Mapping[str, bool], new: Mapping[str, bool]) -> list[Told]:
    words = {True: "count as amounts", False: "count as groups", None: "count as they look again"}
    return [(f"The levels of “{column}” {words[new.get(column)]}.", CHOSEN) for column in _changed(old, new)]


def _set_aside(old: Mapping[int, str], new: Mapping[int, str]) -> list[Told]:
    by_reason: dict[str, list[int]] = {}
    for row in _changed(old, new):
        by_reason.setdefault(new.get(row, ""), []).append(row)
    return [
        (f"{rows_told(rows, len(rows)).capitalize()} {'set aside' if why else 'put back'}.", why or CHOSEN)
        for why, rows in by_reason.items()
    ]


def _matters(old: float | None, new: float | None) -> list[Told]:
    size = "not given any longer" if new is None else shortest(new)
    return [(f"The smallest difference that matters is {size}.", CHOSEN)]


def _story(old: Mapping[str, Any], new: Mapping[str, Any]) -> list[Told]:
    what = {"kept": "comparisons kept", "order": "order of the boards", "dropped": "boards told", "claims": "claims", "notes": "notes"}
    return [(f"The story was changed: {', '.join(what[part] for part in _changed(old, new))}.", CHOSEN)]


def _changed(old: Mapping[Any, Any], new: Mapping[Any, Any]) -> list[Any]:
    """Return the keys whose value is another, or which are there on one side alone."""
    return [key for key in {**old, **new} if old.get(key) != new.get(key)]


SENTENCES: Mapping[str, Callable[[Any, Any], list[Told]]] = MappingProxyType(
    {
        "keep": _keep,
        "relabel": _relabel,
        "apart": _apart,
        "control": _control,
        "amounts": _amounts,
        "set_aside": _set_aside,
        "matters": _matters,
        "story": _story,
        "model": lambda old, new: [(f"The model is fitted {MODELS[new]}.", CHOSEN)],
        "scale": lambda old, new: [(f"The scale analysed is {'as measured' if new == 'none' else new}.", CHOSEN)],
        "confidence": lambda old, new: [(f"Intervals have a confidence of {shortest(100 * new)} percent.", CHOSEN)],
        "adjust": lambda old, new: [(f"Families of comparisons are adjusted by: {ADJUSTMENTS[new].word}.", CHOSEN)],
    }
)
