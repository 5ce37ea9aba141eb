"""Bring: drop a table, paste cells, open a sample or an earlier study; see what was read, and change what was decided."""

import streamlit as st

from analysis import counted, understood
from analysis.study import Study
from analysis.table import Decision, Table
from app import bring_words, bringing, desk, keeping, lay_out_words, paper, samples, sheets, stage, words
from app.keeping import Earlier

FILES = ["csv", "tsv", "txt", "xlsx", "xls", "ods", "parquet", "crossgrain"]
FIRST_ROWS = 8
KEPT_SHOWN = 4  # earlier studies offered at once; the others are a click away


def show() -> None:
    """Show the station."""
    st.html(paper.heading("Bring a table", "one row for each observation, or a grid of them"))
    study = desk.study()
    left, right = st.columns([5, 7] if study is None else [4, 9], gap="large")
    with left:
        st.file_uploader(bring_words.DROP, type=FILES, help=bring_words.DROP_HELP, **desk.bind_taken("bring_file", bringing.upload))
        st.html(paper.caption(bring_words.file_limit(st.get_option("server.maxUploadSize"))))
        stage.complaint(desk.TABLE)
        st.text_area(words.PASTE, height=90, placeholder=words.PASTE_EXAMPLE, **desk.bind_taken("bring_paste", bringing.paste))
        _earlier()
        st.html(paper.caption(bring_words.KEPT))
        st.radio(
            words.SAMPLE, [sample.file for sample in samples.SAMPLES], index=None, format_func=samples.question_of,
            captions=[words.literal(sample.sentence) for sample in samples.SAMPLES],
            **desk.bind_shown("bring_sample", bringing.sample_open(), bringing.sample),
        )  # fmt: skip
    with right:
        if study is None:
            st.html(paper.empty(words.WHAT_FOLLOWS))
        else:
            _what_was_read(study)


def _earlier() -> None:
    """Offer the studies that are kept on this machine, each to be opened again or forgotten."""
    now = desk.file()
    found = [one for one in keeping.earlier() if now is None or one.place != now.place]
    if not found:
        return
    with st.container(gap=None, key="earlier"):
        st.html(paper.question(bring_words.EARLIER))
        for one in found[:KEPT_SHOWN]:
            _kept(one)
        if found[KEPT_SHOWN:]:
            with st.expander(bring_words.more_earlier(len(found) - KEPT_SHOWN), key="earlier_more"):
                for one in found[KEPT_SHOWN:]:
                    _kept(one)


def _kept(one: Earlier) -> None:
    """Offer one study, to be opened again or forgotten."""
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key=f"earlier_{one.place}"):
        st.html(paper.text(bring_words.earlier(one)), width="stretch")
        st.button(bring_words.OPEN_AGAIN, key=f"reopen_{one.place}", type="tertiary", on_click=bringing.come_back, args=(one.place,))
        st.button(bring_words.FORGET, key=f"forget_{one.place}", type="tertiary", on_click=keeping.forget, args=(one.place,))


def _what_was_read(study: Study) -> None:
    """Show the file as it stands beside what was understood, the decisions with their alternatives, and where each row went."""
    table = study.table
    st.html(paper.question(f"{table.name}, as read", words.rows_shown(min(FIRST_ROWS, table.rows), table.rows, len(table.columns))))
    _side_by_side(study)
    stage.complaint(desk.READING)
    _decisions(table)
    _reckoning(study)


def _side_by_side(study: Study) -> None:
    table, preview = study.table, paper.table(sheets.preview(understood.first_rows(study, FIRST_ROWS)))
    if table.raw:
        left, right = st.columns([6, 7], gap="medium")
        left.html(paper.caption(bring_words.AS_IT_STANDS) + paper.lines([(line.row, line.text) for line in table.raw]))
        right.html(paper.caption(bring_words.AS_UNDERSTOOD) + preview)
    else:
        st.html(preview)


def _decisions(table: Table) -> None:
    """Show each decision of the reader; what could have been decided instead is one click away."""
    choices = [decision for decision in table.decisions if decision.alternatives] if desk.file() is not None else []
    if choices:
        with st.container(gap=None, key="reader"):
            st.html(paper.question(bring_words.DECIDED))
            for decision in choices:
                _choice(decision)
    told = [d.sentence for d in table.decisions if d not in choices and not d.ordinary]
    if told:
        st.html(paper.question(bring_words.ALSO) + paper.bullets(told))
    if desk.news():
        st.html(paper.question(bring_words.FOLLOWED) + paper.bullets(desk.news()))


def _choice(decision: Decision) -> None:
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key=f"reader_{decision.kind}"):
        st.html(paper.decided(decision.sentence), width="content")
        for place, other in enumerate(decision.alternatives):
            st.button(
                words.literal(other.words), key=f"reread_{decision.kind}_{place}", type="tertiary",
                on_click=bringing.read_again, args=(other.reading,),
            )  # fmt: skip


def _reckoning(study: Study) -> None:
    """Show where every row of the file went, those that take no part with their reasons."""
    design = desk.crossing()
    left_out = [{"row": one.row, "why": one.why} for one in study.table.left_out] if design is None else design["left_out"]
    account = counted.account(study, study.table.rows if design is None else design["observations"], left_out)
    st.html(paper.text(bring_words.reckoning_open(account) if design is None else lay_out_words.reckoning(account)))
    if left_out:
        with st.expander(lay_out_words.left_out_head(account), key="left_out"):
            st.html(paper.table(sheets.left_out(left_out)))
    st.page_link("stops/lay_out.py", label=bring_words.ON, icon=":material/arrow_forward:")
    why = desk.unkept()
    if why is not None:
        st.html(paper.notice(bring_words.unkept(why)))
