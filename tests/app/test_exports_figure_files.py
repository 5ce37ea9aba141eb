"""Figures have the width, type, resolution, ground and fonts that were asked for, in every format."""

import io
import re
import zipfile
from functools import cache

import pypdf
import pytest
from PIL import Image

from app import boards
from app.exports import figure_files
from app.exports.figure_files import Wanted
from tests.app import designs

WANTED = {"single column": Wanted(89, 7, 600), "double, clear": Wanted(183, 8, 300, transparent=True), "slide": Wanted(308, 18)}
pytestmark = pytest.mark.browser


@cache
def files_of(size: str, design: str = "3 by 4") -> dict[str, bytes]:
    found = designs.design(design)
    told = [one for one in boards.story(found) if one.kind in ("raw", "interaction", "compared")][:3]
    with zipfile.ZipFile(io.BytesIO(figure_files.build(told, found, WANTED[size]))) as parts:
        return {name: parts.read(name) for name in parts.namelist()}


def test_every_figure_comes_in_every_format_with_its_caption() -> None:
    names = {name.rpartition(".")[::2] for name in files_of("double, clear")}
    figures = {"raw", "interaction", "compared 1", "grid"}
    assert names == {(figure, kind) for figure in figures for kind in ("png", "tiff", "svg", "pdf", "txt")}
    assert "n = 6 in each cell" in files_of("double, clear")["interaction.txt"].decode()


@pytest.mark.parametrize("size", WANTED)
def test_pictures_are_as_wide_as_asked(size: str) -> None:
    wanted = WANTED[size]
    for name, content in files_of(size).items():
        if name.endswith((".png", ".tiff")):
            picture = Image.open(io.BytesIO(content))
            assert picture.info["dpi"] == pytest.approx((wanted.dpi, wanted.dpi), abs=0.1)
            assert picture.width / picture.info["dpi"][0] * 25.4 == pytest.approx(wanted.millimetres, abs=0.3), name


def test_a_tiff_is_flat_and_packed() -> None:
    picture = Image.open(io.BytesIO(files_of("double, clear")["interaction.tiff"]))
    assert picture.mode == "RGB"
    assert picture.info["compression"] == "tiff_lzw"
    assert picture.n_frames == 1
    assert picture.getpixel((1, 1)) == (255, 255, 255)


def test_the_ground_is_clear_where_asked_and_light_otherwise() -> None:
    clear = Image.open(io.BytesIO(files_of("double, clear")["interaction.png"]))
    assert clear.getpixel((1, 1))[3] == 0
    light = Image.open(io.BytesIO(files_of("slide")["interaction.png"]))
    assert light.mode == "RGB"
    assert light.getpixel((1, 1)) == (255, 255, 255)


@pytest.mark.parametrize("size", ["single column", "slide"])
def test_type_has_the_points_asked_for(size: str) -> None:
    wanted = WANTED[size]
    sizes = {float(found) for found in re.findall(rb"font-size: ([\d.]+)px", files_of(size)["interaction.svg"])}
    assert {round(found / 96 * 72, 1) for found in sizes} == {wanted.points}


def test_a_pdf_is_as_wide_as_asked_and_carries_its_fonts() -> None:
    page = pypdf.PdfReader(io.BytesIO(files_of("single column")["interaction.pdf"])).pages[0]
    assert float(page.mediabox.width) / 72 * 25.4 == pytest.approx(89, abs=0.5)
    fonts = [font.get_object() for font in page["/Resources"]["/Font"].values()]
    assert fonts
    for font in fonts:
        inner = font["/DescendantFonts"][0].get_object() if "/DescendantFonts" in font else font
        assert {"/FontFile", "/FontFile2", "/FontFile3"} & set(inner["/FontDescriptor"]) or font["/Subtype"] == "/Type3"
    assert "Deep shade" in page.extract_text()


def test_long_names_leave_room_for_the_figure_in_a_single_column() -> None:
    found = designs.design("long names")
    told = next(one for one in boards.story(found) if one.kind == "compared")
    figure = figure_files.dressed(told.figure(WANTED["single column"].look), WANTED["single column"])
    assert figure.layout.margin.l <= 0.5 * WANTED["single column"].look.width
