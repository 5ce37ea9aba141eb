"""Pictures of figures as files: PNG, TIFF, SVG and PDF, drawn by an installed browser without touching the network."""

import io
import os
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

import plotly.graph_objects as go
from choreographer.browsers.chromium import Chromium
from PIL import Image

from analysis.refusals import NoBrowser
from app.exports import renderer
from app.exports.renderer import Asked

WIDE, TALL = 1152, 648  # px, where the figure names no size of its own
PX_TO_THE_INCH = 96  # as browsers count them
KEPT = 16  # sets of files that are kept, so that the same slides are built without the browser the second time


@dataclass(frozen=True)
class Drawing:
    """A figure to be drawn: its format, and how many dots of a PNG stand for one px of the figure."""

    figure: go.Figure
    kind: str
    scale: float = 1.0

    @property
    def asked(self) -> Asked:
        """The figure as text, and format and size as the renderer wants them."""
        layout = self.figure.layout
        size = (("width", layout.width or WIDE), ("height", layout.height or TALL))
        return str(self.figure.to_json()), (("format", self.kind), ("scale", self.scale), *size)


def browser() -> str:
    """Return the path of an installed browser of the Chromium family; raises NoBrowser where there is none."""
    named = os.environ.get("BROWSER_PATH")
    found = named if named and Path(named).is_file() else Chromium.find_browser(skip_local=False)
    if not found:
        raise NoBrowser
    return str(found)


def png(figure: go.Figure, dpi: int = 300) -> bytes:
    """Return a PNG at a resolution in dots per inch, which the file names; raises NoBrowser."""
    return _tagged(_drawn([Drawing(figure, "png", dpi / PX_TO_THE_INCH)])[0], dpi)


def svg(figure: go.Figure) -> bytes:
    """Return an SVG, whose lines and letters stay sharp at any size; raises NoBrowser."""
    return _drawn([Drawing(figure, "svg")])[0]


def pngs_and_svgs(figures: Sequence[go.Figure], dpi: int = 300) -> tuple[tuple[bytes, bytes], ...]:
    """Return each figure as PNG and as SVG; raises NoBrowser."""
    drawings = [drawing for figure in figures for drawing in (Drawing(figure, "png", dpi / PX_TO_THE_INCH), Drawing(figure, "svg"))]
    files = _drawn(drawings)
    return tuple((_tagged(png_file, dpi), svg_file) for png_file, svg_file in zip(files[::2], files[1::2], strict=True))


def in_every_format(figures: Sequence[go.Figure], dpi: int, transparent: bool = False) -> tuple[dict[str, bytes], ...]:
    """Return each figure as PNG, TIFF, SVG and PDF by the endings of these formats.

    PNG and TIFF name their resolution; the TIFF is flat, without transparency, and packed by LZW. Raises NoBrowser.
    """
    kinds = (("png", dpi / PX_TO_THE_INCH), ("svg", 1.0), ("pdf", 1.0))
    files = _drawn([Drawing(figure, kind, scale) for figure in figures for kind, scale in kinds])
    return tuple(
        {"png": _tagged(png_file, dpi, transparent), "tiff": _flat(png_file, dpi), "svg": svg_file, "pdf": pdf_file}
        for png_file, svg_file, pdf_file in zip(files[::3], files[1::3], files[2::3], strict=True)
    )


def _tagged(png_file: bytes, dpi: int, transparent: bool = False) -> bytes:
    """Return a PNG that says how large it is meant to be: the renderer does not write its resolution."""
    tagged = io.BytesIO()
    picture = Image.open(io.BytesIO(png_file))
    (picture if transparent else picture.convert("RGB")).save(tagged, "PNG", dpi=(dpi, dpi))
    return tagged.getvalue()


def _flat(png_file: bytes, dpi: int) -> bytes:
    """Return a picture as TIFF in one layer on white."""
    picture = Image.open(io.BytesIO(png_file)).convert("RGBA")
    ground = Image.new("RGBA", picture.size, "white")
    flat = io.BytesIO()
    Image.alpha_composite(ground, picture).convert("RGB").save(flat, "TIFF", compression="tiff_lzw", dpi=(dpi, dpi))
    return flat.getvalue()


def _drawn(drawings: Sequence[Drawing]) -> list[bytes]:
    """Draw figures, each once: what was drawn before is at hand."""
    return list(_files(tuple(drawing.asked for drawing in drawings), browser()))


@lru_cache(maxsize=KEPT)
def _files(asked: tuple[Asked, ...], path: str) -> tuple[bytes, ...]:
    return renderer.draw(asked, path)
