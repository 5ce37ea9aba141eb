"""Answer: the three questions in words, the grid and the interaction figure, and the tables behind them."""

import streamlit as st

from analysis import verdicts
from analysis.findings import Findings
from analysis.scales import NAMED
from analysis.study import MODELS, Study
from app import desk, how, paper, sheets, stage, words
from app.figures import grid, interaction

AXIS = "choice_axis"
OPEN = (verdicts.UNDECIDED, "not_tested")


def show() -> None:
    """Show the station."""
    findings = stage.findings("Answer")
    if findings is None:
        return
    left, right = st.columns([10, 13], gap="medium")
    with left, st.container(gap="xsmall"):
        st.html(paper.heading(f"{findings.study.response}", f"{findings.study.row_factor} × {findings.study.column_factor}"))
        with st.container(key="answers", gap=None):
            for told in findings.answers:
                st.html(paper.answer(told.sentence, told.statistic, told.verdict not in OPEN, how.known(findings, told)))
        stage.figure(grid.grid(findings, stage.at_hand()), "grid", grid.grid_caption(findings), grid.grid_alt(findings))
    with right, st.container(gap="xsmall"):
        _switches(findings.study)
        if findings.study.matters is not None and findings.choices.matters is None:
            st.html(paper.notice(words.MATTERS_NOT_APPLIED))
        stage.complaint()
        turned = desk.view(AXIS, findings.study.factors[1]) == findings.study.factors[0]
        drawn = interaction.interaction(findings, stage.at_hand(), turned)
        stage.figure(drawn, "interaction", interaction.interaction_caption(findings), interaction.interaction_alt(findings, turned))
    _tables(findings)


def _switches(study: Study) -> None:
    model, scale, confidence, matters, axis = st.columns([13, 11, 8, 14, 10], gap="small")
    with model:
        st.selectbox(words.MODEL, list(MODELS), format_func=words.MODELS.__getitem__, **desk.bind("choice_model", "model"))
    with scale:
        scales = list(NAMED) if study.scale in NAMED else [*NAMED, study.scale]
        st.selectbox(words.SCALE, scales, format_func=words.scale_name, **desk.bind("choice_scale", "scale"))
    with confidence:
        levels = sorted({*words.CONFIDENCES, study.confidence})
        st.selectbox(words.CONFIDENCE, levels, format_func=words.percent_told, **desk.bind("choice_confidence", "confidence"))
    with matters:
        st.number_input(
            words.MATTERS, min_value=0.0, value=None, placeholder=words.NOT_GIVEN, format="%g", help=words.MATTERS_HELP,
            **desk.bind("choice_matters", "matters", take=lambda value: value or None),
        )  # fmt: skip

    with axis:
        st.selectbox(words.AXIS, list(study.factors[::-1]), **desk.bind_view(AXIS, list(study.factors[::-1])))


def _tables(findings: Findings) -> None:
    means, variance, other = st.tabs(["Cell means", "Analysis of variance", "Without interaction"])
    with means, st.container(key="cell_means"):
        st.html(paper.table(sheets.cell_means(findings)))
        st.html(paper.caption(words.margins(findings)))
    with variance:
        st.html(paper.table(sheets.anova(findings, findings.used_table)))
        st.html(paper.caption(words.table_used(findings)))
        types = how.types(findings)
        if types is not None:
            st.html(paper.question(words.TYPES))
            st.html(paper.table(types))
            st.html(paper.bullets(how.questions(findings)))
    with other:
        if findings.tables_additive is None:
            st.html(paper.text(words.NO_ADDITIVE))
        else:
            st.html(paper.table(sheets.anova(findings, findings.tables_additive["type_2"])))
            st.html(paper.caption(words.ADDITIVE_TABLE))
