"""Pictures of a figure as files: PNG and SVG, drawn by an installed browser without touching the network."""

import io
import os
from pathlib import Path

import kaleido
import plotly.graph_objects as go
from choreographer.browsers.chromium import Chromium
from PIL import Image

from analysis.refusals import NoBrowser

WIDE, TALL = 1152, 648  # px at one to the inch's 96th, where the figure names no size of its own
NOWHERE = "http://127.0.0.1:9"  # the discard port of this machine: whatever the browser asks of the network ends here
_MILLIMETRES = 25.4
_CSS_DPI = 96


def browser() -> str:
    """Return the path of an installed browser of the Chromium family; raises NoBrowser where there is none."""
    named = os.environ.get("BROWSER_PATH")
    found = named if named and Path(named).is_file() else Chromium.find_browser(skip_local=False)
    if not found:
        raise NoBrowser
    return str(found)


def png(figure: go.Figure, dpi: int = 300) -> bytes:
    """Return a PNG at a resolution in dots per inch, which the file names; raises NoBrowser."""
    drawn = Image.open(io.BytesIO(_draw(figure, "png", dpi / _CSS_DPI)))
    tagged = io.BytesIO()
    drawn.convert("RGB").save(tagged, "PNG", dpi=(dpi, dpi), optimize=True)
    return tagged.getvalue()


def svg(figure: go.Figure) -> bytes:
    """Return an SVG, whose lines and letters stay sharp at any size; raises NoBrowser."""
    return _draw(figure, "svg", 1)


def _draw(figure: go.Figure, kind: str, scale: float) -> bytes:
    size = {"width": figure.layout.width or WIDE, "height": figure.layout.height or TALL}
    # Neither formulas nor fonts come from elsewhere: no MathJax, and a proxy that leads nowhere.
    options = {"path": browser(), "mathjax": False, "proxy_server": NOWHERE}
    drawn: bytes = kaleido.calc_fig_sync(figure, {"format": kind, "scale": scale, **size}, kopts=options)
    return drawn
