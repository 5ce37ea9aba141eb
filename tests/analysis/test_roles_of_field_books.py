"""Role guesses in ten tables as people keep them: names in several languages, with dates, plots, people and remarks beside the factors."""

from collections.abc import Callable

import numpy as np
import pandas as pd
import pytest

from analysis.reading.entry import read_table
from analysis.roles import guess_roles

RANDOM = np.random.default_rng(31)
Cells = dict[str, tuple[object, ...]]


def crossed(factors: Cells, repeats: int) -> pd.DataFrame:
    """Every combination of the levels of some columns, some times over."""
    names = [*factors, "again"]
    return pd.MultiIndex.from_product([*factors.values(), range(repeats)], names=names).to_frame(index=False)


def pick(frame: pd.DataFrame, *items: object) -> np.ndarray[tuple[int], np.dtype[np.object_]]:
    """One of some cells for every row, by chance."""
    return RANDOM.choice(np.array(items, dtype=object), len(frame))


def numbers(frame: pd.DataFrame, mean: float, decimals: int) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
    """Measurements of no particular pattern."""
    return RANDOM.normal(mean, mean / 8, len(frame)).round(decimals)


# For each: the columns that are crossed, how often, the further columns, then response and factors.
BOOKS: dict[str, tuple[Cells, int, dict[str, Callable[[pd.DataFrame], object]], str, str]] = {
    "wheat, German": (
        {"Sorte": ("Bussard", "Kiebitz", "Amsel"), "N-Stufe": (0, 60, 120)},
        4,
        {
            "Parz.": lambda f: np.arange(101, 101 + len(f)),
            "Datum": lambda f: pick(f, "12.07.", "13.07."),
            "Ertrag dt/ha": lambda f: numbers(f, 62, 1),
            "Bemerkung": lambda f: pick(f, "", "", "Lager", "Hase"),
        },
        "Ertrag dt/ha",
        "Sorte N-Stufe",
    ),
    "tomatoes, French": (
        {"variété": ("Rubis", "Corail"), "arrosage": ("goutte", "pluie", "sec")},
        5,
        {
            "opérateur": lambda f: pick(f, "LM", "PA"),
            "no": lambda f: np.arange(1, len(f) + 1),
            "poids (g)": lambda f: numbers(f, 140, 1),
            "remarque": lambda f: pick(f, "", "fendue"),
        },
        "poids (g)",
        "variété arrosage",
    ),
    "bread, Spanish": (
        {"harina": ("trigo", "centeno"), "levadura": ("masa", "seca", "fresca")},
        4,
        {"lote": lambda f: pick(f, "L1", "L2", "L3"), "volumen": lambda f: numbers(f, 410, 0), "fecha": lambda f: pick(f, "2031-03-04")},
        "volumen",
        "harina levadura",
    ),
    "steel, terse": (
        {"alloy": ("A12", "A14", "B03"), "quench": ("oil", "air")},
        6,
        {"run": lambda f: RANDOM.permutation(len(f)) + 1, "HV10": lambda f: numbers(f, 310, 0), "op": lambda f: pick(f, "jk", "ts")},
        "HV10",
        "alloy quench",
    ),
    "enzyme": (
        {"pH": (5.5, 6.5, 7.5), "buffer": ("MES", "HEPES")},
        4,
        {"well": lambda f: np.arange(1, len(f) + 1), "plate": lambda f: pick(f, "P1", "P2"), "abs_450": lambda f: numbers(f, 0.8, 3)},
        "abs_450",
        "pH buffer",
    ),
    "calves, Dutch": (
        {"voer": ("gras", "mais"), "huisvesting": ("groep", "alleen")},
        8,
        {
            "diernr": lambda f: np.arange(3001, 3001 + len(f)),
            "gewicht": lambda f: numbers(f, 96, 1),
            "opmerking": lambda f: pick(f, "", "ziek"),
        },
        "gewicht",
        "voer huisvesting",
    ),
    "tiles, Italian": (
        {"smalto": ("opaco", "lucido"), "forno": (980, 1020, 1060)},
        5,
        {"pezzo": lambda f: np.arange(1, len(f) + 1), "resistenza": lambda f: numbers(f, 41, 2), "note": lambda f: pick(f, "", "crepa")},
        "resistenza",
        "smalto forno",
    ),
    "blocks with a date": (
        {"block": ("I", "II", "III", "IV"), "mulch": ("none", "straw", "bark"), "water": ("low", "high")},
        1,
        {"sampled": lambda f: pick(f, "2031-06-01"), "dry matter": lambda f: numbers(f, 12, 2), "who": lambda f: pick(f, "Ana", "Ben")},
        "dry matter",
        "mulch water",
    ),
    "counts": (
        {"trap colour": ("white", "yellow", "blue"), "crop": ("leek", "onion")},
        6,
        {
            "site": lambda f: pick(f, "north", "south"),
            "trap": lambda f: np.arange(1, len(f) + 1),
            "thrips": lambda f: RANDOM.poisson(30, len(f)),
        },
        "thrips",
        "trap colour|crop",
    ),
    "two measurements": (
        {"temp_C": (15, 20, 25), "CO2_ppm": (400, 800)},
        5,
        {
            "chamber": lambda f: pick(f, 1, 2),
            "plant_id": lambda f: np.arange(1, len(f) + 1),
            "leaf_no": lambda f: RANDOM.integers(4, 9, len(f)),
            "shoot_mass_g": lambda f: numbers(f, 3.4, 3),
        },
        "shoot_mass_g",
        "temp_C CO2_ppm",
    ),
}


def is_right(name: str) -> bool:
    """Whether the roles of a shuffled table are guessed as they are meant."""
    cells, repeats, further, response, factors = BOOKS[name]
    frame = crossed(cells, repeats).drop(columns="again")
    frame = frame.assign(**{column: make(frame) for column, make in further.items()}).sample(frac=1, random_state=5)
    frame = frame[list(RANDOM.permutation(frame.columns))]
    roles = guess_roles(read_table(frame.to_csv(index=False).encode()))
    wanted = set(factors.split("|") if "|" in factors else factors.split())
    return roles.response == response and {roles.row_factor, roles.column_factor} == wanted


def test_nine_of_ten_tables_are_understood() -> None:
    wrong = [name for name in BOOKS if not is_right(name)]
    assert len(wrong) <= 1, wrong


@pytest.mark.parametrize("name", ["wheat, German", "steel, terse", "blocks with a date"])
def test_these_are_understood_in_any_order(name: str) -> None:
    assert all(is_right(name) for _ in range(5))
