"""The log tells every decision in order, and its decisions lead from the file to the same study again."""

import json
from dataclasses import replace
from pathlib import Path

import pytest

import analysis
from analysis import level_edits, row_edits
from analysis.log import Entry, log, replayed
from analysis.roles import guess_roles
from analysis.study import Study

BASIL = Path(__file__).resolve().parents[2] / "sample_data" / "basil_light_feed.csv"
CHANGES = [
    lambda s: level_edits.renamed(s, "feed", "No feed", "Water only"),
    lambda s: level_edits.moved(s, "light", "Full sun", 1),
    lambda s: level_edits.left_out(s, "feed", "Feed B"),
    lambda s: level_edits.kept_apart(s, "feed", "Feed A", "Feed A+B"),
    lambda s: row_edits.set_aside(s, "9, 5-6", "pot fell over"),
    lambda s: row_edits.set_aside(s, "20", "label lost"),
    lambda s: row_edits.only_aside(s, [9, 5, 20]),
    lambda s: {"control": {"feed": "Water only"}, "adjust": "dunnett"},
    lambda s: {"model": "additive"},
    lambda s: {"scale": "log"},
    lambda s: {"scale": "none"},
    lambda s: {"confidence": 0.9, "matters": 2.5},
    lambda s: {"row_factor": "feed", "column_factor": "light"},
    lambda s: {"matters": None, "relabel": {}, "keep": {}, "control": {}},
]


def basil() -> Study:
    table = analysis.read_table(BASIL.read_bytes(), name=BASIL.name)
    roles = guess_roles(table)
    return Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit)


@pytest.fixture(scope="module")
def history() -> list[Study | None]:
    found: list[Study | None] = [None, basil()]
    for change in CHANGES:
        found.append(replace(found[-1], **change(found[-1])))
    return found


def sentences(history: list[Study | None]) -> list[str]:
    return [entry.sentence for entry in log(history, {})]


@pytest.mark.parametrize("steps", range(len(CHANGES) + 1))
def test_the_decisions_lead_from_the_file_to_the_same_study(history: list[Study | None], steps: int) -> None:
    so_far = history[: steps + 2]
    told = json.loads(json.dumps([(entry.field, entry.value) for entry in log(so_far, {})]))
    entries = [Entry("", field=field, value=value) for field, value in told]
    assert replayed(entries, basil().table).fingerprint == so_far[-1].fingerprint


def test_a_log_whose_beginning_is_lost_still_leads_there(history: list[Study | None]) -> None:
    assert replayed(log(history[6:], {}), basil().table).fingerprint == history[-1].fingerprint


def test_the_decisions_are_told_in_order(history: list[Study | None]) -> None:
    told = iter(sentences(history))
    for sentence in (
        "“basil_light_feed.csv” was read: 72 rows of data.",
        "The response is “yield (g)”.",
        "The first factor is “light”.",
        "“No feed” of “feed” is analysed as “Water only”.",
        "Analysed of “light”: “Half shade”, “Full sun”, “Deep shade”.",
        "Analysed of “feed”: “Water only”, “Feed A”, “Feed A+B”.",
        "“Feed A” and “Feed A+B” of “feed” are kept apart.",
        "Rows 9, 5 and 6 set aside.",
        "Row 20 set aside.",
        "Row 6 put back.",
        "The control level of “feed” is “Water only”.",
        "The model is fitted without the interaction.",
        "The scale analysed is log.",
        "The scale analysed is as measured.",
        "The smallest difference that matters is 2.5.",
        "The first factor is “feed”.",
        "“No feed” of “feed” goes by its own name again.",
    ):
        assert sentence in told, sentence  # looking in an iterator goes on from where it was


def test_reasons_stand_beside_the_decisions(history: list[Study | None]) -> None:
    entries = {entry.sentence: entry.reason for entry in log(history, guess_roles(basil().table).reasons)}
    assert entries["Rows 9, 5 and 6 set aside."] == "pot fell over"
    assert entries["The first factor is “light”."].startswith("suggested: 3 levels that recur")
    assert entries["The first factor is “feed”."] == "chosen"


def test_another_table_starts_another_log(history: list[Study | None]) -> None:
    frame = analysis.read_table(b"y,a,b\n1,u,v\n2,w,x\n", name="other.csv")
    assert sentences([*history, Study(frame)]) == ["“other.csv” was read: 2 rows of data.", *frame.notes]


def test_without_a_table_nothing_was_decided() -> None:
    assert log([None], {}) == ()
