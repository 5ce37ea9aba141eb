"""The bar says what is still to do, and which stops are settled for the study as it is now."""

import re

import pandas as pd

from app.stations import STATIONS
from tests.app import opening

TITLES = [station.title for station in STATIONS]


def settled(dashboard: opening.AppTest) -> list[str]:
    told = re.search(r"Settled: ([^.]*)\.", opening.page(dashboard))
    return told[1].split(", ") if told else []


def to_do(dashboard: opening.AppTest) -> str:
    links = [link.label for link in dashboard.get("page_link")]
    return next((label for label in links if label.startswith("To do")), "")


def test_nothing_is_settled_before_a_table() -> None:
    dashboard = opening.station("bring")
    assert settled(dashboard) == []
    assert to_do(dashboard) == "To do: bring a table →"


def test_stops_settle_as_they_are_looked_at_and_open_again_after_a_change() -> None:
    dashboard = opening.station("answer", opening.sample())
    assert settled(dashboard) == ["Bring", "Lay out", "Answer"]
    assert to_do(dashboard) == "To do: ask which differ →"
    for station in STATIONS[3:]:
        dashboard.switch_page(f"stops/{station.name}.py").run()
    assert settled(dashboard) == TITLES
    assert to_do(dashboard) == ""
    dashboard.switch_page("stops/answer.py").run()
    dashboard.selectbox(key="choice_confidence").select(0.99).run()
    assert settled(dashboard) == ["Bring", "Lay out", "Answer"]
    dashboard.button(key="undo").click().run()
    assert settled(dashboard)[:3] == ["Bring", "Lay out", "Answer"]


def test_columns_without_roles_leave_lay_out_open() -> None:
    study = opening.sample()
    dashboard = opening.station("bring", opening.Study(study.table, study.response, study.row_factor, None))
    assert settled(dashboard) == ["Bring"]
    assert to_do(dashboard) == "To do: say which column is what →"


def test_levels_that_may_be_one_leave_lay_out_open() -> None:
    names = ["Ctrl", "ctrl", "Feed"]
    frame = pd.DataFrame(
        {"y": [float(k % 5) + k / 7 for k in range(36)], "a": [names[k % 3] for k in range(36)], "b": ["p"] * 18 + ["q"] * 18}
    )
    dashboard = opening.station("answer", opening.findings_of(frame).study)
    assert settled(dashboard) == ["Bring", "Answer"]
    assert to_do(dashboard) == "To do: settle which levels are one →"
