"""The report covers its reporting list item by item, tells the engine's numbers, and marks what only the user knows."""

import io
import re
from functools import cache

import docx
import pytest

from analysis import log
from analysis.refusals import NoBrowser
from analysis.rounding import p_number
from analysis.story import Story
from app import boards, report, report_parts, speaker, words
from app.exports import images, report_page, report_text
from app.report_parts import Part, Rows, Text
from tests.app import designs, opening

every_design = pytest.mark.parametrize("name", designs.DESIGNS)
SAMPLES = ("coating_primer_cure.csv", "yeast_sugar.xlsx")


def findings_of(name: str):
    return opening.findings(opening.sample(name)) if name in SAMPLES else designs.design(name)


@cache
def parts_of(name: str) -> tuple[Part, ...]:
    findings = findings_of(name)
    return report.report(findings, boards.story(findings), log.log([findings.study], {}))


def texts_of(parts: tuple[Part, ...]) -> str:
    return "\n".join(block.text for part in parts for block in part.blocks if isinstance(block, Text))


def rows_of(parts: tuple[Part, ...], caption: str) -> list[list[str]]:
    return next(
        [list(map(str, row)) for row in b.sheet.rows] for p in parts for b in p.blocks if isinstance(b, Rows) and caption in b.caption
    )


@pytest.mark.parametrize("name", [*designs.DESIGNS, *SAMPLES])
def test_every_item_of_the_reporting_list_is_stated_or_left_blank(name: str) -> None:
    parts = parts_of(name)
    where = report_parts.where_stated(parts)
    assert set(where) == set(range(1, 33))
    assert all(headings for headings in where.values()), [item for item, headings in where.items() if not headings]
    for item, what, headings, left in rows_of(parts, "The reporting list"):
        assert report_parts.ITEMS[int(item)] == what
        assert headings == ", ".join(where[int(item)])
        assert left == (report.OPEN if int(item) in report_parts.left_blank(parts) else "")


@every_design
def test_what_only_the_user_knows_is_left_blank(name: str) -> None:
    assert {1, 2, 4, 5, 6, 26, 29, 31} <= report_parts.left_blank(parts_of(name))


@every_design
def test_the_answers_the_doubts_and_the_caution_are_told(name: str) -> None:
    findings, told = findings_of(name), texts_of(parts_of(name))
    for answer in findings.answers:
        assert answer.sentence in told
        assert answer.statistic in told
    assert findings.holds_sentence in told
    assert all(sentence in told for sentence in findings.doubts["sentence"])
    assert all(sentence in told for sentence in findings.notes)
    assert speaker.CAUTION in told
    assert all(f"{name} {version}" in told for name, version in findings.versions.items())
    assert "no effect" not in told.lower()
    assert not re.search(r"\d ?\*+", told)


@every_design
def test_the_tables_are_the_engines(name: str) -> None:
    findings, parts = findings_of(name), parts_of(name)
    anova = rows_of(parts, "Analysis of variance.")
    for row, line in zip(anova, findings.used_table.itertuples(), strict=True):
        assert row[0] == line.term
        if line.p == line.p:
            assert row[5] == p_number(line.p)
    cells = rows_of(parts, "What was seen in each cell")
    assert [row[2] for row in cells] == [str(n) for n in findings.cells["n"]]


def test_rows_left_out_and_units_are_accounted_for() -> None:
    findings = findings_of("yeast_sugar.xlsx")
    told = texts_of(parts_of("yeast_sugar.xlsx"))
    for entry in findings.design["left_out"]:
        assert f"row {entry['row']}: {entry['why']}" in told
    assert words.reckoning(findings.design["observations"], len(findings.design["left_out"])) in told


def test_decisions_own_words_and_notes_are_told() -> None:
    findings = designs.design("3 by 4")
    told = boards.story(findings, Story().saying("interaction", "Feed pays in the sun.").noting("raw data", "Row 3 was windy."))
    parts = report.report(findings, told, log.log([findings.study], {}))
    text = texts_of(parts)
    assert f"Feed pays in the sun. (claim in the user’s own words; the program’s sentence: {findings.answers[0].sentence})" in text
    assert "Row 3 was windy." in text
    assert any("The response is" in row[1] or "The response is" in row[0] for row in rows_of(parts, "Every decision"))


@pytest.mark.browser
def test_the_document_has_headings_tables_pictures_and_marked_blanks() -> None:
    findings, parts = designs.design("3 by 4"), parts_of("3 by 4")
    file = report_text.build(report.title(findings), parts)
    document = docx.Document(io.BytesIO(file))
    assert [p.text for p in document.paragraphs if p.style.name == "Heading 1"] == [part.heading for part in parts]
    blocks = [block for part in parts for block in part.blocks]
    tables = [block for block in blocks if isinstance(block, Rows)]
    assert len(document.tables) == len(tables)
    for written, block in zip(document.tables, tables, strict=True):
        assert [[cell.text for cell in row.cells] for row in written.rows] == [
            list(block.sheet.columns),
            *[list(r) for r in block.sheet.rows],
        ]
    pictures = [block for block in blocks if isinstance(block, report_parts.Picture)]
    assert [shape._inline.docPr.get("descr") for shape in document.inline_shapes] == [block.alt for block in pictures]
    marked = [run.text for p in document.paragraphs for run in p.runs if run.font.highlight_color is not None]
    assert marked == report_parts.BLANK.findall(texts_of(parts))
    assert sum(p.text.startswith("Figure ") for p in document.paragraphs if p.style.name == "Caption") == len(pictures)
    assert report_text.build(report.title(findings), parts) == file


def test_without_a_browser_the_document_says_what_is_missing(monkeypatch: pytest.MonkeyPatch) -> None:
    def none() -> str:
        raise NoBrowser

    monkeypatch.setattr(images, "browser", none)
    document = docx.Document(io.BytesIO(report_text.build("title", parts_of("3 by 4"))))
    assert not document.inline_shapes
    assert report_text.NO_PICTURE in [p.text for p in document.paragraphs]


@pytest.mark.parametrize("name", ["3 by 4", "2 by 2, names like formulas"])
def test_the_page_holds_everything_and_fetches_nothing(name: str) -> None:
    parts = parts_of(name)
    page = report_page.build(report.title(findings_of(name)), parts).decode("utf-8")
    outside = re.sub(r"<script>.*?</script>", "", page, flags=re.S)
    assert not re.search(r"(src|href)=", outside)
    assert "default-src 'none'" in outside
    assert page.count("Plotly.newPlot('figure-") == sum(isinstance(b, report_parts.Picture) for part in parts for b in part.blocks)
    assert outside.count("<mark>") == len(report_parts.BLANK.findall(texts_of(parts)))


def test_names_on_the_page_are_inert_text() -> None:
    frame = designs.frame(("<b>x", "</script>y"), ("p", "q"), lambda i, j: i + j, lambda i, j: 3, 1.0, ("<i>a", "b", "y"))
    findings = designs.findings_of(frame)
    page = report_page.build(report.title(findings), report.report(findings, boards.story(findings))).decode("utf-8")
    assert "<i>a" not in page
    assert page.count("</script>") == page.count("<script>")
