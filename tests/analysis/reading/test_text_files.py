"""Delimited text: separators, encodings, line endings, titles, remarks, headers, short and long rows."""

import codecs

import pytest

from analysis import refusals
from analysis.reading.entry import read_table
from tests.analysis.reading.files import BALANCED, YIELDS, labels, read, text, told, values

DIALECTS = {
    "commas": text(BALANCED),
    "semicolons and decimal commas": text(BALANCED, ";", ","),
    "tabs": text(BALANCED, "\t"),
    "tabs and decimal commas": text(BALANCED, "\t", ","),
    "pipes": text(BALANCED, "|"),
    "spaces": text(BALANCED, " "),
    "spaces and decimal commas": text(BALANCED, " ", ","),
    "runs of spaces": text(BALANCED, "    "),
    "aligned columns": "".join(f"{row[0]:<10}{row[1]:<8}{row[2]:>7}\n" for row in BALANCED),
    "blanks around cells": text(BALANCED, " , "),
    "Windows line ends": text(BALANCED, end="\r\n"),
    "old line ends": text(BALANCED, end="\r"),
    "no last line end": text(BALANCED).rstrip("\n"),
    "a declared separator": "sep=;\n" + text(BALANCED, ";", ","),
    "an odd declared separator": "sep=!\n" + text(BALANCED, "!"),
    "quoted cells": "".join(",".join(f'"{cell}"' for cell in row) + "\n" for row in BALANCED),
    "quoted decimal commas": "".join(",".join(f'"{cell}"' for cell in row).replace(".", ",") + "\n" for row in BALANCED),
    "a separator at the end of every line": text(BALANCED, end=",\n"),
    "a title above": "Trial 7 at the lower farm\n\n" + text(BALANCED),
    "a title with commas": "Trial 7, lower farm\nsown 4 May, cut 2 June\n" + text(BALANCED),
    "remarks above": "# Trial 7, lower farm\n# sown 4 May; cut 2 June\n" + text(BALANCED),
    "a header behind a mark": "# " + text(BALANCED),
    "blank lines between": text(BALANCED).replace("grass,none,9.5", "\n\ngrass,none,9.5"),
    "blank rows of separators": text(BALANCED) + ",,\n,,\n",
    "a blank column": "".join(f"{a},,{b},{c}\n" for a, b, c in BALANCED),
    "a blank first column": "".join(f",{a},{b},{c}\n" for a, b, c in BALANCED),
    "a total below": text(BALANCED) + "Total,,79.5\n",
    "a mean below a blank line": text(BALANCED) + "\nMean,,9.94\nSD,,2.2\n",
    "a remark below": text(BALANCED) + "\nMeasured by hand.\n",
}


@pytest.mark.parametrize("content", DIALECTS.values(), ids=DIALECTS.keys())
def test_one_table_in_many_dialects_is_one_table(content: str) -> None:
    table = read(content)
    assert table.names == ("feed", "shade", "yield")
    assert values(table, "yield") == YIELDS
    assert labels(table, "feed") == ["grain"] * 4 + ["grass"] * 4
    assert table.column("shade").as_levels().labels == ("none", "half")


@pytest.mark.parametrize(
    "data",
    [
        text(BALANCED).encode("utf-8"),
        codecs.BOM_UTF8 + text(BALANCED).encode("utf-8"),
        text(BALANCED).encode("utf-16"),
        codecs.BOM_UTF16_BE + text(BALANCED).encode("utf-16-be"),
        text(BALANCED).encode("utf-16-le"),
        text(BALANCED, "\t").encode("utf-16"),
    ],
    ids=["utf-8", "utf-8 with mark", "utf-16", "utf-16 big-endian", "utf-16 without mark", "utf-16 with tabs"],
)
def test_encodings_give_the_same_table(data: bytes) -> None:
    assert values(read_table(data), "yield") == YIELDS


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "windows-1252"])
def test_accents_survive_every_encoding(encoding: str) -> None:
    table = read("Düngung;Höhe;y\nKöln;voll – ganz;1,5\nKöln;halb;2,5\n", encoding)
    assert table.names == ("Düngung", "Höhe", "y")
    assert labels(table, "Höhe") == ["voll – ganz", "halb"]


def test_windows_1252_is_told() -> None:
    assert "Windows-1252" in told(read("Düngung,y\nKöln,1\nUlm,2\n", "windows-1252"))


def test_row_numbers_are_those_of_a_spreadsheet() -> None:
    table = read('Title line\n\nfeed,shade,y\nA,low,1\n\n"A",high,NA\nB,low,2\n')
    assert table.file_rows.tolist() == [4, 6, 7]
    assert [entry.row for entry in table.column("y").as_response().missing] == [6]


def test_a_quoted_line_break_stays_in_its_row() -> None:
    table = read('feed,shade,y\n"A\nlong",low,1\nB,high,2\n')
    assert table.file_rows.tolist() == [2, 3]
    assert labels(table, "feed") == ["A long", "B"]


def test_titles_and_remarks_are_told() -> None:
    assert "2 lines above the header (rows 1 and 2) were passed over" in told(read("Trial\n# sown\n" + text(BALANCED)))


def test_remarks_count_only_above_the_header() -> None:
    table = read("feed,shade,y\n#1,low,1\n#2,low,2\n")
    assert labels(table, "feed") == ["#1", "#2"]


def test_a_short_row_is_filled_with_blanks() -> None:
    table = read("feed,shade,y\nA,low,1\nA,high\nB,low,2\n")
    assert [(entry.row, entry.why) for entry in table.column("y").as_response().missing] == [(3, "no value of y")]


def test_text_in_the_first_cell_alone_is_left_out() -> None:
    table = read("feed,shade,y\nA,low,1\nnote: rain\nB,low,2\n")
    assert [entry.row for entry in table.left_out] == [3]
    assert table.rows == 2


def test_more_filled_fields_than_the_header_are_refused() -> None:
    with pytest.raises(refusals.TooManyFields, match="Row 3 has 4 filled fields and the header only 3"):
        read("feed,shade,y\nA,low,1\nA,high,1,5\nB,low,2,7\n")


def test_no_header_where_the_first_row_is_all_numbers() -> None:
    table = read("1,1,5.5\n1,2,6.5\n2,1,7.5\n")
    assert table.names == ("column 1", "column 2", "column 3")
    assert values(table, "column 3") == [5.5, 6.5, 7.5]
    assert table.file_rows.tolist() == [1, 2, 3]
    assert "no header" in told(table)


def test_two_header_rows_become_one_name_each() -> None:
    table = read("Treatment,,Yield,\nfeed,shade,early,late\nA,low,1,2\nB,high,3,4\n")
    assert table.names == ("Treatment feed", "Treatment shade", "Yield early", "Yield late")
    assert "joined" in told(table)


def test_a_spanning_name_above_some_columns_only() -> None:
    table = read("feed,shade,Yield,\n,,early,late\nA,low,1,2\nB,high,3,4\n")
    assert table.names == ("feed", "shade", "Yield early", "Yield late")


def test_a_row_of_units_under_the_header() -> None:
    table = read("feed,shade,yield\n,,kg/plot\nA,low,1.5\nB,high,2.5\n")
    assert table.rows == 2
    assert table.column("yield").unit == "kg/plot"
    assert table.column("yield").as_response().unit == "kg/plot"
    assert "units" in told(table)


def test_units_in_brackets_under_the_header() -> None:
    table = read("feed,temp,yield\n-,(°C),[mg L-1]\nA,10,1.5\nB,20,2.5\n")
    assert (table.column("temp").unit, table.column("yield").unit) == ("°C", "mg L-1")


def test_a_repeated_name_is_told_apart_by_a_number() -> None:
    table = read("feed,shade,reading,reading\nA,low,1,2\nB,high,3,4\n")
    assert table.names == ("feed", "shade", "reading", "reading 2")
    assert "reading" in told(table)


def test_a_column_without_a_name_gets_one() -> None:
    table = read("feed,,y\nA,low,1\nB,high,3\n", layout="rows")
    assert table.names == ("feed", "column 2", "y")


def test_names_are_trimmed_and_composed() -> None:
    table = read("  feed  type \u00a0, Ho\u0308he,y\nA,low,1\nB,high,3\n")
    assert table.names == ("feed type", "H\u00f6he", "y")


def test_the_content_decides_when_the_ending_lies() -> None:
    table = read_table(text(BALANCED).encode(), name="trial.xlsx")
    assert values(table, "yield") == YIELDS
    assert "ends in .xlsx" in told(table)


def test_a_path_names_the_table(tmp_path) -> None:  # type: ignore[no-untyped-def]
    path = tmp_path / "trial 7.csv"
    path.write_text(text(BALANCED))
    assert read_table(path).name == "trial 7.csv"
    assert read_table(str(path)).fingerprint == read_table(path.read_bytes()).fingerprint


def test_fingerprints_change_with_content_and_choices() -> None:
    seals = {read(text(BALANCED), **choices).fingerprint for choices in ({}, {"layout": "rows"})}
    seals.add(read(text(BALANCED).replace("7.5", "7.6")).fingerprint)
    assert len(seals) == 3


def test_the_preview_shows_the_first_rows_as_understood() -> None:
    preview = read("Title\n" + text(BALANCED)).preview(2)
    assert preview.index.tolist() == [3, 4]
    assert preview["yield"].tolist() == ["12.5", "13.0"]


def test_trimmed_names_are_told() -> None:
    assert "names of columns was trimmed" in told(read("feed , shade,y\nA,low,1\nB,high,2\n"))


def test_bytes_of_other_kinds() -> None:
    assert read_table(bytearray(text(BALANCED).encode())).rows == 8
    assert read_table(memoryview(text(BALANCED).encode())).rows == 8


@pytest.mark.parametrize(
    ("last", "reason"),
    [
        ("Total,,5", "“Total” row, not an observation"),
        ("Mean:,,2.5", "“Mean:” row, not an observation"),
        ("Mittelwert,,2.5", "“Mittelwert” row, not an observation"),
        ("Grand total,,5", "“Grand total” row, not an observation"),
        ("Mean,Mean,2.5", "“Mean” row, not an observation"),
    ],
)
def test_totals_and_means_are_left_out_with_their_reason(last: str, reason: str) -> None:
    table = read(f"feed,shade,y\nA,low,1\nA,high,2\nB,low,3\nB,high,4\n{last}\n")
    assert [(entry.row, entry.why) for entry in table.left_out] == [(6, reason)]
    assert table.rows == 4


def test_a_level_called_total_is_a_level() -> None:
    table = read("light,rep,y\ntotal,1,1\ntotal,2,2\npartial,1,3\npartial,2,4\ntotal,3,2\n")
    assert (table.rows, table.left_out) == (5, ())


def test_a_title_of_two_cells_above_levels_written_once() -> None:
    table = read("Trial 7; lower farm\n\nfeed;shade;y\nhay;low;1,5\n;high;2,5\nstraw;low;3,5\n;high;4,5\nTotal;;12\n")
    assert table.names == ("feed", "shade", "y")
    assert labels(table, "feed") == ["hay", "hay", "straw", "straw"]
