"""What can be taken away from a study: each file's name, what it holds, and how it is built when it is asked for."""

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field

from analysis import log
from analysis.findings import Findings
from app import report
from app.board import Board
from app.exports import csv_files, deck, figure_files, report_page, report_text, script, sheets, workbook
from app.exports.figure_files import Wanted

DECK = "application/vnd.openxmlformats-officedocument.presentationml.presentation"
DOCUMENT = "application/vnd.openxmlformats-officedocument.wordprocessingml.document"
WORKBOOK = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
ZIP = "application/zip"


@dataclass(frozen=True)
class Parcel:
    """One file to save: the key and words of its button, its name and type, and the function that makes it."""

    key: str
    label: str
    holds: str
    file: str
    kind: str
    make: Callable[[], bytes]


@dataclass(frozen=True)
class Manner:
    """How the files are wanted."""

    figures: Wanted = field(default_factory=Wanted)
    dark: bool = False
    template: bytes | None = None  # a presentation of the user's own to write the slides on


def parcels(
    findings: Findings, told: Sequence[Board], decisions: Sequence[log.Entry] = (), manner: Manner | None = None
) -> tuple[Parcel, ...]:
    """Return the files that a study can be taken away as: its story, its numbers, and the way to compute them again."""
    name = re.sub(r"[^\w-]+", "-", f"{findings.study.response}").strip("-").lower() or "crossgrain"
    return (
        *_story(findings, told, name, manner or Manner()),
        *_report(findings, told, decisions, name),
        *_numbers(findings, decisions, name),
    )


def _story(findings: Findings, told: Sequence[Board], name: str, manner: Manner) -> tuple[Parcel, ...]:
    return (
        Parcel(
            "save_deck",
            "Save the slides",
            "A slide for each board of the story, with charts and tables that stay editable, notes under each.",
            f"{name}.pptx",
            DECK,
            lambda: deck.build(told, findings, manner.dark, manner.template),
        ),
        Parcel(
            "save_figures",
            "Save the figures",
            "Every figure of the story and the grid as PNG, TIFF, SVG and PDF, with captions, in the width and type chosen.",
            f"{name}-figures.zip",
            ZIP,
            lambda: figure_files.build(told, findings, manner.figures),
        ),
    )


def _report(findings: Findings, told: Sequence[Board], decisions: Sequence[log.Entry], name: str) -> tuple[Parcel, ...]:
    return (
        Parcel(
            "save_report",
            "Save the report",
            "Methods and results as a document that covers a reporting list item by item, with marked blanks for what only you know.",
            f"{name}-report.docx",
            DOCUMENT,
            lambda: report_text.build(report.title(findings), report.report(findings, told, decisions)),
        ),
        Parcel(
            "save_report_page",
            "Save it as a page",
            "The same report as one page for any browser, with figures that can be pointed at, without a network.",
            f"{name}-report.html",
            "text/html",
            lambda: report_page.build(report.title(findings), report.report(findings, told, decisions)),
        ),
    )


def _numbers(findings: Findings, decisions: Sequence[log.Entry], name: str) -> tuple[Parcel, ...]:
    return (
        Parcel(
            "save_workbook",
            "Save the workbook",
            "Every table in full precision: data with the rows set aside, cells, analysis of variance, means, comparisons, checks, log.",
            f"{name}.xlsx",
            WORKBOOK,
            lambda: workbook.build(findings, decisions),
        ),
        Parcel(
            "save_tables",
            "Save the tables",
            "The same tables as plain text, one .csv file each.",
            f"{name}-tables.zip",
            ZIP,
            lambda: csv_files.archive(sheets.all_sheets(findings, decisions)),
        ),
        Parcel(
            "save_script",
            "Save the script",
            "A Python file with the observations in it that computes tables, means and comparisons again, without this program.",
            f"{name}-recompute.py",
            "text/x-python",
            lambda: script.build(findings, f"{name}-recompute.py"),
        ),
    )
