"""The walk-through shows one board at a time, moves by every key of a presenter, and comes back to its board by the address."""

import html

import pytest

from app import boards, tell_words, walk
from tests.app import designs, opening


def test_the_walk_goes_through_the_story_and_back() -> None:
    told = boards.story(opening.findings(opening.sample()))
    dashboard = opening.station("tell", opening.sample())
    dashboard.button(key="tell_start").click().run()
    assert not dashboard.exception
    for place, board in enumerate(told, start=1):
        assert dashboard.query_params[walk.PLACE] == str(place)
        assert html.escape(board.claim) in opening.page(dashboard)
        assert f"{place} of {len(told)}" in opening.page(dashboard)
        dashboard.button(key="tell_next").click().run()
    assert dashboard.query_params[walk.PLACE] == str(len(told))
    dashboard.button(key="tell_back").click().run()
    assert dashboard.query_params[walk.PLACE] == str(len(told) - 1)
    dashboard.button(key="tell_leave").click().run()
    assert walk.PLACE not in dashboard.query_params
    dashboard.get_by_key("save_deck")


@pytest.mark.parametrize(("key", "place"), [("home", 1), ("end", 8), ("space", 3), ("pagedown", 3), ("pageup", 1), ("up", 1), ("down", 3)])
def test_every_key_of_a_presenter_has_its_button(key: str, place: int) -> None:
    dashboard = opening.station("tell", opening.sample())
    dashboard.query_params[walk.PLACE] = "2"
    dashboard.run()
    dashboard.button(key=f"tell_{key}").click().run()
    assert dashboard.query_params[walk.PLACE] == str(place)


@pytest.mark.parametrize(("asked", "shown"), [("99", "8 of 8"), ("0", "1 of 8"), ("x", "1 of 8")])
def test_an_address_beyond_the_story_shows_the_nearest_board(asked: str, shown: str) -> None:
    dashboard = opening.station("tell", opening.sample())
    dashboard.query_params[walk.PLACE] = asked
    dashboard.run()
    assert shown in opening.page(dashboard)


def test_a_key_hides_the_claims_until_the_group_has_looked() -> None:
    told = boards.story(opening.findings(opening.sample()))
    dashboard = opening.station("tell", opening.sample())
    dashboard.button(key="tell_start").click().run()
    dashboard.button(key="tell_next").click().run()
    dashboard.button(key="tell_hide").click().run()
    assert told[1].claim not in opening.page(dashboard)
    assert told[1].evidence not in opening.page(dashboard)
    dashboard.button(key="tell_next").click().run()
    assert told[2].claim not in opening.page(dashboard)
    dashboard.button(key="tell_hide").click().run()
    assert html.escape(told[2].claim) in opening.page(dashboard)
    dashboard.button(key="tell_next").click().run()
    assert html.escape(told[3].claim) not in opening.page(dashboard)
    dashboard.button(key="tell_hide").click().run()
    dashboard.button(key="tell_hide").click().run()  # shown already: none waits any longer
    dashboard.button(key="tell_next").click().run()
    assert html.escape(told[4].claim) in opening.page(dashboard)


def test_a_reload_comes_back_to_the_same_board_without_the_session() -> None:
    told = boards.story(opening.findings(opening.sample()))
    dashboard = opening.station("tell", opening.sample())
    dashboard.button(key="tell_start").click().run()
    dashboard.button(key="tell_next").click().run()
    again = opening.station("tell")
    for entry in (walk.PLACE, walk.WALK):
        again.query_params[entry] = dashboard.query_params[entry]
    again.run()
    assert html.escape(told[1].claim) in opening.page(again)


def test_the_speakers_window_follows_with_the_notes() -> None:
    told = boards.story(opening.findings(opening.sample()))
    dashboard = opening.station("tell", opening.sample())
    dashboard.button(key="tell_start").click().run()
    speaker = opening.station("tell")
    speaker.query_params[walk.SPEAKER] = dashboard.query_params[walk.WALK]
    for place in (1, 2):
        speaker.run()
        assert f"{place} of {len(told)}" in opening.page(speaker)
        assert html.escape(told[place - 1].notes) in opening.page(speaker)
        assert html.escape(told[place].claim) in opening.page(speaker)
        dashboard.button(key="tell_next").click().run()
    dashboard.button(key="tell_hide").click().run()
    speaker.run()
    assert tell_words.STILL_HIDDEN in opening.page(speaker)


def test_a_window_that_follows_nothing_says_so() -> None:
    speaker = opening.station("tell")
    speaker.query_params[walk.SPEAKER] = "unknown"
    speaker.run()
    assert tell_words.NOTHING_FOLLOWED.replace("’", "’") in opening.page(speaker)


@pytest.mark.parametrize("name", designs.DESIGNS)
def test_a_table_is_cut_to_what_a_low_screen_holds(name: str) -> None:
    for board in boards.story(designs.design(name)):
        if board.table is not None and len(board.table):
            shown = walk.rows_that_fit(board.table)
            assert shown == 1 or sum(walk.lines_of(board.table)[:shown]) <= walk.LINES
