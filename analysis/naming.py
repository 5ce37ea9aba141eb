"""How names from the file read in a sentence: the word apart from the unit that stands in brackets behind it."""

import re
from collections.abc import Sequence

NUMBER = re.compile(r"[-+−]?[0-9]+(?:[.,][0-9]+)?")
BRACKETED = re.compile(r"(?P<word>\S.*?)\s*(?:\((?P<round>[^()\[\]]{1,24})\)|\[(?P<square>[^()\[\]]{1,24})\])")


def word_and_unit(name: str) -> tuple[str, str | None]:
    """Return a column's name without its unit, and the unit: "yield (g per pot)" is "yield" in "g per pot"."""
    found = BRACKETED.fullmatch(name.strip())
    if found is None:
        return name, None
    return found["word"], (found["round"] or found["square"]).strip() or None


def level_told(word: str, unit: str | None, level: str) -> str:
    """Return a level for a sentence; a bare number carries its factor's unit or word, since "with 20" says nothing."""
    if not NUMBER.fullmatch(level):
        return level
    return f"{level} {unit}" if unit else f"{word} {level}"


def listed(words: Sequence[str]) -> str:
    """Return words joined for a sentence: "a", "a and b", "a, b and c"."""
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}"
