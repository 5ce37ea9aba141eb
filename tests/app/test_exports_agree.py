"""One study gives the same numbers everywhere: every file is read back and held against the engine's object."""

import io
import re
import zipfile
from functools import cache

import docx
import openpyxl
import pandas as pd
import pptx
import pytest

from analysis import rounding
from app import boards, report, words
from app.exports import csv_files, deck, report_page, report_text, sheets, workbook
from tests.app import designs, opening

PRECISE = 1e-15  # a workbook holds sixteen significant digits
NAMES = ("3 by 4", "an empty cell", "undecided", "logarithm", "coating_primer_cure.csv")
every_study = pytest.mark.parametrize("name", NAMES)


def findings_of(name: str):
    return designs.design(name) if name in designs.DESIGNS else opening.findings(opening.sample(name))


@cache
def object_of(name: str) -> dict:
    return findings_of(name).to_dict()


@cache
def texts_of(name: str) -> dict[str, str]:
    """Return all text of slides, document and page, tables read line by line."""
    findings = findings_of(name)
    told = boards.story(findings)
    parts, title = report.report(findings, told), report.title(findings)
    slides = pptx.Presentation(io.BytesIO(deck.build(told, findings)))
    document = docx.Document(io.BytesIO(report_text.build(title, parts)))
    on_slides = [shape.text_frame.text for slide in slides.slides for shape in slide.shapes if shape.has_text_frame]
    on_slides += [
        cell.text for slide in slides.slides for shape in slide.shapes if shape.has_table for row in shape.table.rows for cell in row.cells
    ]
    on_slides += [slide.notes_slide.notes_text_frame.text for slide in slides.slides]
    in_document = [paragraph.text for paragraph in document.paragraphs]
    in_document += [cell.text for table in document.tables for cell in table._cells]
    page = re.sub(r"<(script|style)>.*?</\1>", " ", report_page.build(title, parts).decode("utf-8"), flags=re.S)
    return {
        "slides": " ".join(on_slides).replace("\u00a0", " "),
        "document": " ".join(in_document),
        "page": re.sub(r"<[^>]+>", " ", page).replace("&lt;", "<").replace("&amp;", "&").replace("&#x27;", "'").replace("&quot;", '"'),
    }


@every_study
def test_answers_and_tests_are_told_alike(name: str) -> None:
    for answer in object_of(name)["answers"]:
        for place, text in texts_of(name).items():
            assert answer["sentence"] in text, place
            if answer["p"] is not None:
                assert (
                    f"F({answer['df1']}, {answer['df2']}) = {rounding.significant(answer['f'])}, {rounding.p_value(answer['p'])}" in text
                ), place


@every_study
def test_comparisons_are_told_alike(name: str) -> None:
    findings = findings_of(name)
    shown = [board for board in boards.story(findings) if board.kind == "compared"]
    assert shown
    for board in shown:
        for row in board.table.astype(str).to_numpy().tolist()[:6]:
            for place, text in texts_of(name).items():
                assert row[1] in text, (place, row)
                assert row[2] in text, (place, row)


@every_study
def test_cells_come_back_from_workbook_and_tables(name: str) -> None:
    findings = findings_of(name)
    book = openpyxl.load_workbook(io.BytesIO(workbook.build(findings)))
    head, *rows = book["cells"].iter_rows(values_only=True)
    held = pd.DataFrame(rows, columns=head)
    with zipfile.ZipFile(io.BytesIO(csv_files.archive(sheets.all_sheets(findings)))) as parts:
        plain = pd.read_csv(io.BytesIO(parts.read("cells.csv")), encoding="utf-8-sig")
    wanted = pd.DataFrame(object_of(name)["cells"])
    for ours, theirs in (("estimate", "estimate"), ("s.e.", "se"), ("lower", "lower"), ("mean", "mean"), ("sd", "sd")):
        expected = wanted[theirs].astype(float).tolist()
        assert pd.to_numeric(held[ours]).astype(float).tolist() == pytest.approx(expected, rel=PRECISE, nan_ok=True)
        assert plain[theirs].astype(float).tolist() == pytest.approx(expected, rel=0, nan_ok=True)
    for cell in object_of(name)["cells"]:
        if cell["n"] and cell.get("told") is None:
            told = words.with_interval(cell["estimate"], cell["lower"], cell["upper"], cell["se"])
            assert told in texts_of(name)["document"]
            assert told in texts_of(name)["page"]


@every_study
def test_the_chart_of_the_slides_holds_the_objects_estimates(name: str) -> None:
    findings = findings_of(name)
    slides = pptx.Presentation(io.BytesIO(deck.build(boards.story(findings), findings)))
    chart = next(shape.chart for slide in slides.slides for shape in slide.shapes if shape.has_chart)
    drawn = {one.name: list(one.values) for one in chart.plots[0].series}
    cells = object_of(name)["cells"] if findings.study.model == "full" else object_of(name)["additive_means"]
    for level in findings.design["row_levels"]:
        mine = [
            cell["told"]["estimate"] if cell.get("told") else cell.get("estimate", cell.get("mean"))
            for cell in cells
            if cell["row"] == level
        ]
        assert [value for value in drawn[level] if value is not None] == pytest.approx(
            [value for value in mine if value is not None], rel=1e-12
        )


@every_study
def test_other_analyses_are_told_alike(name: str) -> None:
    for line in findings_of(name).holds.itertuples():
        for place in ("document", "page"):
            assert str(line.analysis) in texts_of(name)[place]
    assert findings_of(name).holds_sentence in texts_of(name)["slides"]
