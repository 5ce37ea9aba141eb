"""The trend figure draws the engine's means and lines along the amounts, at their true places."""

import numpy as np
import pandas as pd
import pytest

from analysis.findings import Findings
from app.figures import trend
from app.look import DESK
from tests.app import opening

DOSES = (0.0, 5.0, 10.0, 40.0)


def dosed(doses: tuple[float, ...] = DOSES, **choices: object) -> Findings:
    rng = np.random.default_rng(8)
    rows = [(kind, dose, 20 + 3 * k + dose / 5 + rng.normal()) for k, kind in enumerate(("p", "q")) for dose in doses for _ in range(5)]
    return opening.findings_of(pd.DataFrame(rows, columns=["a", "b", "y"]), **choices)


@pytest.mark.parametrize("scale", ["none", "log", "sqrt"])
def test_means_and_lines_are_the_engines(scale: str) -> None:
    found = dosed(scale=scale)
    *levels, curved, straight, means = trend.trend(found, DESK, "b").data
    frame = found.trend_curves[found.trend_curves["factor"] == "b"]
    average = frame[frame["within"].isna()]
    assert tuple(means.x) == DOSES
    np.testing.assert_array_equal(straight.x, average["amount"])
    np.testing.assert_array_equal(straight.y, found.observed.scale.back(average["straight"].to_numpy()))
    np.testing.assert_array_equal(curved.y, found.observed.scale.back(average["curved"].to_numpy()))
    table = found.marginal_means["b"]
    wanted = table["mean"] if scale == "none" else [told["estimate"] for told in table["told"]]
    np.testing.assert_array_equal(means.y, wanted)
    for level, line in zip(("p", "q"), levels[::2], strict=True):
        np.testing.assert_array_equal(line.y, found.observed.scale.back(frame.loc[frame["within"] == level, "straight"].to_numpy()))


def test_the_departure_is_told() -> None:
    found = dosed()
    tested = found.trends[(found.trends["part"] == "departure") & found.trends["within"].isna()].iloc[0]
    assert f"F = {tested['f']:.3g}"[:8] in trend.trend_caption(found, "b")
    assert "leave nothing over" in trend.trend_caption(dosed((1.0, 2.0, 4.0)), "b")


def test_the_figure_stands_at_compare() -> None:
    dashboard = opening.station("compare", dosed().study)
    dashboard.selectbox(key="compare_family").select("trend of b").run()
    assert not dashboard.exception
    dashboard.get_by_key("trend")
    assert "Y rises with b" in opening.page(dashboard)
