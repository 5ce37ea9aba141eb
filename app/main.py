"""The entry of the dashboard: the bar of stations, undo and redo, and the page that is open."""

from pathlib import Path

import streamlit as st

from app import bringing, desk, paper, stage, words
from app.stations import STATIONS

HERE = Path(__file__).parent

page = st.navigation(
    [st.Page(HERE / "stops" / f"{s.name}.py", title=s.title, url_path=s.name, default=s is STATIONS[0]) for s in STATIONS], position="top"
)
st.set_page_config(page_title=f"{page.title} · Crossgrain", page_icon=str(HERE / "assets" / "icon.png"), layout="wide")
st.html(paper.variables(stage.at_hand()))
st.html(HERE / "assets" / "house.css")
desk.come_back(bringing.come_back)
with st.container(key="tools", horizontal=True, vertical_alignment="center", horizontal_alignment="right"):
    st.html(paper.status(words.open_table(desk.study())))
    st.button("Undo", key="undo", icon=":material/undo:", type="tertiary", disabled=not desk.can_undo(), on_click=desk.undo)
    st.button("Redo", key="redo", icon=":material/redo:", type="tertiary", disabled=not desk.can_redo(), on_click=desk.redo)
page.run()
desk.tell_address()
