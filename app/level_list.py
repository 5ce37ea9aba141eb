"""How the levels of one factor are shown and changed: merges offered, names, order, levels left out, the control level."""

from typing import Any

import streamlit as st

from analysis import level_edits
from analysis.level_edits import Level, Suggestion
from analysis.study import Study
from app import desk, lay_out_words, paper, words

MOST_LISTED = 40  # levels; a column with more is a label rather than a factor


@st.cache_resource(max_entries=32, show_spinner=False)
def _levels(fingerprint: str, _study: Study, column: str) -> tuple[Level, ...]:
    return level_edits.levels_of(_study, column)


@st.cache_resource(max_entries=32, show_spinner=False)
def _suggestions(fingerprint: str, _study: Study, column: str) -> tuple[Suggestion, ...]:
    return level_edits.suggestions(_study, column)


def are_offered(study: Study) -> bool:
    """Return whether some levels of a factor may be one and nobody has said so yet."""
    return any(_suggestions(study.fingerprint, study, factor) for factor in study.factors)


def offers(study: Study, column: str, key: str) -> None:
    """Show each merge that look-alike levels suggest, with what to do about it."""
    for place, offer in enumerate(_suggestions(study.fingerprint, study, column)):
        with st.container(horizontal=True, vertical_alignment="center", key=f"{key}_offer_{place}"):
            st.html(paper.offer(lay_out_words.levels_alike(column, offer)), width="content")
            these = (column, tuple(level.name for level in offer.levels), offer.into.name)
            st.button(words.MERGE, key=f"{key}_merge_{place}", **_edit(level_edits.merged, *these))
            st.button(words.KEEP_APART, key=f"{key}_apart_{place}", type="tertiary", **_edit(level_edits.kept_apart, *these))


def changes(study: Study, column: str, key: str) -> None:
    """Show the levels in their order, each to be renamed, moved, left out or taken back in, and the choice of the control level."""
    levels = _levels(study.fingerprint, study, column)
    with st.expander(words.levels_head(column), key=f"{key}_levels"):
        if len(levels) > MOST_LISTED:
            st.html(paper.text(words.too_many_levels(column, len(levels), MOST_LISTED)))
            return
        st.html(paper.caption(f"{words.LEVELS_HELP} {lay_out_words.COUNTED}"))
        analysed = [level.name for level in levels if level.analysed]
        for place, level in enumerate(levels):
            _level(column, level, f"{key}_{place}", at_start=place == 0, at_end=place == len(analysed) - 1, only=len(analysed) == 1)
        st.selectbox(
            words.CONTROL, analysed, index=None, placeholder=words.CONTROL_FIRST, help=words.CONTROL_HELP, width=320,
            **desk.bind_edit(f"{key}_control", study.control.get(column), level_edits.controlled, column),
        )  # fmt: skip


def _level(column: str, level: Level, key: str, at_start: bool, at_end: bool, only: bool) -> None:
    """Show one level with everything that can be done to it; a level left out can be taken back in."""
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key=f"{key}_level"):
        if not level.analysed:
            st.html(paper.struck(level.name, words.counted(level.rows, "row")), width="content")
            st.button(words.TAKE_BACK, key=f"{key}_back", type="tertiary", **_edit(level_edits.taken_back, column, level.name))
            return
        st.text_input(
            f"Name of {words.literal(level.name)}", label_visibility="collapsed", width=220,
            **desk.bind_edit(f"{key}_name", level.name, level_edits.renamed, column, level.name),
        )  # fmt: skip
        st.html(paper.caption(words.counted(level.rows, "row")), width=70)
        for icon, way, places, stuck in (("arrow_upward", "up", -1, at_start), ("arrow_downward", "down", 1, at_end)):
            st.button(
                way.capitalize(), icon=f":material/{icon}:", key=f"{key}_{way}", type="tertiary", disabled=stuck,
                **_edit(level_edits.moved, column, level.name, places),
            )  # fmt: skip
        st.button(words.LEAVE_OUT, key=f"{key}_out", type="tertiary", disabled=only, **_edit(level_edits.left_out, column, level.name))


def _edit(make: Any, *details: Any) -> dict[str, Any]:
    return {"on_click": desk.edit, "args": (make, *details)}
