"""Numbers in text: marks, signs, exponents, percent, units, footnotes, missing words, detection limits, exact differences."""

from decimal import Decimal

import numpy as np
import pytest

from analysis import refusals
from analysis.table import Response
from tests.analysis.reading.files import read, values


def response(*cells: str, separator: str = ";") -> Response:
    """Read cells as the response of a table with two factors."""
    quoted = [f'"{cell}"' if separator in cell else cell for cell in cells]
    rows = "".join(f"{'AB'[i % 2]}{separator}{'xyz'[i % 3]}{separator}{cell}\n" for i, cell in enumerate(quoted))
    return read(f"feed{separator}shade{separator}y\n{rows}", layout="rows").column("y").as_response()


@pytest.mark.parametrize(
    ("cells", "expected"),
    [
        (("1,5", "2,25"), (1.5, 2.25)),
        (("1.5", "2.25"), (1.5, 2.25)),
        (("1,234.5", "12"), (1234.5, 12)),
        (("1.234,5", "12"), (1234.5, 12)),
        (("1,234,567", "12"), (1234567, 12)),
        (("1.234.567", "12"), (1234567, 12)),
        (("1'234.5", "2\u2019500"), (1234.5, 2500)),
        (("1 234,5", "1\u00a0234,5", "1\u202f234,5", "1\u2009234"), (1234.5, 1234.5, 1234.5, 1234)),
        (("\u22121.5", "-2", "\u20133", "+4"), (-1.5, -2, -3, 4)),
        (("1e3", "1.5E-2", "2,5e+1", "3e\u22122"), (1000, 0.015, 25, 0.03)),
        (("1.5 \u00d7 10^3", "2\u00b710\u207b\u00b2"), (1500, 0.02)),
        (("45%", "50 %", "12,5%"), (45, 50, 12.5)),
        ((".5", "5.", ",25"), (0.5, 5, 0.25)),
        (("$5.2", "$-3", "$1,234.5"), (5.2, -3, 1234.5)),
        (("12.3*", "12.5\u2020", "13"), (12.3, 12.5, 13)),
        (("12.3\u00b2", "12.5", "13"), (12.3, 12.5, 13)),
        (("0.123", "0.456"), (0.123, 0.456)),
        (("1234.567", "2"), (1234.567, 2)),
    ],
    ids=str,
)
def test_numbers_are_read_as_written(cells: tuple[str, ...], expected: tuple[float, ...]) -> None:
    assert response(*cells).values.tolist() == list(expected)


@pytest.mark.parametrize("cell", ["1,23,4", "1.2.3", "12,34.56.7", "1 2", "2024-05-01", "10:30", "3\u00b10.2", "5-10", "1/2"])
def test_what_is_no_number_is_told_with_its_row(cell: str) -> None:
    found = response("1.5", cell, "2.5")
    assert np.isnan(found.values[1])
    assert [(entry.row, entry.why) for entry in found.missing] == [(3, f"“{cell}” is not a number")]


class TestOneMarkAndThreeDigits:
    """Rulings on “1.234” and “1,234”."""

    def test_the_point_is_decimal_with_a_note(self) -> None:
        found = response("1.234", "2.345")
        assert found.values.tolist() == [1.234, 2.345]
        assert any("decimal mark" in note for note in found.notes)

    def test_a_point_settled_by_other_numbers_needs_no_note(self) -> None:
        assert response("1.234", "2.5").notes == ()

    def test_the_comma_is_decimal_where_it_does_not_separate_cells(self) -> None:
        found = response("1,234", "2,345")
        assert found.values.tolist() == [1.234, 2.345]
        assert any("nothing in the column tells" in note for note in found.notes)

    def test_the_comma_is_decimal_where_the_column_says_so(self) -> None:
        assert response("1,234", "2,5", separator=",").values.tolist() == [1.234, 2.5]

    def test_the_comma_marks_thousands_in_a_file_of_commas(self) -> None:
        found = response("1,234", "999", separator=",")
        assert found.values.tolist() == [1234, 999]
        assert any("thousands" in note for note in found.notes)

    @pytest.mark.parametrize("other", ["1,234,567", "1,234.5", "12.5"])
    def test_a_number_that_settles_the_comma_as_thousands(self, other: str) -> None:
        assert response("1,234", other).values[0] == 1234

    @pytest.mark.parametrize("other", ["1.234.567", "1.234,5", "12,5"])
    def test_a_number_that_settles_the_point_as_thousands(self, other: str) -> None:
        found = response("1.234", "2.500", other)
        assert found.values[:2].tolist() == [1234, 2500]
        assert any("point was read as a thousands mark" in note for note in found.notes)

    def test_marks_that_do_not_occur_are_not_told(self) -> None:
        assert response("1,5", "2,25").notes == ("Column “y”: decimal commas were read.",)

    def test_decimal_commas_and_points_in_one_column_are_both_read(self) -> None:
        assert response("5,2", "5.3", "5.123").values.tolist() == [5.2, 5.3, 5.123]


class TestUnits:
    """Units behind numbers."""

    def test_one_unit_is_kept_for_labels(self) -> None:
        found = response("12.3 mg", "13mg", "9,5 mg")
        assert (found.values.tolist(), found.unit) == ([12.3, 13, 9.5], "mg")

    @pytest.mark.parametrize("unit", ["%", "mg/L", "g m-2", "kg ha\u207b\u00b9", "µmol m\u207b\u00b2 s\u207b\u00b9", "°C", "m²", "cfu/mL"])
    def test_units_of_many_forms(self, unit: str) -> None:
        assert response(f"1.5 {unit}", f"2.5 {unit}").unit == unit

    def test_a_unit_on_some_numbers_is_taken_for_all_with_a_note(self) -> None:
        found = response("12.3 mg", "13", "9.5")
        assert (found.values.tolist(), found.unit) == ([12.3, 13, 9.5], "mg")
        assert any("2 of 3 numbers carry no unit" in note for note in found.notes)

    def test_the_micro_sign_and_the_greek_letter_are_one(self) -> None:
        assert response("1 µg", "2 μg").unit == "µg"

    def test_mixed_units_are_refused_with_the_first_row_of_each(self) -> None:
        with pytest.raises(refusals.MixedUnits, match=r"mg \(row 2\) and kg \(row 4\)"):
            response("12.3 mg", "13 mg", "9.5 kg", "8 kg")

    def test_a_name_cannot_disturb_the_sentence(self) -> None:
        with pytest.raises(refusals.MixedUnits) as refusal:
            response("1 mg", "2 kg")
        assert "\n" not in str(refusal.value)


MISSING = [
    "",
    "NA",
    "N/A",
    "n.a.",
    "n.d.",
    "nan",
    "null",
    "none",
    "-",
    "–",
    ".",
    "?",
    "#N/A",
    "#DIV/0!",
    "#REF!",
    "NaN",
    "NULL",
    "None",
    "Na",
    "#VALUE!",
    "--",
]


@pytest.mark.parametrize("word", [*MISSING, "inf", "-Inf", "∞", " na ", "\u00a0"])
def test_missing_words_in_any_case(word: str) -> None:
    found = response("1.5", word, "2.5")
    assert np.isnan(found.values[1])
    assert [entry.row for entry in found.missing] == [3]


def test_all_missing_words_at_once_add_up() -> None:
    found = response("1.5", *MISSING, "2.5")
    assert len(found.missing) == len(MISSING)
    assert np.isfinite(found.values).sum() == 2


@pytest.mark.parametrize("cell", ["<0.5", ">100", "< 0,5", "≤ 2 mg", "≥5", "<LOD", "bdl"])
def test_detection_limits_are_missing_and_named_apart(cell: str) -> None:
    found = response("1.5", cell, "2.5")
    assert found.values[0] == 1.5
    assert np.isnan(found.values[1])
    assert found.missing[0].why == f"“{cell}” is beyond a detection limit"
    assert any("beyond a detection limit" in note and "row 3" in note for note in found.notes)


@pytest.mark.parametrize("code", ["-999", "9999", "-99", "-9"])
def test_codes_far_outside_are_kept_with_a_note(code: str) -> None:
    found = response("1.5", "1.6", code, "1.7", "1.4")
    assert found.values[2] == float(code)
    assert any("row 4" in note and "kept as a number" in note for note in found.notes)


def test_codes_inside_the_data_are_no_codes() -> None:
    assert response("900", "999", "1100", "1000").notes == ()


class TestText:
    """Text among numbers, and instead of them."""

    def test_more_than_half_is_refused_and_quoted(self) -> None:
        with pytest.raises(refusals.ResponseIsText, match="“lost” \\(row 3\\), “broken” \\(row 4\\), “dead” \\(row 5\\)"):
            response("1", "lost", "broken", "dead", "2")

    def test_half_is_not(self) -> None:
        assert len(response("1", "lost", "broken", "2").missing) == 2

    def test_no_number_at_all_is_refused(self) -> None:
        with pytest.raises(refusals.NoNumbers, match="Column “y” holds no number"):
            read("feed,shade,y,z\nA,low,,1\nB,high,NA,2\n", layout="rows").column("y").as_response()


class TestExactDifferences:
    """Offsets from the decimals as written."""

    def test_offsets_are_the_decimals_behind_a_large_number(self) -> None:
        found = response("1000000000000.4", "1000000000000.3", "1000000000000.5")
        assert found.pivot == 1e12
        assert found.offsets.tolist() == [0.4, 0.3, 0.5]

    def test_offsets_with_commas_units_and_missing_values(self) -> None:
        found = response("1000000000000,4 mg", "NA", "1.000.000.000.000,3 mg")
        assert found.offsets[[0, 2]].tolist() == [0.4, 0.3]
        assert np.isnan(found.offsets[1])

    @pytest.mark.parametrize(
        "cells", [("123456.78901", "123456.78902"), ("0.12345678", "0.12345679"), ("-5000001.25", "-5000002.75"), ("1e9", "1000000001")]
    )
    def test_offset_plus_pivot_is_the_decimal(self, cells: tuple[str, ...]) -> None:
        found = response(*cells)
        for cell, offset in zip(cells, found.offsets, strict=True):
            assert offset == float(Decimal(cell) - Decimal(found.pivot))

    def test_ordinary_data_have_no_pivot(self) -> None:
        found = response("1.5", "2.5", "3.5")
        assert found.pivot == 0.0
        assert found.offsets.tolist() == found.values.tolist()

    def test_arrays_are_read_only(self) -> None:
        with pytest.raises(ValueError, match="read-only"):
            response("1.5", "2.5").values[0] = 9.0


def test_every_row_is_either_a_number_or_listed() -> None:
    table = read("feed,shade,y\nA,low,1\nA,high,NA\nB,low,lost\nB,high,<3\nB,high,inf\nB,low,\nA,low,-999\nTotal,,5\n")
    found = table.column("y").as_response()
    assert np.isfinite(found.values).sum() + len(found.missing) + len(table.left_out) == 8
    assert values(table, "y")[-1] == -999
