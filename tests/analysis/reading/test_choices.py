"""Every decision of the reader can be changed, and changed back."""

import json
from collections.abc import Callable

import pandas as pd
import pytest

from analysis import refusals
from analysis.reading.choices import Reading
from analysis.reading.entry import read_table
from analysis.table import Decision, Table
from tests.analysis.reading.files import BALANCED, YIELDS, labels, ods, parquet, text, values, xls, xlsx

REMARKED = "Trial 7\n# sown in May\n" + text(BALANCED, ";", ",")
GRID = "shade,low,high\nhay,1.5,2.5\nstraw,3.5,4.25\n"
TWO_HEADERS = ",low,,high,\nfeed,mass,height,mass,height\nhay,1.5,20,2.5,30\nstraw,3.5,25,4.25,35\n"
OPEN_MARKS = "feed;shade;yield\nhay;low;1.234\nhay;high;2.345\nstraw;low;3.456\n"


def hidden_rows(data: Callable[..., bytes] = xlsx) -> bytes:
    def hide(sheet: object) -> None:
        sheet.row_dimensions[3].hidden = True  # type: ignore[attr-defined]

    return data(BALANCED, hide)


FILES = {
    "commas": text(BALANCED).encode(),
    "remarks": REMARKED.encode(),
    "grid": GRID.encode(),
    "two headers": TWO_HEADERS.encode(),
    "open marks": OPEN_MARKS.encode(),
    "no header": b"1,2,3.5\n1,1,4.5\n2,2,5.5\n",
    "runs of spaces": text(BALANCED, "   ").encode(),
    "named separator": b"sep=;\n" + text(BALANCED, ";").encode(),
    "xlsx": xlsx([["Trial 7"], [], *BALANCED]),
    "hidden": hidden_rows(),
    "xls": xls(BALANCED),
    "ods": ods(BALANCED),
    "parquet": parquet(pd.DataFrame({"feed": ["hay", "straw"], "low": [1.5, 2.5], "high": [2.0, 3.0]})),
}


def content(table: Table) -> tuple[object, ...]:
    """Everything that reading gave."""
    return (table.fingerprint, table.preview(99).to_csv(), table.left_out, table.decisions, table.reading, table.raw)


def read(data: bytes, reading: Reading) -> Table | str:
    """A table, or the sentence of the refusal."""
    try:
        return read_table(data, reading=reading)
    except refusals.Refusal as refusal:
        return str(refusal)


def decided(table: Table, kind: str) -> Decision:
    """The one decision of a kind."""
    (decision,) = [decision for decision in table.decisions if decision.kind == kind]
    return decision


def offered(table: Table, kind: str) -> dict[str, Reading]:
    """What could be read instead, by its words."""
    return {alternative.words: alternative.reading for alternative in decided(table, kind).alternatives}


@pytest.mark.parametrize("name", FILES)
def test_each_alternative_is_read_or_refused_and_leads_back(name: str) -> None:
    first = read_table(FILES[name])
    assert first.reading == Reading()
    for decision in first.decisions:
        for alternative in decision.alternatives:
            other = read(FILES[name], alternative.reading)
            if isinstance(other, Table):
                assert other.reading == alternative.reading
                assert other.fingerprint != first.fingerprint
                assert Reading() in offered(other, decision.kind).values(), (decision.kind, alternative.words)
            assert content(read_table(FILES[name], reading=Reading())) == content(first)


@pytest.mark.parametrize("name", FILES)
def test_every_decision_that_applies_is_listed_once(name: str) -> None:
    kinds = [decision.kind for decision in read_table(FILES[name]).decisions]
    wanted = {"layout"} if name == "parquet" else {"header", "layout"}
    wanted |= {"separator", "decimal"} if not FILES[name].startswith((b"PK", b"PAR1", b"\xd0")) else set()
    wanted |= {"sheet", "hidden"} if FILES[name].startswith((b"PK", b"\xd0")) else set()
    assert wanted <= set(kinds)
    assert all(kinds.count(kind) == 1 for kind in wanted)


def test_an_ordinary_file_has_no_notes() -> None:
    assert read_table(FILES["commas"]).notes == ()


@pytest.mark.parametrize(
    "reading",
    [
        Reading(),
        Reading(separator="semicolons", decimal="comma", header_row=3),
        Reading(sheet="Trial “2”", table="rows 2 to 9", layout="grid", hidden="leave out"),
        Reading(header_row=0),
    ],
)
def test_choices_go_through_json(reading: Reading) -> None:
    assert Reading.from_plain(json.loads(json.dumps(reading.to_plain()))) == reading


@pytest.mark.parametrize(
    "plain",
    [
        {"separator": ";"},
        {"decimal": "dot"},
        {"header_row": -1},
        {"header_row": True},
        {"layout": None},
        {"hidden": 1},
        {"sheet": 3},
        {"row": 1},
    ],
)
def test_choices_that_there_are_not_are_refused(plain: dict[str, object]) -> None:
    with pytest.raises(refusals.UnknownChoice, match="is not offered for"):
        Reading.from_plain(plain)


def test_another_separator_is_read() -> None:
    table = read_table(b"feed;shade;yield,kg\nhay;low;1,5\nhay;high;2,5\n", reading=Reading(separator="commas"))
    assert table.names == ("feed;shade;yield", "kg")
    assert offered(table, "separator")["semicolons"] == Reading()


def test_only_separators_that_occur_are_offered() -> None:
    assert not decided(read_table(FILES["commas"]), "separator").alternatives
    assert set(offered(read_table(FILES["remarks"]), "separator")) == {"commas"}


@pytest.mark.parametrize(("decimal", "wanted"), [("point", [1.234, 2.345, 3.456]), ("comma", [1234.0, 2345.0, 3456.0])])
def test_the_decimal_mark_is_as_asked(decimal: str, wanted: list[float]) -> None:
    assert values(read_table(FILES["open marks"], reading=Reading(decimal=decimal)), "yield") == wanted


def test_the_decimal_mark_offers_the_other_one() -> None:
    assert offered(read_table(FILES["open marks"]), "decimal") == {"comma": Reading(decimal="comma")}
    assert offered(read_table(FILES["remarks"]), "decimal") == {"point": Reading(decimal="point")}
    assert offered(read_table(b"a;b;c\nx;1,5;2.5\ny;2,5;3.5\n"), "decimal") == {
        "point": Reading(decimal="point"),
        "comma": Reading(decimal="comma"),
    }


def test_a_number_that_has_one_meaning_keeps_it() -> None:
    assert values(read_table(FILES["remarks"], reading=Reading(decimal="point")), "yield") == YIELDS


def test_another_row_names_the_columns() -> None:
    data = b"feed,shade,yield\nFutter,Schatten,Ertrag\nhay,low,1.5\nhay,high,2.5\n"
    table = read_table(data, reading=Reading(header_row=2))
    assert table.names == ("Futter", "Schatten", "Ertrag")
    assert values(table, "Ertrag") == [1.5, 2.5]
    instead = offered(read_table(data, reading=Reading(header_row=3)), "header")
    assert instead["as first read (row 1: feed, shade, yield)"] == Reading()
    assert instead["row 2: Futter, Schatten, Ertrag"] == Reading(header_row=2)


def test_a_file_is_read_without_a_header() -> None:
    table = read_table(b"a,b,3.5\nc,d,4.5\ne,f,5.5\n", reading=Reading(header_row=0))
    assert table.names == ("column 1", "column 2", "column 3")
    assert values(table, "column 3") == [3.5, 4.5, 5.5]
    assert offered(table, "header")["as first read (row 1: a, b, 3.5)"] == Reading()


def test_two_header_rows_offer_either_alone() -> None:
    table = read_table(TWO_HEADERS.encode())
    alone = offered(table, "header")["row 2: feed, mass, height, mass, height"]
    assert read_table(TWO_HEADERS.encode(), layout="rows", reading=alone).names == ("feed", "mass", "height", "mass 2", "height 2")


def test_units_under_the_header_asked_for_stay_units() -> None:
    table = read_table(b"Trial\nfeed,yield\n-,kg\nhay,1.5\nstraw,2.5\n", reading=Reading(header_row=2))
    assert table.column("yield").as_response().unit == "kg"


@pytest.mark.parametrize("row", [2, 900])
def test_a_blank_row_cannot_be_the_header(row: int) -> None:
    with pytest.raises(refusals.NoSuchHeader, match=f"Row {row} cannot be the header"):
        read_table(b"Trial\n\na,b,y\nu,v,1\nu,w,2\n", reading=Reading(header_row=row))


def test_the_layout_offers_the_other_one() -> None:
    assert offered(read_table(FILES["grid"]), "layout") == {"rows": Reading(layout="rows")}
    assert offered(read_table(FILES["grid"], layout="rows"), "layout") == {"a grid": Reading()}
    possible = b"feed,mass,height\nhay,1.5,20\nstraw,3.5,25\n"
    assert offered(read_table(possible), "layout") == {"a grid": Reading(layout="grid")}
    assert offered(read_table(possible, layout="grid"), "layout") == {"rows": Reading()}


def test_a_grid_that_cannot_be_is_told() -> None:
    table = read_table(b"feed,shade,yield\nhay,low,1.5\nhay,high,2.5\n", layout="grid")
    assert "A grid was asked for" in decided(table, "layout").sentence
    assert table.names == ("feed", "shade", "yield")


def test_hidden_rows_are_kept_unless_asked_otherwise() -> None:
    table = read_table(FILES["hidden"])
    assert table.rows == 8
    assert "Hidden rows of the sheet were kept (row 3)" in table.notes[0]
    without = read_table(FILES["hidden"], reading=offered(table, "hidden")["leave them out"])
    assert values(without, "yield") == [YIELDS[0], *YIELDS[2:]]
    assert [(entry.row, entry.why) for entry in without.left_out] == [(3, "hidden in the sheet")]
    assert without.file_rows.tolist() == [2, 4, 5, 6, 7, 8, 9]


def test_a_sheet_given_outright_wins() -> None:
    table = read_table(FILES["xlsx"], sheet="Data", reading=Reading(sheet="Nothing", hidden="leave out"))
    assert table.reading == Reading(sheet="Data", hidden="leave out")


def test_raw_lines_stand_as_they_are() -> None:
    assert [(line.row, line.text) for line in read_table(FILES["remarks"]).raw][:4] == [
        (1, "Trial 7"),
        (2, "# sown in May"),
        (3, "feed;shade;yield"),
        (4, "grain;none;12,5"),
    ]
    assert [line.text for line in read_table(FILES["xlsx"]).raw][:3] == ["Trial 7", "", "feed | shade | yield"]
    assert read_table(FILES["runs of spaces"]).raw[1].text == "grain   none   12.5"
    assert read_table(FILES["parquet"]).raw[0].text == "hay | 1.5 | 2"
    assert read_table(pd.DataFrame({"a": ["x"], "y": [1.0]})).raw == ()


def test_long_raw_lines_are_cut() -> None:
    (first, *_) = read_table((f"{'long ' * 300}\n" + text(BALANCED)).encode()).raw
    assert len(first.text) == 500


def test_levels_follow_the_decimal_mark_asked_for() -> None:
    data = b"dose;shade;yield\n1.234;low;1\n1.234;high;2\n2.345;low;3\n2.345;high;4\n"
    assert read_table(data, reading=Reading(decimal="comma")).column("dose").as_levels().amounts == (1234.0, 2345.0)
    assert labels(read_table(data, reading=Reading(decimal="comma")), "dose")[0] == "1.234"
