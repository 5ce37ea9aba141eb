"""Compare: which levels or combinations differ, by how much, adjusted within the family that is asked about."""

import streamlit as st

from analysis.adjustments import ADJUSTMENTS
from analysis.findings import Findings
from app import desk, paper, sheets, stage, words
from app.figures import differences, grid


def show() -> None:
    """Show the station."""
    findings = stage.findings("Compare")
    if findings is None:
        return
    left, right = st.columns([5, 8], gap="large")
    with left:
        st.html(paper.heading("Compare", "which differ, and by how much"))
        family = _question(findings)
        stage.complaint()
        stage.figure(grid.grid(findings, stage.at_hand()), "grid", grid.grid_caption(findings), grid.grid_alt(findings))
    with right:
        frame = findings.comparisons[family]
        if frame is None or frame.empty:
            st.html(paper.notice(words.FAMILY_TOO_LARGE if frame is None else words.FAMILY_EMPTY))
        else:
            _family(findings, family)


def _question(findings: Findings) -> str:
    """Let the family and its adjustment be chosen; return the family asked about."""
    families = list(findings.comparisons)
    family = st.selectbox(
        words.FAMILY,
        families,
        format_func=lambda name: words.family(name, findings.study.factors),
        **desk.bind_view("compare_family", families),
    )
    st.selectbox(words.ADJUST, list(ADJUSTMENTS), format_func=lambda name: ADJUSTMENTS[name].word, **desk.bind("choice_adjust", "adjust"))
    return str(family)


def _family(findings: Findings, family: str) -> None:
    st.html(paper.heading(words.family(family, findings.study.factors), words.family_told(findings, family)))
    drawn = differences.differences(findings, stage.at_hand(), family)
    stage.figure(drawn, "differences", differences.differences_caption(findings, family), differences.differences_alt(findings, family))
    with st.container(key="compare_table"):
        st.html(paper.table(sheets.comparisons(findings, family)))
    letters = sheets.letters(findings, family)
    if letters is not None:
        with st.expander(words.LETTERS):
            st.html(paper.table(letters))
