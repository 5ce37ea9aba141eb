"""The study itself as a file to take away: its button, and why there is none for a table that came from no file."""

from pathlib import Path

import streamlit as st

from analysis import study_file
from app import desk, paper

HOLDS = (
    "The whole study in one file, for a colleague or for later: the table as it was brought, and every decision since. Drop it at Bring."
)
NO_FILE = "This table came from no file, so there is nothing to put into a study file."


def show() -> None:
    """Show the button that saves the open study."""
    saved = desk.saved()
    with st.container(border=True):
        st.html(paper.text(HOLDS if saved is not None else NO_FILE))
        st.download_button(
            "Save the study", "" if saved is None else lambda: study_file.packed(saved), f"{_name()}{study_file.ENDING}",
            "application/zip", key="save_study", on_click="ignore", icon=":material/download:", disabled=saved is None, type="primary",
        )  # fmt: skip


def _name() -> str:
    study = desk.study()
    return "study" if study is None else Path(study.table.name).stem
