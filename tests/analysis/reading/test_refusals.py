"""Files that are turned down: each by one sentence that says what was found and what would help."""

import pytest

from analysis import refusals
from analysis.reading.entry import read_table
from analysis.refusals import Refusal
from tests.analysis.reading.files import BALANCED, read, text

ROWS = text(BALANCED).encode()


@pytest.mark.parametrize(
    ("data", "words"),
    [
        (b"", "The file is empty"),
        (b" \n\n\t\n", "The file is empty"),
        (b"\xef\xbb\xbf", "The file is empty"),
        (b",,,\n,,\n", "The file is empty"),
        (b"feed,shade,y\n", "no rows of data below it"),
        (b"feed,shade,y\n\n,,\n", "no rows of data below it"),
        (b"# only a remark\n", "no rows of data below it"),
        (b"feed,shade,y\nA,low,good\nB,high,bad\n", "no numeric column"),
        (b"\x89PNG\r\n\x1a\n" + bytes(100), "a PNG picture"),
        (b"\xff\xd8\xff\xe0" + bytes(100), "a JPEG picture"),
        (b"GIF89a" + bytes(100), "a GIF picture"),
        (b"%PDF-1.7\n" + bytes(100), "a PDF document"),
        (b"{\\rtf1\\ansi hello}", "a text document"),
        (b"\x1f\x8b\x08" + bytes(100), "a gzip archive"),
        (b"<!DOCTYPE html><html><body><table><tr><td>1</td></tr></table></body></html>", "a web page"),
        (b"<table><tr><td>feed</td></tr></table>", "a web page"),
        (b'[{"feed": "A", "y": 1}]', "a JSON document"),
        (b"<?xml version='1.0'?><Workbook/>", "an XML document"),
        (b"\x00\x01\x02\x03" * 100 + b"\xfe\xff\x80", "binary data"),
        (b"PK\x03\x04" + bytes(100), "damaged or cut short"),
        (b"PAR1" + bytes(100) + b"PAR1", "Parquet file is damaged"),
        (b"PARE" + bytes(100), "encrypted"),
        (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + "WordDocument".encode("utf-16-le") + bytes(900), "a text document"),
        (ROWS[:30] + b"\0" + ROWS[30:], "Row 2 holds NUL bytes"),
        (b'feed,shade,y\nA,low,1\n"B,high,2\nC,low,3\n', "unclosed quotation mark was found in row 3"),
        (b'feed,shade,y\nA,low,1\n"B,"high",2\nC,low,3\n', "unclosed quotation mark was found in row 3"),
        (b"feed,shade,y\nA,low,1\nB,high,2\nC," + b"x" * 40_000 + b",3\n", "cell in row 4 is longer than 32,767 characters"),
        (b"feed,shade,y\nA,low,1\nC," + b"x" * 200_000 + b",3\n", "cell in row 3 is longer than 32,767 characters"),
        (b"feed,shade,y\nA,low,1\nA,high,2,3\n", "Row 3 has 4 filled fields and the header only 3"),
    ],
    ids=lambda value: value if isinstance(value, str) else "",
)
def test_files_without_a_usable_table(data: bytes, words: str) -> None:
    with pytest.raises(Refusal, match=words) as refusal:
        read_table(data, name="trial.csv")
    assert is_one_sentence(str(refusal.value))


def is_one_sentence(told: str) -> bool:
    """One line of at most 1,000 characters that does not begin with the name of an exception."""
    return "\n" not in told and 20 < len(told) <= 1000 and not told.split(":")[0].endswith(("Error", "Exception"))


def test_a_missing_file_is_named() -> None:
    with pytest.raises(refusals.MissingFile, match=r"no file “/nowhere/at/all\.csv”"):
        read_table("/nowhere/at/all.csv")


def test_a_folder_is_no_file(tmp_path) -> None:  # type: ignore[no-untyped-def]
    with pytest.raises(refusals.MissingFile):
        read_table(tmp_path)


def test_an_unknown_layout() -> None:
    with pytest.raises(refusals.UnknownChoice, match="“sideways” is not offered for layout"):
        read_table(ROWS, layout="sideways")


def test_an_unknown_column_suggests_the_nearest() -> None:
    with pytest.raises(refusals.UnknownColumn, match="no column “yeild”: did you mean “yield”"):
        read(text(BALANCED)).column("yeild")


def test_long_texts_do_not_break_the_sentence() -> None:
    name = "n" * 5000
    table = read(f"feed,{name},y\nA,1 mg,1\nB,2 kg,2\nC,3 kg,2\n", layout="rows")
    with pytest.raises(refusals.MixedUnits) as refusal:
        table.column(name).as_response()
    assert is_one_sentence(str(refusal.value))
    with pytest.raises(refusals.UnknownColumn) as unknown:
        table.column("m" * 5000)
    assert is_one_sentence(str(unknown.value))


def test_line_breaks_in_names_stay_out_of_the_sentence() -> None:
    with pytest.raises(Refusal) as refusal:
        read_table("no\nsuch\u2028file.csv")
    assert is_one_sentence(str(refusal.value))


def test_a_long_cell_in_a_header_or_a_workbook() -> None:
    with pytest.raises(refusals.CellTooLong, match="row 1"):
        read("feed," + "s" * 40_000 + ",y\nA,low,1\nB,high,2\n")
