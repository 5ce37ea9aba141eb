"""Tell: the story and how it is told, the walk-through, and the files to take away, built when they are asked for."""

from collections.abc import Mapping
from typing import Any

import streamlit as st
from streamlit.delta_generator import DeltaGenerator

from analysis.findings import Findings
from analysis.refusals import NoBrowser, TemplateUnusable
from app import boards, desk, following, paper, saving, stage, story_list, take_away, tell_words, walk, words
from app.exports import images, stationery
from app.exports.figure_files import Wanted
from app.figures import interaction
from app.take_away import Manner, Parcel

NEEDS_BROWSER = "save_figures"


def show() -> None:
    """Show the station, or in its place the walk-through or the speaker's window."""
    if walk.is_speaker():
        walk.show_speaker()
    elif walk.is_on():
        _walk()
    else:
        _station()


def _walk() -> None:
    """Show the boards with which the walk-through was started; by its address alone, those of the open study."""
    known = following.at(walk.name())
    if known is not None:
        walk.show(known.boards)
        return
    findings, study = stage.findings("Tell"), desk.study()
    if findings is not None and study is not None:
        walk.show(boards.story(findings, study.story))


def _station() -> None:
    findings, study = stage.findings("Tell"), desk.study()
    if findings is None or study is None:
        return
    told = boards.story(findings, study.story)
    left, right = st.columns([5, 8], gap="large")
    with left:
        st.html(paper.heading("Tell", "take it away"))
        with st.container(border=True):
            st.html(paper.text(words.WALK_HOLDS))
            st.button(
                words.WALK,
                key="tell_start",
                icon=":material/slideshow:",
                on_click=walk.start,
                args=(told,),
                type="primary",
                disabled=not told,
            )
        files = st.container()
    with right:
        st.html(paper.question(tell_words.STORY))
        st.html(paper.caption(tell_words.STORY_HELP))
        story_list.show(findings, study)
        wanted = _figures(findings)
    with files:
        missing, manner = _why_no_pictures(), Manner(wanted, *_slides())
        for parcel in take_away.parcels(findings, told, desk.decisions(), manner):
            _file(parcel, missing if parcel.key == NEEDS_BROWSER else None)
        saving.show()


def _slides() -> tuple[bool, bytes | None]:
    """Let the paper of the slides be chosen, or a template of the user's own."""
    with st.container(border=True):
        papers = list(tell_words.PAPERS)
        dark = st.radio(
            tell_words.PAPER, papers, format_func=tell_words.PAPERS.__getitem__, horizontal=True, label_visibility="collapsed",
            **desk.bind_view("deck_dark", papers),
        )  # fmt: skip
        file = st.file_uploader(tell_words.TEMPLATE, type="pptx", key="deck_template")
        if file is None:
            return dark, None
        try:
            stationery.of(file.getvalue())
        except TemplateUnusable as refusal:
            st.html(paper.notice(str(refusal)))
            return dark, None
        return dark, file.getvalue()


def _figures(findings: Findings) -> Wanted:
    """Let size, type, resolution and ground of figures be chosen, and show the interaction figure so, with a camera."""
    st.html(paper.question(tell_words.FIGURES))
    width, points, dpi, clear, camera = st.columns([12, 7, 8, 9, 10], gap="small")
    wanted = Wanted(
        _picked(width, "figure_width", tell_words.WIDTH, tell_words.WIDTHS, 183.0),
        _picked(points, "figure_points", tell_words.TYPE, tell_words.POINTS, 8.0),
        _picked(dpi, "figure_dpi", tell_words.RESOLUTION, tell_words.RESOLUTIONS, 300),
        _picked(clear, "figure_clear", tell_words.GROUND, tell_words.GROUNDS, False),
    )
    kind, look = _picked(camera, "figure_camera", tell_words.CAMERA, tell_words.CAMERAS, "png"), wanted.look
    saves = {"format": kind, "width": look.width, "height": look.height, "scale": wanted.dpi / images.PX_TO_THE_INCH, "filename": "figure"}
    drawn = interaction.interaction(findings, look)
    stage.figure(drawn, "interaction", interaction.interaction_caption(findings), interaction.interaction_alt(findings), camera=saves)
    return wanted


def _picked(place: DeltaGenerator, key: str, label: str, names: Mapping[Any, str], first: Any) -> Any:
    """Let one of the options named be chosen, this one until another is."""
    options = sorted(names, key=lambda option: option != first)
    with place:
        return st.selectbox(label, options, format_func=names.__getitem__, **desk.bind_view(key, options))


def _file(parcel: Parcel, off: str | None) -> None:
    """Show the button of a file; off is why it cannot be had."""
    with st.container(border=True):
        st.html(paper.text(parcel.holds))
        st.download_button(
            parcel.label, parcel.make, parcel.file, parcel.kind, key=parcel.key, on_click="ignore", icon=":material/download:",
            disabled=off is not None, type="primary",
        )  # fmt: skip
        if off:
            st.html(paper.notice(off))


def _why_no_pictures() -> str | None:
    try:
        images.browser()
    except NoBrowser as refusal:
        return str(refusal)
    return None
