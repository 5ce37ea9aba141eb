"""Problems that an experimenter meets, planted into clean invented experiments: what a doubt should name at the top."""

from collections.abc import Callable, Mapping, Sequence
from typing import Any

import numpy as np
import pandas as pd

import analysis
from tests.analysis.experiments import analysed

Random = np.random.Generator
Plant = Callable[[pd.DataFrame, Random], pd.DataFrame]
FULL: Sequence[Sequence[int]] = [[12] * 3] * 2


def experiment(counts: Sequence[Sequence[int]], rng: Random, interaction: float = 0.0) -> pd.DataFrame:
    """Return a clean experiment with normal errors of spread 1, its rows in random order."""
    rows = [
        (f"a{i}", f"b{j}", 10 + 2 * i + j + interaction * i * j)
        for i, line in enumerate(counts)
        for j, n in enumerate(line)
        for _ in range(n)
    ]
    frame = pd.DataFrame(rows, columns=["a", "b", "expected"]).sample(frac=1, random_state=int(rng.integers(1 << 30)))
    frame = frame.reset_index(drop=True)
    return frame.assign(y=frame["expected"] + rng.normal(size=len(frame)))


def _at(frame: pd.DataFrame, row: int, value: float) -> pd.DataFrame:
    y = frame["y"].copy()
    y[row] = value
    return frame.assign(y=y)


def _cell(frame: pd.DataFrame) -> "pd.Series[bool]":
    return (frame["a"] == "a1") & (frame["b"] == "b1")


def _blocked(frame: pd.DataFrame) -> pd.DataFrame:
    block = frame.groupby(["a", "b"]).cumcount() % 4
    return frame.assign(block=[f"k{k}" for k in block], shift=block)


def _changing(f: pd.DataFrame) -> pd.DataFrame:
    return f.assign(y=f["y"] + 1.5 * f["shift"] * np.where(f["a"] == "a0", 1, -1))


def _readings(frame: pd.DataFrame, rng: Random) -> pd.DataFrame:
    frame = frame.sort_values(["a", "b"], kind="stable").reset_index(drop=True)
    plant = np.arange(len(frame)) // 4
    return frame.assign(y=frame["expected"] + rng.normal(size=plant.max() + 1)[plant] + 0.3 * rng.normal(size=len(frame)), plant=plant)


def _swapped(frame: pd.DataFrame) -> pd.DataFrame:
    one, other = int(frame["expected"].argmin()), int(frame["expected"].argmax())
    y = frame["y"].copy()
    y[one], y[other] = y[other], y[one]
    return frame.assign(y=y)


def _multiplied(f: pd.DataFrame, r: Random) -> pd.DataFrame:
    return f.assign(y=np.exp((f["expected"] - 10) * 0.5) * 10 + 0.9 * r.normal(size=len(f)))


def _crossed(f: pd.DataFrame, r: Random) -> pd.DataFrame:
    sign = np.where(f["a"] == "a0", 1.0, -1.0) * (f["b"].str[1].astype(int) - 1)
    return f.assign(y=10 + 2 * sign + r.normal(size=len(f)))


PLANTS: Mapping[str, tuple[str, Plant]] = {
    "one outlier": ("one_observation", lambda f, r: _at(f, 7, f["y"][7] + 7)),
    "unit slip of ten": ("one_observation", lambda f, r: _at(f, 11, f["y"][11] * 10)),
    "unit slip of a thousand": ("one_observation", lambda f, r: _at(f, 3, f["y"][3] / 1000)),
    "swapped pair": ("one_observation", lambda f, r: _swapped(f.assign(y=f["y"] + 2 * (f["expected"] - 10)))),
    "drift": ("order", lambda f, r: f.assign(y=f["y"] + np.linspace(0, 3.5, len(f)))),
    "warming up": ("order", lambda f, r: f.assign(y=f["y"] - 5 * np.exp(-np.arange(len(f)) / 15))),
    "fan": ("spread_grows_with_mean", lambda f, r: f.assign(y=4 * f["expected"] + (f["expected"] - 9.5) * r.normal(size=len(f)))),
    "log-normal": ("spread_grows_with_mean", lambda f, r: f.assign(y=np.exp(f["expected"] / 2 + 0.4 * r.normal(size=len(f))))),
    "counts": ("spread_grows_with_mean", lambda f, r: f.assign(y=r.poisson(3 * np.exp((f["expected"] - 10) * 0.9)) + 1.0)),
    "one loose cell": ("spread_by_cell", lambda f, r: f.assign(y=f["expected"] + np.where(_cell(f), 5, 1) * r.normal(size=len(f)))),
    "one loose row": ("spread_by_cell", lambda f, r: f.assign(y=f["expected"] + np.where(f["a"] == "a0", 4, 1) * r.normal(size=len(f)))),
    "unit slip in one cell": ("spread_by_cell", lambda f, r: f.assign(y=np.where(_cell(f), 10, 1) * f["y"])),
    "two humps": ("shape", lambda f, r: f.assign(y=f["expected"] + 3 * r.choice([-1, 1], size=len(f)) + 0.6 * r.normal(size=len(f)))),
    "heavy tails": ("shape", lambda f, r: f.assign(y=f["expected"] + np.where(r.random(len(f)) < 0.2, 7, 1) * r.normal(size=len(f)))),
    "skew": ("shape", lambda f, r: f.assign(y=f["expected"] + 2 * r.exponential(size=len(f)))),
    "coarse rounding": ("shape", lambda f, r: f.assign(y=3 * np.round(f["y"] / 3))),
    "block by factor": ("block_pattern", lambda f, r: _changing(_blocked(f))),
    "repeated readings": ("unit", _readings),
    "crossing": ("scale", _crossed),
    "interaction of the scale": ("scale", _multiplied),
}  # fmt: skip


def planted(name: str, seed: int, counts: Sequence[Sequence[int]] = FULL) -> analysis.Findings:
    """Return the findings of an experiment with one planted problem."""
    rng = np.random.default_rng([seed, *name.encode()])
    frame = PLANTS[name][1](experiment(counts, rng), rng)
    choices: dict[str, Any] = {"block": "block"} if "block" in frame else {}
    return analysed(frame[[c for c in ("a", "b", "block", "y") if c in frame]], **choices)


CLEAN: Mapping[str, Sequence[Sequence[int]]] = {
    "balanced": [[6] * 3] * 2,
    "large": [[10] * 4] * 3,
    "unequal": [[4, 5, 3], [6, 4, 5]],
    "very unequal": [[20, 8], [5, 15]],
    "three a cell": [[3] * 3] * 3,
    "two a cell": [[2] * 4] * 3,
    "blocked": [[4] * 3] * 3,
}


def clean(name: str, seed: int) -> analysis.Findings:
    """Return the findings of an experiment without a problem."""
    rng = np.random.default_rng([seed, *name.encode()])
    frame = experiment(CLEAN[name], rng, interaction=0.5)
    if name != "blocked":
        return analysed(frame[["a", "b", "y"]])
    frame = _blocked(frame)
    return analysed(frame.assign(y=frame["y"] + frame["shift"])[["a", "b", "block", "y"]], block="block")
