"""Every rule of reading against a file of its own: what was found, what was left out, and what was told."""

from collections.abc import Callable
from typing import Any

import pandas as pd
import pytest

from analysis import Study, analyse, refusals
from analysis.reading.entry import read_table
from analysis.table import Table
from tests.analysis.reading.files import labels, ods, parquet, told, xls, xlsx

Wanted = dict[str, Any]
CROP = "plot,soil,water,mass\n"
ROWS = "1,sand,wet,4.5\n2,sand,dry,3.5\n3,loam,wet,6.5\n4,loam,dry,5.5\n"


def column(*cells: str, mark: str = ";") -> str:
    """A file whose last column holds these cells."""
    soils = ["sand", "sand", "loam", "loam"]
    lines = [f"{soils[i % 4]}{mark}{'wet' if i % 2 else 'dry'}{mark}{cell}\n" for i, cell in enumerate(cells)]
    return f"soil{mark}water{mark}mass\n" + "".join(lines)


def factor(*cells: str) -> str:
    """A file whose first column holds these cells."""
    return "dose;water;mass\n" + "".join(f"{cell};{'wet' if i % 2 else 'dry'};{i + 0.5}\n" for i, cell in enumerate(cells))


def seen(table: Table) -> Wanted:
    """What a file turned out to hold, by the names that the rules use."""
    last = table.columns[-1]
    response = last.as_response() if last.looks_numeric else None
    return {
        "names": list(table.names),
        "rows": table.file_rows.tolist(),
        "values": None if response is None else [None if value != value else value for value in response.values.tolist()],
        "unit": None if response is None else response.unit,
        "missing": [] if response is None else [entry.row for entry in response.missing],
        "left_out": [entry.row for entry in table.left_out],
        "levels": list(table.columns[0].as_levels().labels),
        "first": labels(table, table.names[0]),
        "second": labels(table, table.names[1]) if len(table.names) > 1 else [],
        "told": " ".join([told(table, table.names[0]), *(() if response is None else response.notes)]),
    }


MASSES = [4.5, 3.5, 6.5, 5.5]
TEXT: dict[str, tuple[str | bytes, Wanted]] = {
    # separators, encodings, line ends
    "commas": (CROP + ROWS, {"values": MASSES, "told": ""}),
    "semicolons": ((CROP + ROWS).replace(",", ";"), {"values": MASSES}),
    "tabs": ((CROP + ROWS).replace(",", "\t"), {"values": MASSES}),
    "pipes": ((CROP + ROWS).replace(",", "|"), {"values": MASSES}),
    "runs of spaces": ((CROP + ROWS).replace(",", "    "), {"values": MASSES}),
    "aligned columns": ("soil   water  mass\nsand   wet    4.5\nclayey dry    3.5\n", {"values": [4.5, 3.5], "levels": ["sand", "clayey"]}),
    "a byte-order mark": (b"\xef\xbb\xbf" + (CROP + ROWS).encode(), {"names": ["plot", "soil", "water", "mass"]}),
    "UTF-16": ((CROP + ROWS).encode("utf-16"), {"values": MASSES, "told": "UTF-16"}),
    "Windows-1252": (CROP.encode() + ROWS.replace("loam", "grès").encode("windows-1252"), {"second": ["sand", "sand", "grès", "grès"]}),
    "old line ends": ((CROP + ROWS).replace("\n", "\r"), {"rows": [2, 3, 4, 5]}),
    "DOS line ends": ((CROP + ROWS).replace("\n", "\r\n"), {"rows": [2, 3, 4, 5]}),
    "no line end at the end": ((CROP + ROWS).rstrip("\n"), {"values": MASSES}),
    "sep=;": ("sep=;\n" + (CROP + ROWS).replace(",", ";"), {"rows": [3, 4, 5, 6], "values": MASSES}),
    # what stands above, between and below
    "titles and remarks": (
        "Trial at the mill\nsecond year\n# by hand\n\n" + CROP + ROWS,
        {"rows": [6, 7, 8, 9], "told": "were passed over"},
    ),
    "blank rows": (CROP + ROWS.replace("3,", "\n\n3,"), {"rows": [2, 3, 6, 7], "told": "2 blank rows passed over"}),
    "a blank column": ((CROP + ROWS).replace(",mass", ",,mass").replace("wet,", "wet,,").replace("dry,", "dry,,"), {"values": MASSES}),
    "a hash below the header": ("soil,water,mass\n#1,wet,4.5\n#2,dry,3.5\n", {"levels": ["#1", "#2"], "rows": [2, 3]}),
    "a short row": ("soil,water,mass\nsand,wet,4.5\nloam,dry\nsand,dry,2.5\n", {"missing": [3], "values": [4.5, None, 2.5]}),
    "text in its first cell alone": (CROP + ROWS + "harvested late,,,\n", {"left_out": [6], "values": MASSES}),
    "a total": (CROP + ROWS + "Total,,,20\n", {"left_out": [6], "values": MASSES}),
    "a mean": (CROP + ROWS + "Mean,,,5\n", {"left_out": [6], "told": "without an observation"}),
    # numbers
    "decimal commas": (column("4,5", "3,25", "6"), {"values": [4.5, 3.25, 6.0], "told": "decimal commas"}),
    "thousands commas": (column("1,234.5", "2,000", "3"), {"values": [1234.5, 2000.0, 3.0]}),
    "thousands points": (column("1.234,5", "2.000", "3"), {"values": [1234.5, 2000.0, 3.0]}),
    "thousands apostrophes": (column("1'234", "1’234.5", "3"), {"values": [1234.0, 1234.5, 3.0]}),
    "thousands spaces": (column("1 234", "1\u00a0234,5", "1\u202f234"), {"values": [1234.0, 1234.5, 1234.0]}),
    "Unicode minus": (column("−4.5", "–3", "+2"), {"values": [-4.5, -3.0, 2.0]}),
    "exponents": (column("1e3", "2.5E-1", "3×10^2"), {"values": [1000.0, 0.25, 300.0]}),
    "percent": (column("45%", "50 %"), {"values": [45.0, 50.0], "unit": "%"}),
    "one mark and three digits, a point": (column("1.234", "2.345"), {"values": [1.234, 2.345], "told": "nothing in the column tells"}),
    "one mark and three digits, a comma": (column("1,234", "2,345"), {"values": [1.234, 2.345], "told": "nothing in the column tells"}),
    "one mark and three digits between commas": (column('"1,234"', '"2,345"', mark=","), {"values": [1234.0, 2345.0]}),
    "two groups": (column("1.234.567", "2.345"), {"values": [1234567.0, 2345.0]}),
    "other numbers settle it": (column("1,234", "2,3"), {"values": [1.234, 2.3]}),
    "footnote marks": (column("4.5*", "3.5†", "2"), {"values": [4.5, 3.5, 2.0], "told": "footnote marks"}),
    # units
    "one unit": (column("4.5 mg", "3.5mg"), {"values": [4.5, 3.5], "unit": "mg"}),
    "a unit on some": (column("4.5 mg", "3.5", "2"), {"values": [4.5, 3.5, 2.0], "unit": "mg", "told": "carry no unit"}),
    "a row of units": ("soil,water,mass\n-,-,kg\nsand,wet,4.5\nloam,dry,3.5\n", {"unit": "kg", "rows": [3, 4]}),
    "two spellings of micro": (column("4 µg", "3 μg"), {"values": [4.0, 3.0], "unit": "µg"}),
    # missing
    "missing words": (
        column("4", "", "NA", "n/a", "n.a.", "N.D.", "NaN", "NULL", "None", "-", "–", ".", "?", "#N/A", "#DIV/0!", "#REF!", "5"),
        {"missing": list(range(3, 18)), "told": "counted as missing"},
    ),
    "infinite": (column("4", "inf", "-Infinity", "5", "6"), {"missing": [3, 4]}),
    "detection limits": (column("4", "<0.5", ">100", "5"), {"missing": [3, 4], "told": "beyond a detection limit"}),
    "far codes": (column("4", "5", "4.5", "-999"), {"values": [4.0, 5.0, 4.5, -999.0], "told": "far outside the rest"}),
    "missing words in a factor": (factor("NA", "none", "-", "", "x"), {"first": ["NA", "none", "-", "", "x"], "told": "kept as levels"}),
    # levels
    "white space around levels": (factor(" sand", "sand ", "lo\u00a0am"), {"levels": ["sand", "lo am"], "told": "trimmed"}),
    "case": (factor("Ctrl", "ctrl"), {"levels": ["Ctrl", "ctrl"], "told": "differ only in case"}),
    "one letter": (factor("barley", "barely"), {"told": "one letter"}),
    "inner spaces": (factor("line two", "linetwo"), {"told": "spaces or hyphens"}),
    "look-alike letters": (factor("MACE", "МАСЕ"), {"told": "look-alike letters"}),
    "numbers in order": (factor("10", "2", "1.0", "1", "1,0"), {"levels": ["1.0", "2", "10"]}),
    "levels with units": (factor("10 mg", "2 mg", "0.5 mg"), {"levels": ["0.5 mg", "2 mg", "10 mg"]}),
    "levels with numbers": (factor("T10", "T2", "T1"), {"levels": ["T1", "T2", "T10"]}),
    "ordered words": (factor("high", "very low", "medium", "none"), {"levels": ["none", "very low", "medium", "high"]}),
    "sizes": (factor("large", "small"), {"levels": ["small", "large"]}),
    "months": (factor("May", "January", "Dec"), {"levels": ["January", "May", "Dec"]}),
    "weekdays": (factor("Sun", "Tuesday", "Mon"), {"levels": ["Mon", "Tuesday", "Sun"]}),
    "truth": (factor("true", "false"), {"levels": ["false", "true"]}),
    "plain words": (factor("zinc", "iron", "boron"), {"levels": ["zinc", "iron", "boron"]}),
    "composed letters": (factor("caf\u00e9", "cafe\u0301"), {"levels": ["caf\u00e9"]}),
    "written once above several rows": (
        "soil,water,mass\nsand,wet,4.5\n,dry,3.5\nloam,wet,6.5\n,dry,5.5\n",
        {"first": ["sand", "sand", "loam", "loam"], "told": "filled down"},
    ),
    "simply empty": ("soil,water,mass\nsand,wet,4.5\n,dry,3.5\nloam,wet,6.5\nloam,dry,5.5\n", {"first": ["sand", "", "loam", "loam"]}),
    # names
    "two header rows": (
        ",wet,,dry,\nsoil,mass,ash,mass,ash\nsand,1,2,3,4\nloam,2,3,4,5\n",
        {"names": ["soil", "wet mass", "wet ash", "dry mass", "dry ash"]},
    ),
    "a repeated name": ("soil,water,mass,mass\nsand,wet,1,4.5\nloam,dry,2,3.5\n", {"names": ["soil", "water", "mass", "mass 2"]}),
    "no header": ("1,1,4.5\n1,2,3.5\n2,1,6.5\n", {"names": ["column 1", "column 2", "column 3"], "told": "no header"}),
    # grids
    "a grid with a corner": (
        "Soil \\ Water,wet,dry\nsand,4.5,3.5\nloam,6.5,5.5\n",
        {"names": ["Soil", "Water", "value"], "values": MASSES},
    ),
    "a grid with a slash": ("Soil / Water,wet,dry\nsand,4.5,3.5\nloam,6.5,5.5\n", {"names": ["Soil", "Water", "value"]}),
    "a grid with nothing in its corner": (",wet,dry\nsand,4.5,3.5\nloam,6.5,5.5\n", {"names": ["row", "column", "value"]}),
    "a grid with repeated headings": (
        "Soil \\ Water,wet,wet,dry,dry\nsand,1,2,3,4\nloam,5,6,7,8\n",
        {"second": ["wet", "wet", "dry", "dry"] * 2},
    ),
    "a grid with repeated rows": ("Soil \\ Water,wet,dry\nsand,1,2\nsand,3,4\nloam,5,6\n", {"first": ["sand"] * 4 + ["loam"] * 2}),
    "a grid with a blank cell": ("Soil \\ Water,wet,dry\nsand,4.5,\nloam,6.5,5.5\n", {"values": [4.5, 6.5, 5.5], "missing": []}),
    "a grid with a missing word": ("Soil \\ Water,wet,dry\nsand,4.5,NA\nloam,6.5,5.5\n", {"missing": [2]}),
    "a grid with totals": (
        "Soil \\ Water,wet,dry,Total\nsand,4.5,3.5,8\nloam,6.5,5.5,12\nTotal,11,9,20\n",
        {"values": MASSES, "left_out": [4], "told": "1 column of totals or means"},
    ),
    "levels that span replicates": (
        ",wet,,dry,\nsoil,rep 1,rep 2,rep 1,rep 2\nsand,1,2,3,4\nloam,5,6,7,8\n",
        {"values": [1.0, 2, 3, 4, 5, 6, 7, 8]},
    ),
}


@pytest.mark.parametrize("name", TEXT)
def test_rule_of_text(name: str) -> None:
    content, wanted = TEXT[name]
    found = seen(read_table(content if isinstance(content, bytes) else content.encode()))
    for what, value in wanted.items():
        if what == "told" and value:
            assert value in found[what]
        else:
            assert found[what] == value, what


BOOK = [["soil", "water", "mass"], ["sand", "wet", 4.5], ["sand", "dry", 3.5], ["loam", "wet", 6.5], ["loam", "dry", 5.5]]


@pytest.mark.parametrize("make", [xlsx, xls, ods])
def test_rules_of_workbooks(make: Callable[..., bytes]) -> None:
    assert seen(read_table(make(BOOK)))["values"] == MASSES
    assert seen(read_table(make([[1.0, "x", 2.5] if i else ["dose", "b", "y"] for i in range(4)])))["levels"] == ["1"]
    assert seen(read_table(make([["Trial"], [], *BOOK])))["rows"] == [4, 5, 6, 7]


def test_a_percent_format_gives_percent_and_a_decimal_format_the_value() -> None:
    def formats(sheet) -> None:  # type: ignore[no-untyped-def]
        for row in range(2, 6):
            sheet.cell(row, 1).number_format, sheet.cell(row, 3).number_format = "0.00", "0%"

    found = seen(read_table(xlsx([["dose", "b", "y"], [1, "u", 0.45], [1, "v", 0.5], [2, "u", 0.25], [2, "v", 0.1]], formats)))
    assert (found["levels"], found["values"], found["unit"]) == (["1", "2"], [45.0, 50.0, 25.0, 10.0], "%")


def test_rules_of_parquet() -> None:
    frame = pd.DataFrame({"dose": [1.0, 2.0, 10.0], "b": pd.Categorical(["z", "y", "z"], ["z", "y"], ordered=True), "y": [1.5, None, 3.5]})
    table = read_table(parquet(frame))
    assert (labels(table, "dose"), table.column("b").as_levels().labels) == (["1", "2", "10"], ("z", "y"))
    assert [entry.row for entry in table.column("y").as_response().missing] == [2]


@pytest.mark.parametrize("name", TEXT)
def test_every_observation_is_analysed_or_left_out(name: str) -> None:
    content, _ = TEXT[name]
    table = read_table(content if isinstance(content, bytes) else content.encode())
    for column in table.columns:
        if column.looks_numeric:
            response = column.as_response()
            assert sum(value == value for value in response.values.tolist()) + len(response.missing) == table.rows


FOUR = "sand,wet,1\nsand,dry,2\nloam,wet,3\nloam,dry,4.5\n"
REFUSED: dict[str, tuple[str | bytes, type[refusals.Refusal], str]] = {
    "an empty file": ("", refusals.EmptyFile, "The file is empty"),
    "a header without rows": ("soil,water,mass\n", refusals.HeaderWithoutRows, "no rows of data"),
    "no numeric column": ("soil,water,mass\nsand,wet,much\nloam,dry,little\n", refusals.NoNumericColumn, "no numeric column"),
    "a picture": (b"\x89PNG\r\n\x1a\n" + bytes(90), refusals.NotATable, "a PNG picture"),
    "a web page": ("<html><table><tr><td>1</td></tr></table></html>", refusals.NotATable, "a web page"),
    "a letter": (b"{\\rtf1 Dear colleague}", refusals.NotATable, "a text document"),
    "more fields than names": ("soil,water,mass\nsand,wet,4,5\n", refusals.TooManyFields, "Row 2 has 4 filled fields"),
    "NUL bytes": (b"soil,water,mass\nsand,wet,4\0\n", refusals.NulBytes, "Row 2 holds NUL bytes"),
    "an unclosed quote": ('soil,water,mass\n"sand,wet,4\nloam,dry,5\n', refusals.UnclosedQuote, "unclosed quotation mark"),
    "a long cell": (f"soil,water,mass\n{'s' * 32_768},wet,4\n", refusals.CellTooLong, "longer than 32,767"),
    "mixed units": (column("4 mg", "3 kg"), refusals.MixedUnits, r"holds mg \(row 2\) and kg \(row 3\)"),
    "a response of text": (column("4", "much", "little", "some"), refusals.ResponseIsText, "“much” \\(row 3\\)"),
    "a column that is not there": (CROP + ROWS, refusals.UnknownColumn, "did you mean “mass”"),
    "the same column twice": (CROP + ROWS, refusals.SameColumnTwice, "water"),
    "a constant": ("soil,water,mass\n" + "sand,wet,1\nsand,dry,1\nloam,wet,1\nloam,dry,1\n" * 2, refusals.ConstantResponse, "mass"),
    "a level for every row": ("soil,water,mass\ns1,wet,1\ns2,dry,2\ns3,wet,4\ns4,dry,3\n", refusals.LevelForEveryRow, "soil"),
    "too few observations": (f"soil,water,mass\n{FOUR}loam,dry,5\n", refusals.TooFewObservations, "observations"),
}  # fmt: skip
ASKED = {"a column that is not there": ("mas", "soil", "water"), "the same column twice": ("mass", "water", "water")}


def analysed(data: bytes, response: str, row: str, other: str) -> Wanted:
    """The object for the columns of a file."""
    table = read_table(data)
    return analyse(Study(table, table.column(response).name, row, other)).to_dict()


@pytest.mark.parametrize("name", REFUSED)
def test_refused_in_one_sentence(name: str) -> None:
    content, refusal, words = REFUSED[name]
    with pytest.raises(refusal, match=words) as caught:
        analysed(content if isinstance(content, bytes) else content.encode(), *ASKED.get(name, ("mass", "soil", "water")))
    assert len(str(caught.value)) <= 1000
    assert "\n" not in str(caught.value)
