"""Answer: the three questions in words, the grid and the interaction figure, and the tables behind them."""

from collections.abc import Mapping

import pandas as pd
import streamlit as st

from analysis.findings import Findings
from analysis.scales import NAMED
from analysis.study import MODELS, Study
from app import answer_words, answers_told, desk, how, paper, pictures, sheets, stage, words

AXIS, FIGURE, DRAWN = "choice_axis", "choice_figure", "choice_drawn"


def show() -> None:
    """Show the station."""
    findings = stage.findings("Answer")
    if findings is None:
        return
    left, right = st.columns([10, 13], gap="medium")
    with left, st.container(gap="xsmall"):
        st.html(paper.heading(f"{findings.study.response}", f"{findings.study.row_factor} × {findings.study.column_factor}"))
        with st.container(key="answers", gap=None):
            st.html(
                "".join(paper.answer(told.sentence, told.statistic, *answers_told.standing(findings, told)) for told in findings.answers)
            )
        stage.show(pictures.grid(findings), "grid")
    with right, st.container(gap="xsmall"):
        _switches(findings.study)
        if findings.study.matters is not None and findings.choices.matters is None:
            st.html(paper.notice(words.MATTERS_NOT_APPLIED))
        stage.complaint()
        _figure(findings)
    _tables(findings)


def _switches(study: Study) -> None:
    model, scale, confidence, matters = st.columns([13, 12, 9, 15], gap="small")
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


@st.fragment
def _figure(findings: Findings) -> None:
    """Show the figure that was picked; what is picked changes no result, so only this part of the page is drawn anew."""
    name = desk.view(FIGURE, answer_words.LINES)
    with st.container(key="figure_row"):
        pick, axis, way = st.columns([14, 9, 6], gap="small")
        with pick:
            st.segmented_control(
                answer_words.FIGURE, list(answer_words.FIGURES), format_func=answer_words.FIGURES.__getitem__, required=True,
                **desk.bind_view(FIGURE, list(answer_words.FIGURES)),
            )  # fmt: skip
        with axis:
            turned = _turned(findings) if name in (answer_words.LINES, answer_words.SPREAD) else False
        with way:
            boxes = _boxes(findings) if name == answer_words.SPREAD else False
    drawn = pictures.of_answer(findings, name, turned, boxes)
    if drawn is None:
        st.html(paper.notice(answer_words.NO_EFFECTS))
        return
    warning = answer_words.over_interaction(findings) if name == answer_words.AVERAGES else ""
    if warning:
        st.html(paper.notice(warning))
    stage.show(drawn, pictures.KEYS[name])


def _turned(findings: Findings) -> bool:
    """Let the factor along the axis be picked; return whether it is the first."""
    axes = list(findings.study.factors[::-1])
    st.selectbox(words.AXIS, axes, **desk.bind_view(AXIS, axes))
    return bool(desk.view(AXIS, axes[0]) == axes[1])


def _boxes(findings: Findings) -> bool:
    """Let points or boxes be picked; the first sight is what suits the number of observations."""
    ways = [answer_words.POINTS, answer_words.BOX]
    by_suit = ways[::-1] if pictures.suits_boxes(findings) else ways
    st.selectbox(answer_words.DRAWN, ways, **desk.bind_view(DRAWN, by_suit))
    return bool(desk.view(DRAWN, by_suit[0]) == answer_words.BOX)


def _tables(findings: Findings) -> None:
    means, variance = st.tabs(["Cell means", "Analysis of variance"])
    with means, st.container(key="cell_means"):
        st.html(paper.table(sheets.cell_means(findings)) + paper.caption(answer_words.margins(findings)))
    with variance:
        _models(findings)
        types = how.types(findings)
        if types is not None:
            st.html(paper.question(words.TYPES) + paper.table(types) + paper.bullets(how.questions(findings)))


def _models(findings: Findings) -> None:
    """Show the analysis of variance of both models side by side; the one that the answers read comes with its reason."""
    used = findings.used["table"]
    with st.container(key="models"):
        full, additive = st.columns(2, gap="medium")
    with full:
        why = answer_words.table_used(findings) if findings.model.interaction else answer_words.WITH_TOLD.format(words.TABLES[used])
        _model(findings, answer_words.WITH, findings.tables_full, used, why, answer_words.NO_FULL)
    with additive:
        why = answer_words.TYPE_TWO if findings.model.interaction else answer_words.table_used(findings)
        _model(findings, answer_words.WITHOUT, findings.tables_additive, "type_2", why, answer_words.NO_ADDITIVE)


def _model(findings: Findings, title: str, tables: Mapping[str, pd.DataFrame] | None, kind: str, why: str, missing: str) -> None:
    shown = paper.text(missing) if tables is None else paper.table(sheets.anova(findings, tables[kind])) + paper.caption(why)
    st.html(paper.question(title) + shown)
