"""Frames and Parquet files: taken as they are, categories with their order, rows counted from 1."""

import datetime
from decimal import Decimal

import numpy as np
import pandas as pd
import pytest

from analysis import refusals
from analysis.reading.entry import read_table
from tests.analysis.reading.files import labels, parquet, told, values

FRAME = pd.DataFrame(
    {
        "feed": pd.Categorical(["b", "a", "b", None], categories=["b", "a", "never"], ordered=True),
        "dose": [1.0, 10.0, 2.5, 1.0],
        "plot": ["T10", "T2", "T2", ""],
        "y": [1.5, np.nan, np.inf, 2.5],
        "n": [3, 1, 2, 3],
    }
)


@pytest.fixture(params=["frame", "parquet"])
def table(request):  # type: ignore[no-untyped-def]
    """The same table as a frame and as a Parquet file."""
    return read_table(FRAME if request.param == "frame" else parquet(FRAME))


def test_rows_count_from_1(table) -> None:  # type: ignore[no-untyped-def]
    assert table.file_rows.tolist() == [1, 2, 3, 4]


def test_categories_keep_their_order_and_only_those_that_occur(table) -> None:  # type: ignore[no-untyped-def]
    levels = table.column("feed").as_levels()
    assert levels.labels == ("b", "a")
    assert levels.codes.tolist() == [0, 1, 0, -1]


def test_a_float_level_1_is_shown_as_1(table) -> None:  # type: ignore[no-untyped-def]
    levels = table.column("dose").as_levels()
    assert (levels.labels, levels.amounts) == (("1", "2.5", "10"), (1.0, 2.5, 10.0))


def test_text_levels_in_natural_order_and_empty_ones_missing(table) -> None:  # type: ignore[no-untyped-def]
    assert table.column("plot").as_levels().labels == ("T2", "T10")
    assert labels(table, "plot") == ["T10", "T2", "T2", ""]


def test_missing_and_infinite_values_are_listed(table) -> None:  # type: ignore[no-untyped-def]
    response = table.column("y").as_response()
    assert np.isnan(response.values).tolist() == [False, True, True, False]
    assert [(entry.row, entry.why) for entry in response.missing] == [(2, "no value of y"), (3, "not a finite number")]


def test_whole_numbers_are_responses_and_levels(table) -> None:  # type: ignore[no-untyped-def]
    assert values(table, "n") == [3, 1, 2, 3]
    assert table.column("n").as_levels().labels == ("1", "2", "3")


def test_categories_are_no_response(table) -> None:  # type: ignore[no-untyped-def]
    with pytest.raises(refusals.ResponseIsText, match="“b” \\(row 1\\)"):
        table.column("feed").as_response()


def test_the_preview_is_text(table) -> None:  # type: ignore[no-untyped-def]
    preview = table.preview(2)
    assert preview.index.tolist() == [1, 2]
    assert preview.iloc[0].tolist() == ["b", "1", "T10", "1.5", "3"]


def test_nothing_in_a_frame_is_parsed() -> None:
    table = read_table(pd.DataFrame({"a": [" x", "x", "NA"], "t": ["1,5", "2,5", "3,5"], "y": [1, 2, 3]}))
    assert set(table.column("a").as_levels().labels) == {" x", "x", "NA"}
    with pytest.raises(refusals.ResponseIsText):
        table.column("t").as_response()


def test_text_in_parquet_follows_the_rules_of_text() -> None:
    table = read_table(parquet(pd.DataFrame({"a": [" x", "x", "NA"], "t": ["1,5 mg", "NA", "3,5 mg"], "y": [1, 2, 3]})))
    assert table.column("a").as_levels().labels == ("x", "NA")
    response = table.column("t").as_response()
    assert (response.values[[0, 2]].tolist(), response.unit) == ([1.5, 3.5], "mg")
    assert [entry.row for entry in response.missing] == [2]


def test_an_unordered_category_in_parquet_is_text() -> None:
    frame = pd.DataFrame({"a": pd.Categorical(["low", "high"], categories=["high", "low"]), "y": [1, 2]})
    assert read_table(parquet(frame)).column("a").as_levels().labels == ("low", "high")


def test_decimals_in_parquet_are_exact() -> None:
    frame = pd.DataFrame({"a": ["u", "v"], "y": [Decimal("1000000000000.4"), Decimal("1000000000000.3")]})
    assert read_table(parquet(frame)).column("y").as_response().offsets.tolist() == [0.4, 0.3]


def test_a_frame_later_changed_leaves_the_table_alone() -> None:
    frame = pd.DataFrame({"a": ["u", "v"], "y": [1.5, 2.5]})
    table = read_table(frame)
    frame.loc[0, "y"] = 9.0
    assert values(table, "y") == [1.5, 2.5]


def test_doubles_are_shared_and_read_only() -> None:
    frame = pd.DataFrame({"a": ["u", "v"], "y": [1.5, 2.5]})
    response = read_table(frame).column("y").as_response()
    assert np.shares_memory(response.values, frame["y"].to_numpy())
    with pytest.raises(ValueError, match="read-only"):
        response.values[0] = 3.0


def test_a_large_offset_in_doubles() -> None:
    response = read_table(pd.DataFrame({"a": ["u", "v"], "y": [1e9 + 0.25, 1e9 + 0.5]})).column("y").as_response()
    assert response.pivot == 1e9
    assert response.offsets.tolist() == [0.25, 0.5]


@pytest.mark.parametrize(
    ("cells", "order"),
    [
        ([True, False, True], ("False", "True")),
        ([datetime.date(2031, 5, 2), datetime.date(2031, 4, 1), None], ("2031-04-01", "2031-05-02")),
        ([1, "1", "b"], ("1", "b")),
        ([pd.NA, "a", "b"], ("a", "b")),
        (["high", "low", "medium"], ("low", "medium", "high")),
    ],
    ids=str,
)
def test_objects_as_levels(cells: list[object], order: tuple[str, ...]) -> None:
    table = read_table(pd.DataFrame({"a": pd.Series(cells, dtype=object), "y": [1, 2, 3]}))
    assert table.column("a").as_levels().labels == order


@pytest.mark.parametrize("dtype", ["Int64", "Float64", "int8", "uint16", "float32", "int64[pyarrow]", "double[pyarrow]"])
def test_numbers_of_every_type(dtype: str) -> None:
    table = read_table(pd.DataFrame({"a": ["u", "v", "u"], "y": pd.array([1, 2, 4], dtype=dtype)}))  # type: ignore[call-overload]
    assert values(table, "y") == [1, 2, 4]
    assert table.column("y").as_levels().labels == ("1", "2", "4")


@pytest.mark.parametrize("dtype", ["Int64", "Float64", "int64[pyarrow]"])
def test_missing_numbers_of_nullable_types(dtype: str) -> None:
    table = read_table(pd.DataFrame({"a": ["u", "v", "u"], "y": pd.array([1, None, 4], dtype=dtype)}))  # type: ignore[call-overload]
    assert [entry.row for entry in table.column("y").as_response().missing] == [2]
    assert table.column("y").as_levels().codes.tolist() == [0, -1, 1]


def test_names_become_text_and_differ() -> None:
    frame = pd.DataFrame([[1, 2, 3]], columns=pd.Index([1, "1", ("a", "b")], dtype=object))
    assert read_table(frame).names == ("1", "1 2", "a b")


@pytest.mark.parametrize(
    ("frame", "refusal"),
    [
        (pd.DataFrame(), refusals.EmptyFile),
        (pd.DataFrame({"a": [], "y": []}), refusals.HeaderWithoutRows),
        (pd.DataFrame({"a": ["u"], "b": ["v"]}), refusals.NoNumericColumn),
    ],
)
def test_frames_without_a_table(frame: pd.DataFrame, refusal: type[refusals.Refusal]) -> None:
    with pytest.raises(refusal):
        read_table(frame)


def test_fingerprints_see_every_value_and_name() -> None:
    frames = [
        FRAME,
        FRAME.assign(y=[1.5, np.nan, np.inf, 2.75]),
        FRAME.rename(columns={"n": "m"}),
        FRAME.assign(plot=["T1", "T2", "T2", ""]),
    ]
    assert len({read_table(frame).fingerprint for frame in frames}) == 4
    assert read_table(FRAME).fingerprint == read_table(FRAME.copy()).fingerprint


def test_parquet_is_told_when_its_name_says_otherwise() -> None:
    assert "the file is a Parquet file" in told(read_table(parquet(FRAME), name="trial.csv"))


def test_a_parquet_file_cut_short() -> None:
    with pytest.raises(refusals.DamagedFile, match="Parquet file is damaged"):
        read_table(parquet(FRAME)[:-20])
