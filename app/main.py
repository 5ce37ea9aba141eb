"""The entry of the dashboard: the bar of stations, undo and redo, and the page that is open."""

from pathlib import Path

import streamlit as st

from app import bringing, desk, paper, progress, stage, words
from app.stations import STATIONS

HERE = Path(__file__).parent

page = st.navigation(
    [st.Page(HERE / "stops" / f"{s.name}.py", title=s.title, url_path=s.name, default=s is STATIONS[0]) for s in STATIONS], position="top"
)
st.set_page_config(page_title=f"{page.title} · Crossgrain", page_icon=str(HERE / "assets" / "icon.png"), layout="wide")
st.html(HERE / "assets" / "house.css")
desk.come_back(bringing.come_back)
so_far = progress.so_far(page.url_path or STATIONS[0].name)
st.html(paper.variables(stage.at_hand()) + paper.marks([station.title for station in STATIONS if station.name in so_far.settled]))
with st.container(key="tools", horizontal=True, vertical_alignment="center", horizontal_alignment="right"):
    if so_far.step is not None:
        with st.container(key="to_do"):
            st.page_link(HERE / "stops" / f"{so_far.step.station}.py", label=words.to_do(so_far.step.words))
    st.html(paper.status(words.open_table(desk.study()), progress.told(so_far)))
    st.button("Undo", key="undo", icon=":material/undo:", type="tertiary", disabled=not desk.can_undo(), on_click=desk.undo)
    st.button("Redo", key="redo", icon=":material/redo:", type="tertiary", disabled=not desk.can_redo(), on_click=desk.redo)
page.run()
desk.tell_address()
