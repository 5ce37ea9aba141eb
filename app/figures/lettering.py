"""How names are lettered in a figure: harmless as markup, wrapped, and never wider than their place."""

import html
import textwrap
from collections.abc import Sequence

LETTER = 0.54  # mean width of a letter, as a share of its height (measured on the bundled sans-serif)


def plain(name: object) -> str:
    """Return a name that a figure shows as it is, whatever markup it looks like."""
    return html.escape(str(name), quote=False)


def wrapped(name: object, width: int, lines: int = 3) -> str:
    """Return a name broken into lines of at most `width` letters, cut with an ellipsis after `lines` lines."""
    broken = textwrap.wrap(str(name), width=max(width, 4), max_lines=lines, placeholder=" …", break_on_hyphens=False)
    return "<br>".join(plain(line) for line in broken)


def kept_apart(names: Sequence[str], width: int) -> list[str]:
    """Return names broken into two lines, or into as many more as it takes for different names to read differently."""
    for lines in (2, 3, 4):
        labels = [wrapped(name, width, lines) for name in names]
        if len(set(labels)) == len(set(names)):
            break
    return labels


def widest(labels: list[str], size: float) -> float:
    """Return the width in px that the longest line among wrapped labels takes at a type size in px."""
    lines = [html.unescape(line) for label in labels for line in label.split("<br>")]
    return max((len(line) for line in lines), default=0) * size * LETTER


def line_count(label: str) -> int:
    """Return how many lines a wrapped label has."""
    return label.count("<br>") + 1
