"""Figures as files for print and slides: their width in mm, their type in points, their resolution, their ground."""

import io
import zipfile
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

import plotly.graph_objects as go

from analysis.findings import Findings
from app.board import Board
from app.exports import images, zips
from app.figures import grid, lettering
from app.look import PRINT, Look

MM_TO_THE_INCH, POINTS_TO_THE_INCH = 25.4, 72
SHAPE = 0.62  # height of a figure, of its width
LEAST_LINES = 17  # of type, that the lowest figure is tall
CLEAR = "rgba(0,0,0,0)"
MOST_NAMES = 0.45  # of the width, that names down the side may take on one line


@dataclass(frozen=True)
class Wanted:
    """How figures are wanted."""

    millimetres: float = 183.0
    points: float = 8.0
    dpi: int = 300
    transparent: bool = False

    @property
    def look(self) -> Look:
        """The look of print at this width and size of type; lines and marks grow with the type."""
        pixels = images.PX_TO_THE_INCH
        wide, text = self.millimetres / MM_TO_THE_INCH * pixels, self.points / POINTS_TO_THE_INCH * pixels
        grown = text / PRINT.text
        return replace(
            PRINT, width=round(wide), height=round(max(SHAPE * wide, LEAST_LINES * text)), text=text, small=text,
            line=PRINT.line * grown, marker=PRINT.marker * grown, point=PRINT.point * grown,
        )  # fmt: skip


def build(boards: Sequence[Board], findings: Findings, wanted: Wanted) -> bytes:
    """Return every figure of a story and the grid of means as PNG, TIFF, SVG and PDF with their captions; raises NoBrowser."""
    named = list(figures(boards, findings))
    drawn = [dressed(make(wanted.look), wanted) for _, make, _ in named]
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w") as archive:
        for (name, _, caption), files in zip(named, images.in_every_format(drawn, wanted.dpi, wanted.transparent), strict=True):
            for kind, content in files.items():
                archive.writestr(f"{name}.{kind}", content)
            archive.writestr(f"{name}.txt", caption + "\n")
    return zips.settled(packed.getvalue())


def figures(boards: Sequence[Board], findings: Findings) -> Iterator[tuple[str, Callable[[Look], go.Figure], str]]:
    """Return name, drawing and caption of every figure; those of a kind that comes more than once are numbered."""
    count: dict[str, int] = {}
    for board in boards:
        if board.figure is not None:
            count[board.kind] = count.get(board.kind, 0) + 1
            number = f" {count[board.kind]}" if board.kind == "compared" else ""
            yield f"{board.kind}{number}", board.figure, f"{board.claim} {board.caption}"
    yield "grid", lambda look: grid.grid(findings, look), grid.grid_caption(findings)


def dressed(figure: go.Figure, wanted: Wanted) -> go.Figure:
    """Return a figure on the ground wanted, its names down the side on two lines where they would take too much of the width."""
    if wanted.transparent:
        figure.update_layout(paper_bgcolor=CLEAR, plot_bgcolor=CLEAR)
    look, left = wanted.look, figure.layout.margin.l
    names = figure.layout.yaxis.ticktext
    if not names or look.width is None or left is None or left <= MOST_NAMES * look.width:
        return figure
    broken = [name.replace(" − ", "<br>− ").replace(" ÷ ", "<br>÷ ") for name in names]
    letters = int(MOST_NAMES * look.width / (look.text * lettering.LETTER))
    short = ["<br>".join(line if len(line) <= letters else f"{line[: letters - 1]}…" for line in name.split("<br>")) for name in broken]
    room = max((lettering.line_count(name) for name in short), default=1)
    height = max(int(figure.layout.height or 0), round(len(short) * room * look.text * 1.35 + 5 * look.text))
    figure.update_layout(yaxis={"ticktext": short}, margin={"l": lettering.widest(short, look.text) + 8}, height=height)
    return figure
