"""Doubt: what the residuals say about the assumptions, question by question, and which observations carry the answer."""

import streamlit as st

from analysis.findings import Findings
from app import checks_told, paper, sheets, stage
from app.figures import residuals

WIDTHS = [4, 5, 5]


def show() -> None:
    """Show the station."""
    findings = stage.findings("Doubt")
    if findings is None:
        return
    st.html(paper.heading("Doubt", checks_told.what_can_be_seen(findings)))
    _spread(findings)
    _shape_and_carriers(findings)


def _spread(findings: Findings) -> None:
    """Ask whether all cells spread alike: cell by cell, and along the fitted values."""
    told, by_cell, along = st.columns(WIDTHS, gap="medium")
    look = stage.at_hand()
    with told:
        st.html(paper.question("Do all cells spread alike?"))
        st.html(paper.bullets(checks_told.spread(findings)))
    with by_cell:
        stage.figure(residuals.by_cell(findings, look), "by_cell", residuals.by_cell_caption(findings), residuals.by_cell_alt(findings))
    with along:
        stage.figure(
            residuals.along_fitted(findings, look),
            "along_fitted",
            residuals.along_fitted_caption(findings),
            residuals.along_fitted_alt(findings),
        )


def _shape_and_carriers(findings: Findings) -> None:
    """Ask whether the residuals are shaped like a bell, and whether the answer hangs on a few observations."""
    told, bell, carriers = st.columns(WIDTHS, gap="medium")
    with told:
        st.html(paper.question("Are the residuals shaped like a bell?"))
        st.html(paper.bullets(checks_told.shape(findings)))
    with bell:
        drawn = residuals.against_bell(findings, stage.at_hand())
        stage.figure(drawn, "against_bell", residuals.against_bell_caption(findings), residuals.against_bell_alt(findings))
    with carriers:
        st.html(paper.question("Does the answer hang on a few observations?"))
        st.html(paper.bullets(checks_told.carriers(findings)))
        sheet = sheets.influence(findings)
        if sheet is not None:
            st.html(paper.table(sheet))
