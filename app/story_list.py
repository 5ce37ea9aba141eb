"""How the story is shown and changed: its boards in order, each to be reworded, noted beside, moved, left out or taken back in."""

from collections.abc import Mapping, Sequence
from typing import Any

import streamlit as st

from analysis.findings import Findings
from analysis.study import Study
from app import boards, desk, paper, tell_words
from app.board import Board


def show(findings: Findings, study: Study) -> None:
    """Show every board with its claim and evidence, and behind a button what can be changed of it."""
    told = boards.every(findings, study.story)
    keys = tuple(board.key for board in told)
    number = 0
    for place, board in enumerate(told):
        dropped = board.key in study.story.dropped
        number += not dropped
        with st.container(key=f"story_board_{place}", horizontal=True, vertical_alignment="center", gap="small"):
            shown = board.as_told(study.story)
            st.html(paper.told(number, shown.claim, shown.evidence, dropped), width="stretch")
            if dropped:
                st.button(tell_words.TAKE_BACK, key=f"story_back_{place}", type="tertiary", on_click=desk.edit, args=(dropping, board.key))
            else:
                _changes(board, study, keys, place)


def _changes(board: Board, study: Study, keys: Sequence[str], place: int) -> None:
    """Show what can be changed of one board, behind a button."""
    with st.popover(tell_words.CHANGE, key=f"story_change_{place}", type="tertiary", width="content"):
        st.text_area(
            tell_words.CLAIM, placeholder=board.claim, help=tell_words.CLAIM_HELP, height=90,
            **desk.bind_edit(f"story_claim_{place}", study.story.claims.get(board.key, ""), saying, board.key),
        )  # fmt: skip
        st.text_area(
            tell_words.NOTE, height=68, **desk.bind_edit(f"story_note_{place}", study.story.notes.get(board.key, ""), noting, board.key)
        )
        with st.container(horizontal=True):
            for label, by, off in ((tell_words.UP, -1, place == 0), (tell_words.DOWN, 1, place == len(keys) - 1)):
                st.button(
                    label,
                    key=f"story_{'up' if by < 0 else 'down'}_{place}",
                    disabled=off,
                    on_click=desk.edit,
                    args=(moving, keys, board.key, by),
                )
            st.button(tell_words.DROP, key=f"story_drop_{place}", on_click=desk.edit, args=(dropping, board.key))


def saying(study: Study, key: str, claim: str) -> Mapping[str, Any]:
    """Return the study's story with a claim in the user's own words."""
    return {"story": study.story.saying(key, claim)}


def noting(study: Study, key: str, note: str) -> Mapping[str, Any]:
    """Return the study's story with a note beside a board."""
    return {"story": study.story.noting(key, note)}


def moving(study: Study, keys: Sequence[str], key: str, by: int) -> Mapping[str, Any]:
    """Return the study's story with a board moved."""
    return {"story": study.story.moving(keys, key, by)}


def dropping(study: Study, key: str) -> Mapping[str, Any]:
    """Return the study's story with a board left out, or taken back in."""
    return {"story": study.story.dropping(key)}
