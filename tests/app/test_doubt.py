"""Doubt: open doubts, the table of analyses, and offers that change the study with one click."""

import numpy as np
import pandas as pd
import pytest

import analysis
from analysis.findings import Findings
from analysis.rounding import p_number
from analysis.study import Study
from app import doubt_words, holds_told
from app.figures import residuals
from app.look import DESK
from tests.app import opening
from tests.app.designs import DESIGNS


def _growing() -> Study:
    rng = np.random.default_rng(4)
    rows = [(f"a{i}", f"b{j}", float(np.exp(1 + i + 0.7 * j + 0.4 * rng.normal()))) for i in range(2) for j in range(3) for _ in range(12)]
    table = analysis.read_table(pd.DataFrame(rows, columns=["a", "b", "y"]), name="growing")
    return Study(table=table, response="y", row_factor="a", column_factor="b")


def test_the_table_shows_every_analysis_with_its_p() -> None:
    found = analysis.analyse(_growing())
    sheet = holds_told.sheet(found)
    assert [row[0] for row in sheet.rows] == list(dict.fromkeys(found.holds["analysis"]))
    first = found.holds.iloc[0]
    assert sheet.rows[0][1].startswith(p_number(first["p"]))


def test_an_entry_that_answers_otherwise_says_so_in_words() -> None:
    found = analysis.analyse(_growing())
    for line in found.holds.itertuples():
        entry = next(row for row in holds_told.sheet(found).rows if row[0] == line.analysis)
        assert ("otherwise" in " ".join(entry)) or line.same is not False


def test_an_offer_changes_the_study_and_shows_before_and_after() -> None:
    dashboard = opening.station("doubt", _growing())
    assert "The spread grows with the mean" in opening.page(dashboard)
    dashboard.button(key="offer_log").click().run()
    assert not dashboard.exception
    assert opening.study_of(dashboard).scale == "log"
    assert doubt_words.CHANGED in opening.page(dashboard)
    dashboard.button(key="offer_back").click().run()
    assert opening.study_of(dashboard).scale == "none"


def test_every_doubt_and_the_sentence_stand_on_the_page() -> None:
    study = _growing()
    page = opening.page(opening.station("doubt", study))
    found = analysis.analyse(study)
    assert all(sentence.split(":")[0][:60] in page for sentence in found.doubts["sentence"])
    assert found.holds_sentence[:60] in page


@pytest.mark.parametrize("name", DESIGNS)
def test_the_envelope_is_drawn_in_residual_units(name: str) -> None:
    found = _of(name)
    band = residuals.against_bell(found, DESK).data[0]
    assert band.fill == "toself"
    assert np.nanmax(np.abs(band.y)) < 12 * found.residual_sd + 1e-12


def _of(name: str) -> Findings:
    return DESIGNS[name]()
