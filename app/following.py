"""Which board each walk-through stands at, for the other windows of this machine: the speaker's, and the room's after a reload."""

import secrets
from collections.abc import Sequence
from dataclasses import dataclass

import streamlit as st

from app.board import Board

MOST = 8  # walk-throughs that are remembered; the oldest goes first


@dataclass(frozen=True, eq=False)
class Told:
    """The boards of one walk-through, the number of the one shown, and whether its claim is still hidden from the room."""

    boards: tuple[Board, ...]
    place: int = 1
    hidden: bool = False


@st.cache_resource(show_spinner=False)
def _walks() -> dict[str, Told]:
    return {}


def begin(boards: Sequence[Board]) -> str:
    """Remember a new walk-through and return its name, which no other page can guess."""
    walks, name = _walks(), secrets.token_urlsafe(9)
    walks[name] = Told(tuple(boards))
    for old in list(walks)[:-MOST]:
        del walks[old]
    return name


def at(name: str | None) -> Told | None:
    """Return what a walk-through shows now, None where it is not known, or not any longer."""
    return None if name is None else _walks().get(name)


def follow(name: str, boards: Sequence[Board], place: int, hidden: bool) -> None:
    """Remember what a walk-through shows now."""
    _walks()[name] = Told(tuple(boards), place, hidden)
