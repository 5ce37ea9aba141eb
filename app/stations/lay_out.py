"""Lay out: which column is what, which levels there are, and whether the design can answer the questions."""

from collections.abc import Mapping, Sequence
from typing import Any

import streamlit as st

from analysis import amounts, counted, level_edits
from analysis.findings import Findings
from analysis.refusals import Refusal
from analysis.study import NEEDED_ROLES, Study
from app import desk, lay_out_words, level_list, paper, row_list, sheets, stage, words
from app.figures import grid

ROLES = (
    ("role_response", "response"),
    ("role_row", "row_factor"),
    ("role_column", "column_factor"),
    ("role_block", "block"),
    ("role_unit", "unit"),
)


def show() -> None:
    """Show the station."""
    study = desk.study()
    if study is None:
        stage.findings("Lay out")
        return
    left, right = st.columns([4, 9], gap="large")
    with left:
        st.html(paper.heading("Lay out", "which column is what"))
        for key, role in ROLES:
            _role(study, key, role)
        _unit_question(study)
    with right:
        stage.complaint()
        found, design = desk.findings(), desk.crossing()
        if isinstance(found, Refusal):
            st.html(paper.notice(str(found)))
        if design is not None:
            _design(design)
        _edits(study, [] if design is None else design["left_out"])
        if design is not None:
            _account(study, design)
        if isinstance(found, Findings):
            _notes(found)


def _role(study: Study, key: str, role: str) -> None:
    """Show the choice of one role, beneath it the reason for the suggestion, and what its numbers are where it is a factor of numbers."""
    column, needed = getattr(study, role), role in NEEDED_ROLES
    with st.container(gap=None):
        st.selectbox(
            words.ROLES[role], list(study.table.names), index=None, required=needed, placeholder=words.CHOOSE if needed else words.NONE,
            **desk.bind_role(key, role),
        )  # fmt: skip
        st.html(paper.caption(desk.reasons().get(column, words.CHOSEN) if column else words.ROLE_MEANS[role]))
        if column is not None and role in ("row_factor", "column_factor"):
            _amounts(study, column, f"{key}_amounts")


def _amounts(study: Study, column: str, key: str) -> None:
    """Ask whether levels that are numbers are amounts or groups."""
    asked = amounts.question(study, column)
    if asked is not None:
        st.radio(
            lay_out_words.amounts_asked(asked), list(lay_out_words.AMOUNTS_OR_GROUPS), format_func=lay_out_words.AMOUNTS_OR_GROUPS.get,
            horizontal=True, **desk.bind_edit(key, asked.are_amounts, amounts.counted_as, column),
        )  # fmt: skip
        st.html(paper.caption(lay_out_words.amounts_told(asked)))


def _unit_question(study: Study) -> None:
    """Ask what one unit is, with what each answer leaves to judge chance by, where a column names the units or looks as if it did."""
    answers = desk.asked_units()
    if answers:
        st.radio(
            words.ONE_UNIT, [answer.unit for answer in answers], format_func=lay_out_words.one_unit,
            captions=[words.literal(lay_out_words.unit_told(answer)) for answer in answers],
            **desk.bind_edit("unit_asked", study.unit, _unit),
        )  # fmt: skip


def _unit(study: Study, column: str | None) -> Mapping[str, Any]:
    return {"unit": column}


def _design(design: Mapping[str, Any]) -> None:
    st.html(paper.heading(lay_out_words.layout(design)))
    stage.figure(grid.counts(design, stage.at_hand()), "grid", "", grid.counts_alt(design))
    first, *others = lay_out_words.cells(design)
    st.html(paper.text(first))
    if others:
        st.html(paper.bullets(others))


def _edits(study: Study, left_out: Sequence[Mapping[str, Any]]) -> None:
    """Show what can be changed of levels and rows, and what was decided so far."""
    factors = [(column, key) for key, column in (("row", study.row_factor), ("column", study.column_factor)) if column is not None]
    for column, key in factors:
        level_list.offers(study, column, key)
    for column, key in factors:
        level_list.changes(study, column, key)
    row_list.show(study, left_out)
    entries = desk.decisions()
    with st.expander(words.decisions_head(len(entries)), key="decisions"):
        st.html(paper.table(sheets.decisions(entries)))


def _account(study: Study, design: Mapping[str, Any]) -> None:
    account = counted.account(study, design["observations"], design["left_out"])
    st.html(paper.text(lay_out_words.reckoning(account)))
    if design["left_out"]:
        with st.expander(lay_out_words.left_out_head(account), key="left_out"):
            st.html(paper.table(sheets.left_out(design["left_out"])))


def _notes(findings: Findings) -> None:
    """Show what the levels, the response and the layout mean for the answers; what the reader decided stands at Bring."""
    study = findings.study
    told_elsewhere = frozenset(study.table.notes).union(*(level_edits.merge_notes(study, factor) for factor in study.factors))
    notes = [note for note in findings.notes if note not in told_elsewhere]
    if notes:
        st.html(paper.question("Worth knowing"))
        st.html(paper.bullets(notes))
