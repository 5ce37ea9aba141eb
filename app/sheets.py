"""The tables of the screen: analysis of variance, cell means with margins, comparisons, influence, rows left out."""

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
import pandas as pd

from analysis.findings import Findings
from analysis.log import Entry
from analysis.rounding import NOT_KNOWN, fixed, measured, p_number, percent, significant
from analysis.understood import FirstRows
from app import checks_told, original, records, tabled, words
from app.paper import Sheet

MOST_ROWS = 500  # of a table on screen; the workbook holds all
MOST_CASES = 8  # observations listed as the most influential


def anova(findings: Findings, table: pd.DataFrame) -> Sheet:
    """Return one analysis of variance, a row for each question, with the share of variation and its interval."""
    share = f"partial η² ({percent(findings.study.confidence)} interval)"
    columns = ("term", "df", "sum of squares", "mean square", "F", "p", share, "partial ω²")
    return Sheet("Analysis of variance", columns, [_source(line) for line in records.lines(table)], foot=2)


def _source(r: Any) -> tuple[str, ...]:
    """Return the row of one term; what is not defined for it stays blank."""
    squares = (fixed(r.df, 0), significant(r.ss, 5), significant(r.ms, 4) if _known(r.ms) else "")
    if not _known(r.f):
        return (str(r.term), *squares, "", "", "", "")
    share = f"{fixed(r.partial_eta2, 2)} ({fixed(r.partial_eta2_lower, 2)} to {fixed(r.partial_eta2_upper, 2)})"
    return (str(r.term), *squares, significant(r.f), p_number(r.p), share, fixed(r.partial_omega2, 2))


def _known(value: Any) -> bool:
    return value is not None and bool(np.isfinite(value))


def cell_means(findings: Findings) -> Sheet:
    """Return estimates by row and column with their intervals, margins of equal weight at the ends, and the grand mean."""
    design = findings.design
    row, column = design["row_factor"], design["column_factor"]
    by_cell = {(c.row, c.column): c for c in records.lines(findings.cells)}
    margin = {factor: {m.level: m for m in records.lines(findings.marginal_means[factor])} for factor in (row, column)}
    rows = [
        (level, *(_estimate(findings, by_cell[level, c]) for c in design["column_levels"]), _mean(findings, margin[row][level]))
        for level in design["row_levels"]
    ]
    spread = findings.marginal_means[row]["se"].min()
    grand = original.number(findings, original.back(findings, findings.effects["grand_mean"]), spread)
    last = ("mean", *(_mean(findings, margin[column][c]) for c in design["column_levels"]), grand)
    return Sheet(
        f"Cell means of {original.label(findings)} with {words.intervals(findings)}",
        (f"{row} ╲ {column}", *design["column_levels"], "mean"),
        (*rows, last),
        foot=1,
    )


def _estimate(findings: Findings, cell: Any) -> str:
    return words.EMPTY if cell.n == 0 else original.with_interval(findings, cell)


def _mean(findings: Findings, level: Any) -> str:
    return original.with_interval(findings, level, "mean") if level.estimable else NOT_KNOWN


def comparisons(findings: Findings, family: str, asked: pd.DataFrame | None = None) -> Sheet:
    """Return a family's differences, or those asked about, with adjusted interval, adjusted p and what it says."""
    frame = records.family(findings, family) if asked is None else asked
    sliced = frame["within"].notna().any()
    rows = [
        (tabled.pair(c.left, c.right, findings.observed.scale.tells_ratios), *((str(c.within),) if sliced else ()), *_compared(c))
        for c in records.lines(frame.head(MOST_ROWS))
    ]
    columns = ("compared", *(("within",) if sliced else ()), tabled.difference_head(findings), "t", "p", "p adjusted", "reading")
    return Sheet(
        f"Comparisons, {words.family(family, findings.study.factors)}",
        columns,
        rows,
        frozenset({0, len(columns) - 1} | ({1} if sliced else set())),
    )


def _compared(comparison: Any) -> tuple[str, ...]:
    """Return what one comparison came to: size, t, both p-values and the reading."""
    c = comparison
    if not _known(c.difference):
        return ("", "", "", "", words.NOT_ESTIMABLE)
    return (tabled.size(c), significant(c.t), p_number(c.p), p_number(c.p_adjusted), words.VERDICTS[c.verdict])


def letters(findings: Findings, family: str) -> Sheet | None:
    """Return the levels of a family with their letters, or None where there are none."""
    found = None if findings.letters is None else findings.letters.get(family)
    if not found:
        return None
    return Sheet("Letters: levels that share one are not decided to differ", ("level", "letters"), list(found.items()), frozenset({0, 1}))


def influence(findings: Findings) -> Sheet | None:
    """Return the observations that carry most of the answer, by Cook's distance; None where that is not defined."""
    known = checks_told.influence(findings)
    if known.empty:
        return None
    frame = known.nlargest(MOST_CASES, "cook")
    columns = ("row", "fitted", "residual", "studentised", "leverage", "Cook")
    spread = findings.fit["sigma"]
    rows = [
        (
            str(c.row),
            measured(c.fitted, spread),
            measured(c.residual, spread),
            fixed(c.student_external, 2),
            fixed(c.leverage, 2),
            significant(c.cook, 2),
        )
        for c in records.lines(frame)
    ]
    return Sheet("The most influential observations: row of the file, studentised residual, Cook’s distance", columns, rows)


def left_out(entries: Sequence[Mapping[str, Any]]) -> Sheet:
    """Return the rows that take no part, each with its reason."""
    rows = [(str(entry["row"]), str(entry["why"])) for entry in entries[:MOST_ROWS]]
    return Sheet("Rows left out", ("row of the file", "reason"), rows, frozenset({0, 1}))


def rows(numbers: Sequence[int], columns: Sequence[str], cells: Sequence[Sequence[str]], why: Mapping[int, str]) -> Sheet:
    """Return rows of the data with what they are used for, those that take no part struck through."""
    lines = [(str(number), *line, why.get(number, "")) for number, line in zip(numbers, cells, strict=True)]
    struck = frozenset(place for place, number in enumerate(numbers) if number in why)
    return Sheet("Rows of the data", ("row", *columns, "left out because"), lines, frozenset(range(len(columns) + 2)), struck=struck)


def decisions(entries: Sequence[Entry]) -> Sheet:
    """Return the decisions in their order, each with its reason."""
    lines = [(str(place), entry.sentence, entry.reason) for place, entry in enumerate(entries, start=1)]
    return Sheet("Decisions so far", ("step", "decision", "reason"), lines, frozenset({0, 1, 2}))


def preview(first: FirstRows) -> Sheet:
    """Return the first rows as they were understood, each with its number in the file."""
    rows = [(str(number), *cells) for number, cells in first.rows]
    words_in = frozenset({0, *(place for place, are_numbers in enumerate(first.numbers, start=1) if not are_numbers)})
    return Sheet("First rows as understood", ("row", *first.columns), rows, words_in)
