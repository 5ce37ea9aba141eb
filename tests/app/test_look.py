"""The palette can be told apart and read, and the page wears the same colours as the figures."""

import itertools
import tomllib

import numpy as np
import pytest

from app import look
from tests.app.opening import ROOT

# Simulated vision, linear RGB. Source: Machado, Oliveira & Fernandes (2009), IEEE TVCG 15, 1291-1298, severity 1.0; from memory.
VISION = {
    "full colour": np.eye(3),
    "protanopia": np.array([[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]]),
    "deuteranopia": np.array([[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.011820, 0.042940, 0.968881]]),
    "tritanopia": np.array([[1.255528, -0.076749, -0.178779], [-0.078411, 0.930809, 0.147602], [0.004733, 0.691367, 0.303900]]),
    "grey": np.tile([0.2126, 0.7152, 0.0722], (3, 1)),
}
# Linear RGB to OKLab. Source: Ottosson (2020), "A perceptual color space for image processing"; from memory.
LMS = np.array(
    [[0.4122214708, 0.5363325363, 0.0514459929], [0.2119034982, 0.6806995451, 0.1073969566], [0.0883024619, 0.2817188376, 0.6299787005]]
)
LAB = np.array(
    [[0.2104542553, 0.7936177850, -0.0040720468], [1.9779984951, -2.4285922050, 0.4505937099], [0.0259040371, 0.7827717662, -0.8086757660]]
)
# Distances in OKLab that the palette keeps; near nothing in grey, where marker and dash alone tell some levels apart.
LEAST = {"full colour": 0.1, "protanopia": 0.025, "deuteranopia": 0.06, "tritanopia": 0.06, "grey": 0.005}
LOOKS = [look.DESK, look.NIGHT, look.PROJECTOR, look.SLIDE, look.PRINT]


def seen(colour: str, vision: str) -> np.ndarray:
    """Return a colour's place in OKLab as somebody with this vision sees it."""
    channels = np.array([int(colour[k : k + 2], 16) for k in (1, 3, 5)]) / 255
    linear = np.where(channels <= 0.04045, channels / 12.92, ((channels + 0.055) / 1.055) ** 2.4)
    return LAB @ np.cbrt(LMS @ np.clip(VISION[vision] @ linear, 0, 1))


@pytest.mark.parametrize("vision", VISION)
def test_levels_can_be_told_apart(vision: str) -> None:
    """Where two hues come near each other for some eye, marker and dash still differ; the least distance is printed."""
    pairs = list(itertools.combinations(range(len(look.HUES)), 2))
    distances = {pair: float(np.linalg.norm(seen(look.HUES[pair[0]], vision) - seen(look.HUES[pair[1]], vision))) for pair in pairs}
    nearest = min(pairs, key=distances.__getitem__)
    print(f"{vision}: least distance {distances[nearest]:.3f} between {look.HUES[nearest[0]]} and {look.HUES[nearest[1]]}")  # noqa: T201
    assert distances[nearest] > LEAST[vision]
    for one, other in pairs:
        a, b = look.DESK.style_of(one), look.DESK.style_of(other)
        assert a.marker != b.marker
        assert a.dash != b.dash


@pytest.mark.parametrize("worn", LOOKS, ids=lambda worn: worn.name)
def test_marks_and_text_stand_out(worn: look.Look) -> None:
    """Source: WCAG 2.2, 1.4.3 (text 4.5:1) and 1.4.11 (marks 3:1); 7:1 for text on a far wall is our own rule."""
    text = 7.0 if worn.name in ("projector", "slide") else 4.5
    for hue, ink in zip(worn.hues, worn.inks, strict=True):
        assert look.contrast(hue, worn.paper) >= 3.0
        assert look.contrast(ink, worn.paper) >= text
    for words in (worn.ink, worn.quiet, worn.accent):
        assert look.contrast(words, worn.paper) >= text
        assert look.contrast(words, worn.panel) >= text


@pytest.mark.parametrize("worn", LOOKS, ids=lambda worn: worn.name)
def test_text_is_legible_on_every_shade_of_the_grid(worn: look.Look) -> None:
    for share in np.linspace(0, 1, 101):
        ground = look.shade(worn.shades, float(share))
        assert look.contrast(look.text_on(ground), ground) >= 4.5


def test_more_than_eight_levels_are_still_told_apart() -> None:
    styles = [look.DESK.style_of(k) for k in range(16)]
    assert len({(style.hue, style.marker) for style in styles}) == 16


@pytest.mark.parametrize(("mode", "worn"), [("light", look.DESK), ("dark", look.NIGHT)])
def test_the_page_wears_the_colours_of_the_figures(mode: str, worn: look.Look) -> None:
    theme = tomllib.loads((ROOT / ".streamlit" / "config.toml").read_text(encoding="utf-8"))["theme"][mode]
    assert theme["backgroundColor"] == worn.paper
    assert theme["textColor"] == worn.ink
    assert theme["borderColor"] == worn.rule
    assert theme["primaryColor"] == worn.accent


def test_projected_text_is_a_fortieth_of_the_screen() -> None:
    assert look.PROJECTOR.text >= 1080 / 40
    assert look.PROJECTOR.small >= 768 / 40
