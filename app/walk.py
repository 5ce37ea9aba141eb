"""The walk-through: one board on the whole window, its place in the address, moved by keys, a presenter's remote or the pointer."""

from dataclasses import replace
from pathlib import Path

import pandas as pd
import streamlit as st

from app import paper, stage, words
from app.boards import Board
from app.look import NIGHT, PROJECTOR, Look
from app.paper import Sheet

GROUND = Path(__file__).parent / "assets" / "walk.css"
PLACE = "board"  # in the address, counted from 1, so that a reload comes back to it
FORWARD = ("Right", "Space", "PageDown", "Down", "Enter")
BACKWARD = ("Left", "PageUp", "Up", "Backspace")
LINES = 12  # of a table on the lowest screen
FEW = 6  # lines that may be set larger
LETTERS = 74  # in a line across the lowest screen
LOWEST = 400  # px, of a figure on the lowest screen; names of lines keep apart there


def is_on() -> bool:
    """Return whether the walk-through is shown."""
    return PLACE in st.query_params


def start() -> None:
    """Show the first board."""
    go_to(1)


def go_to(place: int) -> None:
    """Show a board by its number."""
    st.query_params[PLACE] = str(place)


def leave() -> None:
    """Go back to the station."""
    del st.query_params[PLACE]


def show(told: tuple[Board, ...]) -> None:
    """Show the board that the address names, the nearest one where there is none of that number."""
    asked = st.query_params[PLACE]
    place = min(max(int(asked) if asked.isdecimal() else 1, 1), len(told))
    board = told[place - 1]
    st.html(GROUND)
    with st.container(key="tell_claim"):
        st.html(paper.claim(board.claim))
    with st.container(key="walk_board"):
        _board(board)
    st.html(paper.evidence(board.evidence, words.place_of(place, len(told))))
    _keys(place, len(told))


def _board(board: Board) -> None:
    if board.figure is not None:
        drawn = board.figure(far_away()).update_layout(height=None, autosize=True)
        st.plotly_chart(drawn, key=f"walk_{board.kind}", theme=None, width="stretch", height="stretch", config=stage.PLAIN, alt=board.alt)
    elif board.table is not None:
        shown = board.table.head(rows_that_fit(board.table))
        of_words = frozenset({0} if board.kind == "question" else range(len(shown.columns)))
        with st.container(key="walk_large" if sum(lines_of(board.table)) <= FEW else "walk_table"):
            st.html(paper.table(Sheet(board.alt, list(map(str, shown.columns)), shown.astype(str).to_numpy().tolist(), of_words)))
        if len(shown) < len(board.table):
            st.html(paper.caption(words.more_rows(len(board.table) - len(shown))))


def rows_that_fit(table: pd.DataFrame) -> int:
    """Return how many rows of a table stand on the lowest screen, by the lines that their letters need."""
    lines = lines_of(table)
    taken = [sum(lines[: k + 1]) for k in range(len(lines))]
    return max(1, sum(total <= LINES for total in taken))


def lines_of(table: pd.DataFrame) -> list[int]:
    """Return about how many lines each row of a table needs."""
    return [1 + sum(len(str(value)) for value in row) // LETTERS for row in table.itertuples(index=False)]


def far_away() -> Look:
    """Return the look that is read from the far end of a room, in the browser's light or dark theme."""
    wanted = replace(PROJECTOR, height=LOWEST, small=PROJECTOR.text)
    if st.context.theme.type != "dark":
        return wanted
    night = {name: getattr(NIGHT, name) for name in ("paper", "panel", "ink", "quiet", "rule", "accent", "hues", "inks", "shades")}
    return replace(wanted, **night)


def _keys(place: int, last: int) -> None:
    """Set the buttons, which show under the pointer only; a button takes one key, so each further key has a button out of sight."""
    back, on = max(place - 1, 1), min(place + 1, last)
    with st.container(key="walk_keys", horizontal=True):
        st.button(words.BACK, key="tell_back", shortcut=BACKWARD[0], on_click=go_to, args=(back,), type="tertiary")
        st.button(words.NEXT, key="tell_next", shortcut=FORWARD[0], on_click=go_to, args=(on,), type="tertiary")
        st.button(words.LEAVE, key="tell_leave", shortcut="Escape", on_click=leave, type="tertiary")
    with st.container(key="walk_more_keys"):
        for key, goal in (("Home", 1), ("End", last), *((k, on) for k in FORWARD[1:]), *((k, back) for k in BACKWARD[1:])):
            st.button(key, key=f"tell_{key.lower()}", shortcut=key, on_click=go_to, args=(goal,))
