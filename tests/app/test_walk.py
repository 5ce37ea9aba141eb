"""The walk-through shows one board at a time, moves by every key of a presenter, and comes back to its board by the address."""

import pytest

from app import boards, walk
from tests.app import designs, opening


def test_the_walk_goes_through_the_story_and_back() -> None:
    told = boards.story(opening.findings(opening.sample()))
    dashboard = opening.station("tell", opening.sample())
    dashboard.button(key="tell_start").click().run()
    assert not dashboard.exception
    for place, board in enumerate(told, start=1):
        assert dashboard.query_params[walk.PLACE] == str(place)
        assert board.claim in opening.page(dashboard)
        assert f"{place} of {len(told)}" in opening.page(dashboard)
        dashboard.button(key="tell_next").click().run()
    assert dashboard.query_params[walk.PLACE] == str(len(told))
    dashboard.button(key="tell_back").click().run()
    assert dashboard.query_params[walk.PLACE] == str(len(told) - 1)
    dashboard.button(key="tell_leave").click().run()
    assert walk.PLACE not in dashboard.query_params
    dashboard.get_by_key("save_deck")


@pytest.mark.parametrize(("key", "place"), [("home", 1), ("end", 4), ("space", 3), ("pagedown", 3), ("pageup", 1), ("up", 1), ("down", 3)])
def test_every_key_of_a_presenter_has_its_button(key: str, place: int) -> None:
    dashboard = opening.station("tell", opening.sample())
    dashboard.query_params[walk.PLACE] = "2"
    dashboard.run()
    dashboard.button(key=f"tell_{key}").click().run()
    assert dashboard.query_params[walk.PLACE] == str(place)


@pytest.mark.parametrize(("asked", "shown"), [("9", "4 of 4"), ("0", "1 of 4"), ("x", "1 of 4")])
def test_an_address_beyond_the_story_shows_the_nearest_board(asked: str, shown: str) -> None:
    dashboard = opening.station("tell", opening.sample())
    dashboard.query_params[walk.PLACE] = asked
    dashboard.run()
    assert shown in opening.page(dashboard)


@pytest.mark.parametrize("name", designs.DESIGNS)
def test_a_table_is_cut_to_what_a_low_screen_holds(name: str) -> None:
    for board in boards.story(designs.design(name)):
        if board.table is not None and len(board.table):
            shown = walk.rows_that_fit(board.table)
            assert shown == 1 or sum(walk.lines_of(board.table)[:shown]) <= walk.LINES
