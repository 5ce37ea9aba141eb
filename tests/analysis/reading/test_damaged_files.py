"""A few damaged files of every kind; `python -m tests.benchmarks.fuzz_reading` makes thousands."""

import random

import pytest

from tests.benchmarks import fuzz_reading

SOUND = fuzz_reading.samples()


@pytest.mark.parametrize("data", SOUND)
def test_sound_files_are_read(data: bytes) -> None:
    assert fuzz_reading.check(data, random.Random(0)) == "read"


@pytest.mark.parametrize("number", range(100))
def test_damaged_files_are_read_or_refused(number: int) -> None:
    chance = random.Random(number)
    assert fuzz_reading.check(fuzz_reading.mutated(chance.choice(SOUND), chance), chance)
