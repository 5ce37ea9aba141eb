"""How a table comes onto the desk: from a dropped file, pasted cells, a sample, a study file or an earlier study, and read anew."""

from pathlib import Path
from typing import Any

import streamlit as st

from analysis import read_table, reread, study_file
from analysis.reading.choices import Reading
from analysis.refusals import Refusal
from analysis.roles import guess_roles
from analysis.study import Study
from app import bring_words, desk, keeping, samples

PASTED = "pasted cells"


def upload(file: Any) -> None:
    """Open a file that was dropped."""
    if file is not None:
        bring(file.getvalue(), file.name)


def paste(text: str) -> None:
    """Open cells that were pasted."""
    if text.strip():
        bring(text.encode(), PASTED)


def sample(file: str | None) -> None:
    """Open a sample."""
    if file is not None:
        bring(samples.path_of(file).read_bytes(), file)


def sample_open() -> str | None:
    """Return which sample is open."""
    brought = desk.file()
    known = [] if brought is None else [one.file for one in samples.SAMPLES if one.file == brought.name]
    return next((file for file in known if brought is not None and samples.path_of(file).read_bytes() == brought.content), None)


def bring(content: bytes, name: str) -> None:
    """Open a file: a table, with the roles that its columns suggest, or a study as it was saved; a refusal leaves what is open."""
    try:
        with st.spinner(bring_words.reading(name, len(content))):
            if study_file.is_one(content) or Path(name).suffix.lower() == study_file.ENDING:
                desk.open_saved(study_file.opened(content), keeping.new_place())
            else:
                table = read_table(content, name=name)
                roles = guess_roles(table)
                study = Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit)
                desk.open_study(study, desk.Brought(content, name, keeping.new_place()))
    except Refusal as refusal:
        desk.complain(str(refusal), desk.TABLE)


def read_again(reading: Reading) -> None:
    """Read the open file another way; a refusal leaves the table as it was."""
    now, brought = desk.study(), desk.file()
    if now is None or brought is None:
        return
    try:
        with st.spinner(bring_words.reading(brought.name, len(brought.content))):
            table = read_table(brought.content, name=brought.name, reading=reading)
            found = reread.carried(now, table, guess_roles(table))
            desk.open_study(found.study, brought, found.dropped)
    except Refusal as refusal:
        desk.complain(str(refusal), desk.READING)


def come_back(place: str) -> None:
    """Open a study that is kept on this machine, with its history."""
    try:
        with st.spinner(bring_words.COMING_BACK):
            desk.open_saved(keeping.kept(place), place)
    except Refusal as refusal:
        desk.complain(str(refusal), desk.TABLE)
