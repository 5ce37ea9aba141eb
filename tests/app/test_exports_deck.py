"""The slides hold the engine's numbers, keep inside their edges, stay legible and say what they show."""

import io
import re
import zipfile
from functools import cache

import openpyxl
import pptx
import pytest
from pptx.enum.dml import MSO_LINE
from pptx.oxml.ns import qn
from pptx.presentation import Presentation
from pptx.slide import Slide

from analysis import rounding
from app import boards, speaker, words
from app.exports import deck, master, series
from app.look import SLIDE
from tests.app import designs

every_design = pytest.mark.parametrize("name", designs.DESIGNS)


@cache
def file_of(name: str) -> bytes:
    found = designs.design(name)
    return deck.build(boards.story(found), found)


def slides_of(name: str) -> Presentation:
    return pptx.Presentation(io.BytesIO(file_of(name)))


def chart_of(name: str):
    return next(shape.chart for shape in slides_of(name).slides[1].shapes if shape.has_chart)


def table_of(slide: Slide) -> list[list[str]]:
    found = next((shape.table for shape in slide.shapes if shape.has_table), None)
    return [] if found is None else [[cell.text for cell in row.cells] for row in found.rows]


@every_design
def test_four_slides_each_with_its_claim_as_title(name: str) -> None:
    told = boards.story(designs.design(name))
    titles = [slide.shapes.title.text for slide in slides_of(name).slides]
    assert len(titles) == 4
    assert all(title.strip() for title in titles)
    for title, board in zip(titles, told, strict=True):
        assert board.claim == title or board.claim.startswith(title.removesuffix("…"))


@every_design
def test_the_slides_are_wide_and_nothing_stands_outside(name: str) -> None:
    show = slides_of(name)
    assert show.slide_width / show.slide_height == pytest.approx(16 / 9, rel=1e-3)
    for slide in show.slides:
        for shape in slide.shapes:
            assert shape.left >= 0
            assert shape.top >= 0
            assert shape.left + shape.width <= show.slide_width, (slide.shapes.title.text, shape.name)
            assert shape.top + shape.height <= show.slide_height, (slide.shapes.title.text, shape.name)


@every_design
def test_tables_keep_clear_of_the_evidence(name: str) -> None:
    for slide in slides_of(name).slides:
        for shape in slide.shapes:
            if shape.has_table:
                assert sum(row.height for row in shape.table.rows) <= shape.height + 10
                assert shape.top + shape.height <= pptx.util.Inches(master.EVIDENCE.top)


@every_design
def test_no_text_is_smaller_than_eighteen_points(name: str) -> None:
    with zipfile.ZipFile(io.BytesIO(file_of(name))) as parts:
        wanted = [part for part in parts.namelist() if re.match(r"ppt/(slides|slideLayouts|charts)/[^/]+\.xml", part)]
        sizes = {part: [int(size) for size in re.findall(rb'\bsz="(\d+)"', parts.read(part))] for part in wanted}
    assert all(size >= 1800 for found in sizes.values() for size in found), sizes
    for slide in slides_of(name).slides:  # what names no size of its own takes it from its place in the layout
        for shape in slide.placeholders:
            if shape.has_text_frame:
                inherited = shape._base_placeholder._element.find(f".//{qn('a:defRPr')}")
                assert int(inherited.get("sz")) >= 1800


@every_design
def test_graphics_say_both_factors_and_n(name: str) -> None:
    found = designs.design(name).design
    graphics = [shape for slide in slides_of(name).slides for shape in slide.shapes if shape.has_table or shape.has_chart]
    assert len(graphics) >= 3
    for shape in graphics:
        text = shape.element.xpath(".//p:cNvPr")[0].get("descr")
        assert found["row_factor"] in text
        assert found["column_factor"] in text
        assert re.search(r"\bn = \d+", text)


@every_design
def test_notes_hold_model_numbers_caveats_and_the_caution(name: str) -> None:
    findings = designs.design(name)
    for slide, board in zip(slides_of(name).slides, boards.story(findings), strict=True):
        notes = slide.notes_slide.notes_text_frame.text
        assert speaker.model_words(findings) in notes
        assert board.claim in notes
        assert speaker.CAUTION in notes
        assert all(sentence in notes for sentence in findings.notes)


@every_design
def test_every_slide_has_its_number(name: str) -> None:
    for slide in slides_of(name).slides:
        (field,) = slide.shapes._spTree.findall(f".//{qn('a:fld')}")
        assert field.get("type") == "slidenum"


@every_design
def test_no_slide_holds_an_empty_place(name: str) -> None:
    for slide in slides_of(name).slides:
        for shape in slide.placeholders:
            assert shape.has_table or shape.has_chart or shape.text_frame.text.strip(), shape.name


@pytest.mark.parametrize("name", ["3 by 4", "6 by 8", "an empty cell", "one value a cell"])
def test_the_chart_draws_the_estimates_with_their_intervals(name: str) -> None:
    """The chart in the slide, its bars and its own workbook all hold the engine's numbers."""
    findings = designs.design(name)
    means = findings.cells if findings.study.model == "full" else findings.additive_means.rename(columns={"mean": "estimate"})
    drawn = chart_of(name)
    book = openpyxl.load_workbook(io.BytesIO(drawn.part.chart_workbook.xlsx_part.blob))["Sheet1"]
    drawn_series = {one.name: one for one in drawn.plots[0].series}
    for level in findings.design["row_levels"]:
        cells = means[means["row"] == level].set_index("column").loc[findings.design["column_levels"]]
        known = cells["estimate"].notna().to_numpy()
        ends = {"c:plus": cells["upper"] - cells["estimate"], "c:minus": cells["estimate"] - cells["lower"]}
        for kind, wanted in {"c:yVal": cells["estimate"], **ends}.items():
            part = drawn_series[level]._element.find(f".//{qn(kind)}")
            points = {int(point.get("idx")): float(point.find(qn("c:v")).text) for point in part.iter(qn("c:pt"))}
            assert [points.get(k) for k in range(len(cells)) if known[k]] == pytest.approx(wanted[known].tolist(), rel=1e-12)
            assert len(points) == known.sum()
            held = [cell.value for (cell,) in book[part.find(f".//{qn('c:f')}").text.partition("!")[2].replace("$", "")]]
            assert [value for value in held if value is not None] == pytest.approx(wanted[known].tolist(), rel=1e-12)


def test_the_chart_keeps_hues_markers_and_dashes_apart() -> None:
    findings = designs.design("6 by 8")
    levels = findings.design["row_levels"]
    lines = [one for one in chart_of("6 by 8").plots[0].series if one.name in levels]
    assert [str(one.format.line.color.rgb) for one in lines] == [SLIDE.style_of(k).hue.lstrip("#") for k in range(6)]
    assert len({one.marker.style for one in lines}) == 6
    assert len({one.format.line.dash_style for one in lines}) == 6


@every_design
def test_no_series_stands_before_a_longer_one(name: str) -> None:
    """LibreOffice 7.4 leaves out a series that stands before a longer one (seen in a file with three series)."""
    lengths = [int(one._element.find(f"{qn('c:xVal')}//{qn('c:ptCount')}").get("val")) for one in chart_of(name).plots[0].series]
    assert lengths == sorted(lengths, reverse=True)


def test_many_rows_change_sides_with_few_columns() -> None:
    drawn = {one.name for one in chart_of("20 by 3").plots[0].series}
    assert {"low", "mid", "high"} <= drawn
    text = next(shape for shape in slides_of("20 by 3").slides[1].shapes if shape.has_chart).element.xpath(".//p:cNvPr")[0].get("descr")
    assert text.endswith("Here the levels of line run along the axis, and each level of dose is a line.")


def test_every_style_of_a_level_can_be_drawn() -> None:
    styles = [SLIDE.style_of(k) for k in range(8)]
    assert len({series.MARKERS[style.marker] for style in styles}) == 8
    assert len({series.DASHES[style.dash] for style in styles}) == 8
    assert MSO_LINE.SOLID in series.DASHES.values()


def test_observations_stand_in_the_chart() -> None:
    found = designs.design("3 by 4")
    drawn = {one.name: list(one.values) for one in chart_of("3 by 4").plots[0].series}
    for level in found.design["row_levels"]:
        wanted = found.observations.loc[found.observations["row"] == level, "value"]
        assert sorted(drawn[f"{level}: observations"]) == pytest.approx(sorted(wanted))


@pytest.mark.parametrize("name", ["3 by 4", "2 by 2, names like formulas", "an empty cell"])
def test_the_grid_holds_every_count(name: str) -> None:
    found = designs.design(name).design
    head, *rows = table_of(slides_of(name).slides[0])
    assert head[1:] == found["column_levels"]
    assert [row[0] for row in rows] == found["row_levels"]
    assert [[0 if cell == words.EMPTY else int(cell) for cell in row[1:]] for row in rows] == found["counts"]


@every_design
def test_the_answers_stand_on_their_slide(name: str) -> None:
    found = designs.design(name)
    rows = table_of(slides_of(name).slides[2])[1:]
    for (question, sentence, test), answer in zip(rows, found.answers, strict=True):
        if "…" not in question + sentence:
            assert (question, sentence) == (answer.question, answer.sentence)
        if answer.p is not None:
            assert test.replace("\u00a0", " ").endswith(rounding.p_value(answer.p))


def test_comparisons_are_the_engines_rounded_by_the_one_rule() -> None:
    findings = designs.design("3 by 4")
    assert boards.families_told(findings) == ("feed within light",)
    head, *rows = table_of(slides_of("3 by 4").slides[3])
    assert head[:2] == ["within", "compared"]
    family = findings.comparisons["feed within light"].set_index(["within", "left", "right"])
    sizes = []
    for within, compared, told, p, reading in rows:
        entry = family.loc[(within, *compared.split(f" {rounding.MINUS} "))]
        assert told == words.with_interval(entry["difference"], entry["lower_adjusted"], entry["upper_adjusted"], entry["se"])
        assert p == rounding.p_number(entry["p_adjusted"])
        assert reading == words.VERDICTS[entry["verdict"]]
        sizes.append(abs(entry["difference"]))
    assert sizes == sorted(sizes, reverse=True)
    assert sizes[0] == family["difference"].abs().max()


def test_a_table_that_is_cut_says_by_which_rule() -> None:
    rows = table_of(slides_of("6 by 8").slides[3])[1:]
    evidence = next(shape.text for shape in slides_of("6 by 8").slides[3].placeholders if shape.placeholder_format.idx == master.WORDS)
    assert evidence.startswith(f"Shown: the {len(rows)} largest of 168 rows; the workbook holds all")


def test_names_that_are_shortened_stay_apart_and_are_told_in_the_notes() -> None:
    slide = slides_of("long names").slides[1]
    labels = [" ".join(text.text for text in label.iter(qn("a:t"))) for label in chart_of("long names")._chartSpace.iter(qn("c:dLbl"))]
    assert any(label.startswith("Treated") and label.endswith("full strength") for label in labels)
    assert any(label.startswith("Treated") and label.endswith("half strength") for label in labels)
    notes = slide.notes_slide.notes_text_frame.text
    assert re.search(r"On the slide “[^”]*…[^”]*full strength” stands for “Treated with compound alpha at full strength”", notes)


def test_without_an_interaction_the_comparisons_are_on_average() -> None:
    findings = designs.design("undecided")
    assert findings.answers[0].verdict == "undecided"
    assert set(boards.families_told(findings)) == {"light", "feed"}


def test_ratios_are_told_as_ratios() -> None:
    head, first, *_ = table_of(slides_of("logarithm").slides[3])
    assert head[2].startswith("ratio")
    assert "÷" in first[1]


@pytest.mark.parametrize("name", ["3 by 4", "long names"])
def test_the_same_findings_give_the_same_file(name: str) -> None:
    found = designs.design(name)
    assert deck.build(boards.story(found), found) == file_of(name)


def test_the_file_names_no_one_and_no_time() -> None:
    with zipfile.ZipFile(io.BytesIO(file_of("3 by 4"))) as parts:
        core = parts.read("docProps/core.xml")
        assert b"dcterms:" not in core.replace(b"xmlns:dcterms", b"")
        assert not [part for part in parts.namelist() if "printerSettings" in part or "thumbnail" in part]
