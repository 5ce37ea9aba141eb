"""The files that a study is taken away as are whole and named after the response."""

import io

import openpyxl
import pptx

from app import boards, take_away
from tests.app import opening

FINDINGS = opening.findings(opening.sample())
PARCELS = {parcel.key: parcel for parcel in take_away.parcels(FINDINGS, boards.story(FINDINGS))}


def test_files_are_named_after_the_response() -> None:
    assert {parcel.file for parcel in PARCELS.values()} == {
        "yield-g.pptx", "yield-g.xlsx", "yield-g-tables.zip", "yield-g-recompute.py", "yield-g-figures.zip", "yield-g-report.docx",
        "yield-g-report.html"
    }  # fmt: skip


def test_the_slides_and_the_workbook_open() -> None:
    assert len(pptx.Presentation(io.BytesIO(PARCELS["save_deck"].make())).slides) == len(boards.story(FINDINGS))
    assert len(openpyxl.load_workbook(io.BytesIO(PARCELS["save_workbook"].make())).sheetnames) > 3
