"""The slides of a study: one for each board, the claim as title, the table or figure below it, its evidence, and the notes."""

import io
from collections.abc import Sequence
from dataclasses import dataclass, replace

from pptx.slide import Slide
from pptx.util import Pt

from analysis.findings import Findings
from analysis.refusals import NoBrowser
from app import tabled
from app.board import Board
from app.exports import chart, fit, images, master, plot, stationery, tables
from app.exports.setting import Dress, fitted
from app.exports.stationery import Stationery

DRESSES = {
    "question": Dress(strong=0, tiles=True),
    "raw": Dress(strong=3),
    "compared": Dress(strong=1, kept="the {} largest"),
    "slices": Dress(strong=2, kept="the {} largest"),
    "belief": Dress(strong=0, every_row=True),
    "next": Dress(strong=0, every_row=True),
}
PICTURE_DPI = 220  # at the size at which a picture stands on the slide


@dataclass(frozen=True)
class Shown:
    """What stands on a slide beside its claim, and how that differs from the whole."""

    rule: str = ""  # where rows or columns were left away
    shortened: tuple[tuple[str, str], ...] = ()
    added: str = ""  # to the notes


def build(boards: Sequence[Board], findings: Findings, dark: bool = False, template: bytes | None = None) -> bytes:
    """Return the slides as a .pptx file, one for each board, the same bytes for the same findings.

    They are 16:9 in our own light or dark colours, or stand in the user's own template; raises TemplateUnusable where that has no place
    for a title.
    """
    paper = stationery.own(dark) if template is None else stationery.of(template)
    for board in boards:
        kind, picture = _kind(board, paper)
        layout = paper.layouts[kind]
        slide = paper.deck.slides.add_slide(layout)
        _claim(slide, board, paper)
        shown = _content(slide, board, findings, paper, picture)
        _evidence(slide, board, shown, paper)
        master.number(slide, layout)
        slide.notes_slide.notes_text_frame.text = _notes(board, shown)
    return paper.saved(boards[0].claim if boards else "")


def _kind(board: Board, paper: Stationery) -> tuple[str, bytes | None]:
    """Return the kind of content that shows a board: the native chart, a picture drawn by a browser, or a native table."""
    if board.kind == "interaction":
        return "chart", None
    if board.figure is not None and (board.kind == "raw" or board.table is None):
        body = paper.places.body
        look = replace(paper.look, width=round(body.wide * images.PX_TO_THE_INCH), height=round(body.tall * images.PX_TO_THE_INCH))
        try:
            return "pic", images.png(board.figure(look), PICTURE_DPI)
        except NoBrowser:  # the table of the cells says the same in numbers
            return "tbl", None
    return "tbl", None


def _claim(slide: Slide, board: Board, paper: Stationery) -> None:
    """Write the claim as the slide's title, in the largest type that lets it fit."""
    wide, tall = paper.places.claim.wide / fit.BOLD, paper.places.claim.tall
    points = fit.largest_type(board.claim, master.CLAIM_SIZES, wide, tall)
    frame = slide.shapes.title.text_frame
    frame.text = fit.shorten(board.claim, points, wide, fit.lines_in(tall, points))
    frame.paragraphs[0].runs[0].font.size = Pt(points)


def _content(slide: Slide, board: Board, findings: Findings, paper: Stationery, picture: bytes | None) -> Shown:
    """Put the figure or the table on a slide."""
    place, body = paper.place(slide), paper.places.body
    if picture is not None:
        drawn = place.insert_picture(io.BytesIO(picture))
        drawn.crop_left = drawn.crop_right = drawn.crop_top = drawn.crop_bottom = 0
        drawn.left, drawn.top, drawn.width, drawn.height = body.emu()
        master.describe(drawn, board.kind.capitalize(), board.alt)
        return Shown(added=f"In numbers: {tabled.aloud(board.table)}" if board.table is not None else "")
    if board.kind == "interaction":
        planned = plot.plan(findings, paper.look, body)
        master.describe(chart.add(place, planned, paper.inks), board.kind.capitalize(), board.alt + _turned(planned))
        return Shown(shortened=planned.shortened)
    if board.table is None or board.table.empty:
        place.element.getparent().remove(place.element)
        return Shown()
    dress = replace(DRESSES.get(board.kind, Dress()), body=body)
    content = fitted(board.table, dress)
    master.describe(tables.add(place, content, dress, paper.inks), board.kind.capitalize(), board.alt)
    return Shown(content.cut, content.shortened)


def _turned(drawn: plot.Plot) -> str:
    """Say it where the slide draws the factors on other sides than the screen."""
    sides = f" Here the levels of {drawn.column_factor} run along the axis, and each level of {drawn.row_factor} is a line."
    return sides if drawn.turned else ""


def _evidence(slide: Slide, board: Board, shown: Shown, paper: Stationery) -> None:
    """Write the line of evidence; what was left away is said first."""
    text = " · ".join(filter(None, (shown.rule and f"Shown: {shown.rule}; the workbook holds all", board.evidence)))
    place = paper.places.evidence
    paper.words(slide).text = fit.shorten(text, master.SMALLEST, place.wide, fit.lines_in(place.tall, master.SMALLEST))


def _notes(board: Board, shown: Shown) -> str:
    """Return the speaker notes, with the whole of everything that stands shortened on the slide."""
    whole = "\n".join(f"On the slide “{short}” stands for “{text}”." for short, text in shown.shortened)
    return "\n\n".join(filter(None, (board.claim, board.evidence, whole, shown.added, board.notes)))
