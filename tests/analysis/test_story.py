"""Changes to a story are values: they come and go, survive the file, and leave every number where it was."""

import json
from dataclasses import replace

import pandas as pd
import pytest

import analysis
from analysis import log
from analysis.story import Kept, Story
from analysis.study import Study

KEYS = ("question", "raw", "interaction", "next")


@pytest.fixture
def study() -> Study:
    frame = pd.DataFrame({"y": [1.0, 2.0, 4.0, 3.0, 5.0, 7.0, 6.0, 8.5], "a": list("ppppqqqq"), "b": list("rsrsrsrs")})
    return Study(analysis.read_table(frame, name="frame"), "y", "a", "b")


@pytest.fixture
def story() -> Story:
    told = Story().keeping(Kept("a within b", "r")).keeping(Kept("chosen cells", None, (("p", "r"), ("q", "s"))))
    return told.dropping("raw").saying("interaction", " They  depend. ").noting("next", "Ask Ann.").moving(KEYS, "next", -2)


def test_a_story_survives_the_file(study: Study, story: Story) -> None:
    told = replace(study, story=story)
    again = Study.from_json(told.to_json(), study.table)
    assert again.story == story
    assert again.to_json() == told.to_json()
    assert again.story.claims == {"interaction": "They depend."}


def test_a_study_saved_before_there_were_stories_opens(study: Study) -> None:
    without = {name: value for name, value in json.loads(study.to_json()).items() if name != "story"}
    assert Study.from_json(json.dumps(without), study.table).story == Story()


def test_the_story_changes_no_number(study: Study, story: Story) -> None:
    assert replace(study, story=story).fingerprint == study.fingerprint
    assert replace(study, model="additive").fingerprint != study.fingerprint


def test_what_is_done_twice_is_undone(story: Story) -> None:
    one = Kept("a within b", "r")
    assert one not in story.keeping(one).kept
    assert "raw" not in story.dropping("raw").dropped
    assert story.saying("interaction", " ").claims == {}
    assert story.noting("next", "").notes == {}


@pytest.mark.parametrize(
    ("key", "by", "order"),
    [
        ("next", -2, ["question", "next", "raw", "interaction"]),
        ("question", -1, ["question", "raw", "interaction", "next"]),
        ("question", 9, ["raw", "interaction", "next", "question"]),
    ],
)
def test_a_board_moves_among_the_others(key: str, by: int, order: list[str]) -> None:
    assert Story().moving(KEYS, key, by).in_order(KEYS) == order


def test_a_board_that_came_later_follows_its_neighbour(story: Story) -> None:
    assert story.in_order(("question", "raw", "light", "interaction", "next")) == ["question", "next", "raw", "light", "interaction"]
    assert story.in_order(("first", *KEYS))[0] == "first"


def test_the_log_tells_a_change_of_the_story_and_leads_back_to_it(study: Study, story: Story) -> None:
    entries = log.log([study, replace(study, story=story)], {})
    assert entries[-1].sentence == "The story was changed: comparisons kept, order of the boards, boards told, claims, notes."
    assert log.replayed(entries, lambda _: study.table).story == story
