"""How the tests open a station: the dashboard run without a browser, with a study already on the desk."""

from functools import cache
from pathlib import Path

import pandas as pd
from streamlit.testing.v1 import AppTest

import analysis
from analysis.findings import Findings
from analysis.roles import guess_roles
from analysis.study import Study
from app import desk

ROOT = Path(__file__).resolve().parents[2]
SAMPLES = ROOT / "sample_data"
SECONDS = 60  # before a run counts as hung


@cache
def sample(name: str = "basil_light_feed.csv") -> Study:
    """Return the study that opens with a sample."""
    table = analysis.read_table((SAMPLES / name).read_bytes(), name=name)
    roles = guess_roles(table)
    return Study(table, roles.response, roles.row_factor, roles.column_factor, roles.block, roles.unit)


@cache
def findings(study: Study) -> Findings:
    """Return the engine's findings of a study."""
    return analysis.analyse(study)


def findings_of(frame: pd.DataFrame, **choices: object) -> Findings:
    """Return the findings of a frame with columns y, a, b."""
    return analysis.analyse(Study(analysis.read_table(frame, name="frame"), "y", "a", "b", **choices))  # type: ignore[arg-type]


def findings_of_file(content: bytes, response: str, row: str, column: str) -> Findings:
    """Return the findings of a file."""
    return analysis.analyse(Study(analysis.read_table(content, name="file.csv"), response, row, column))


def station(name: str, study: Study | None = None) -> AppTest:
    """Return the dashboard open at a station."""
    dashboard = AppTest.from_file(str(ROOT / "app" / "main.py"), default_timeout=SECONDS)
    if study is not None:
        dashboard.session_state["desk"] = desk.State(study=study)
    return dashboard.run().switch_page(f"stops/{name}.py").run()


def study_of(dashboard: AppTest) -> Study:
    """Return the study that is open on the desk."""
    found: Study = dashboard.session_state["desk"].study
    return found


def page(dashboard: AppTest) -> str:
    """Return all HTML of a page as one text."""
    return "\n".join(block.value for block in dashboard.html)
