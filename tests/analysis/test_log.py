"""The log tells every decision in order, and its decisions lead from the file to the same study again."""

import json
from dataclasses import replace
from pathlib import Path

import pytest

import analysis
from analysis import level_edits, reread, row_edits
from analysis.log import Entry, log, of_one_file, replayed
from analysis.reading.choices import Reading
from analysis.roles import guess_roles
from analysis.study import Study
from analysis.table import Table

BASIL = Path(__file__).resolve().parents[2] / "sample_data" / "basil_light_feed.csv"
CHANGES = [
    lambda s: level_edits.renamed(s, "feed", "No feed", "Water only"),
    lambda s: level_edits.moved(s, "light", "Full sun", 1),
    lambda s: level_edits.left_out(s, "feed", "Feed B"),
    lambda s: level_edits.kept_apart(s, "feed", ["Feed A"], "Feed A+B"),
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


def read(reading: Reading) -> Table:
    return analysis.read_table(BASIL.read_bytes(), name=BASIL.name, reading=reading)


def basil() -> Study:
    table = read(Reading())
    roles = guess_roles(table)
    return Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit)


@pytest.fixture(scope="module")
def history() -> list[Study]:
    found = [basil()]
    for change in CHANGES:
        found.append(replace(found[-1], **change(found[-1])))
    return found


def sentences(history: list[Study]) -> list[str]:
    return [entry.sentence for entry in log(history, {})]


@pytest.mark.parametrize("steps", range(len(CHANGES) + 1))
def test_the_decisions_lead_from_the_file_to_the_same_study(history: list[Study], steps: int) -> None:
    so_far = history[: steps + 1]
    told = json.loads(json.dumps([(entry.field, entry.value) for entry in log(so_far, {})]))
    entries = [Entry("", field=field, value=value) for field, value in told]
    assert replayed(entries, read).fingerprint == so_far[-1].fingerprint


def test_a_log_whose_beginning_is_lost_still_leads_there(history: list[Study]) -> None:
    assert replayed(log(history[6:], {}), read).fingerprint == history[-1].fingerprint


def test_the_decisions_are_told_in_order(history: list[Study]) -> None:
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


def test_reasons_stand_beside_the_decisions(history: list[Study]) -> None:
    entries = {entry.sentence: entry.reason for entry in log(history, guess_roles(basil().table).reasons)}
    assert entries["Rows 9, 5 and 6 set aside."] == "pot fell over"
    assert entries["The first factor is “light”."].startswith("suggested: 3 levels that recur")
    assert entries["The first factor is “feed”."] == "chosen"


def test_another_table_starts_another_log(history: list[Study]) -> None:
    other = analysis.read_table(b"y,a,b\n1,u,v\n2,w,x\n", name="other.csv")
    studies = of_one_file([None, *history, Study(other)], lambda table: table.name)
    assert sentences(studies) == ["“other.csv” was read: 2 rows of data.", *other.notes]
    assert of_one_file([None, *history], lambda table: table.name) == history


def test_without_a_table_nothing_was_decided() -> None:
    assert log(of_one_file([None], lambda table: table.name), {}) == ()


MESSY = """Trial 12, greenhouse

light;feed;yield;pot
""" + "".join(
    f"{light};{feed};{10 + 2 * place},{25 * (place % 3)};{place}\n"
    for place, (light, feed) in enumerate((a, b) for a in ("sun", "shade") for b in ("A", "B", "b") for _ in range(3))
)


def messy(reading: Reading) -> Table:
    return analysis.read_table(MESSY.encode(), name="messy.csv", reading=reading)


def test_another_reading_is_told_and_replayed_byte_for_byte() -> None:
    first = Study(messy(Reading()), "yield", "light", "feed", set_aside={5: "pot fell over"}, relabel={"feed": {"b": "B"}})
    studies = [Study(first.table), first]
    for reading in (Reading(decimal="point"), Reading(decimal="comma"), Reading(decimal="comma", header_row=4), Reading()):
        table = messy(reading)
        studies.append(reread.carried(studies[-1], table, guess_roles(table)).study)
    entries = log(studies, {})
    assert [entry.value for entry in entries if entry.field == "reading"] == [s.table.reading.to_plain() for s in (first, *studies[2:])]
    assert "Numbers are read with the point as decimal mark." in {entry.sentence for entry in entries if entry.reason == "chosen"}
    told = json.loads(json.dumps([(entry.field, entry.value) for entry in entries]))
    again = replayed([Entry("", field=field, value=value) for field, value in told], messy)
    assert again.fingerprint == studies[-1].fingerprint
    assert again.table.fingerprint == messy(Reading()).fingerprint
    assert cells(again.table) == cells(studies[-1].table)


def cells(table: Table) -> bytes:
    """Every cell of a table with its row, as one run of bytes."""
    rows = table.preview(table.rows)
    return rows.to_csv().encode()
