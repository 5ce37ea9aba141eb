"""The slides of a study: one for each board, the claim as title, the table or figure below it, its evidence, and the notes."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from pptx.slide import Slide
from pptx.util import Pt

from analysis.findings import Findings
from app.boards import Board
from app.exports import chart, fit, master, plot, tables
from app.exports.setting import Dress, fitted
from app.look import DESK, SLIDE

DRESSES = {
    "question": Dress(strong=0, tiles=True),
    "answers": Dress(strong=1, every_row=True),
    "comparisons": Dress(strong=2, kept="the {} largest"),
}


@dataclass(frozen=True)
class Shown:
    """What stands on a slide beside its claim, and how that differs from the whole."""

    rule: str  # where rows or columns were left away
    shortened: tuple[tuple[str, str], ...]


def inks() -> master.Inks:
    """Return the colours of the deck."""
    return master.Inks(
        paper=_digits(DESK.paper),
        panel=_digits(DESK.panel),
        field=_digits(DESK.shades[0]),
        ink=_digits(SLIDE.ink),
        quiet=_digits(SLIDE.quiet),
        rule=_digits(DESK.rule),
        accent=_digits(SLIDE.accent),
        levels=tuple(map(_digits, SLIDE.hues)),
    )


def _digits(colour: str) -> str:
    return colour.removeprefix("#")


def build(boards: Sequence[Board], findings: Findings) -> bytes:
    """Return the slides as a .pptx file, 16:9, one slide for each board, the same bytes for the same findings."""
    deck, for_table, for_chart = master.empty_deck()
    for board in boards:
        layout = for_chart if board.figure else for_table
        slide = deck.slides.add_slide(layout)
        _claim(slide, board)
        shown = _content(slide, board, findings)
        _evidence(slide, board, shown)
        master.number(slide, layout)
        slide.notes_slide.notes_text_frame.text = _notes(board, shown)
    return master.saved(deck, boards[0].claim if boards else "", inks())


def _claim(slide: Slide, board: Board) -> None:
    """Write the claim as the slide's title, in the largest type that lets it fit."""
    wide, tall = master.CLAIM.wide / fit.BOLD, master.CLAIM.tall
    points = fit.largest_type(board.claim, master.CLAIM_SIZES, wide, tall)
    frame = _place(slide, 0).text_frame
    frame.text = fit.shorten(board.claim, points, wide, fit.lines_in(tall, points))
    frame.paragraphs[0].runs[0].font.size = Pt(points)


def _place(slide: Slide, number: int) -> Any:
    """Return the placeholder of a slide with this number; the title's is 0, and each kind of content has a class of its own."""
    return next(shape for shape in slide.placeholders if shape.placeholder_format.idx == number)


def _content(slide: Slide, board: Board, findings: Findings) -> Shown:
    """Put the figure or the table on a slide."""
    place = _place(slide, master.CONTENT)
    if board.figure:
        drawn = plot.plan(findings)
        master.describe(chart.add(place, drawn, inks()), board.kind.capitalize(), board.alt + _turned(drawn))
        return Shown("", drawn.shortened)
    if board.table is None or board.table.empty:
        place.element.getparent().remove(place.element)
        return Shown("", ())
    dress = DRESSES.get(board.kind, Dress())
    content = fitted(board.table, dress)
    master.describe(tables.add(place, content, dress, inks()), board.kind.capitalize(), board.alt)
    return Shown(content.cut, content.shortened)


def _turned(drawn: plot.Plot) -> str:
    """Say it where the slide draws the factors on other sides than the screen."""
    sides = f" Here the levels of {drawn.column_factor} run along the axis, and each level of {drawn.row_factor} is a line."
    return sides if drawn.turned else ""


def _evidence(slide: Slide, board: Board, shown: Shown) -> None:
    """Write the line of evidence; what was left away is said first."""
    text = " · ".join(filter(None, (shown.rule and f"Shown: {shown.rule}; the workbook holds all", board.evidence)))
    lines = fit.lines_in(master.EVIDENCE.tall, master.SMALLEST)
    _place(slide, master.WORDS).text_frame.text = fit.shorten(text, master.SMALLEST, master.EVIDENCE.wide, lines)


def _notes(board: Board, shown: Shown) -> str:
    """Return the speaker notes, with the whole of everything that stands shortened on the slide."""
    whole = "\n".join(f"On the slide “{short}” stands for “{text}”." for short, text in shown.shortened)
    return "\n\n".join(filter(None, (board.claim, board.evidence, whole, board.notes)))
