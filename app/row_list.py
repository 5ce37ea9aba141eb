"""How the rows of the data are looked through, set aside with a reason and put back, and what deserves a second look."""

from collections.abc import Mapping, Sequence
from typing import Any

import streamlit as st

from analysis import row_edits
from analysis.implausible import Suspicion
from analysis.study import ROLES, Study
from app import desk, lay_out_words, paper, sheets, words

STRETCH = 200  # rows shown at a time
HEIGHT = 280  # px of the rows; the rest scrolls


def show(study: Study, left_out: Sequence[Mapping[str, Any]]) -> None:
    """Show what is worth a look, and the rows with those that take no part struck through."""
    odd = desk.worth_a_look()
    with st.expander(lay_out_words.rows_head(len(odd)), key="rows"):
        _odd(odd)
        _set_aside(study)
        _rows(study, {int(entry["row"]): str(entry["why"]) for entry in left_out})


def _odd(odd: Sequence[Suspicion]) -> None:
    """Show what is worth a look, each with a way to name its rows in the field below; nothing is set aside by it."""
    for place, suspicion in enumerate(odd):
        with st.container(horizontal=True, vertical_alignment="center", key=f"odd_{place}"):
            st.html(paper.offer(suspicion.sentence), width="content")
            st.button(
                lay_out_words.take_up(suspicion.rows), key=f"odd_take_{place}", type="tertiary",
                on_click=desk.fill, args=("rows_named", ", ".join(str(row) for row in suspicion.rows)),
            )  # fmt: skip
    if odd:
        st.html(paper.caption(lay_out_words.LOOK))


def _set_aside(study: Study) -> None:
    """Show where rows and their reason are typed, and the rows set aside so far."""
    with st.container(horizontal=True, vertical_alignment="bottom"):
        st.text_input(words.ROWS, key="rows_named", placeholder=words.ROWS_EXAMPLE, width=170)
        st.text_input(words.WHY, key="rows_why", placeholder=words.WHY_EXAMPLE, width=330)
        st.button(words.SET_ASIDE, key="rows_aside", **desk.bind_typed(row_edits.set_aside, "rows_named", "rows_why"))
    if study.set_aside:
        st.multiselect(
            words.ASIDE, list(study.set_aside), format_func=lambda row: words.row_aside(row, study.set_aside[row]), help=words.ASIDE_HELP,
            **desk.bind_edit("rows_kept_aside", list(study.set_aside), row_edits.only_aside),
        )  # fmt: skip


def _rows(study: Study, why: Mapping[int, str]) -> None:
    """Show a stretch of the rows, the columns that have a role first."""
    table, columns = study.table, [name for name in (getattr(study, role) for role in ROLES) if name is not None]
    if not columns:
        return
    stretches = row_edits.stretches(table, STRETCH)
    start, stop = stretches[0]
    if len(stretches) > 1:
        told = {f"rows {table.file_rows[first]} to {table.file_rows[last - 1]}": (first, last) for first, last in stretches}
        start, stop = told[st.selectbox(words.ROWS, list(told), width=300, **desk.bind_view("rows_shown", list(told)))]
    numbers = [int(row) for row in table.file_rows[start:stop]]
    with st.container(height=HEIGHT, border=False, key="rows_table"):
        st.html(paper.table(sheets.rows(numbers, columns, row_edits.with_levels(study, columns, start, stop), why)))
