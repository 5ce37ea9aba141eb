"""Pictures have the size and resolution that was asked for, and a missing browser is one sentence."""

import io

import plotly.graph_objects as go
import pytest
from PIL import Image

from analysis.refusals import NoBrowser
from app.exports import images
from app.figures import interaction
from app.look import PRINT
from tests.app import designs


@pytest.mark.browser
def test_png_and_svg_of_a_figure() -> None:
    figure = interaction.interaction(designs.design("3 by 4"), PRINT)
    ((png, svg),) = images.pngs_and_svgs([figure], dpi=192)
    picture = Image.open(io.BytesIO(png))
    assert picture.size == (2 * PRINT.width, 2 * figure.layout.height)  # 192 dots to the inch are two for each px
    assert picture.info["dpi"] == pytest.approx((192, 192), abs=0.1)
    assert len(set(picture.convert("L").resize((64, 64)).tobytes())) > 5, "the picture is not blank"
    assert svg.lstrip().startswith(b"<svg")
    assert b"Deep shade" in svg


def test_without_a_browser_there_are_two_ways_out(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(images.Chromium, "find_browser", lambda **_: None)
    monkeypatch.delenv("BROWSER_PATH", raising=False)
    with pytest.raises(NoBrowser, match=r"let the set-up fetch one .*, or take figures with the camera above them"):
        images.png(go.Figure())


def test_a_browser_named_in_the_environment_comes_first(monkeypatch: pytest.MonkeyPatch, tmp_path) -> None:
    named = tmp_path / "browser"
    named.touch()
    monkeypatch.setenv("BROWSER_PATH", str(named))
    assert images.browser() == str(named)
