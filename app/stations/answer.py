"""Answer: the three questions in words, the grid and the interaction figure, and the tables behind them."""

from collections.abc import Mapping

import pandas as pd
import streamlit as st

from analysis.findings import Findings
from analysis.scales import NAMED
from analysis.study import MODELS, Study
from app import answer_words, answers_told, desk, how, paper, pictures, sheets, stage, words

AXIS, FIGURE, DRAWN = "choice_axis", "choice_figure", "choice_drawn"
TABLE, TABS = "table", "answer_tables"


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
    with st.container(key="switches", horizontal=True, gap="small"):
        st.selectbox(words.MODEL, list(MODELS), format_func=words.MODELS.__getitem__, **desk.bind("choice_model", "model"))
        scales = list(NAMED) if study.scale in NAMED else [*NAMED, study.scale]
        st.selectbox(words.SCALE, scales, format_func=words.scale_name, **desk.bind("choice_scale", "scale"))
        levels = sorted({*words.CONFIDENCES, study.confidence})
        st.selectbox(words.CONFIDENCE, levels, format_func=words.percent_told, width=120, **desk.bind("choice_confidence", "confidence"))
        st.number_input(
            words.MATTERS, min_value=0.0, value=None, placeholder=words.NOT_GIVEN, format="%g", help=words.MATTERS_HELP, width=200,
            **desk.bind("choice_matters", "matters", take=lambda value: value or None),
        )  # fmt: skip


@st.fragment
def _figure(findings: Findings) -> None:
    """Show the figure that was picked; what is picked changes no result, so only this part of the page is drawn anew."""
    name = desk.view(FIGURE, answer_words.LINES)
    with st.container(key="figure_row", horizontal=True, gap="small"):
        st.segmented_control(
            answer_words.FIGURE, list(answer_words.FIGURES), format_func=answer_words.FIGURES.__getitem__, required=True, width="stretch",
            **desk.bind_view(FIGURE, list(answer_words.FIGURES)),
        )  # fmt: skip
        turned = _turned(findings) if name in (answer_words.LINES, answer_words.SPREAD) else False
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
    st.selectbox(words.AXIS, axes, width=220, **desk.bind_view(AXIS, axes))
    return bool(desk.view(AXIS, axes[0]) == axes[1])


def _boxes(findings: Findings) -> bool:
    """Let points or boxes be picked; the first sight is what suits the number of observations."""
    ways = [answer_words.POINTS, answer_words.BOX]
    by_suit = ways[::-1] if pictures.suits_boxes(findings) else ways
    st.selectbox(answer_words.DRAWN, ways, width=140, **desk.bind_view(DRAWN, by_suit))
    return bool(desk.view(DRAWN, by_suit[0]) == answer_words.BOX)


@st.fragment
def _tables(findings: Findings) -> None:
    """Show the table whose tab is open; the other is not made before it is asked for."""
    shown = [answer_words.MEANS, answer_words.VARIANCE]
    open_now = desk.view(TABLE, shown[0])
    means, variance = st.tabs(shown, default=open_now, key=TABS, on_change=lambda: desk.look_at(**{TABLE: desk.held(TABS)}))
    if means.open:
        with means, st.container(key="cell_means"):
            st.html(paper.table(sheets.cell_means(findings)) + paper.caption(answer_words.margins(findings)))
    if variance.open:
        with variance:
            st.html(paper.side_by_side(_models(findings)) + _types(findings))


def _models(findings: Findings) -> list[str]:
    """Return the analysis of variance of both models; the one that the answers read comes with its reason."""
    used, full = findings.used["table"], findings.model.interaction
    reason, other = answer_words.table_used(findings), answer_words.WITH_TOLD.format(words.TABLES[used])
    return [
        _model(findings, answer_words.WITH, findings.tables_full, used, reason if full else other, answer_words.NO_FULL),
        _model(
            findings, answer_words.WITHOUT, findings.tables_additive, "type_2", answer_words.TYPE_TWO if full else reason,
            answer_words.NO_ADDITIVE,
        ),
    ]  # fmt: skip


def _model(findings: Findings, title: str, tables: Mapping[str, pd.DataFrame] | None, kind: str, why: str, missing: str) -> str:
    shown = paper.text(missing) if tables is None else paper.table(sheets.anova(findings, tables[kind])) + paper.caption(why)
    return paper.question(title) + shown


def _types(findings: Findings) -> str:
    """Return every type of sums of squares with its question, where they differ."""
    types = how.types(findings)
    return "" if types is None else paper.question(words.TYPES) + paper.table(types) + paper.bullets(how.questions(findings))
