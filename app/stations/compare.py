"""Compare: which levels or combinations differ, by how much; the grid is pointed at, or the question is chosen in words."""

import numpy as np
import pandas as pd
import streamlit as st

from analysis.adjustments import ADJUSTMENTS
from analysis.findings import Findings
from analysis.refusals import Refusal
from app import asked_words, asking, desk, paper, sheets, stage, words
from app.asking import Asked
from app.figures import differences, grid, pointing

FAMILY, WITHIN, CELLS = "compare_family", "compare_within", "compare_cells"
EVERY = ""  # the choice of all slices


def show() -> None:
    """Show the station."""
    findings = stage.findings("Compare")
    if findings is None:
        return
    left, right = st.columns([5, 8], gap="large")
    with left, st.container(gap="xsmall"):
        st.html(paper.heading("Compare", "which differ, and by how much"))
        asked = _question(findings)
        stage.complaint()
        _grid(findings, asked)
    with right, st.container(gap="xsmall"):
        _answer(findings, asked)


def _open_question(findings: Findings) -> Asked:
    family = desk.view(FAMILY, next(iter(findings.comparisons)))
    return asking.valid(findings, Asked(family, desk.view(WITHIN, EVERY) or None, tuple(desk.view(CELLS, ()))))


def _ask(asked: Asked) -> None:
    desk.look_at(**{FAMILY: asked.family, WITHIN: asked.within or EVERY, CELLS: asked.cells})


def _question(findings: Findings) -> Asked:
    """Let question and adjustment be chosen in words; return the question."""
    families = asking.families(findings)
    beside, adjust = st.columns([1, 1], gap="small")
    with beside:
        st.selectbox(
            asked_words.FAMILY, families, format_func=lambda name: asked_words.family(findings, name), **desk.bind_view(FAMILY, families)
        )
    with adjust:
        st.selectbox(
            words.ADJUST, list(ADJUSTMENTS), format_func=lambda name: ADJUSTMENTS[name].word, **desk.bind("choice_adjust", "adjust")
        )
    asked = _open_question(findings)
    slices = asking.slices(findings, asked.family)
    if slices:
        levels = [EVERY, *slices]
        st.selectbox(asked_words.WITHIN, levels, format_func=lambda level: level or asked_words.ALL, **desk.bind_view(WITHIN, levels))
    elif asked.family == asking.CHOSEN:
        cells = [(int(i), int(j)) for i, j in np.ndindex(findings.observed.shape)]
        st.multiselect(
            asked_words.CELLS, cells, format_func=lambda cell: asked_words.cell(findings, cell), max_selections=asking.MOST_CELLS,
            placeholder=asked_words.NEXT_CELL[0], **desk.bind_views(CELLS, cells),
        )  # fmt: skip
    return asked


def _grid(findings: Findings, asked: Asked) -> None:
    """Show the grid; a click on a cell, a head or the name of a factor asks the next question."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    drawn = pointing.pointing(findings, stage.at_hand(), asking.places(findings, asked))
    follow = stage.pointed("grid", lambda place: _ask(asking.pointed(asked, place, findings.study.factors, rows, columns)))
    st.plotly_chart(
        drawn, key="grid", theme=None, width="stretch", config=stage.PLAIN, alt=grid.grid_alt(findings), on_select=follow,
        selection_mode="points",
    )  # fmt: skip
    st.html(paper.caption(asked_words.HOW_TO_POINT))


def _answer(findings: Findings, asked: Asked) -> None:
    if asked.family.startswith(asking.TREND):
        _trend(findings, asked)
        return
    try:
        frame = asking.compared(findings, asked)
    except Refusal as refusal:
        st.html(paper.notice(str(refusal)))
        return
    if asked.family == asking.CHOSEN and frame is None:
        st.html(paper.text(asked_words.NEXT_CELL[len(asked.cells)]))
    elif frame is None or frame.empty:
        st.html(paper.notice(words.FAMILY_TOO_LARGE if frame is None else words.FAMILY_EMPTY))
    else:
        st.html(paper.heading(asked_words.question(findings, asked, frame), asked_words.family_told(findings, asked, frame)))
        st.html(paper.answer(*asked_words.answer(findings, asked, frame)))
        drawn = differences.differences(findings, stage.at_hand(), asked.family, frame)
        caption = differences.differences_caption(findings, asked.family, frame)
        stage.figure(drawn, "differences", caption, differences.differences_alt(findings, asked.family, frame))
        with st.container(key="compare_table"):
            st.html(paper.table(sheets.comparisons(findings, asked.family, frame)))
        _small_print(findings, asked, frame)


def _trend(findings: Findings, asked: Asked) -> None:
    st.html(paper.heading(asked_words.question(findings, asked, None)))
    st.html(paper.answer(*asked_words.trend_answer(findings, asked)))
    with st.container(key="compare_table"):
        st.html(paper.table(asked_words.trend(findings, asked)))


def _small_print(findings: Findings, asked: Asked, frame: pd.DataFrame) -> None:
    """Say what the adjustment does, and show letters to whoever wants them."""
    st.html(paper.caption(asked_words.explained(findings, frame)))
    letters = sheets.letters(findings, asked.family) if asked.within is None else None
    if letters is not None:
        with st.expander(words.LETTERS):
            st.html(paper.table(letters))
