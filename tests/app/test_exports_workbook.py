"""The workbook holds every number at full precision under frozen headings, and text that never becomes a formula."""

import io
from functools import cache

import numpy as np
import openpyxl
import pandas as pd
import pytest

import analysis
from analysis.study import Study
from app import speaker, words
from app.exports import sheets, workbook
from tests.app import designs

# The format holds sixteen significant digits, one less than a double may need.
PRECISE = 1e-15

every_design = pytest.mark.parametrize("name", designs.DESIGNS)


@cache
def book_of(name: str) -> openpyxl.Workbook:
    return openpyxl.load_workbook(io.BytesIO(workbook.build(designs.design(name))))


def frame_of(book: openpyxl.Workbook, sheet: str) -> pd.DataFrame:
    head, *rows = book[sheet].iter_rows(values_only=True)
    return pd.DataFrame(rows, columns=head)


@every_design
def test_every_sheet_is_there_with_a_frozen_heading(name: str) -> None:
    book = book_of(name)
    assert {"read me", "data as analysed", "cells", "ANOVA", "means", "comparisons"} <= set(book.sheetnames)
    assert book.sheetnames[0] == "read me"
    for sheet in book:
        assert sheet.freeze_panes == "A2"
        for column in list(sheet.columns)[:12]:
            width = sheet.column_dimensions[column[0].column_letter].width
            assert 9 <= width <= 110


@every_design
def test_numbers_are_the_engines(name: str) -> None:
    findings = designs.design(name)
    for sheet, wanted in sheets.all_sheets(findings).items():
        held = frame_of(book_of(name), sheet)
        assert len(held) == len(wanted)
        for column, head in enumerate(wanted.columns):
            if pd.api.types.is_numeric_dtype(wanted.iloc[:, column]) and not pd.api.types.is_bool_dtype(wanted.iloc[:, column]):
                told = pd.to_numeric(held.iloc[:, column]).to_numpy(float)
                np.testing.assert_allclose(told, wanted.iloc[:, column].to_numpy(float), rtol=PRECISE, atol=0, err_msg=f"{sheet}: {head}")


def test_means_and_tables_come_back_from_the_file() -> None:
    """One chain read without the exporter's own frames, from findings to file."""
    findings, book = designs.design("3 by 4"), book_of("3 by 4")
    cells = frame_of(book, "cells")
    assert cells["mean"].tolist() == pytest.approx(findings.cells["mean"].tolist(), rel=PRECISE)
    anova = frame_of(book, "ANOVA")
    used = anova[(anova["used for the answers"] == "yes")].set_index("term")
    for row in findings.used_table.itertuples():
        if not np.isnan(row.f):
            assert used.loc[row.term, "F"] == pytest.approx(row.f, rel=PRECISE)
            assert used.loc[row.term, "p"] == pytest.approx(row.p, rel=PRECISE)
    assert set(anova["model"]) == {"with interaction", "without interaction"}


@every_design
def test_numbers_have_a_display_format(name: str) -> None:
    for sheet in book_of(name).worksheets[1:]:
        for row in sheet.iter_rows(min_row=2, max_row=min(40, sheet.max_row)):
            assert all(cell.number_format != "General" for cell in row if isinstance(cell.value, (int, float)))


@every_design
def test_no_cell_holds_a_formula(name: str) -> None:
    for sheet in book_of(name):
        for row in sheet.iter_rows():
            for cell in row:
                assert cell.data_type != "f"
                if isinstance(cell.value, str) and cell.value.startswith(("=", "+", "-", "@")):
                    assert cell.quotePrefix


def test_names_like_formulas_are_kept_to_the_letter() -> None:
    held = frame_of(book_of("2 by 2, names like formulas"), "data as analysed")
    assert set(held["=soil"]) == {"=A1", "@plain"}
    assert set(held["@water"]) == {"-dry", "+wet"}


def test_rows_left_out_are_listed_with_what_stood_there_and_why() -> None:
    text = "a,b,y\n" + "".join(f"{a},{b},{v}\n" for a in "pq" for b in "rs" for v in (1.5, 2.5, 2.75)) + "p,r,<0.5\nq,s,\n"
    findings = analysis.analyse(Study(analysis.read_table(text.encode(), name="bench.csv"), "y", "a", "b"))
    held = frame_of(openpyxl.load_workbook(io.BytesIO(workbook.build(findings))), "data as analysed")
    assert len(held) == 14
    gone = held[held["analysed"] == "no"]
    assert gone["row of the file"].tolist() == [entry["row"] for entry in findings.design["left_out"]] == [14, 15]
    assert gone["reason"].tolist() == [entry["why"] for entry in findings.design["left_out"]]
    assert gone["y"].tolist()[0] == "<0.5"
    assert gone["a"].tolist() == ["p", "q"]


@every_design
def test_the_first_sheet_says_what_the_workbook_is(name: str) -> None:
    findings = designs.design(name)
    told = {str(text) for _, text in book_of(name)["read me"].iter_rows(values_only=True)}
    assert speaker.CAUTION in told
    assert any(words.n_per_cell(findings) in text for text in told)
    for answer in findings.answers:
        assert any(text.startswith(answer.sentence) for text in told)
    assert set(findings.notes) <= told


def test_letters_that_a_workbook_cannot_hold_are_replaced() -> None:
    sheet = openpyxl.Workbook().active
    workbook.write(sheet["A1"], "bell\x07" + "x" * 40_000)
    assert sheet["A1"].value.startswith("bell\N{REPLACEMENT CHARACTER}x")
    assert len(sheet["A1"].value) == workbook.LONGEST


@pytest.mark.parametrize("name", ["3 by 4", "an empty cell"])
def test_the_same_findings_give_the_same_file(name: str) -> None:
    assert workbook.build(designs.design(name)) == workbook.build(designs.design(name))
