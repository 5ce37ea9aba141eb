"""The report as one page for a browser: figures that can be pointed at, everything inside the file, nothing fetched."""

import html
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

from plotly.offline import get_plotlyjs

from app import paper
from app.look import PRINT, Look
from app.paper import Sheet
from app.report_parts import BLANK, Block, Part, Picture, Rows, Text

STYLE = Path(__file__).parents[1] / "assets" / "report.css"
# The page may draw and run what is in it, and fetch nothing.
ONLY_ITSELF = "default-src 'none'; style-src 'unsafe-inline'; script-src 'unsafe-inline'; img-src data: blob:"


def look() -> Look:
    """Return the look of figures in the report: type as on a desk, ink for paper."""
    return replace(PRINT, text=13, small=12, line=2.0, marker=9, point=5, width=860, height=460)


def build(title: str, parts: Sequence[Part]) -> bytes:
    """Return the page, the same bytes for the same parts."""
    body = "".join(_part(part, number) for number, part in enumerate(parts))
    head = (
        f"<meta charset='utf-8'><meta name='viewport' content='width=device-width'><title>{html.escape(title)}</title>"
        f"<meta http-equiv='Content-Security-Policy' content=\"{ONLY_ITSELF}\"><style>{STYLE.read_text(encoding='utf-8')}</style>"
        f"<script>{get_plotlyjs()}</script>"
    )
    page = f"<!doctype html><html lang='en'><head>{head}</head><body><main><h1>{html.escape(title)}</h1>{body}</main></body></html>"
    return page.encode("utf-8")


def _part(part: Part, number: int) -> str:
    blocks = "".join(_block(block, f"figure-{number}-{place}") for place, block in enumerate(part.blocks))
    return f"<section><h2>{html.escape(part.heading)}</h2>{blocks}</section>"


def _block(block: Block, name: str) -> str:
    if isinstance(block, Text):
        return f"<p>{marked(block.text)}</p>"
    if isinstance(block, Rows):
        return f"<figure class='rows'><figcaption>{html.escape(block.caption)}</figcaption>{paper.table(_plain(block.sheet))}</figure>"
    return _picture(block, name)


def marked(text: str) -> str:
    """Return text with its blanks marked, everything else inert."""
    pieces, at = [], 0
    for blank in BLANK.finditer(text):
        pieces += [html.escape(text[at : blank.start()]), f"<mark>{html.escape(blank.group())}</mark>"]
        at = blank.end()
    return "".join([*pieces, html.escape(text[at:])])


def _plain(sheet: Sheet) -> Sheet:
    return replace(sheet, rows=[[str(cell) for cell in row] for row in sheet.rows])


def _picture(block: Picture, name: str) -> str:
    # A name ends a script where it holds "</": escaped, JSON stays the same value.
    figure = str(block.figure(look()).to_json()).replace("</", "<\\/")
    draw = f"const f = {figure}; Plotly.newPlot('{name}', f.data, f.layout, {{displayModeBar: false}});"
    return (
        f"<figure><div id='{name}' role='img' aria-label=\"{html.escape(block.alt)}\"></div><script>{{{draw}}}</script>"
        f"<figcaption>{html.escape(block.caption)}</figcaption></figure>"
    )
