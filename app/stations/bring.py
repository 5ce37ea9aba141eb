"""Bring: drop a table, paste cells or open a sample, and see what was read and what was decided."""

import streamlit as st

from analysis.findings import Findings
from analysis.table import Table
from app import desk, paper, samples, sheets, stage, words

FILES = ["csv", "tsv", "txt", "xlsx", "xls", "ods", "parquet"]
FIRST_ROWS = 10


def show() -> None:
    """Show the station."""
    st.html(paper.heading("Bring a table", "one row for each observation, or a grid of them"))
    left, right = st.columns([5, 7], gap="large")
    with left:
        st.file_uploader(words.DROP, type=FILES, **desk.bind_upload("bring_file"))
        st.html(paper.caption(words.file_limit(st.get_option("server.maxUploadSize"))))
        stage.complaint(desk.TABLE)
        st.text_area(words.PASTE, height=90, placeholder=words.PASTE_EXAMPLE, **desk.bind_paste("bring_paste"))
        st.radio(
            words.SAMPLE, [sample.file for sample in samples.SAMPLES], index=None, format_func=samples.question_of,
            captions=[words.literal(sample.sentence) for sample in samples.SAMPLES], **desk.bind_sample("bring_sample"),
        )  # fmt: skip
    with right:
        study = desk.study()
        if study is None:
            st.html(paper.empty(words.WHAT_FOLLOWS))
        else:
            _what_was_read(study.table)


def _what_was_read(table: Table) -> None:
    st.html(paper.question(f"{table.name}, as read"))
    st.html(paper.table(sheets.preview(table.preview(FIRST_ROWS))))
    st.html(paper.caption(words.rows_shown(min(FIRST_ROWS, table.rows), table.rows, len(table.columns))))
    st.html(paper.question("What was decided on the way"))
    sentences = [*(d.sentence for d in table.decisions), *(n for n in table.notes if n not in {d.sentence for d in table.decisions})]
    st.html(paper.bullets(sentences) if sentences else paper.text(words.NOTHING_DECIDED))
    found = desk.findings()
    entries = found.design["left_out"] if isinstance(found, Findings) else [{"row": e.row, "why": e.why} for e in table.left_out]
    analysed = found.design["observations"] if isinstance(found, Findings) else None
    st.html(paper.text(words.reckoning(analysed, len(entries))))
    if entries:
        with st.expander(f"The {words.counted(len(entries), 'row')} left out, with reasons"):
            st.html(paper.table(sheets.left_out(entries)))
