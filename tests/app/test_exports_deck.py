"""The slides hold the engine's numbers, keep inside their edges, stay legible and say what they show."""

import io
import re
import zipfile
from functools import cache

import openpyxl
import pandas as pd
import pptx
import pytest
from pptx.enum.dml import MSO_LINE
from pptx.oxml.ns import qn
from pptx.presentation import Presentation
from pptx.slide import Slide

from analysis import rounding
from analysis.refusals import TemplateUnusable
from analysis.story import Story
from app import boards, factor_boards, look, speaker, words
from app.exports import deck, images, master, series
from app.look import SLIDE
from tests.app import designs

every_design = pytest.mark.parametrize("name", designs.DESIGNS)


@cache
def file_of(name: str) -> bytes:
    found = designs.design(name)
    return deck.build(boards.story(found), found)


def slides_of(name: str) -> Presentation:
    return pptx.Presentation(io.BytesIO(file_of(name)))


def slide_of(name: str, kind: str) -> Slide:
    """Return the first slide of a kind of board."""
    told = boards.story(designs.design(name))
    return slides_of(name).slides[next(place for place, board in enumerate(told) if board.kind == kind)]


def chart_of(name: str):
    return next(shape.chart for shape in slide_of(name, "interaction").shapes if shape.has_chart)


def is_graphic(shape) -> bool:
    return shape.has_table or shape.has_chart or hasattr(shape, "image")


def table_of(slide: Slide) -> list[list[str]]:
    found = next((shape.table for shape in slide.shapes if shape.has_table), None)
    return [] if found is None else [[cell.text for cell in row.cells] for row in found.rows]


@every_design
def test_each_board_is_a_slide_with_its_claim_as_title(name: str) -> None:
    told = boards.story(designs.design(name))
    titles = [slide.shapes.title.text for slide in slides_of(name).slides]
    assert len(titles) == len(told)
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
    graphics = [shape for slide in slides_of(name).slides for shape in slide.shapes if is_graphic(shape)]
    assert len(graphics) == len(slides_of(name).slides)
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
            assert is_graphic(shape) or shape.text_frame.text.strip(), shape.name


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
    text = next(shape for shape in slide_of("20 by 3", "interaction").shapes if shape.has_chart).element.xpath(".//p:cNvPr")[0].get("descr")
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
def test_the_answers_stand_on_their_slides(name: str) -> None:
    found = designs.design(name)
    told = "\n".join(slide.shapes.title.text + slide.notes_slide.notes_text_frame.text for slide in slides_of(name).slides)
    for answer in found.answers:
        assert answer.sentence in told or factor_boards.depends(found)
        if answer.p is not None:
            assert rounding.p_value(answer.p) in told


def test_comparisons_are_the_engines_rounded_by_the_one_rule() -> None:
    findings = designs.design("3 by 4")
    within = [board.key.rpartition(" / ")[2] for board in boards.story(findings) if board.key.startswith("slice")]
    assert within == list(designs.LIGHT)
    for slide, level in zip(list(slides_of("3 by 4").slides)[3:6], within, strict=True):
        head, *rows = table_of(slide)
        assert head[0] == "compared"
        family = findings.comparisons["feed within light"].set_index(["within", "left", "right"])
        sizes = []
        for compared, told, p, reading in rows:
            entry = family.loc[(level, *compared.split(f" {rounding.MINUS} "))]
            assert told == words.with_interval(entry["difference"], entry["lower_adjusted"], entry["upper_adjusted"], entry["se"])
            assert p == rounding.p_number(entry["p_adjusted"])
            assert reading == words.VERDICTS[entry["verdict"]]
            sizes.append(abs(entry["difference"]))
        assert sizes == sorted(sizes, reverse=True)
        assert len(sizes) == 6


def test_a_table_that_is_cut_says_by_which_rule() -> None:
    slide = slide_of("6 by 8", "compared")
    rows = table_of(slide)[1:]
    evidence = next(shape.text for shape in slide.placeholders if shape.placeholder_format.idx == master.WORDS)
    assert evidence.startswith(f"Shown: the {len(rows)} largest of 28 rows; the workbook holds all")


def test_names_that_are_shortened_stay_apart_and_are_told_in_the_notes() -> None:
    slide = slide_of("long names", "interaction")
    labels = [" ".join(text.text for text in label.iter(qn("a:t"))) for label in chart_of("long names")._chartSpace.iter(qn("c:dLbl"))]
    assert any(label.startswith("Treated") and label.endswith("full strength") for label in labels)
    assert any(label.startswith("Treated") and label.endswith("half strength") for label in labels)
    notes = slide.notes_slide.notes_text_frame.text
    assert re.search(r"On the slide “[^”]*…[^”]*full strength” stands for “Treated with compound alpha at full strength”", notes)


def test_ratios_are_told_as_ratios() -> None:
    head, first, *_ = table_of(slide_of("logarithm", "compared"))
    assert head[1].startswith("ratio")
    assert "÷" in first[0]


def test_a_log_scale_is_drawn_in_original_units() -> None:
    found, drawn = designs.design("logarithm"), chart_of("logarithm")
    told = pd.DataFrame(found.cells["told"].tolist())["estimate"]
    lines = {one.name: list(one.values) for one in drawn.plots[0].series}
    for level in designs.LIGHT:
        assert lines[level] == pytest.approx(told[(found.cells["row"] == level).to_numpy()].tolist(), rel=1e-12)
    assert drawn.value_axis._element.find(f"{qn('c:scaling')}/{qn('c:logBase')}").get("val") == "10"
    assert drawn.value_axis.axis_title.text_frame.text == "yield"


@pytest.mark.browser
def test_raw_data_are_a_sharp_picture() -> None:
    picture = next(shape for shape in slide_of("3 by 4", "raw").shapes if hasattr(shape, "image"))
    assert picture.image.size[0] / picture.width.inches >= 200
    assert picture.image.size[1] / picture.height.inches >= 200
    assert (picture.crop_left, picture.crop_right, picture.crop_top, picture.crop_bottom) == (0, 0, 0, 0)
    assert "In numbers: light Full sun, feed No feed, n 6" in slide_of("3 by 4", "raw").notes_slide.notes_text_frame.text


def test_without_a_browser_the_slides_are_built_with_their_own_charts_and_tables(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(images.Chromium, "find_browser", lambda **_: None)
    monkeypatch.delenv("BROWSER_PATH", raising=False)
    found = designs.design("3 by 4")
    show = pptx.Presentation(io.BytesIO(deck.build(boards.story(found), found)))
    head, *rows = table_of(show.slides[1])
    assert head[:3] == ["light", "feed", "n"]
    assert [row[2] for row in rows] == ["6"] * len(rows)
    assert any(shape.has_chart for shape in show.slides[2].shapes)


def test_the_dark_deck_is_the_same_on_dark_paper() -> None:
    found = designs.design("3 by 4")
    dark = deck.build(boards.story(found), found, dark=True)
    with zipfile.ZipFile(io.BytesIO(dark)) as parts:
        slides, notes = (parts.read(f"ppt/theme/theme{k}.xml").decode() for k in (1, 2))
    assert f'<a:lt1><a:srgbClr val="{look.NIGHT.paper[1:]}"/></a:lt1>' in slides
    assert f'<a:lt1><a:srgbClr val="{look.DESK.paper[1:]}"/></a:lt1>' in notes, "notes are printed"
    show = pptx.Presentation(io.BytesIO(dark))
    assert [slide.shapes.title.text for slide in show.slides] == [slide.shapes.title.text for slide in slides_of("3 by 4").slides]
    lines = [one for one in show.slides[2].shapes[1].chart.plots[0].series if one.name in designs.LIGHT]
    assert [f"#{one.format.line.color.rgb}" for one in lines] == list(look.NIGHT.hues[:3])


def own_template(wide: float, tall: float) -> bytes:
    """Return a presentation such as users have: a slide in it, and its own colours."""
    show = pptx.Presentation()
    show.slide_width, show.slide_height = pptx.util.Inches(wide), pptx.util.Inches(tall)
    show.slides.add_slide(show.slide_layouts[1]).shapes.title.text = "An old slide"
    file = io.BytesIO()
    show.save(file)
    return file.getvalue()


def test_the_slides_stand_in_the_users_own_template() -> None:
    found = designs.design("logarithm")
    show = pptx.Presentation(io.BytesIO(deck.build(boards.story(found), found, template=own_template(10, 7.5))))
    told = boards.story(found)
    assert [slide.shapes.title.text for slide in show.slides] == [board.claim for board in told]
    for slide in show.slides:
        assert slide.slide_layout.name == "Title Only"
        assert len([shape for shape in slide.shapes if is_graphic(shape)]) == 1
        for shape in slide.shapes:
            assert shape.left >= 0
            assert shape.left + shape.width <= show.slide_width
            assert shape.top + shape.height <= show.slide_height
        for text in slide.shapes._spTree.iter(qn("a:rPr")):
            assert text.get("sz") is None or int(text.get("sz")) >= 1800


@pytest.mark.parametrize(
    ("template", "why"),
    [(b"no presentation", "it is not a presentation"), (own_template(10, 3), "below the title of its plainest layout there is no room")],
)
def test_a_template_that_cannot_be_used_is_refused(template: bytes, why: str) -> None:
    found = designs.design("3 by 4")
    with pytest.raises(TemplateUnusable, match=why):
        deck.build(boards.story(found), found, template=template)


def test_own_words_keep_the_evidence_and_are_marked() -> None:
    found = designs.design("3 by 4")
    changes = Story().saying("interaction", "Feed pays in the sun.").noting("interaction", "Ask for the cost.").dropping("raw data")
    show = pptx.Presentation(io.BytesIO(deck.build(boards.story(found, changes), found)))
    slide = show.slides[1]
    assert slide.shapes.title.text == "Feed pays in the sun."
    evidence = next(shape.text for shape in slide.placeholders if shape.placeholder_format.idx == master.WORDS)
    assert "F(6, 60) = 7.78" in evidence
    assert evidence.endswith("claim in the user’s own words")
    notes = slide.notes_slide.notes_text_frame.text
    assert found.answers[0].sentence in notes
    assert "Ask for the cost." in notes


@pytest.mark.parametrize("name", ["3 by 4", "long names"])
def test_the_same_findings_give_the_same_file(name: str) -> None:
    found = designs.design(name)
    assert deck.build(boards.story(found), found) == file_of(name)


def test_the_file_names_no_one_and_no_time() -> None:
    with zipfile.ZipFile(io.BytesIO(file_of("3 by 4"))) as parts:
        core = parts.read("docProps/core.xml")
        assert b"dcterms:" not in core.replace(b"xmlns:dcterms", b"")
        assert not [part for part in parts.namelist() if "printerSettings" in part or "thumbnail" in part]
