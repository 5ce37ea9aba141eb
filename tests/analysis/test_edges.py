"""The edges of what can be analysed: names that the results use, numbers out of reach, and a reason for every null."""

import json

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis import shell
from analysis.refusals import NameTaken, SpanOutOfReach


def frame(counts, block=None, seed=1):
    """Random values in a layout of these counts; block gives a block to each row."""
    counts = np.array(counts)
    row, column = (np.repeat(index.ravel(), counts.ravel()) for index in np.indices(counts.shape))
    y = np.round(np.random.default_rng(seed).normal(10, 1, row.size), 3)
    made = pd.DataFrame({"a": [f"a{i}" for i in row], "b": [f"b{j}" for j in column], "y": y})
    return made if block is None else made.assign(block=block(made))


def analysed(data, **choices):
    roles = {"response": "y", "row_factor": "a", "column_factor": "b"} | choices
    return analysis.analyse(analysis.Study(table=analysis.read_table(data), **roles))


@pytest.mark.parametrize("name", ["interaction", "residual", "total", "cells"])
def test_a_factor_named_like_a_line_of_the_results_is_refused(name):
    with pytest.raises(NameTaken, match=f"“{name}”: give that column another name"):
        analysed(frame([[3, 3], [3, 3]]).rename(columns={"a": name}), row_factor=name)


@pytest.mark.parametrize("unit", [1e200, 1e-170])
def test_numbers_that_cannot_be_squared_are_refused(unit):
    data = frame([[3, 3], [3, 3]])
    with pytest.raises(SpanOutOfReach, match="too large or too small to be squared"):
        analysed(data.assign(y=data["y"] * unit))


def test_a_power_beyond_double_precision_is_refused():
    with pytest.raises(SpanOutOfReach, match="power=400 scale"):
        analysed(frame([[3, 3], [3, 3]]), scale="power=400")


def test_a_control_of_another_column_is_refused_in_the_shell(tmp_path, capsys):
    file = tmp_path / "t.csv"
    frame([[3, 3], [3, 3]]).to_csv(file, index=False)
    assert shell.main([str(file), "--response", "y", "--factors", "a", "b", "--adjust", "dunnett", "--control", "y=1"]) == 2
    assert "neither of the factors" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("counts", "block", "reason"),
    [
        ([[1, 2, 3], [2, 2, 2], [3, 2, 2]], None, "alone determines its own fitted value"),
        ([[3, 2, 3], [2, 2, 3], [3, 3, 0]], None, "need an observation in every combination"),
        ([[3, 3, 0, 0], [3, 3, 0, 0], [0, 0, 3, 3], [0, 0, 3, 3]], None, "layout of separate parts"),
        ([[3, 3], [3, 3]], lambda made: "k", "the block takes no part"),
        ([[3, 3], [3, 3], [3, 3]], lambda made: np.where(made["a"] == "a0", "k0", "k1"), "share no block of “block”"),
    ],
)
def test_what_is_undefined_has_its_reason_in_the_notes(counts, block, reason):
    findings = analysed(frame(counts, block), block=None if block is None else "block")
    assert any(reason in note for note in findings.design["notes"])
    json.dumps(findings.to_dict(), allow_nan=False)
