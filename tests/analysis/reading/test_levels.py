"""Levels: what is one level, what is missing, and the natural order."""

import pytest

from analysis.table import Levels
from tests.analysis.reading.files import labels, read


def levels(*cells: str) -> Levels:
    """Read cells as the levels of a column."""
    rows = "".join(f'"{cell}";{i + 0.5}\n' for i, cell in enumerate(cells))
    return read(f"level;y\n{rows}", layout="rows").column("level").as_levels()


@pytest.mark.parametrize(
    ("cells", "order"),
    [
        (("10", "9", "100", "-5"), ("-5", "9", "10", "100")),
        (("1", "1.0", "1,0", "2"), ("1", "2")),
        (("1.0", "1", "2"), ("1.0", "2")),
        (("0,5", "0,25", "10"), ("0,25", "0,5", "10")),
        (("100 mg", "10 mg", "9 mg"), ("9 mg", "10 mg", "100 mg")),
        (("50%", "100%", "0%"), ("0%", "50%", "100%")),
        (("T10", "T2", "T1"), ("T1", "T2", "T10")),
        (("day 14", "Day 7", "day 21"), ("Day 7", "day 14", "day 21")),
        (("18-25", ">40", "26-40", "<18"), ("<18", "18-25", "26-40", ">40")),
        (("20 mg", "control", "5 mg"), ("control", "5 mg", "20 mg")),
        (("high", "low", "medium"), ("low", "medium", "high")),
        (("Very high", "high", "LOW", "very low", "Medium"), ("very low", "LOW", "Medium", "high", "Very high")),
        (("high", "none", "low"), ("none", "low", "high")),
        (("large", "small", "medium"), ("small", "medium", "large")),
        (("TRUE", "FALSE"), ("FALSE", "TRUE")),
        (("March", "January", "february"), ("January", "february", "March")),
        (("Oct", "Mar", "May"), ("Mar", "May", "Oct")),
        (("Friday", "monday", "Wed"), ("monday", "Wed", "Friday")),
        (("pellet", "grain", "hay"), ("pellet", "grain", "hay")),
        (("spring wheat", "barley", "oat 2"), ("spring wheat", "barley", "oat 2")),
    ],
    ids=str,
)
def test_natural_order(cells: tuple[str, ...], order: tuple[str, ...]) -> None:
    assert levels(*cells).labels == order


@pytest.mark.parametrize(
    ("cells", "amounts"),
    [
        (("0", "50", "200"), (0.0, 50.0, 200.0)),
        (("0 mg", "2,5 mg"), (0.0, 2.5)),
        (("low", "high"), None),
        (("0", "50", "none"), None),
        (("T1", "T2"), None),
    ],
    ids=str,
)
def test_amounts_where_every_level_is_a_number(cells: tuple[str, ...], amounts: tuple[float, ...] | None) -> None:
    assert levels(*cells).amounts == amounts


def test_codes_point_to_labels() -> None:
    assert labels(read("level,y\nhigh,1\nlow,2\n,3\nhigh,4\n"), "level") == ["high", "low", "", "high"]


def test_only_an_empty_cell_is_missing() -> None:
    found = levels("NA", "none", "-", "null", "K", "", " ")
    assert set(found.labels) == {"NA", "none", "-", "null", "K"}
    assert found.codes.tolist()[-2:] == [-1, -1]
    assert any("only an empty cell is missing" in note for note in found.notes)


def test_white_space_is_trimmed_with_a_note() -> None:
    found = levels("beta ", "beta", " beta", "be\u00a0ta", "be ta", "be  ta")
    assert found.labels == ("beta", "be ta")
    assert any("white space" in note for note in found.notes)


def test_composed_and_decomposed_letters_are_one_level() -> None:
    assert levels("Ho\u0308he", "H\u00f6he").labels == ("H\u00f6he",)


@pytest.mark.parametrize(
    ("left", "right", "how"),
    [
        ("Ctrl", "ctrl", "case"),
        ("half shade", "halfshade", "spaces"),
        ("Control", "Contol", "one letter"),
        ("Control", "Contorl", "one letter"),
        ("Beta", "\u0412eta", "look-alike letters"),
    ],
)
def test_look_alike_levels_are_kept_apart_with_an_offer(left: str, right: str, how: str) -> None:
    found = levels(left, right, "other")
    assert len(found.labels) == 3
    assert any(how in note and "merge" in note for note in found.notes)


@pytest.mark.parametrize(("left", "right"), [("T1", "T2"), ("low", "los"), ("line A", "line B"), ("plot 11", "plot 12"), ("grain", "hay")])
def test_levels_that_differ_on_purpose_are_not_offered(left: str, right: str) -> None:
    assert levels(left, right).notes == ()


def test_a_level_written_once_above_its_rows_is_filled_down() -> None:
    table = read("feed,shade,y\ngrain,low,1\n,high,2\ngrass,low,3\n,high,4\n")
    assert labels(table, "feed") == ["grain", "grain", "grass", "grass"]
    assert any("filled down" in note and "“feed”" in note for note in table.notes)


def test_blanks_are_not_filled_where_a_block_repeats_its_level() -> None:
    table = read("feed,shade,y\ngrain,low,1\ngrain,high,2\ngrass,low,3\n,high,4\n")
    assert labels(table, "feed") == ["grain", "grain", "grass", ""]


def test_nested_levels_are_filled_down() -> None:
    table = read("feed,shade,y\ngrain,low,1\n,,2\n,high,3\n,,4\ngrass,low,5\n,,6\n,high,7\n,,8\n")
    assert labels(table, "feed") == ["grain"] * 4 + ["grass"] * 4
    assert labels(table, "shade") == ["low", "low", "high", "high"] * 2


def test_measurements_are_never_filled_down() -> None:
    table = read("feed,shade,y\nA,low,1\nA,high,\nB,low,3\nB,high,\n")
    assert [entry.row for entry in table.column("y").as_response().missing] == [3, 5]
    assert "filled" not in " ".join(table.notes)


def test_a_great_many_levels_are_read_by_the_same_rules() -> None:
    numbers = read("plot,y\n" + "".join(f"{30_000 - index}.0,1\n{30_000 - index},1\n" for index in range(25_000)))
    found = numbers.column("plot").as_levels()
    assert (len(found.labels), found.labels[0], found.labels[-1]) == (25_000, "5001.0", "30000.0")
    assert found.codes[:2].tolist() == [24_999, 24_999]
    words = read("plot,y\n" + "".join(f"p{index} ,1\np{index},1\n" for index in range(25_000))).column("plot").as_levels()
    assert (len(words.labels), words.labels[1], words.amounts) == (25_000, "p1", None)
