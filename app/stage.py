"""What all stations share: the open findings or the sentence that stands in their place, figures with caption and description."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

import plotly.graph_objects as go
import streamlit as st

from analysis.findings import Findings
from analysis.refusals import Refusal
from app import asking, desk, look, paper, words

PLAIN = {"displayModeBar": False}
WITH_CAMERA = {"displayModeBar": True, "displaylogo": False, "modeBarButtons": [["toImage"]]}


def at_hand() -> look.Look:
    """Return the look that suits the browser's light or dark theme."""
    return look.NIGHT if st.context.theme.type == "dark" else look.DESK


def findings(title: str) -> Findings | None:
    """Return the open findings; where there are none, show the station's title and the one thing to do next."""
    found = desk.findings()
    if isinstance(found, Findings):
        return found
    st.html(paper.heading(title))
    if isinstance(found, Refusal):
        st.html(paper.notice(str(found)))
        st.page_link("stops/lay_out.py", label=words.TO_LAY_OUT, icon=":material/arrow_back:")
    else:
        st.html(paper.text(words.NOTHING_OPEN))
        st.page_link("stops/bring.py", label=words.TO_BRING, icon=":material/arrow_back:")
    return None


def complaint(about: str = desk.CHOICE) -> None:
    """Show why the last choice or table was not taken, until something is taken again."""
    sentence = desk.complaint(about)
    if sentence:
        st.html(paper.notice(sentence))


def pointed(key: str, take: Callable[[asking.Cell], None]) -> Callable[[], None]:
    """Return what follows a click on a figure: the place of the mark that was pointed at is handed over."""

    def follow() -> None:
        points = desk.held(key)["selection"]["points"]
        if points:
            row, column = points[-1]["customdata"]
            take((int(row), int(column)))

    return follow


@dataclass(frozen=True, eq=False)
class Picture:
    """A figure with the words that belong to it."""

    figure: go.Figure
    caption: str
    alt: str


@st.cache_resource(max_entries=128, show_spinner=False)
def _picture(study: str, look_name: str, name: str, choices: tuple[object, ...], _make: Callable[[], Picture]) -> Picture:
    return _make()


def picture(found: Findings, name: str, choices: tuple[object, ...], make: Callable[[look.Look], Picture]) -> Picture:
    """Return the picture of this name, drawn at the first time only: the same study, look and choices give the same picture."""
    worn = at_hand()
    return _picture(found.study.fingerprint, worn.name, name, choices, lambda: make(worn))


def show(drawn: Picture, key: str) -> None:
    """Show a picture with its caption beneath."""
    figure(drawn.figure, key, drawn.caption, drawn.alt)


def figure(drawn: go.Figure, key: str, caption: str, alt: str, camera: Mapping[str, Any] | None = None) -> None:
    """Show a figure with its description for screen readers and its caption beneath.

    With a camera, told its format, size and resolution, the figure can be saved from where it stands in any browser.
    """
    config = PLAIN if camera is None else {**WITH_CAMERA, "toImageButtonOptions": dict(camera)}
    st.plotly_chart(drawn, key=key, theme=None, width="stretch" if camera is None else "content", config=config, alt=alt)
    if caption:
        st.html(paper.caption(caption))
