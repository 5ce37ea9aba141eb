"""A column made plain at once gives what its cells give one by one."""

import random

import numpy as np
import pyarrow as pa
import pytest

from analysis.reading import plain_texts, responses
from analysis.reading.half_read import Written
from analysis.reading.marks import Known
from analysis.reading.plain_texts import Plain
from analysis.refusals import Refusal

UNITS = ["", " mg", "mg", "%", " kg/ha", " μm", "°C", " m2", "*", " x", "e"]
ODD = ["", "NA", "-", "<0.5", "abc", "1 234", "12.5*", "3 kg", "1,5", "2.5 mg", " 4.5", "1.234,5"]


def column(chance: random.Random) -> list[str]:
    """A column in one style, a few of its cells in another."""
    comma, unit, odd = chance.random() < 0.5, chance.choice(UNITS), chance.choice([0, 0, 0.1, 0.5])
    cells = []
    for _ in range(chance.randint(1, 12)):
        number = chance.choice([f"{chance.uniform(0, 100):.{chance.randint(0, 4)}f}", "1.234", "-0.5", "1e5", "1.5e-3", "+2.5", ".5", "5."])
        plain = (number.replace(".", ",") if comma else number) + unit * (chance.random() < 0.9)
        cells.append(chance.choice(ODD) if chance.random() < odd else plain)
    return cells


def outcome(cells: list[str], known: Known) -> tuple[object, ...]:
    """Everything that reading gives, or the sentence of a refusal."""
    written = Written("y", pa.array(cells, pa.string()), None, np.arange(2, len(cells) + 2), None, known)
    try:
        found = responses.read(written)
    except Refusal as refusal:
        return (str(refusal),)
    return (found.values.tobytes(), found.pivot, found.offsets.tobytes(), found.unit, found.missing, found.notes)


def test_at_once_and_one_by_one(monkeypatch: pytest.MonkeyPatch) -> None:
    chance = random.Random(5)
    trials = [(column(chance), Known(chance.random() < 0.5, chance.choice([None, None, "point", "comma"]))) for _ in range(600)]
    at_once = [outcome(*trial) for trial in trials]
    monkeypatch.setattr(plain_texts, "of", lambda texts: Plain(texts, ".", "", None))
    assert [outcome(*trial) for trial in trials] == at_once


@pytest.mark.parametrize(
    ("cells", "wanted"),
    [
        (["1,5", "2,5"], ("1.5", "2.5", ",", "")),
        (["1,5 mg", "2 mg"], ("1.5", "2", ",", "mg")),
        (["1.5 %", "2.5 %"], ("1.5", "2.5", ".", "%")),
        (["1e5 %", "2.5 %"], ("1e5 %", "2.5 %", ".", "")),
        (["1,5", "2.5"], ("1,5", "2.5", ".", "")),
        (["a", "b"], ("a", "b", ".", "")),
    ],
)
def test_what_is_made_plain(cells: list[str], wanted: tuple[str, ...]) -> None:
    plain = plain_texts.of(pa.array(cells, pa.string()))
    assert (*plain.texts.to_pylist(), plain.mark, plain.unit) == wanted
