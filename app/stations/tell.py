"""Tell: the slides, the workbook and the figures to take away, built when they are asked for."""

from dataclasses import replace

import streamlit as st

from analysis.findings import Findings
from analysis.refusals import NoBrowser
from app import boards, paper, saving, stage, take_away, walk, words
from app.exports import images
from app.figures import interaction

NEEDS_BROWSER = "save_figures"
PREVIEW = 290  # px, of the figure beside the files


def show() -> None:
    """Show the station."""
    findings = stage.findings("Tell")
    if findings is None:
        return
    if walk.is_on():
        walk.show(boards.story(findings))
        return
    left, right = st.columns([5, 8], gap="large")
    with left:
        st.html(paper.heading("Tell", "take it away"))
        with st.container(border=True):
            st.html(paper.text(words.WALK_HOLDS))
            st.button(words.WALK, key="tell_start", icon=":material/slideshow:", on_click=walk.start, type="primary")
        _files(findings)
    with right:
        st.html(paper.question("What the slides say"))
        st.html(paper.story([(board.claim, board.evidence) for board in boards.story(findings)]))
        drawn = interaction.interaction(findings, replace(stage.at_hand(), height=PREVIEW))
        stage.figure(drawn, "interaction", interaction.interaction_caption(findings), interaction.interaction_alt(findings), camera=True)


def _files(findings: Findings) -> None:
    """Show a button for each file; one that needs a browser is off where there is none, with the reason."""
    missing = _why_no_pictures()
    for parcel in take_away.parcels(findings):
        off = missing if parcel.key == NEEDS_BROWSER else None
        with st.container(border=True):
            st.html(paper.text(parcel.holds))
            st.download_button(
                parcel.label, parcel.make, parcel.file, parcel.kind, key=parcel.key, on_click="ignore", icon=":material/download:",
                disabled=off is not None, type="primary",
            )  # fmt: skip
            if off:
                st.html(paper.notice(off))
    saving.show()


def _why_no_pictures() -> str | None:
    try:
        images.browser()
    except NoBrowser as refusal:
        return str(refusal)
    return None
