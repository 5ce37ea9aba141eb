"""Which words in the response stand for a value that is not there."""

import re

_WORDS = frozenset(
    (
        *("na", "n/a", "n.a.", "n.a", "<na>", "nan", "nat", "null", "none", "nil", "void", "nd", "n.d.", "n.d", "n/d", "n.m.", "n/m"),
        *("-", "--", "---", "\u2013", "\u2014", "\u2212", ".", "..", "...", "\u2026", "?", "??"),
        *("missing", "miss", "(missing)", "not available", "not measured", "not determined", "not detected", "no data", "no value"),
    )
)
_SPREADSHEET_ERROR = re.compile(r"#[A-Z0-9/_]+[!?]?|Err:[0-9]{3}", re.IGNORECASE)  # #N/A, #DIV/0!, #WERT!, Err:502
_INFINITE = frozenset(sign + word for sign in ("", "+", "-", "\u2212") for word in ("inf", "infinity", "\u221e", "1.#inf"))
_BEYOND = frozenset(
    (
        *("lod", "loq", "bdl", "bql", "blq", "tntc", "<lod", "<loq", "<dl", "<ql", ">loq", "< lod", "< loq"),
        *("below detection", "below detection limit", "over range"),
    )
)


def is_missing(text: str) -> bool:
    """Whether tidy text is a word for a value that is not there, in any case of letters."""
    folded = text.casefold()
    return folded in _WORDS or (text[:1] in "#Ee" and _SPREADSHEET_ERROR.fullmatch(text) is not None)


def is_infinite(text: str) -> bool:
    """Whether tidy text writes an infinite number."""
    return text.casefold() in _INFINITE


def is_beyond_limit(text: str) -> bool:
    """Whether tidy text says in words that a value lies beyond a detection limit."""
    return text.casefold() in _BEYOND
