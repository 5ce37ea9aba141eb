"""Doubt: what is open, whether the answers hold by other analyses, and what the residuals show, question by question."""

import streamlit as st

from analysis.doubting.signs import AMBER
from analysis.findings import Findings
from app import checks_told, desk, doubt_words, holds_told, paper, sheets, stage, words
from app.figures import residuals
from app.stage import Picture

WIDTHS = [4, 5, 5]


def show() -> None:
    """Show the station; the residuals come first, and the analyses that take long are put above them when they are there."""
    findings = stage.findings("Doubt")
    if findings is None:
        return
    st.html(paper.heading("Doubt", checks_told.what_can_be_seen(findings)))
    stage.complaint()
    above = st.container()
    before = desk.findings_before("scale")
    if before is not None:
        _before_and_after(before, findings)
    _spread(findings)
    _shape_and_carriers(findings)
    with above:
        _hold(findings)
        doubts, table = st.columns([5, 8], gap="large")
        with doubts:
            _doubts(findings)
        with table:
            _table(findings)


def _hold(findings: Findings) -> None:
    """Compute the other analyses with a bar that says how far they are; leaving the page stops it between two of them."""
    place = st.empty()

    def tell(done: int, count: int) -> None:
        place.progress(done / count, text=f"{doubt_words.WORKING}: {done} of {count}")

    findings.hold(tell)
    place.empty()


def _doubts(findings: Findings) -> None:
    st.html(paper.question(doubt_words.OPEN))
    with st.container(key="doubts", gap="xsmall"):
        for doubt in findings.doubts.itertuples():
            st.html(paper.doubt(str(doubt.sentence), doubt_words.MARKS[str(doubt.level)], str(doubt.level) == AMBER))
        if findings.doubts.empty:
            st.html(paper.text(doubt_words.NONE_OPEN))
    for offer in doubt_words.offers(findings):
        st.button(offer.label, key=f"offer_{offer.scale}", on_click=desk.change, kwargs={"scale": offer.scale})
    if set(findings.doubts["kind"]) & doubt_words.TO_LAY_OUT:
        st.page_link("stops/lay_out.py", label=words.TO_LAY_OUT, icon=":material/arrow_back:")


def _table(findings: Findings) -> None:
    st.html(paper.question(doubt_words.HOLDS) + paper.text(findings.holds_sentence))
    with st.container(key="doubt_table"):
        st.html(paper.table(holds_told.sheet(findings)) + paper.caption(f"{doubt_words.ENTRY} {holds_told.notes(findings)}"))


def _before_and_after(before: Findings, now: Findings) -> None:
    """Set the answers and the residuals along the fitted values side by side, as they were and as they are."""
    st.html(paper.question(doubt_words.CHANGED))
    for place, name, found in zip(st.columns(2, gap="medium"), ("before", "after"), (before, now), strict=True):
        with place, st.container(key=f"side_{name}", gap="xsmall"):
            st.html(paper.text(words.scale_name(found.study.scale)) + paper.bullets(holds_told.compared(found)))
            stage.show(_along(found), f"along_{name}")
    st.button(doubt_words.GO_BACK, key="offer_back", icon=":material/undo:", on_click=desk.undo)


def _along(findings: Findings) -> Picture:
    return stage.picture(
        findings, "along_fitted", (),
        lambda look: Picture(
            residuals.along_fitted(findings, look), residuals.along_fitted_caption(findings), residuals.along_fitted_alt(findings)
        ),
    )  # fmt: skip


def _spread(findings: Findings) -> None:
    """Ask whether all cells spread alike: cell by cell, and along the fitted values."""
    told, by_cell, along = st.columns(WIDTHS, gap="medium")
    with told:
        st.html(paper.question(doubt_words.SPREAD) + paper.bullets(checks_told.spread(findings)))
    with by_cell:
        drawn = stage.picture(
            findings, "by_cell", (),
            lambda look: Picture(residuals.by_cell(findings, look), residuals.by_cell_caption(findings), residuals.by_cell_alt(findings)),
        )  # fmt: skip
        stage.show(drawn, "by_cell")
    with along:
        stage.show(_along(findings), "along_fitted")


def _shape_and_carriers(findings: Findings) -> None:
    """Ask whether the residuals are shaped like a bell, and whether the answer hangs on a few observations."""
    told, bell, carriers = st.columns(WIDTHS, gap="medium")
    with told:
        st.html(paper.question(doubt_words.SHAPE) + paper.bullets(checks_told.shape(findings)))
    with bell:
        drawn = stage.picture(
            findings, "against_bell", (),
            lambda look: Picture(
                residuals.against_bell(findings, look), residuals.against_bell_caption(findings), residuals.against_bell_alt(findings)
            ),
        )  # fmt: skip
        stage.show(drawn, "against_bell")
    with carriers:
        st.html(paper.question(doubt_words.CARRIERS) + paper.bullets(checks_told.carriers(findings)))
        sheet = sheets.influence(findings)
        if sheet is not None:
            st.html(paper.table(sheet))
