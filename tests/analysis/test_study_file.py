"""A study file opens as it was saved, and is refused in one sentence where it was damaged, forged, or written by a later version."""

import io
import json
import zipfile
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import pandas as pd
import pytest

import analysis
from analysis import level_edits, reread, row_edits, study_file
from analysis.reading.choices import Reading
from analysis.refusals import StudyFileDamaged, StudyFileNewer, StudyFileTooLarge
from analysis.roles import guess_roles
from analysis.story import Kept, Story
from analysis.study import Study
from analysis.study_file import Saved

SAMPLES = Path(__file__).resolve().parents[2] / "sample_data"
CHANGES = [
    lambda s: level_edits.renamed(s, "feed", "No feed", "Water only"),
    lambda s: level_edits.moved(s, "light", "Full sun", 1),
    lambda s: row_edits.set_aside(s, "9, 5-6", "pot fell over"),
    lambda s: {"control": {"feed": "Water only"}, "adjust": "dunnett"},
    lambda s: {"amounts": {"pot": False}, "matters": 2.5},
    lambda s: {"story": Story(kept=(Kept("cells", None, (("Full sun", "Feed A"),)),), notes={"design": "told"})},
]


def of_sample(name: str = "basil_light_feed.csv") -> Saved:
    content = (SAMPLES / name).read_bytes()
    table = analysis.read_table(content, name=name)
    roles = guess_roles(table)
    studies = [Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit)]
    if name.startswith("basil"):
        for change in CHANGES:
            studies.append(replace(studies[-1], **change(studies[-1])))
        points = analysis.read_table(content, name=name, reading=Reading(decimal="point"))
        studies.append(reread.carried(studies[-1], points, guess_roles(points)).study)
    return Saved(name, content, tuple(studies), len(studies) - 1)


@pytest.fixture(scope="module")
def saved() -> Saved:
    return of_sample()


@pytest.mark.parametrize("name", ["basil_light_feed.csv", "coating_primer_cure.csv", "yeast_sugar.xlsx"])
def test_a_study_file_opens_as_it_was_saved(name: str) -> None:
    saved = of_sample(name)
    again = study_file.opened(study_file.packed(saved))
    assert (again.name, again.content, again.place) == (saved.name, saved.content, saved.place)
    assert [study.fingerprint for study in again.studies] == [study.fingerprint for study in saved.studies]
    assert [study.choices() for study in again.studies] == [study.choices() for study in saved.studies]
    left, right = analysis.analyse(again.study), analysis.analyse(saved.study)
    pd.testing.assert_frame_equal(left.used_table, right.used_table, check_exact=True)
    assert left.to_dict() == right.to_dict()


def test_an_earlier_study_can_be_the_open_one(saved: Saved) -> None:
    again = study_file.opened(study_file.packed(replace(saved, place=2)))
    assert again.study.fingerprint == saved.studies[2].fingerprint


def test_the_same_study_makes_the_same_file(saved: Saved) -> None:
    assert study_file.packed(saved) == study_file.packed(saved)


def test_a_long_history_keeps_its_end(saved: Saved) -> None:
    long = tuple(replace(saved.studies[0], matters=1.0 + k) for k in range(study_file.MOST_STUDIES + 50))
    again = study_file.opened(study_file.packed(replace(saved, studies=long, place=len(long) - 3)))
    assert len(again.studies) == study_file.MOST_STUDIES
    assert again.study.matters == 1.0 + len(long) - 3


def test_a_study_file_is_told_from_a_workbook(saved: Saved) -> None:
    assert study_file.is_one(study_file.packed(saved))
    assert not study_file.is_one((SAMPLES / "yeast_sugar.xlsx").read_bytes())
    assert not study_file.is_one(b"light,feed\n")


def test_any_byte_turned_is_noticed(saved: Saved) -> None:
    whole = study_file.packed(saved)
    for place in range(0, len(whole), max(1, len(whole) // 97)):
        spoilt = bytearray(whole)
        spoilt[place] ^= 0x41
        try:
            again = study_file.opened(bytes(spoilt))
        except (StudyFileDamaged, StudyFileNewer):
            continue
        # A byte that no reader looks at, such as a time of day in the archive, may turn without harm.
        assert [study.fingerprint for study in again.studies] == [study.fingerprint for study in saved.studies]


@pytest.mark.parametrize("kept", [0, 3, 40, 500, -1, -30])
def test_a_file_cut_short_is_refused(saved: Saved, kept: int) -> None:
    with pytest.raises(StudyFileDamaged, match="damaged"):
        study_file.opened(study_file.packed(saved)[:kept])


def forged(saved: Saved, forge: Callable[[dict[str, Any]], object], content: bytes | None = None) -> bytes:
    """Return a study file whose record was changed by hand, with a fitting seal."""
    told = json.loads(study_file.record(saved))
    del told["seal"]
    forge(told)
    told["seal"] = study_file._seal(told)
    return archive({study_file.RECORD: json.dumps(told).encode(), study_file.CONTENT: saved.content if content is None else content})


def archive(parts: dict[str, bytes]) -> bytes:
    filled = io.BytesIO()
    with zipfile.ZipFile(filled, "w", zipfile.ZIP_DEFLATED) as made:
        for name, part in parts.items():
            made.writestr(name, part)
    return filled.getvalue()


def set_in(step: int, **changes: Any) -> Callable[[dict[str, Any]], object]:
    return lambda told: told["studies"][step]["changes"].update(changes)


@pytest.mark.parametrize(
    "forge",
    [
        set_in(0, response=5),
        set_in(0, response="no such column"),
        set_in(0, keep={"feed": 5}),
        set_in(0, keep=["feed"]),
        set_in(0, keep={"no such column": ["x"]}),
        set_in(0, relabel={"feed": {"No feed": None}}),
        set_in(0, set_aside={"x": "y"}),
        set_in(0, set_aside={"2": ""}),
        set_in(0, confidence=7),
        set_in(0, confidence=float("nan")),
        set_in(0, model="__import__('os')"),
        set_in(0, scale="power=1e999999"),
        set_in(0, amounts={"pot": "yes"}),
        set_in(0, story={"kept": [["cells", None, [["a"]]]]}),
        set_in(0, story={"kept": 5}),
        set_in(0, story=[]),
        set_in(0, table="x"),
        set_in(0, matters=3.5),  # a decision that the fingerprint does not vouch for
        lambda told: told["studies"][0].pop("changes"),
        lambda told: told["studies"][0].update(reading={"separator": "hashes"}),
        lambda told: told["studies"][0].update(reading=["x"]),
        lambda told: told["studies"].clear(),
        lambda told: told["studies"].insert(0, 5),
        lambda told: told.update(studies={}),
        lambda told: told.update(open=99),
        lambda told: told.update(open=True),
        lambda told: told.update(open=-1),
        lambda told: told.update(name=7),
        lambda told: told.update(version="1"),
        lambda told: told.pop("format"),
        lambda told: told.update(studies=told["studies"] * 400),
    ],
)
def test_a_forged_record_is_refused(saved: Saved, forge: Callable[[dict[str, Any]], object]) -> None:
    with pytest.raises(StudyFileDamaged, match="damaged or was changed"):
        study_file.opened(forged(saved, forge))


@pytest.mark.parametrize("told", [b"", b"[]", b"{}", b"null", b"\xff\xfe", b"[" * 200_000, b'{"format": "crossgrain study"}'])
def test_a_record_of_another_shape_is_refused(saved: Saved, told: bytes) -> None:
    with pytest.raises(StudyFileDamaged):
        study_file.opened(archive({study_file.RECORD: told, study_file.CONTENT: saved.content}))


def test_another_file_inside_is_refused(saved: Saved) -> None:
    with pytest.raises(StudyFileDamaged):
        study_file.opened(forged(saved, lambda told: None, saved.content.replace(b"26.9", b"26.8")))


def test_more_parts_than_two_are_refused(saved: Saved) -> None:
    with pytest.raises(StudyFileDamaged):
        study_file.opened(archive({study_file.RECORD: b"{}", study_file.CONTENT: b"", "../evil": b""}))


def test_a_later_version_is_told_as_such(saved: Saved) -> None:
    with pytest.raises(StudyFileNewer, match=r"newer Crossgrain \(9.1\)"):
        study_file.opened(forged(saved, lambda told: told.update(version=2, written_by="9.1")))


def test_what_unpacks_too_far_is_refused(saved: Saved) -> None:
    with pytest.raises(StudyFileTooLarge, match="32 MiB"):
        study_file.opened(archive({study_file.RECORD: bytes(study_file.LARGEST_RECORD + 1), study_file.CONTENT: b""}))
