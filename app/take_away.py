"""What can be taken away from a study: each file's name, what it holds, and how it is built when it is asked for."""

import io
import re
import zipfile
from collections.abc import Callable
from dataclasses import dataclass

from analysis.findings import Findings
from app import boards
from app.exports import csv_files, deck, images, script, sheets, workbook
from app.figures import grid, interaction
from app.look import PRINT

DECK = "application/vnd.openxmlformats-officedocument.presentationml.presentation"
WORKBOOK = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"


@dataclass(frozen=True)
class Parcel:
    """One file to save: the key and words of its button, its name and type, and the function that makes it."""

    key: str
    label: str
    holds: str
    file: str
    kind: str
    make: Callable[[], bytes]


def parcels(findings: Findings) -> tuple[Parcel, ...]:
    """Return the files that a study can be taken away as."""
    name = re.sub(r"[^\w-]+", "-", f"{findings.study.response}").strip("-").lower() or "crossgrain"
    return (
        Parcel(
            "save_deck",
            "Save the slides",
            "Four slides with native charts and tables: the question, the interaction, the answers, the comparisons; notes under each.",
            f"{name}.pptx",
            DECK,
            lambda: deck.build(boards.story(findings), findings),
        ),
        Parcel(
            "save_workbook",
            "Save the workbook",
            "Every table in full precision: cells, margins, analysis of variance, comparisons, rows left out.",
            f"{name}.xlsx",
            WORKBOOK,
            lambda: workbook.build(findings),
        ),
        Parcel(
            "save_tables",
            "Save the tables",
            "The same tables as plain text, one .csv file each.",
            f"{name}-tables.zip",
            "application/zip",
            lambda: csv_files.archive(sheets.all_sheets(findings)),
        ),
        Parcel(
            "save_script",
            "Save the script",
            "A Python file with the observations in it that computes tables, means and comparisons again, without this program.",
            f"{name}-recompute.py",
            "text/x-python",
            lambda: script.build(findings, f"{name}-recompute.py"),
        ),
        Parcel(
            "save_figures",
            "Save the figures",
            "The interaction figure and the grid for print, 183 mm wide: PNG at 300 dots per inch and SVG, with captions.",
            f"{name}-figures.zip",
            "application/zip",
            lambda: figures(findings),
        ),
    )


def figures(findings: Findings) -> bytes:
    """Return the figures as PNG and SVG, with their captions, in one archive; raises NoBrowser."""
    drawn = {
        "interaction": (interaction.interaction(findings, PRINT), interaction.interaction_caption(findings)),
        "grid": (grid.grid(findings, PRINT), grid.grid_caption(findings)),
    }
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w", zipfile.ZIP_DEFLATED) as archive:
        pictures = images.pngs_and_svgs([figure for figure, _ in drawn.values()])
        for (name, (_, caption)), (png, svg) in zip(drawn.items(), pictures, strict=True):
            archive.writestr(f"{name}.png", png)
            archive.writestr(f"{name}.svg", svg)
            archive.writestr(f"{name}.txt", caption + "\n")
    return packed.getvalue()
