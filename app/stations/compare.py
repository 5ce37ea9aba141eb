"""Compare: which levels or combinations differ, by how much; the grid is pointed at, or the question is chosen in words."""

from collections.abc import Mapping
from typing import Any

import numpy as np
import pandas as pd
import streamlit as st

from analysis import level_edits
from analysis.adjustments import ADJUSTMENTS
from analysis.findings import Findings
from analysis.refusals import Refusal
from analysis.story import Kept
from analysis.study import Study
from app import asked_words, asking, desk, factor_boards, paper, pictures, sheets, stage, tell_words, words
from app.asking import Asked
from app.figures import differences, grid, pointing
from app.stage import Picture

FAMILY, WITHIN, CELLS = "compare_family", "compare_within", "compare_cells"
EVERY = ""  # the choice of all slices


def show() -> None:
    """Show the station."""
    findings = stage.findings("Compare")
    if findings is None:
        return
    asked = _open_question(findings)
    left, right = st.columns([5, 8], gap="large")
    with left, st.container(gap="xsmall"):
        st.html(paper.heading("Compare", "which differ, and by how much"))
        _grid(findings, asked)
        stage.complaint()
        _in_words(findings, asked)
    with right, st.container(gap="xsmall"):
        _answer(findings, asked)


def _open_question(findings: Findings) -> Asked:
    family = desk.view(FAMILY, next(iter(findings.comparisons)))
    return asking.valid(findings, Asked(family, desk.view(WITHIN, EVERY) or None, tuple(desk.view(CELLS, ()))))


def _ask(asked: Asked) -> None:
    desk.look_at(**{FAMILY: asked.family, WITHIN: asked.within or EVERY, CELLS: asked.cells})


def _in_words(findings: Findings, asked: Asked) -> None:
    """Let question and adjustment be chosen in words: the same questions as by pointing."""
    families = asking.families(findings)
    st.selectbox(
        asked_words.FAMILY, families, format_func=lambda name: asked_words.family(findings, name), **desk.bind_view(FAMILY, families)
    )
    adjust, where = st.columns(2, gap="small")
    with adjust:
        st.selectbox(
            words.ADJUST, list(ADJUSTMENTS), format_func=lambda name: ADJUSTMENTS[name].word, **desk.bind("choice_adjust", "adjust")
        )
        _control(findings, asked)
    with where:
        _where(findings, asked)


def _where(findings: Findings, asked: Asked) -> None:
    """Let the slice or the combinations be chosen that the question is about."""
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


def _control(findings: Findings, asked: Asked) -> None:
    """Let the level be chosen that the others are compared with, where comparisons are made with a control."""
    factor = asking.factor_of(findings, asked)
    if findings.control is None or factor is None:
        return
    levels = list(findings.observed.factor(factor).levels)
    st.selectbox(
        asked_words.CONTROL, levels,
        **desk.bind_edit("choice_control", levels[findings.control[factor]], level_edits.controlled, factor),
    )  # fmt: skip


def _grid(findings: Findings, asked: Asked) -> None:
    """Show the grid; a click on a cell, a head or the name of a factor asks the next question."""
    rows, columns = findings.design["row_levels"], findings.design["column_levels"]
    chosen = asking.places(findings, asked)
    drawn = stage.picture(
        findings, "pointing", (chosen,), lambda look: Picture(pointing.pointing(findings, look, chosen), "", grid.grid_alt(findings))
    )
    follow = stage.pointed("grid", lambda place: _ask(asking.pointed(asked, place, findings.study.factors, rows, columns)))
    st.plotly_chart(
        drawn.figure, key="grid", theme=None, width="stretch", config=stage.PLAIN, alt=drawn.alt, on_select=follow, selection_mode="points"
    )
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
        heading = paper.heading(asked_words.question(findings, asked, frame), asked_words.family_told(findings, asked, frame))
        before = desk.findings_before("adjust")
        changed = asked_words.changed(findings, before, asked) if before is not None else ""
        st.html(heading + paper.answer(*asked_words.answer(findings, asked, frame)) + (paper.caption(changed) if changed else ""))
        _keep(findings, asked)
        stage.show(_differences(findings, asked, frame), "differences")
        with st.container(key="compare_table"):
            st.html(paper.table(sheets.comparisons(findings, asked.family, frame)) + paper.caption(asked_words.explained(findings, frame)))
        _letters(findings, asked)


def _differences(findings: Findings, asked: Asked, frame: pd.DataFrame) -> Picture:
    return stage.picture(
        findings, "differences", (asked,),
        lambda look: Picture(
            differences.differences(findings, look, asked.family, frame),
            differences.differences_caption(findings, asked.family, frame),
            differences.differences_alt(findings, asked.family, frame),
        ),
    )  # fmt: skip


def _keep(findings: Findings, asked: Asked) -> None:
    """Offer to keep the open question for the story, or to take it out again."""
    one = factor_boards.keepable(findings, asked)
    study = desk.study()
    is_kept = study is not None and one in study.story.kept
    label = tell_words.KEPT if is_kept else tell_words.KEEP
    icon = ":material/bookmark_added:" if is_kept else ":material/bookmark:"
    st.button(label, key="keep_comparison", icon=icon, type="tertiary", on_click=desk.edit, args=(_keeping, one))


def _keeping(study: Study, one: Kept) -> Mapping[str, Any]:
    return {"story": study.story.keeping(one)}


def _trend(findings: Findings, asked: Asked) -> None:
    st.html(paper.heading(asked_words.question(findings, asked, None)) + paper.answer(*asked_words.trend_answer(findings, asked)))
    _keep(findings, asked)
    stage.show(pictures.along(findings, asked.family.removeprefix(asking.TREND)), "trend")
    with st.container(key="compare_table"):
        st.html(paper.table(asked_words.trend(findings, asked)))


def _letters(findings: Findings, asked: Asked) -> None:
    """Show letters to whoever wants them."""
    letters = sheets.letters(findings, asked.family) if asked.within is None else None
    if letters is not None:
        with st.expander(words.LETTERS):
            st.html(paper.table(letters))
