"""Studies kept on the machine: written whole, found again, limited in number, and never outside the user's own folder."""

import os
import stat
from dataclasses import replace
from pathlib import Path

import pytest

from analysis import study_file
from analysis.refusals import StudyFileDamaged, StudyNotKept
from analysis.study_file import Saved
from app import keeping
from tests.app import opening


@pytest.fixture(autouse=True)
def home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv(keeping.HOME, str(tmp_path / "home"))
    return tmp_path / "home"


def saved(*matters: float) -> Saved:
    study = opening.sample()
    studies = (study, *(replace(study, matters=size) for size in matters))
    return Saved(study.table.name, (opening.SAMPLES / study.table.name).read_bytes(), studies, len(studies) - 1)


def test_nothing_is_written_by_looking(home: Path) -> None:
    assert keeping.earlier() == ()
    assert not home.exists()


def test_a_study_is_found_again() -> None:
    place = keeping.new_place()
    keeping.keep(place, saved(2.0, 3.0))
    (one,) = keeping.earlier()
    assert (one.place, one.name, one.factors, one.steps) == (place, "basil_light_feed.csv", ("light", "feed"), 3)
    assert keeping.kept(place).study.matters == 3.0
    keeping.forget(place)
    assert keeping.earlier() == ()
    with pytest.raises(StudyNotKept, match="not kept on this machine"):
        keeping.kept(place)


def test_a_change_writes_the_decisions_and_not_the_table_again(home: Path) -> None:
    place = keeping.new_place()
    keeping.keep(place, saved())
    table = next(home.rglob("table"))
    before = table.stat().st_mtime_ns
    keeping.keep(place, saved(4.0))
    assert table.stat().st_mtime_ns == before
    assert keeping.kept(place).study.matters == 4.0
    assert {file.name for file in table.parent.iterdir()} == {"table", "study.json"}


@pytest.mark.skipif(os.name == "nt", reason="Windows has no such permissions")
def test_only_the_user_may_read_it(home: Path) -> None:
    keeping.keep(keeping.new_place(), saved())
    for file in home.rglob("*"):
        if file.is_file():
            assert stat.S_IMODE(file.stat().st_mode) == 0o600


def test_the_oldest_go_and_a_study_never_changed_makes_room_for_the_same_file(home: Path) -> None:
    for k in range(keeping.MOST + 3):
        place = keeping.new_place()
        keeping.keep(place, saved(1.0 + k))
        os.utime(home / "studies" / place / "study.json", (k, k))
    assert len(keeping.earlier()) == keeping.MOST
    assert keeping.earlier()[-1].when == 3
    for _ in range(3):
        keeping.keep(keeping.new_place(), saved())
    assert [one.steps for one in keeping.earlier()].count(1) == 1


@pytest.mark.parametrize("place", ["../../etc", "..", "", "ABCDEF123456", "0123456789ab/..", "0123456789abc"])
def test_a_name_that_leads_elsewhere_is_no_study(place: str, tmp_path: Path) -> None:
    (tmp_path / "precious").mkdir()
    with pytest.raises(StudyNotKept):
        keeping.kept(place)
    keeping.forget(place)
    assert (tmp_path / "precious").is_dir()


def test_a_damaged_record_is_refused_and_not_offered(home: Path) -> None:
    place = keeping.new_place()
    keeping.keep(place, saved())
    file = home / "studies" / place / "study.json"
    file.write_bytes(file.read_bytes()[:-20])
    assert keeping.earlier() == ()
    with pytest.raises(StudyFileDamaged):
        keeping.kept(place)


def test_another_table_in_the_folder_is_noticed(home: Path) -> None:
    place = keeping.new_place()
    keeping.keep(place, saved())
    (home / "studies" / place / "table").write_bytes(b"light,feed,yield (g)\n")
    with pytest.raises(StudyFileDamaged):
        keeping.kept(place)


@pytest.mark.parametrize(("platform", "part"), [("linux", "crossgrain"), ("darwin", "Application Support"), ("win32", "Crossgrain")])
def test_the_folder_is_where_programs_keep_data(platform: str, part: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv(keeping.HOME)
    monkeypatch.setattr("sys.platform", platform)
    assert part in str(keeping.folder())
    assert opening.ROOT not in keeping.folder().parents


def test_how_long_ago() -> None:
    assert keeping.ago(0.0, now=2 * 86400 + 3 * 3600 + 240) == {"days": 2, "hours": 3, "minutes": 4}


def test_the_record_is_the_one_of_a_study_file() -> None:
    assert study_file.record(saved()).startswith(b'{"format": "crossgrain study"')


def test_large_tables_make_room_sooner(monkeypatch: pytest.MonkeyPatch) -> None:
    one = len(saved().content)
    monkeypatch.setattr(keeping, "MOST_BYTES", 3 * one)
    places = [keeping.new_place() for _ in range(5)]
    for k, place in enumerate(places):
        keeping.keep(place, saved(1.0 + k))
        os.utime(keeping.folder() / place / "study.json", (k, k))
    assert {kept.place for kept in keeping.earlier()} == set(places[2:])


def test_the_table_just_opened_is_never_removed(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(keeping, "MOST_BYTES", 1)
    place = keeping.new_place()
    keeping.keep(place, saved())
    assert [kept.place for kept in keeping.earlier()] == [place]
