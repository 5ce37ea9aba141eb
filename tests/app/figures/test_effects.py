"""Effects are drawn as bars from zero, each as long as the engine's effect, and each set adds up to zero."""

import numpy as np
import pytest

from app.figures import effects
from app.look import DESK, PRINT
from tests.app import designs, opening


@pytest.mark.parametrize("name", ["3 by 4", "6 by 8", "20 by 3", "logarithm"])
def test_every_bar_is_an_effect_of_the_engine(name: str) -> None:
    found = designs.design(name)
    bars = effects.effects(found, DESK).data[0]
    told = found.effects
    rows, columns = found.design["row_levels"], found.design["column_levels"]
    wanted = [*told["row"].values(), *told["column"].values(), *(told["interaction"][r][c] for c in columns for r in rows)]
    np.testing.assert_array_equal(bars.y, wanted)
    assert len(bars.base or ()) == 0  # bars start at zero
    for kind in ("α", "β", "αβ"):
        mine = [y for y, (_, _, is_kind) in zip(bars.y, bars.customdata, strict=True) if is_kind == kind]
        assert sum(mine) == pytest.approx(0, abs=1e-9 * max(np.abs(bars.y)))


def test_bars_do_not_cover_each_other() -> None:
    bars = effects.effects(designs.design("20 by 3"), PRINT).data[0]
    order = np.argsort(bars.x)
    x, half = np.array(bars.x)[order], np.array(bars.width)[order] / 2
    assert (x[1:] - half[1:] >= x[:-1] + half[:-1] - 1e-12).all()


def test_without_the_interaction_there_are_two_sets() -> None:
    found = designs.basil(model="additive")
    assert len(effects.effects(found, DESK).data[0].y) == 3 + 4
    assert "αβ" not in effects.effects_caption(found)
    assert "αβ" in effects.effects_caption(designs.basil())


def test_an_empty_combination_leaves_effects_undefined_and_the_page_says_so() -> None:
    dashboard = opening.station("answer", designs.design("an empty cell").study)
    dashboard.get("button_group")[0].set_value("effects").run()
    assert not dashboard.exception
    assert "need an observation in every combination" in opening.page(dashboard)


def test_the_description_names_the_largest() -> None:
    assert "Full sun with Feed A+B" in effects.effects_alt(designs.basil())
