"""Damaged files without end: `python -m tests.benchmarks.fuzz_reading 20000` reads so many mutated files and counts what happens.

Every file must become a table whose account adds up, or be refused in one line, within five processor seconds and one GiB. What breaks
that is printed with the number that makes it again, and the exit status is 1.
"""

import collections
import os
import random
import resource
import sys
import traceback
from collections.abc import Callable

import numpy as np
import pandas as pd

from analysis.reading.choices import NOTHING_ASKED, Reading
from analysis.reading.entry import read_table
from analysis.refusals import Refusal
from analysis.roles import guess_roles
from analysis.table import Table
from tests.analysis.reading import files

SLOWEST = 5.0  # processor seconds for one file
MOST_MEMORY = 2**30  # bytes
_SNIPPETS = [
    b'"',
    b",",
    b";",
    b"\n",
    b"\r\n",
    b"\0",
    b"\t",
    b"NA",
    b"<",
    b"-999",
    b"1,5",
    b"1.234",
    b"#",
    b"sep=;\n",
    b"Total",
    b"\xff\xfe",
    b"\xef\xbb\xbf",
    b"%",
    b"\xa0",
]


def samples() -> list[bytes]:
    """Sound files of every kind."""
    rows = files.BALANCED
    messy = "Trial 7; lower farm\n# sown in May\n\nfeed;shade;yield (kg)\nhay;low;1,5\n;high;<0,5\nstraw;low;NA\n;high;-999\nTotal;;9\n"
    grid = "Cultivar \\ Shade,none,half,full\nRex,5.1,,3.3\nNova,NA,5.5,2.6\nTotal,9,9,9\n"
    frame = pd.DataFrame(list(rows[1:]), columns=list(rows[0]))
    texts = [files.text(rows), files.text(rows, ";", ","), files.text(rows, "\t", end="\r\n"), files.text(rows, "  "), messy, grid]
    quoted = "".join(",".join(f'"{cell}"' for cell in row) + "\n" for row in rows)
    books = [files.xlsx(rows), files.xls(rows), files.ods(rows), files.parquet(frame), files.parquet(frame.astype({"feed": "category"}))]
    wide = [[f"c{i}" for i in range(300)], *([f"k{(i + j) % 3}" if j < 5 else i * j % 17 / 8 for j in range(300)] for i in range(12))]
    two = [*rows, (), ("Oil", "", ""), *rows]
    return [
        *(text.encode() for text in texts),
        *(files.text(table).encode() for table in (wide, two)),
        quoted.encode(),
        messy.encode("utf-16"),
        "Höhe,y\nKöln,1\nUlm,2\n".encode("windows-1252"),
        *books,
    ]


def mutated(data: bytes, chance: random.Random) -> bytes:
    """Change a file in one to six places, or cut it short."""
    found = bytearray(data)
    for _ in range(chance.randint(1, 6)):
        chance.choice(_CHANGES)(found, chance)
    return bytes(found)


def _flip(found: bytearray, chance: random.Random) -> None:
    if found:
        found[chance.randrange(len(found))] = chance.randrange(256)


def _insert(found: bytearray, chance: random.Random) -> None:
    place = chance.randint(0, len(found))
    found[place:place] = chance.choice(_SNIPPETS)


def _delete(found: bytearray, chance: random.Random) -> None:
    place = chance.randint(0, len(found))
    del found[place : place + chance.randint(1, 20)]


def _repeat(found: bytearray, chance: random.Random) -> None:
    place = chance.randint(0, len(found))
    found[place:place] = found[place : place + chance.randint(1, 60)] * chance.randint(1, 40)


def _cut(found: bytearray, chance: random.Random) -> None:
    if chance.random() < 0.3:
        del found[chance.randint(0, len(found)) :]


_CHANGES: list[Callable[[bytearray, random.Random], None]] = [_flip, _flip, _insert, _insert, _delete, _repeat, _cut]


def check(data: bytes, chance: random.Random) -> str:
    """Read one file, and once more with something else asked for; returns what came of it, raises where that is not allowed."""
    outcome = check_one(data, NOTHING_ASKED)
    if isinstance(outcome, str):
        return outcome
    offered = [alternative.reading for decision in outcome.decisions for alternative in decision.alternatives]
    if offered:
        check_one(data, chance.choice(offered))
    return "read"


def check_one(data: bytes, reading: Reading) -> Table | str:
    """Read one file and look at everything in it; returns the table, or the kind of the refusal."""
    try:
        table = read_table(data, reading=reading)
    except Refusal as refusal:
        one_line(refusal)
        return f"refused: {type(refusal).__name__}"
    guess_roles(table)
    for column in table.columns:
        _check_levels(table, column.name)
        try:
            response = column.as_response()
        except Refusal as refusal:
            one_line(refusal)
            continue
        finite = int(np.isfinite(response.values).sum())
        assert response.values.size == response.offsets.size == table.rows, "a response has another length than its table"
        assert finite + len(response.missing) == table.rows, "values and missing entries do not add up"
    assert len(set(table.names)) == len(table.names), "two columns share a name"
    table.preview(5)
    return table


def _check_levels(table: Table, name: str) -> None:
    levels = table.column(name).as_levels()
    assert levels.codes.size == table.rows, "levels have another length than their table"
    assert set(np.unique(levels.codes)) - {-1} == set(range(len(levels.labels))), "a level does not occur"
    assert len(set(levels.labels)) == len(levels.labels), "two levels share a label"


def one_line(refusal: Refusal) -> None:
    """A refusal is one line of at most 1,000 characters."""
    told = str(refusal)
    assert "\n" not in told, f"a refusal of several lines: {told!r}"
    assert len(told) <= 1000, f"a refusal of {len(told)} characters"


def spent() -> float:
    """Processor seconds of this process and of those that it waited for, whatever else the machine does."""
    return sum(os.times()[:4])


def main(count: int, first: int = 0) -> int:
    """Read so many files, the first of them made from a number."""
    sound, outcomes, faults, slowest = samples(), collections.Counter[str](), 0, 0.0
    for number in range(first, first + count):
        chance = random.Random(number)
        data = mutated(chance.choice(sound), chance)
        start = spent()
        try:
            outcomes[check(data, chance)] += 1
        except Exception:
            faults += 1
            print(f"file {number}:\n{traceback.format_exc(limit=-4)}")
        seconds = spent() - start
        slowest = max(slowest, seconds)
        if seconds > SLOWEST:
            faults += 1
            print(f"file {number} took {seconds:.1f} s")
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * 1024
    for outcome, times in outcomes.most_common():
        print(f"{times:8,}  {outcome}")
    print(f"slowest {slowest:.2f} s, memory at most {memory / 2**20:.0f} MiB, {faults} faults in {count:,} files")
    return int(faults > 0 or memory > MOST_MEMORY)


if __name__ == "__main__":
    sys.exit(main(int(sys.argv[1]) if len(sys.argv) > 1 else 20_000, int(sys.argv[2]) if len(sys.argv) > 2 else 0))
