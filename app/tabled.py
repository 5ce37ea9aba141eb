"""The tables of the story as text: counts, answers and comparisons as they are told, largest differences first."""

from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np
import pandas as pd

from analysis import rounding
from analysis.answers import Answer
from analysis.findings import Findings
from app import words

NO_BREAK = "\u00a0"
NOTHING_TO_COMPARE = "There is nothing to compare one by one here."


def counts(findings: Findings) -> pd.DataFrame:
    """Return how many observations each combination holds, rows by columns, an empty one named so."""
    design = findings.design
    corner = f"{design['row_factor']}{NO_BREAK}↓ {design['column_factor']}{NO_BREAK}→"
    table = pd.DataFrame({corner: design["row_levels"]})
    for level, column in zip(design["column_levels"], np.transpose(design["counts"]), strict=True):
        table.insert(len(table.columns), level, [str(n) if n else words.EMPTY for n in column], allow_duplicates=True)
    return table


def counts_alt(findings: Findings) -> str:
    """Read the layout out: factors, levels, counts."""
    return f"Table of the number of observations in each combination of {factors_with_levels(findings)}; {numbers(findings)}."


def factors_with_levels(findings: Findings) -> str:
    """Return both factors with their levels, for reading aloud."""
    design = findings.design
    return " and ".join(f"{design[f'{side}_factor']} ({', '.join(design[f'{side}_levels'])})" for side in ("row", "column"))


def numbers(findings: Findings) -> str:
    """Return how many values are analysed in all and in each cell."""
    return f"{words.n_per_cell(findings)}, n = {len(findings.observations)} in all"


def aloud(table: pd.DataFrame) -> str:
    """Read a table out, one line after another."""
    heads = [str(name) for name in table.columns]
    return "; ".join(
        ", ".join(f"{head} {value}" for head, value in zip(heads, row, strict=True) if str(value))
        for row in table.itertuples(index=False, name=None)
    )


def read_cells(findings: Findings) -> Iterator[str]:
    """Read out the estimate of every cell with its interval, one line each."""
    for cell in findings.cells.itertuples():
        mean = with_interval(cell) if cell.n else words.EMPTY
        yield f"{cell.row}, {cell.column}: {mean}, n = {cell.n}"


def with_interval(cell: Any) -> str:
    """Return the estimate of a cell with its interval."""
    return words.with_interval(cell.estimate, cell.lower, cell.upper, cell.se)


def answers(findings: Findings) -> pd.DataFrame:
    """Return the three questions with their answers and tests."""
    rows = [(answer.question, answer.sentence, bare_test(answer)) for answer in findings.answers]
    return pd.DataFrame(rows, columns=["question", "answer", "test"])


def bare_test(answer: Answer) -> str:
    """Return the test of an answer without its term, which the question names; it breaks only before its p."""
    test = short_test(answer.statistic)
    test = test[max(0, test.find("F(")) :]
    return test if answer.p is None else test.replace(" ", NO_BREAK).replace(f",{NO_BREAK}p", ", p")


def short_test(statistic: str) -> str:
    """Return the test at the head of a statistic."""
    return statistic.partition(" · ")[0]


def answers_alt(findings: Findings) -> str:
    """Read the answers out, each with its statistic."""
    told = " ".join(f"{answer.question} {answer.sentence} {answer.statistic}." for answer in findings.answers)
    return f"Table of the three answers on {factors_with_levels(findings)}; {numbers(findings)}. {told}"


def by_size(findings: Findings, families: Sequence[str]) -> pd.DataFrame:
    """Return the comparisons of some families in one frame with their family, the largest differences first."""
    found = [(name, findings.comparisons[name]) for name in families]
    frames = [frame.assign(family=name) for name, frame in found if frame is not None]
    together = pd.concat(frames, ignore_index=True) if frames else pd.DataFrame(columns=["difference"])
    return largest_first(together)


def comparisons(findings: Findings, families: Sequence[str]) -> pd.DataFrame:
    """Return every comparison of some families as told, the largest differences first, with the slice or factor that it stands in."""
    frame = by_size(findings, families)
    averaged = bool(families) and families[0] in findings.study.factors
    told = compared(findings, frame)
    told.insert(0, "factor" if averaged else "within", [c.family if averaged else c.within for c in frame.itertuples()])
    return told


def compared(findings: Findings, frame: pd.DataFrame) -> pd.DataFrame:
    """Return lines of a family as told: what is compared, the difference or ratio with its interval, p, and the reading."""
    return pd.DataFrame(
        {
            "compared": [pair(c.left, c.right, findings.observed.scale.tells_ratios) for c in frame.itertuples()],
            difference_head(findings): [size(c) for c in frame.itertuples()],
            "p adjusted": [rounding.p_number(p) for p in frame.get("p_adjusted", ())],
            "reading": [words.VERDICTS[verdict] for verdict in frame.get("verdict", ())],
        },
        dtype=object,
    )


def pair(left: object, right: object, ratio: bool) -> str:
    """Return the two sides of a comparison in the order in which they are subtracted, or divided where ratios are told."""
    return f"{words.cell_name(left)} {'÷' if ratio else rounding.MINUS} {words.cell_name(right)}"


def difference_head(findings: Findings) -> str:
    """Return what heads the column of differences: what they are, in which unit, with which interval."""
    scale = findings.observed.scale
    unit = findings.observed.unit if scale.is_identity else None
    where = f" in {unit}" if unit else "" if scale.is_identity else " on the scale analysed"
    what = "ratio" if scale.tells_ratios else f"difference{where}"
    return f"{what} ({rounding.percent(findings.study.confidence)} interval)"


def size(comparison: Any) -> str:
    """Return a difference, or the ratio that it stands for, with its adjusted interval."""
    c, told = comparison, getattr(comparison, "told", None)
    if told:
        ends = [rounding.significant(told[name]) for name in ("estimate", "lower_adjusted", "upper_adjusted")]
        return f"{ends[0]} ({ends[1]} to {ends[2]})"
    return words.with_interval(c.difference, c.lower_adjusted, c.upper_adjusted, c.se)


def largest_first(frame: pd.DataFrame) -> pd.DataFrame:
    """Return the lines of a family that can be estimated, the largest differences first."""
    known = frame[frame["difference"].notna()]
    return known.loc[known["difference"].abs().sort_values(ascending=False, kind="stable").index]


def comparisons_alt(findings: Findings, told: pd.DataFrame) -> str:
    """Read out what the table of comparisons holds and its three largest differences."""
    if told.empty:
        return f"No comparisons on {factors_with_levels(findings)}; {numbers(findings)}. {NOTHING_TO_COMPARE}"
    head = difference_head(findings)
    place = [str(name) for name in told.columns[: told.columns.get_loc("compared")]]
    lines = (
        ", ".join([*(str(row[name]) for name in place), str(row["compared"])]) + f": {row[head]}, {row['reading']}"
        for _, row in told.head(3).iterrows()
    )
    return f"Table of {len(told)} comparisons on {factors_with_levels(findings)}; {numbers(findings)}. Largest {head}: {'; '.join(lines)}."
