"""How sentences and tables are set on the page: small pieces of HTML in which every name is inert text."""

import html
import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType

from app.look import Look

# Words before the statistic of an answer that is no plain yes, so that the edge alone need not say it.
MARKS: Mapping[str, str] = MappingProxyType({"decided": "", "small": "too small to matter", "open": "still open"})


@dataclass(frozen=True)
class Sheet:
    """A table as it is read: a heading for each column and rows of text, the first column naming the row."""

    caption: str  # for someone who does not see the table
    columns: Sequence[str]
    rows: Sequence[Sequence[str]]
    words: frozenset[int] = frozenset({0})  # columns of words, set to the left; the others are numbers, set to the right
    foot: int = 0  # rows at the end that sum the others up
    struck: frozenset[int] = frozenset()  # rows that take no part, struck through and still legible


def variables(look: Look) -> str:
    """Return the style sheet that hands a look's colours to the page."""
    colours = {name: getattr(look, name) for name in ("paper", "panel", "ink", "quiet", "rule", "accent")}
    told = "".join(f"--{name}:{colour};" for name, colour in {**colours, "shade": look.shades[0], "deep": look.shades[1]}.items())
    return f"<style>:root{{{told}}}</style>"


def marks(settled: Sequence[str]) -> str:
    """Return the style that fills the marks of the settled stops in the bar, by their titles."""
    where = ", ".join(f'[data-testid="stTopNavLink"] span[label="{safe(title)}"] p::before' for title in settled)
    return f"<style>{where} {{ background: var(--accent); border-color: var(--accent); }}</style>" if settled else ""


def safe(text: object) -> str:
    """Return text that no browser takes for markup."""
    return html.escape(str(text))


def heading(text: str, aside: str = "") -> str:
    """Return the heading of a station, with a quieter part beside it."""
    beside = f" <span class='aside'>{safe(aside)}</span>" if aside else ""
    return f"<h1 class='station'>{safe(text)}{beside}</h1>"


def question(text: str, aside: str = "") -> str:
    """Return the heading of one part of a station, with a quieter part beside it."""
    beside = f" <span class='aside'>{safe(aside)}</span>" if aside else ""
    return f"<h2 class='question'>{safe(text)}{beside}</h2>"


def answer(sentence: str, statistic: str, standing: str, known: Sequence[str] = ()) -> str:
    """Return one answer: the sentence, beneath it the statistic, and folded away how it is known."""
    mark = f"<span class='mark'>{MARKS[standing]}</span>"
    fold = f"<details><summary>How we know</summary>{bullets(known)}</details>" if known else ""
    told = f"<p class='sentence'>{safe(sentence)}</p><p class='statistic'>{mark}{safe(statistic)}</p>{fold}"
    return f"<section class='answer {standing}'>{told}</section>"


def doubt(sentence: str, mark: str, amber: bool) -> str:
    """Return one open doubt, with the words that say how serious it is."""
    kind = "amber" if amber else "note"
    return f"<section class='doubt {kind}'><p><b>{safe(mark)}</b> {safe(sentence)}</p></section>"


def notice(sentence: str) -> str:
    """Return a sentence that needs the user."""
    return f"<p class='notice' role='alert'>{safe(sentence)}</p>"


def caption(text: str) -> str:
    """Return the small print of a figure or table."""
    return f"<p class='caption'>{safe(text)}</p>"


def text(sentence: str) -> str:
    """Return a paragraph."""
    return f"<p class='text'>{safe(sentence)}</p>"


def bullets(sentences: Iterable[str]) -> str:
    """Return sentences one below the other."""
    return f"<ul class='bullets'>{''.join(f'<li>{safe(sentence)}</li>' for sentence in sentences)}</ul>"


def empty(steps: Sequence[str]) -> str:
    """Return the road ahead, for a page with nothing on it yet."""
    told = "".join(f"<li><b>{safe(name)}</b>{safe(rest)}</li>" for name, _, rest in (step.partition(":") for step in steps))
    return f"<ol class='road'>{told}</ol>"


def claim(sentence: str, size: str = "") -> str:
    """Return the claim of a board that fills the window; a long one is set smaller."""
    return f"<h1 class='claim {size}'>{safe(sentence)}</h1>"


def told(place: int, claim: str, evidence: str, dropped: bool = False) -> str:
    """Return one board of the story as it stands in the list: its number, claim and evidence."""
    number = "–" if dropped else str(place)
    return f"<div class='told{' dropped' if dropped else ''}'><i>{number}</i><p><b>{safe(claim)}</b><span>{safe(evidence)}</span></p></div>"


def speaker(head: str, claim: str, evidence: str, notes: str, after: Sequence[str]) -> str:
    """Return what the speaker sees: the board's claim, its notes as they are broken into lines, and what comes next."""
    later = "".join(f"<p class='after'>{safe(sentence)}</p>" for sentence in after)
    shown = f"<p class='place'>{safe(head)}</p><h1>{safe(claim)}</h1><p class='shown'>{safe(evidence)}</p>"
    told = f"{shown}<div class='notes'>{safe(notes)}</div>"
    return f"<section class='speaker' tabindex='0'>{told}{later}</section>"


NUMBER = re.compile(r"empty|–|(< )?[−\d][−\d\s.,]*( \([−\d\s.,]+ to [−\d\s.,]+\))?( ≠)?")


def is_number(text: str) -> bool:
    """Return whether a text reads as a number, with or without an interval."""
    return bool(NUMBER.fullmatch(text))


def evidence(line: str, place: str) -> str:
    """Return the line of evidence under a board, with the number of the board beside it."""
    return f"<div class='evidence'><p>{safe(line)}</p><p class='place'>{safe(place)}</p></div>"


def status(sentence: str, unseen: str) -> str:
    """Return the words beside undo and redo, and what is told to a screen reader alone."""
    return f"<p class='status'>{safe(sentence)}</p><p class='unseen'>{safe(unseen)}</p>"


def levels(factor: str, counts: Sequence[tuple[str, int]]) -> str:
    """Return a factor's levels in their order, each with its count."""
    told = "".join(f"<li>{safe(level)} <span>{count}</span></li>" for level, count in counts)
    return f"<div class='levels'><h2>{safe(factor)}</h2><ul>{told}</ul></div>"


def decided(sentence: str) -> str:
    """Return a decision that is followed by what it could be instead."""
    return f"<p class='decided'>{safe(sentence)} <span class='quiet'>Instead:</span></p>"


def lines(numbered: Iterable[tuple[int, str]]) -> str:
    """Return lines of a file as they stand there, each with its number."""
    told = "".join(f"<li value='{number}'><code>{safe(text) or '&nbsp;'}</code></li>" for number, text in numbered)
    return f"<div class='lines' tabindex='0' role='region' aria-label='The file as it stands'><ol>{told}</ol></div>"


def offer(sentence: str) -> str:
    """Return a question that is answered by the buttons beside it."""
    return f"<p class='offer'>{safe(sentence)}</p>"


def struck(name: str, aside: str) -> str:
    """Return a name that takes no part, struck through and still legible."""
    return f"<p class='text'><s>{safe(name)}</s> <span class='quiet'>{safe(aside)}, left out</span></p>"


def side_by_side(parts: Iterable[str]) -> str:
    """Return parts of a page, made here, beside each other."""
    return f"<div class='beside'>{''.join(f'<div>{part}</div>' for part in parts)}</div>"


def table(sheet: Sheet) -> str:
    """Return a table with headings that a screen reader can follow."""
    head = "".join(f"<th scope='col'{_side(sheet, k)}>{safe(name)}</th>" for k, name in enumerate(sheet.columns))
    body = "".join(_row(sheet, row, _kind(sheet, k)) for k, row in enumerate(sheet.rows))
    inner = f"<caption>{safe(sheet.caption)}</caption><thead><tr>{head}</tr></thead><tbody>{body}</tbody>"
    return f"<div class='sheet' tabindex='0' role='region' aria-label='{safe(sheet.caption)}'><table>{inner}</table></div>"


def _row(sheet: Sheet, row: Sequence[str], kind: str) -> str:
    name, *cells = row
    told = "".join(f"<td{_side(sheet, k)}>{safe(cell)}</td>" for k, cell in enumerate(cells, start=1))
    return f"<tr{kind}><th scope='row'>{safe(name)}</th>{told}</tr>"


def _kind(sheet: Sheet, place: int) -> str:
    if place in sheet.struck:
        return " class=struck"
    return " class=foot" if place >= len(sheet.rows) - sheet.foot else ""


def _side(sheet: Sheet, column: int) -> str:
    return "" if column in sheet.words else " class='number'"
