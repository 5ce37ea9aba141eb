"""The walk-through: one board on the whole window, its place in the address, moved by keys, a presenter's remote or the pointer."""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

import pandas as pd
import plotly.graph_objects as go
import streamlit as st

from app import following, paper, stage, tell_words, words
from app.board import Board
from app.look import PROJECTOR, Look, at_night
from app.paper import Sheet

GROUND = Path(__file__).parent / "assets" / "walk.css"
PLACE = "board"  # in the address, counted from 1, so that a reload comes back to it
WALK = "walk"  # in the address: the name by which other windows follow, and by which a reload finds its boards
HIDE, SHOWN = "hide", "shown"  # in the address: claims wait until the group has looked; the board whose claim was shown since
FORWARD = ("Right", "Space", "PageDown", "Down", "Enter")
BACKWARD = ("Left", "PageUp", "Up", "Backspace")
HIDES = "H"
LINES = 12  # of a table on the lowest screen
FEW = 9  # lines that may be set larger
LETTERS = 74  # in a line across the lowest screen
LOWEST = 400  # px, of a figure on the lowest screen; names of lines keep apart there
LONG, LONGEST = 110, 190  # letters of a claim, beyond which it is set smaller, and smaller still


def is_on() -> bool:
    """Return whether the walk-through is shown."""
    return PLACE in st.query_params


def name() -> str | None:
    """Return the name of the walk-through in the address."""
    return st.query_params.get(WALK)


def start(boards: Sequence[Board]) -> None:
    """Show the first board, and let other windows follow."""
    st.query_params[WALK] = following.begin(boards)
    go_to(1)


def go_to(place: int) -> None:
    """Show a board by its number."""
    st.query_params[PLACE] = str(place)


def leave() -> None:
    """Go back to the station."""
    for entry in (PLACE, WALK, HIDE, SHOWN):
        st.query_params.pop(entry, None)


def hide(place: int) -> None:
    """Hide the claims from this board on; where they wait already show this one; where it is shown let none wait any longer."""
    if HIDE not in st.query_params:
        st.query_params[HIDE] = "1"
    elif not _is_hidden(place):
        st.query_params.pop(HIDE)
        st.query_params.pop(SHOWN, None)
    else:
        st.query_params[SHOWN] = str(place)


def _is_hidden(place: int) -> bool:
    return HIDE in st.query_params and st.query_params.get(SHOWN) != str(place)


def show(told: Sequence[Board]) -> None:
    """Show the board that the address names, and the key that leaves."""
    st.html(GROUND)
    _turn(told)
    with st.container(key="walk_leave"):
        st.button(words.LEAVE, key="tell_leave", shortcut="Escape", on_click=leave, type="tertiary")


def _turn(told: Sequence[Board]) -> None:
    """Show one board, the nearest one where there is none of the number asked for."""
    asked = st.query_params.get(PLACE, "1")
    place = min(max(int(asked) if asked.isdecimal() else 1, 1), len(told))
    board, hidden = told[place - 1], _is_hidden(place)
    following.follow(name() or _named(told), told, place, hidden)
    with st.container(key="tell_claim"):
        size = "longest" if len(board.claim) > LONGEST else "long" if len(board.claim) > LONG else ""
        st.html(paper.claim(tell_words.LOOK_FIRST if hidden else board.claim, "waits" if hidden else size))
    with st.container(key="walk_board"):
        _board(board, place)
    drawn = f" · {board.drawn}" if board.figure is not None and board.drawn else ""
    st.html(paper.evidence("" if hidden else board.evidence + drawn, words.place_of(place, len(told))))
    _keys(place, len(told))


@st.cache_resource(max_entries=64, show_spinner=False)
def _drawn(walk: str | None, place: int, look_name: str, _board: Board, _look: Look) -> go.Figure:
    return _board.figure(_look).update_layout(height=None, autosize=True) if _board.figure is not None else go.Figure()


def _named(told: Sequence[Board]) -> str:
    """Give a walk-through that was opened by its address a name."""
    st.query_params[WALK] = following.begin(told)
    return st.query_params[WALK]


def _board(board: Board, place: int) -> None:
    if board.figure is not None:
        look = far_away()
        drawn = _drawn(name(), place, look.paper, board, look)
        st.plotly_chart(drawn, key="walk_figure", theme=None, width="stretch", height="stretch", config=stage.PLAIN, alt=board.alt)
    elif board.table is not None:
        shown = board.table.head(rows_that_fit(board.table))
        numeric = numbers_in(board.table)
        of_words = frozenset(range(len(shown.columns))) - numeric
        with st.container(key="walk_large" if sum(lines_of(board.table)) <= FEW else "walk_table"):
            st.html(paper.table(Sheet(board.alt, list(map(str, shown.columns)), shown.astype(str).to_numpy().tolist(), of_words)))
        if len(shown) < len(board.table):
            st.html(paper.caption(words.more_rows(len(board.table) - len(shown))))


def numbers_in(table: pd.DataFrame) -> frozenset[int]:
    """Return the columns that hold numbers as told, which stand flush right."""
    return frozenset(k for k in range(1, len(table.columns)) if all(paper.is_number(str(value)) for value in table.iloc[:, k]))


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
    return at_night(wanted) if st.context.theme.type == "dark" else wanted


def _keys(place: int, last: int) -> None:
    """Set the buttons, which show under the pointer only; a button takes one key, so each further key has a button out of sight."""
    back, on = max(place - 1, 1), min(place + 1, last)
    with st.container(key="walk_keys", horizontal=True):
        st.button(words.BACK, key="tell_back", shortcut=BACKWARD[0], on_click=go_to, args=(back,), type="tertiary")
        st.button(words.NEXT, key="tell_next", shortcut=FORWARD[0], on_click=go_to, args=(on,), type="tertiary")
        st.button(tell_words.HIDE, key="tell_hide", shortcut=HIDES, on_click=hide, args=(place,), type="tertiary")
        st.link_button(tell_words.SPEAKER, f"?{SPEAKER}={name()}", type="tertiary")
    with st.container(key="walk_more_keys"):
        for key, goal in (("Home", 1), ("End", last), *((k, on) for k in FORWARD[1:]), *((k, back) for k in BACKWARD[1:])):
            st.button(key, key=f"tell_{key.lower()}", shortcut=key, on_click=go_to, args=(goal,))


SPEAKER = "speaker"  # in the address of the speaker's window: the walk-through that it follows
EVERY = 0.7  # seconds between two looks at what the room sees


def is_speaker() -> bool:
    """Return whether this window is the speaker's."""
    return SPEAKER in st.query_params


def show_speaker() -> None:
    """Show the speaker what the room sees, with the notes and what comes next."""
    st.html(GROUND)
    _follow(st.query_params[SPEAKER])


@st.fragment(run_every=EVERY)
def _follow(walk: str) -> None:
    told = following.at(walk)
    if told is None:
        st.html(paper.notice(tell_words.NOTHING_FOLLOWED))
        return
    board, after = told.boards[told.place - 1], told.boards[told.place : told.place + 1]
    head = words.place_of(told.place, len(told.boards)) + (f" · {tell_words.STILL_HIDDEN}" if told.hidden else "")
    st.html(paper.speaker(head, board.claim, board.evidence, board.notes, [f"{tell_words.AFTER} {later.claim}" for later in after]))
