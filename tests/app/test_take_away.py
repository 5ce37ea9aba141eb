"""The files that a study is taken away as are whole and named after the response."""

import io
import zipfile

import openpyxl
import pptx
import pytest
from PIL import Image

from app import take_away
from tests.app import opening

PARCELS = {parcel.key: parcel for parcel in take_away.parcels(opening.findings(opening.sample()))}


def test_files_are_named_after_the_response() -> None:
    assert [parcel.file for parcel in PARCELS.values()] == [
        "yield-g.pptx", "yield-g.xlsx", "yield-g-tables.zip", "yield-g-recompute.py", "yield-g-figures.zip"
    ]  # fmt: skip


def test_the_slides_and_the_workbook_open() -> None:
    assert len(pptx.Presentation(io.BytesIO(PARCELS["save_deck"].make())).slides) == 4
    assert len(openpyxl.load_workbook(io.BytesIO(PARCELS["save_workbook"].make())).sheetnames) > 3


@pytest.mark.browser
def test_the_figures_are_pictures_with_captions() -> None:
    with zipfile.ZipFile(io.BytesIO(PARCELS["save_figures"].make())) as archive:
        assert sorted(archive.namelist()) == ["grid.png", "grid.svg", "grid.txt", "interaction.png", "interaction.svg", "interaction.txt"]
        picture = Image.open(io.BytesIO(archive.read("interaction.png")))
        assert picture.width / picture.info["dpi"][0] * 25.4 == pytest.approx(183, abs=0.5)  # mm
        assert b"<svg" in archive.read("interaction.svg")
        assert b"n = 6 in each cell" in archive.read("interaction.txt")
