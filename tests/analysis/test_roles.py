"""Role guesses: ten tables with shuffled columns, and what a block, a unit or a plain number is taken for."""

import numpy as np
import pandas as pd
import pytest

from analysis.reading.entry import read_table
from analysis.roles import Roles, guess_roles
from tests.analysis.reading.files import read

RANDOM = np.random.default_rng(7)


def crossed(**factors: tuple[object, ...]) -> pd.DataFrame:
    """Every combination of the levels of some columns."""
    return pd.MultiIndex.from_product(factors.values(), names=factors.keys()).to_frame(index=False)


def measured(frame: pd.DataFrame, name: str, scale: float = 1.0, decimals: int = 2) -> pd.DataFrame:
    """A frame with measurements of no particular pattern."""
    return frame.assign(**{name: (scale * RANDOM.lognormal(2, 0.3, len(frame))).round(decimals)})


# Ten invented tables: the frame, then response, factors, block and unit.
TABLES = {
    "words": (
        measured(crossed(feed=("hay", "oats"), shade=("none", "half", "full"), n=(1, 2, 3)).drop(columns="n"), "yield"),
        "yield",
        "feed shade",
        None,
        None,
    ),
    "coded": (measured(crossed(dose=(0, 50, 200), temp=(10, 20), n=(1, 2, 3, 4)).drop(columns="n"), "y"), "y", "dose temp", None, None),
    "counts": (
        measured(crossed(line=("A", "B"), diet=("lean", "rich"), n=tuple(range(6))).drop(columns="n"), "eggs", 9, 0),
        "eggs",
        "line diet",
        None,
        None,
    ),
    "blocks": (
        measured(crossed(block=(1, 2, 3, 4), variety=("Rex", "Nova", "Lux"), nitrogen=(0, 40, 80)), "grain"),
        "grain",
        "variety nitrogen",
        "block",
        None,
    ),
    "plot id": (
        measured(
            crossed(mulch=("straw", "bark"), water=("low", "high"), n=tuple(range(5))).drop(columns="n").assign(plot=range(1, 21)), "mass"
        ),
        "mass",
        "mulch water",
        None,
        None,
    ),
    "leaves": (
        measured(crossed(light=("red", "blue"), co2=("low", "high"), pot=("p1", "p2", "p3"), leaf=(1, 2, 3, 4)), "area"),
        "area",
        "light co2",
        None,
        "pot",
    ),
    "run order": (
        measured(
            crossed(alloy=("X1", "X2", "X3"), heat=(600, 700), n=(1, 2, 3)).drop(columns="n").assign(order=RANDOM.permutation(18) + 1),
            "strength",
        ),
        "strength",
        "alloy heat",
        None,
        None,
    ),
    "one each": (
        measured(crossed(soil=("clay", "loam", "sand"), crop=("rye", "oat", "pea", "bean")), "carbon"),
        "carbon",
        "soil crop",
        None,
        None,
    ),
    "two readings": (
        measured(measured(crossed(sex=("f", "m"), drug=("a", "b", "c"), n=(1, 2, 3)).drop(columns="n"), "score"), "remark", 3, 0),
        "score",
        "sex drug",
        None,
        None,
    ),
    "sites": (
        measured(
            crossed(site=("north", "south", "west"), seed=("early", "late"), depth=(2, 4, 6), n=(1, 2)).drop(columns="n"), "count", 20, 0
        ),
        "count",
        "seed depth",
        "site",
        None,
    ),
}


@pytest.mark.parametrize(("frame", "response", "factors", "block", "unit"), TABLES.values(), ids=TABLES.keys())
def test_roles_of_shuffled_columns(frame: pd.DataFrame, response: str, factors: str, block: str | None, unit: str | None) -> None:
    for seed in range(3):
        shuffled = frame.sample(frac=1, axis=1, random_state=seed).sample(frac=1, random_state=seed)
        roles = guess_roles(read(shuffled.to_csv(index=False)))
        assert roles.response == response
        assert {roles.row_factor, roles.column_factor} == set(factors.split())
        assert (roles.block, roles.unit) == (block, unit)
        assert set(roles.reasons) == {name for name in (response, *factors.split(), block, unit) if name}


def test_reasons_are_a_few_words() -> None:
    roles = guess_roles(read(TABLES["blocks"][0].to_csv(index=False)))
    assert all(0 < len(reason.split()) <= 12 for reason in roles.reasons.values())


def test_a_table_without_factors() -> None:
    roles = guess_roles(read("id,y\n1,1.5\n2,2.5\n3,3.5\n4,1.25\n"))
    assert (roles.response, roles.row_factor, roles.column_factor) == ("y", None, None)


def test_a_grid_has_its_roles() -> None:
    roles = guess_roles(read("Cultivar \\ Shade,none,half\nRex,5.1,4.2\nNova,6.4,5.5\n"))
    assert roles == Roles("value", "Cultivar", "Shade", None, None, roles.reasons)


def test_frames_have_roles_too() -> None:
    roles = guess_roles(read_table(TABLES["words"][0]))
    assert (roles.response, roles.row_factor, roles.column_factor) == ("yield", "feed", "shade")
