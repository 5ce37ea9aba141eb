"""The open study and its history: the only module that knows the session, so that undo and page changes cannot disagree."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

import streamlit as st

from analysis import analyse, counted, log, read_table
from analysis.findings import Findings
from analysis.implausible import Suspicion, suspicions
from analysis.refusals import Refusal
from analysis.roles import Roles, guess_roles
from analysis.study import ROLES, Study
from analysis.table import Table
from analysis.unit_question import UnitAnswer, unit_answers
from app import samples

HISTORY = 200  # studies kept for undo
TABLE, CHOICE = "table", "choice"
PASTED = "pasted cells"
STATE = "desk"  # the one entry of the session that matters; widgets are views of it


@dataclass(frozen=True, eq=False)
class State:
    """All that a session remembers."""

    study: Study | None = None
    past: tuple[Study | None, ...] = ()
    future: tuple[Study | None, ...] = ()
    complaint: str | None = None  # why the last file or choice was not taken
    about: str = TABLE  # what the complaint is about
    views: Mapping[str, Any] | None = None  # what is looked at, which no analysis depends on


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


def open_study(new: Study | None) -> None:
    """Make a study the open one; the one before can be had back by undo."""
    now = _state()
    _remember(study=new, past=(*now.past, now.study)[-HISTORY:], future=(), complaint=None)


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
        _remember(study=now.past[-1], past=now.past[:-1], future=(now.study, *now.future), complaint=None)


def redo() -> None:
    """Take back the last undo."""
    now = _state()
    if now.future:
        _remember(study=now.future[0], past=(*now.past, now.study), future=now.future[1:], complaint=None)


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


def bind_upload(key: str) -> dict[str, Any]:
    """Tie an uploader to the desk: a file is read once, in its callback, and is not needed afterwards."""
    return {"key": key, "on_change": lambda: _take_upload(key)}


def bind_paste(key: str) -> dict[str, Any]:
    """Tie a text area to the desk: cells pasted into it are read like a file."""
    return {"key": key, "on_change": lambda: _take_pasted(st.session_state[key])}


def bind_sample(key: str) -> dict[str, Any]:
    """Tie the choice of samples to the desk: choosing one opens it."""
    now = study()
    name = None if now is None else now.table.name
    st.session_state[key] = next((sample.file for sample in samples.SAMPLES if Path(sample.file).name == name), None)
    return {"key": key, "on_change": lambda: _take_sample(st.session_state[key])}


def _take_upload(key: str) -> None:
    file = st.session_state[key]
    if file is not None:
        bring(file.getvalue(), file.name)


def _take_pasted(text: str) -> None:
    if text.strip():
        bring(text.encode(), PASTED)


def _take_sample(file: str | None) -> None:
    if file is not None:
        bring(samples.path_of(file).read_bytes(), file)


def bring(content: bytes, name: str) -> None:
    """Read a file and open a study of it with the roles that its columns suggest; a refusal leaves the open study as it is."""
    try:
        table = read_table(content, name=name)
        roles = guess_roles(table)
        open_study(Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit))
    except Refusal as refusal:
        _remember(complaint=str(refusal), about=TABLE)


@st.cache_resource(max_entries=64, show_spinner=False)
def _findings(fingerprint: str, _study: Study) -> Findings:
    return analyse(_study)


def findings() -> Findings | Refusal | None:
    """Return what the open study comes to, the refusal where it cannot be analysed, None where nothing is open."""
    now = study()
    if now is None:
        return None
    try:
        return _findings(now.fingerprint, now)
    except Refusal as refusal:
        return refusal


@st.cache_resource(max_entries=16, show_spinner=False)
def _crossing(fingerprint: str, _study: Study) -> Mapping[str, Any]:
    return counted.crossing(_study)


def crossing() -> Mapping[str, Any] | None:
    """Return the layout of the open study with its counts, also where it cannot be analysed; None where there is nothing to count in."""
    now, found = study(), findings()
    if now is None or isinstance(found, Findings):
        return None if found is None else found.design  # type: ignore[union-attr]
    try:
        return _crossing(now.fingerprint, now)
    except Refusal:
        return None


@st.cache_resource(max_entries=16, show_spinner=False)
def _suspicions(fingerprint: str, _study: Study) -> tuple[Suspicion, ...]:
    return suspicions(_study)


def worth_a_look() -> tuple[Suspicion, ...]:
    """Return the values of the open study that deserve a second look; none where it cannot be laid out."""
    now = study()
    return () if now is None or isinstance(findings(), Refusal) else _suspicions(now.fingerprint, now)


@st.cache_resource(max_entries=16, show_spinner=False)
def _roles(fingerprint: str, _table: Table) -> Roles:
    return guess_roles(_table)


def reasons() -> Mapping[str, str]:
    """Return why each column of the open table got the role that was suggested for it, by column."""
    now = study()
    return {} if now is None else _roles(now.table.fingerprint, now.table).reasons


def decisions() -> tuple[log.Entry, ...]:
    """Return every decision that led to the open study, in order; what was undone is not among them."""
    studies = log.of_one_file([*_state().past, study()], lambda table: table.fingerprint)
    return log.log(studies, _roles(studies[0].table.fingerprint, studies[0].table).reasons if studies else {})


@st.cache_resource(max_entries=16, show_spinner=False)
def _unit_answers(fingerprint: str, _study: Study, column: str) -> tuple[UnitAnswer, UnitAnswer]:
    return unit_answers(_study, column)


def asked_units() -> tuple[UnitAnswer, ...]:
    """Return what each answer to the question of the unit means, where a column names the units or looks as if it did."""
    now = study()
    if now is None or isinstance(findings(), Refusal):
        return ()
    column = now.unit or _roles(now.table.fingerprint, now.table).unit
    return () if column is None or column in (now.response, now.block, *now.factors) else _unit_answers(now.fingerprint, now, column)
