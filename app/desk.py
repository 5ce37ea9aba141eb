"""The open study and its history: the only module that knows the session, so that undo and page changes cannot disagree."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from typing import Any

import streamlit as st

from analysis import log
from analysis.findings import Findings
from analysis.implausible import Suspicion
from analysis.refusals import Refusal
from analysis.study import ROLES, Study
from analysis.study_file import Saved
from analysis.table import Table
from analysis.unit_question import UnitAnswer
from app import found, keeping

HISTORY = 200  # studies kept for undo
TABLE, READING, CHOICE = "table", "reading", "choice"
ADDRESS = "study"  # what the address calls the place where the open study is kept
STATE = "desk"  # the one entry of the session that matters; widgets are views of it


@dataclass(frozen=True, eq=False)
class Brought:
    """A file as it was brought, from which its table can be read again in another way."""

    content: bytes
    name: str
    place: str  # where studies of it are kept


@dataclass(frozen=True, eq=False)
class State:
    """All that a session remembers."""

    study: Study | None = None
    past: tuple[Study | None, ...] = ()
    future: tuple[Study | None, ...] = ()
    complaint: str | None = None  # why the last file or choice was not taken
    about: str = TABLE  # what the complaint is about
    views: Mapping[str, Any] | None = None  # what is looked at, which no analysis depends on
    files: Mapping[str, Brought] = field(default_factory=dict)  # by the fingerprint of each table read from them
    news: tuple[str, ...] = ()  # what the last change brought along, told until the next one
    unkept: str | None = None  # why the open study could not be written down
    stamps: Mapping[str, str] = field(default_factory=dict)  # of what this session wrote or opened last, by place


def _state() -> State:
    return st.session_state.get(STATE) or State()


def _remember(**changes: Any) -> None:
    st.session_state[STATE] = replace(_state(), **changes)


def study() -> Study | None:
    """Return the open study, or None before the first table."""
    return _state().study


def complaint(about: str) -> str | None:
    """Return why the last table, or the last choice, was not taken, until something is taken again."""
    return _state().complaint if _state().about == about else None


def complain(sentence: str, about: str) -> None:
    """Tell why a table or a choice was not taken."""
    _remember(complaint=sentence, about=about)


def open_study(new: Study, file: Brought | None = None, news: tuple[str, ...] = ()) -> None:
    """Make a study the open one, of a file where it is the first of its table; the study before can be had back by undo."""
    _open((new,), 0, file, news)


def open_saved(saved: Saved, place: str) -> None:
    """Open a study with its history, as it was saved."""
    _remember(stamps={**_state().stamps, place: keeping.stamp(place) or ""})
    _open(saved.studies, saved.place, Brought(saved.content, saved.name, place), ())


def _open(studies: tuple[Study, ...], at: int, file: Brought | None, news: tuple[str, ...]) -> None:
    now = _state()
    past = (*now.past, now.study, *studies[:at])[-HISTORY:]
    files = now.files if file is None else {**now.files, **{study.table.fingerprint: file for study in studies}}
    _remember(study=studies[at], past=past, future=studies[at + 1 :], complaint=None, files=files, news=news)
    _keep()


def file() -> Brought | None:
    """Return the file that the open table was read from; None where there is none, as for a data frame."""
    now = study()
    return None if now is None else _state().files.get(now.table.fingerprint)


def _place_of(table: Table) -> str:
    """Return where studies of a table's file are kept, or what else tells the table from others."""
    brought = _state().files.get(table.fingerprint)
    return table.fingerprint if brought is None else brought.place


def saved() -> Saved | None:
    """Return the open study with its history and its file; None where there is no file."""
    now, brought = _state(), file()
    if brought is None:
        return None
    past = log.of_one_file([*now.past, now.study], _place_of)
    future = log.of_one_file([*reversed(now.future), now.study], _place_of)[-2::-1]
    return Saved(brought.name, brought.content, (*past, *future), len(past) - 1)


def _keep() -> None:
    """Write the open study down, so that neither a reload nor a restart loses it."""
    brought, written = file(), saved()
    if brought is None or written is None:
        return
    try:
        if keeping.stamp(brought.place) not in (None, _state().stamps.get(brought.place)):  # another window went on with it
            brought = _part_ways(brought)
        stamp = keeping.keep(brought.place, written)
    except OSError as error:
        _remember(unkept=error.strerror or str(error))
    else:
        _remember(unkept=None, stamps={**_state().stamps, brought.place: stamp})


def _part_ways(brought: Brought) -> Brought:
    """Keep what follows at a place of its own, so that two windows on one study lose nothing to each other."""
    own = replace(brought, place=keeping.new_place())
    _remember(files={table: own if file.place == brought.place else file for table, file in _state().files.items()})
    return own


def unkept() -> str | None:
    """Return why the open study could not be written down, or None where it was."""
    return _state().unkept


def news() -> tuple[str, ...]:
    """Return what the last change brought along."""
    return _state().news


def come_back(reopen: Callable[[str], None]) -> None:
    """Open the study that the address names, where a page was loaded anew."""
    if STATE not in st.session_state and ADDRESS in st.query_params:
        reopen(st.query_params[ADDRESS])


def tell_address() -> None:
    """Name the open study in the address, so that the page can be loaded anew."""
    brought = file()
    if brought is None:
        st.query_params.pop(ADDRESS, None)
    elif st.query_params.get(ADDRESS) != brought.place:
        st.query_params[ADDRESS] = brought.place


def change(**fields: Any) -> None:
    """Replace fields of the open study; a choice that is refused leaves it as it was, with the sentence to show."""
    now = study()
    if now is None or all(getattr(now, name) == value for name, value in fields.items()):
        return
    try:
        open_study(replace(now, **fields))
    except Refusal as refusal:
        _remember(complaint=str(refusal), about=CHOICE)


def edit(make: Callable[..., Mapping[str, Any]], *details: Any) -> None:
    """Change the open study by the fields that `make` returns for it and the details; a refusal leaves it as it was."""
    now = study()
    if now is None:
        return
    try:
        changes = make(now, *details)
    except Refusal as refusal:
        _remember(complaint=str(refusal), about=CHOICE)
    else:
        change(**changes)


def assign(role: str, column: str | None) -> None:
    """Give a column a role; a role that held the column before takes over what this role held."""
    now = study()
    if now is None:
        return
    held_by = [other for other in ROLES if other != role and column is not None and getattr(now, other) == column]
    change(**{role: column, **{other: getattr(now, role) for other in held_by}})


def undo() -> None:
    """Go back to the study before the last change."""
    now = _state()
    if now.past:
        _remember(study=now.past[-1], past=now.past[:-1], future=(now.study, *now.future), complaint=None, news=())
        _keep()


def redo() -> None:
    """Take back the last undo."""
    now = _state()
    if now.future:
        _remember(study=now.future[0], past=(*now.past, now.study), future=now.future[1:], complaint=None, news=())
        _keep()


def can_undo() -> bool:
    """Return whether there is a study to go back to."""
    return bool(_state().past)


def can_redo() -> bool:
    """Return whether an undo can be taken back."""
    return bool(_state().future)


def bind(key: str, field: str, take: Callable[[Any], Any] = lambda value: value) -> dict[str, Any]:
    """Tie a widget to a field of the open study: the study is the truth, the widget a view of it."""
    st.session_state[key] = getattr(study(), field)
    return {"key": key, "on_change": lambda: change(**{field: take(st.session_state[key])})}


def bind_role(key: str, role: str) -> dict[str, Any]:
    """Tie a select box to the role of a column."""
    st.session_state[key] = getattr(study(), role)
    return {"key": key, "on_change": lambda: assign(role, st.session_state[key])}


def bind_edit(key: str, value: Any, make: Callable[..., Mapping[str, Any]], *details: Any) -> dict[str, Any]:
    """Tie a widget that shows a value of the open study to the edit that a new value stands for."""
    st.session_state[key] = value
    return {"key": key, "on_change": lambda: edit(make, *details, st.session_state[key])}


def held(key: str) -> Any:
    """Return what a widget holds now, for what follows from using it."""
    return st.session_state[key]


def fill(key: str, text: str) -> None:
    """Put text into a field, as if it had been typed there."""
    st.session_state[key] = text


def bind_typed(make: Callable[..., Mapping[str, Any]], *keys: str) -> dict[str, Any]:
    """Tie a button to the edit that it makes of what was typed; what was typed is gone once it was taken."""
    return {"on_click": lambda: _take_typed(make, keys)}


def _take_typed(make: Callable[..., Mapping[str, Any]], keys: tuple[str, ...]) -> None:
    before = study()
    edit(make, *(st.session_state[key] for key in keys))
    if study() is not before:
        st.session_state.update(dict.fromkeys(keys, ""))


def bind_view(key: str, options: list[Any]) -> dict[str, Any]:
    """Tie a widget to what is looked at, which no result depends on; the first option until another is chosen."""
    kept = (_state().views or {}).get(key)
    st.session_state[key] = kept if kept in options else options[0]
    return {"key": key, "on_change": lambda: _remember(views={**(_state().views or {}), key: st.session_state[key]})}


def bind_views(key: str, options: list[Any]) -> dict[str, Any]:
    """Tie a widget of several choices to what is looked at; choices that are not offered are passed over."""
    st.session_state[key] = [kept for kept in view(key, ()) if kept in options]
    return {"key": key, "on_change": lambda: look_at(**{key: tuple(st.session_state[key])})}


def view(key: str, otherwise: Any) -> Any:
    """Return what is looked at under a key, or the other value where nothing was chosen."""
    return (_state().views or {}).get(key, otherwise)


def look_at(**chosen: Any) -> None:
    """Choose what is looked at, which no result depends on."""
    _remember(views={**(_state().views or {}), **chosen})


def bind_taken(key: str, take: Callable[[Any], None]) -> dict[str, Any]:
    """Tie a widget to what is done with what it takes, once it took something."""
    return {"key": key, "on_change": lambda: take(st.session_state[key])}


def bind_shown(key: str, value: Any, take: Callable[[Any], None]) -> dict[str, Any]:
    """Tie a widget to a value that it shows, and to what is done with another one."""
    st.session_state[key] = value
    return bind_taken(key, take)


def findings() -> Findings | Refusal | None:
    """Return what the open study comes to, the refusal where it cannot be analysed, None where nothing is open."""
    return found.findings(study())


def findings_before(field: str) -> Findings | None:
    """Return what the study came to before the last change, where that change was of this field alone."""
    now, past = study(), _state().past
    old = past[-1] if past else None
    if now is None or old is None or old.fingerprint == now.fingerprint:
        return None
    came_to = found.findings(old) if replace(old, **{field: getattr(now, field)}).fingerprint == now.fingerprint else None
    return came_to if isinstance(came_to, Findings) else None


def crossing() -> Mapping[str, Any] | None:
    """Return the layout of the open study with its counts, also where it cannot be analysed; None where there is nothing to count in."""
    return found.crossing(study())


def worth_a_look() -> tuple[Suspicion, ...]:
    """Return the values of the open study that deserve a second look; none where it cannot be laid out."""
    return found.worth_a_look(study())


def reasons() -> Mapping[str, str]:
    """Return why each column of the open table got the role that was suggested for it, by column."""
    now = study()
    return {} if now is None else found.roles(now.table).reasons


def decisions() -> tuple[log.Entry, ...]:
    """Return every decision that led to the open study, in order; what was undone is not among them."""
    studies = log.of_one_file([*_state().past, study()], _place_of)
    return log.log(studies, found.roles(studies[0].table).reasons if studies else {})


def asked_units() -> tuple[UnitAnswer, ...]:
    """Return what each answer to the question of the unit means, where a column names the units or looks as if it did."""
    return found.asked_units(study())
