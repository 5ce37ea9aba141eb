"""Levels renamed, merged, moved, left out and taken back in, one change after the other."""

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis import level_edits
from analysis.level_edits import Level
from analysis.refusals import LevelNameMissing
from analysis.study import Study
from tests.analysis.experiments import crossed


@pytest.fixture
def study() -> Study:
    frame = crossed([[4, 4, 4], [4, 4, 4]])
    return Study(analysis.read_table(frame, name="experiment"), "y", "a", "b")


@pytest.fixture
def misspelt() -> Study:
    frame = crossed([[4, 4, 4], [4, 4, 4]])
    frame["b"] = frame["b"].map({"b0": "Maltose", "b1": "Fructose", "b2": "Glucose"})
    frame.loc[frame.index[[0, 12]], "b"] = "maltose"
    return Study(analysis.read_table(frame, name="experiment"), "y", "a", "b")


def made(study: Study, changes: Mapping[str, Any]) -> Study:
    return replace(study, **changes)


def names(study: Study) -> list[str]:
    return list(analysis.analyse(study).design["column_levels"])


def test_levels_are_counted_and_stand_in_their_order(study: Study) -> None:
    assert [(level.name, level.rows, level.analysed) for level in level_edits.levels_of(study, "b")] == [
        ("b0", 8, True), ("b1", 8, True), ("b2", 8, True),
    ]  # fmt: skip


def test_a_look_alike_is_offered_with_counts_and_nothing_is_merged(misspelt: Study) -> None:
    (offer,) = level_edits.suggestions(misspelt, "b")
    assert (offer.levels, offer.into) == ((Level("maltose", 2, True),), Level("Maltose", 6, True))
    assert set(names(misspelt)) == {"Maltose", "maltose", "Fructose", "Glucose"}


def test_a_merge_taken_leaves_nothing_to_offer(misspelt: Study) -> None:
    merged = made(misspelt, level_edits.merged(misspelt, "b", ["maltose"], "Maltose"))
    assert level_edits.suggestions(merged, "b") == ()
    assert set(names(merged)) == {"Maltose", "Fructose", "Glucose"}


def test_a_merge_refused_is_remembered_with_the_study(misspelt: Study) -> None:
    apart = made(misspelt, level_edits.kept_apart(misspelt, "b", ["maltose"], "Maltose"))
    again = Study.from_json(apart.to_json(), apart.table)
    assert level_edits.suggestions(again, "b") == ()
    assert again.fingerprint == apart.fingerprint != misspelt.fingerprint


def test_a_level_renamed_twice_and_back_is_as_read(study: Study) -> None:
    once = made(study, level_edits.renamed(study, "b", "b0", "  no   feed "))
    assert names(once) == ["no feed", "b1", "b2"]
    twice = made(once, level_edits.renamed(once, "b", "no feed", "b0"))
    assert twice.fingerprint == study.fingerprint


def test_a_new_name_goes_along_into_order_and_control(study: Study) -> None:
    set_up = replace(study, keep={"b": ("b2", "b0")}, control={"b": "b0"})
    renamed = made(set_up, level_edits.renamed(set_up, "b", "b0", "control"))
    assert renamed.keep["b"] == ("b2", "control")
    assert renamed.control == {"b": "control"}


def test_a_level_needs_a_name(study: Study) -> None:
    with pytest.raises(LevelNameMissing, match="Level “b0” of column “b” needs a name"):
        level_edits.renamed(study, "b", "b0", " ")


def test_a_level_moves_and_stops_at_the_ends(study: Study) -> None:
    down = made(study, level_edits.moved(study, "b", "b0", 1))
    assert names(down) == ["b1", "b0", "b2"]
    assert made(down, level_edits.moved(down, "b", "b1", -1)).keep == {"b": ("b1", "b0", "b2")}
    assert made(down, level_edits.moved(down, "b", "b0", -1)).fingerprint == study.fingerprint


def test_a_level_left_out_can_be_taken_back_to_its_place(study: Study) -> None:
    out = made(replace(study, control={"b": "b1"}), level_edits.left_out(replace(study, control={"b": "b1"}), "b", "b1"))
    assert names(out) == ["b0", "b2"]
    assert out.control == {}
    assert [level.name for level in level_edits.levels_of(out, "b") if not level.analysed] == ["b1"]
    assert made(out, level_edits.taken_back(out, "b", "b1")).fingerprint == study.fingerprint


def test_merging_a_level_that_is_left_out_takes_its_rows_along() -> None:
    frame = pd.concat([crossed([[4, 4], [4, 4]]), crossed([[2, 2], [2, 2]]).replace({"b1": "B1"})])
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b")
    out = made(study, level_edits.left_out(study, "b", "B1"))
    merged = made(out, level_edits.merged(out, "b", ["B1"], "b1"))
    assert analysis.analyse(merged).design["observations"] == len(frame)


def test_three_spellings_are_merged_at_once(misspelt: Study) -> None:
    frame = crossed([[4, 4, 4], [4, 4, 4]]).replace({"b": {"b0": "Maltose", "b1": "Fructose", "b2": "Glucose"}})
    frame.loc[frame.index[[0, 12]], "b"] = "maltose"
    frame.loc[frame.index[[1]], "b"] = "MALTOSE"
    study = Study(analysis.read_table(frame, name="experiment"), "y", "a", "b", keep={"b": ("Glucose", "maltose", "Maltose", "MALTOSE")})
    (offer,) = level_edits.suggestions(study, "b")
    assert ({level.name for level in offer.levels}, offer.into.name) == ({"maltose", "MALTOSE"}, "Maltose")
    merged = made(study, level_edits.merged(study, "b", [level.name for level in offer.levels], offer.into.name))
    assert merged.relabel == {"b": {"maltose": "Maltose", "MALTOSE": "Maltose"}}
    assert merged.keep["b"] == ("Glucose", "Maltose")
    assert level_edits.suggestions(merged, "b") == ()
    apart = made(study, level_edits.kept_apart(study, "b", [level.name for level in offer.levels], offer.into.name))
    assert level_edits.suggestions(apart, "b") == ()


def test_an_offer_counts_the_rows_that_the_layout_counts(misspelt: Study) -> None:
    aside = replace(misspelt, set_aside={1: "pot fell over", 2: "pot fell over"})
    (offer,) = level_edits.suggestions(aside, "b")
    found = analysis.analyse(aside)
    counted = dict(zip(found.design["column_levels"], np.sum(found.design["counts"], axis=0).tolist(), strict=True))
    assert {level.name: level.rows for level in level_edits.levels_of(aside, "b")} == counted
    assert {level.name: level.rows for level in (*offer.levels, offer.into)}.items() <= counted.items()
