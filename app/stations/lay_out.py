"""Lay out: which column is what, which levels there are, and whether the design can answer the questions."""

import streamlit as st

from analysis import level_edits
from analysis.findings import Findings
from analysis.refusals import Refusal
from analysis.study import NEEDED_ROLES, Study
from app import desk, level_list, paper, records, row_list, sheets, stage, words
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
        found = desk.findings()
        if isinstance(found, Refusal):
            st.html(paper.notice(str(found)))
        elif found is not None:
            _design(found)
        factors = [(column, key) for key, column in (("row", study.row_factor), ("column", study.column_factor)) if column is not None]
        for column, key in factors:
            level_list.offers(study, column, key)
        for column, key in factors:
            level_list.changes(study, column, key)
        row_list.show(study, found.design["left_out"] if isinstance(found, Findings) else [])
        entries = desk.decisions()
        with st.expander(words.decisions_head(len(entries)), key="decisions"):
            st.html(paper.table(sheets.decisions(entries)))
        if isinstance(found, Findings):
            _account(found)


def _role(study: Study, key: str, role: str) -> None:
    """Show the choice of one role, and beneath it the reason for the suggestion."""
    column, needed = getattr(study, role), role in NEEDED_ROLES
    with st.container(gap=None):
        st.selectbox(
            words.ROLES[role], list(study.table.names), index=None, required=needed, placeholder=words.CHOOSE if needed else words.NONE,
            **desk.bind_role(key, role),
        )  # fmt: skip
        st.html(paper.caption(desk.reasons().get(column, words.CHOSEN) if column else words.ROLE_MEANS[role]))


def _unit_question(study: Study) -> None:
    """Show what each answer leaves to judge chance by, where a column names the units or looks as if it did."""
    answers = desk.asked_units()
    if answers:
        st.html(paper.question(words.ONE_UNIT))
        st.html(paper.bullets(words.unit_answer(answer, study.unit) for answer in answers))


def _design(findings: Findings) -> None:
    design = findings.design
    st.html(paper.heading(words.layout_sentence(findings)))
    stage.figure(grid.counts(design, stage.at_hand()), "grid", "", grid.counts_alt(design))
    st.html(paper.text(" ".join(sentence for sentence in (words.balance(findings), words.singles(design)) if sentence)))
    for factor in findings.study.factors:
        st.html(paper.levels(factor, [(str(m.level), int(m.n)) for m in records.lines(findings.marginal_means[factor])]))


def _account(findings: Findings) -> None:
    design = findings.design
    st.html(paper.text(words.reckoning(design["observations"], len(design["left_out"]))))
    if design["left_out"]:
        with st.expander(f"The {words.counted(len(design['left_out']), 'row')} left out, with reasons"):
            st.html(paper.table(sheets.left_out(design["left_out"])))
    settled = frozenset[str]().union(*(level_edits.settled_notes(findings.study, factor) for factor in findings.study.factors))
    notes = [note for note in findings.notes if note not in settled]
    if notes:
        st.html(paper.question("Worth knowing"))
        st.html(paper.bullets(notes))
