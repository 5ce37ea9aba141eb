"""How long reading takes beside pandas: `python -m tests.benchmarks.reading` prints the ratios of one run.

A file of a million rows is read as a table, with one column taken as measurements and three as levels, and the same file by
pandas with its fastest engine. Further lines show less regular files, frames, and a workbook.
"""

import io
import sys
import time
from collections.abc import Callable
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pandas as pd

from analysis.reading.entry import read_table
from analysis.table import Table

ROUNDS = 5


def sample(rows: int) -> pd.DataFrame:
    """An invented experiment of two factors, a block, two measurements and a running number."""
    random = np.random.default_rng(3)
    return pd.DataFrame(
        {
            "feed": random.choice(["none", "hay", "pellets"], rows),
            "shade": random.choice(["low", "half", "high", "full"], rows),
            "block": random.integers(1, 9, rows),
            "yield": random.normal(10, 2, rows),
            "height": random.normal(50, 9, rows).round(2),
            "plot": np.arange(1, rows + 1),
        }
    )


def best(work: Callable[[], object]) -> float:
    """The shortest of several runs, in seconds."""
    times = []
    for _ in range(ROUNDS):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def used(table: Table) -> Table:
    """A table whose columns have been read for an analysis."""
    table.column("yield").as_response()
    for name in ("feed", "shade", "block"):
        table.column(name).as_levels()
    return table


def messy(text: str) -> dict[str, str]:
    """The same rows with one thing out of order at a time."""
    lines = text.split("\n")
    return {
        "one short row": "\n".join([*lines[:500], "hay,low,3", *lines[500:]]),
        "one missing word": "\n".join([*lines[:500], "hay,low,3,NA,1,1", *lines[500:]]),
        "decimal commas": text.replace(",", ";").replace(".", ","),
        "quoted words": text.replace("hay", '"hay"'),
        "a unit behind every number": "\n".join([lines[0], *(line.replace(",", " mg,", 4).replace(" mg,", ",", 3) for line in lines[1:])]),
    }


def report(what: str, seconds: float, beside: float) -> None:
    """Print one line."""
    print(f"{what:<40}{seconds:8.3f} s {seconds / beside:8.2f} × pandas")


def main(rows: int) -> None:
    """Print how long everything takes for a number of rows."""
    frame = sample(rows)
    text = frame.to_csv(index=False)
    with TemporaryDirectory() as folder:
        path = Path(folder) / "trial.csv"
        path.write_text(text)
        pandas = best(lambda: pd.read_csv(path, engine="pyarrow"))
        report("pandas, its fastest engine", pandas, pandas)
        report("read_table", best(lambda: read_table(path)), pandas)
        report("read_table, response and three factors", best(lambda: used(read_table(path))), pandas)
        for what, content in messy(text).items():
            path.write_text(content)
            report(f"the same with {what}", best(lambda: used(read_table(path))), pandas)
    report("a frame", best(lambda: used(read_table(frame))), pandas)
    stream = io.BytesIO()
    frame.to_parquet(stream)
    report("Parquet", best(lambda: used(read_table(stream.getvalue()))), pandas)


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 1_000_000)
