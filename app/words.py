"""The words of the screen, each in one place: names of choices, labels of columns, and short phrases about a study."""

from collections.abc import Mapping, Sequence
from types import MappingProxyType
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis.adjustments import ADJUSTMENTS
from analysis.findings import Findings
from analysis.naming import word_and_unit
from analysis.rounding import decimals_for, fixed, measured, percent, significant
from analysis.study import Study
from app import records

EMPTY = "empty"
NOT_ESTIMABLE = "cannot be estimated"
NONE = "none"
MODELS: Mapping[str, str] = MappingProxyType({"full": "With interaction", "additive": "Without"})
SCALES: Mapping[str, str] = MappingProxyType({"none": "As measured", "log": "Logarithm", "sqrt": "Square root", "reciprocal": "Reciprocal"})
CONFIDENCES = (0.90, 0.95, 0.99)
MODEL, SCALE, CONFIDENCE, MATTERS = "Model", "Scale", "Confidence", "Difference that matters"
MATTERS_HELP = (
    "The smallest difference that matters, in units of the response. With it, a small difference can be told from an open question."
)
AXIS = "Along the axis"
TYPES = "Cells are unequal, so each type of sums of squares answers a question of its own"
NOT_GIVEN = "not given"
MATTERS_NOT_APPLIED = "The difference that matters is in the units of the response and is not applied on another scale."
ADJUST, FAMILY, LETTERS = "Adjusted by", "What is compared", "Letters for a figure or table"
SAMPLE = "Or look around with an invented experiment"
PASTE, PASTE_EXAMPLE = "Or paste cells from a spreadsheet, headings included", "light\tfeed\tyield (g)\nFull sun\tFeed A\t30.7"
CHOOSE = "choose a column"
ROLES: Mapping[str, str] = MappingProxyType(
    {
        "response": "What was measured",
        "row_factor": "First factor",
        "column_factor": "Second factor",
        "block": "Block, if any",
        "unit": "Unit, if measured more than once",
    }
)
ROLE_MEANS: Mapping[str, str] = MappingProxyType(
    {
        "response": "a column of numbers",
        "row_factor": "drawn as rows and as lines",
        "column_factor": "drawn as columns and along the axis",
        "block": "a bench, a day, a batch: allowed for, not tested",
        "unit": "readings of one unit are averaged before anything else",
    }
)
CHOSEN = "chosen by you"
MERGE, KEEP_APART, LEAVE_OUT, TAKE_BACK = "Merge", "Keep apart", "Leave out", "Take back in"
ROWS, WHY, SET_ASIDE, ASIDE = "Rows of the file", "Why they do not belong to the experiment", "Set aside", "Set aside now"
ROWS_EXAMPLE, WHY_EXAMPLE = "12, 15-18", "pot fell over on day 3"
ASIDE_HELP = "Take a row out of this list to put it back into the analysis."
ONE_UNIT = "What is one independent unit?"
CONTROL, CONTROL_FIRST = "Control level", "the first level"
CONTROL_HELP = "The level that the others are compared with, where Compare adjusts by Dunnett."
LEVELS_HELP = "Write another name to rename a level; the name of another level makes the two one."
NOTHING_OPEN = "There is no table yet."
TO_BRING, TO_LAY_OUT = "Bring one", "Choose columns at Lay out"
FAMILY_TOO_LARGE = "This family holds too many comparisons to be written out; compare within one factor instead."
FAMILY_EMPTY = "There is nothing to compare in this family."
WALK, NEXT, BACK, LEAVE = "Walk through it", "Next", "Back", "Leave"
WALK_HOLDS = "One board on the whole window, for the group: arrow keys, space or a presenter’s remote, Escape to leave."
WHAT_FOLLOWS = (
    "Bring: a table from a spreadsheet or a text file.",
    "Lay out: say which column was measured and which two were varied.",
    "Answer: does each factor matter, and does one depend on the other?",
    "Compare: which differ, and by how much.",
    "Doubt: whether the numbers may be believed.",
    "Tell: slides, figures and tables to take away.",
)
VERDICTS: Mapping[str, str] = MappingProxyType(
    {
        "larger_than_matters": "larger than matters",
        "differs": "differs",
        "differs_but_small": "differs, but too little to matter",
        "no_difference_that_matters": "no difference that matters",
        "undecided": "undecided",
    }
)
COLUMNS: Mapping[str, str] = MappingProxyType(
    {
        "ss": "sum of squares", "ms": "mean square", "f": "F", "partial_eta2": "partial η²", "partial_omega2": "partial ω²", "se": "s.e.",
        "p_adjusted": "p adjusted", "verdict": "reading", "student_external": "studentised residual", "cook": "Cook’s distance",
    }
)  # fmt: skip
TABLES: Mapping[str, str] = MappingProxyType(
    {"type_1": "Type I", "type_1_column_first": "Type I", "type_2": "Type II", "type_3": "Type III"}
)
POINT_HOVER = "%{customdata[0]} · %{customdata[1]}<br>%{y}<br>row %{customdata[2]} of the file<extra></extra>"


def mean_hover(confidence: float) -> str:
    """Return what hovering over a mean tells."""
    return (
        "%{customdata[0]} · %{customdata[1]}<br>mean %{customdata[2]}, n %{customdata[5]}"
        f"<br>{percent(confidence)} interval %{{customdata[3]}} to %{{customdata[4]}}<extra></extra>"
    )


def response_label(findings: Findings) -> str:
    """Return the response with its unit and the scale it is analysed on, as an axis names it."""
    scale = findings.study.scale
    return f"{'' if scale == 'none' else f'{scale_name(scale).lower()} of '}{response_in_units(findings)}"


def response_in_units(findings: Findings) -> str:
    """Return the response with its unit, as it was measured; a name that holds the unit already stays as it is."""
    return with_unit(findings.observed.response, findings.observed.response_unit)


def factor_in_units(findings: Findings, factor: str) -> str:
    """Return a factor with the unit that the file gives its column, which a row of units may do."""
    return with_unit(factor, findings.study.table.column(factor).unit)


def with_unit(name: str, unit: str | None) -> str:
    """Return a name with its unit in brackets behind it, where it does not end in that unit by itself."""
    said = unit is None or unit == word_and_unit(name)[1] or name.split()[-1:] == [unit]
    return name if said else f"{name} ({unit})"


def scale_name(scale: str) -> str:
    """Return what a scale is called."""
    return SCALES.get(scale, scale.replace("power=", "power "))


def unit_word(findings: Findings) -> str:
    """Return what one analysed value is."""
    return "observation" if findings.study.unit is None else f"mean of one {findings.study.unit}"


def units_word(findings: Findings) -> str:
    """Return what several analysed values are."""
    return "observations" if findings.study.unit is None else f"means, one for each {findings.study.unit}"


def of_model(findings: Findings) -> str:
    """Return the words that tell a means' model where it is not the plain cell means."""
    if findings.study.model == "additive":
        return " of the model without interaction"
    return "" if findings.study.block is None else f", averaged over {findings.study.block} with equal weight,"


def intervals(findings: Findings) -> str:
    """Return what the bars are."""
    return f"{percent(findings.study.confidence)} confidence intervals"


def n_per_cell(findings: Findings) -> str:
    """Return how many values the filled cells hold."""
    filled = findings.cells["n"][findings.cells["n"] > 0]
    low, high = int(filled.min()), int(filled.max())
    return f"n = {low} in each cell" if low == high else f"n = {low} to {high} in a cell"


def with_interval(value: float, lower: float, upper: float, se: float) -> str:
    """Return a number with its interval, all with the digits that its standard error supports."""
    return f"{measured(value, se)} ({measured(lower, se)} to {measured(upper, se)})"


def spread(sd: float | None, se: float | None) -> str:
    """Return a standard deviation with one digit more than the mean it stands beside, or nothing where it is not defined."""
    return "" if sd is None or not np.isfinite(sd) else fixed(sd, decimals_for(sd if se is None or not np.isfinite(se) else se))


def count_word(n: int, counts: NDArray[np.int_]) -> str:
    """Return what a cell's count needs said beside it."""
    if n == 0:
        return EMPTY
    if n == 1:
        return "single"
    filled = counts[counts > 0]
    if filled.min() == filled.max():
        return ""
    return {int(filled.min()): "fewest", int(filled.max()): "most"}.get(n, "")


def cell_name(cell: object) -> str:
    """Return the name of one side of a comparison: a level, or the two levels of a cell."""
    return str(cell) if isinstance(cell, str) else ", ".join(str(part) for part in cell)  # type: ignore[attr-defined]


def family(name: str, factors: Sequence[str]) -> str:
    """Return which question a family of comparisons asks."""
    row, column = factors
    questions = {
        row: f"{row}, averaged over {column}",
        column: f"{column}, averaged over {row}",
        f"{row} within {column}": f"{row}, within each {column}",
        f"{column} within {row}": f"{column}, within each {row}",
        "cells": "every combination with every other",
    }
    return questions.get(name, name)


def statistic(f: float, df1: float, df2: float) -> str:
    """Return an F as it is told in a sentence."""
    return f"F({fixed(df1, 0)}, {fixed(df2, 0)}) = {significant(f)}"


def literal(text: Any) -> str:
    """Return text that Streamlit's Markdown shows as it is."""
    return "".join(f"\\{letter}" if letter in "\\`*_{}[]()#+-.!|$:~<>^=" else letter for letter in str(text))


def adjusted_by(findings: Findings) -> str:
    """Return how p-values and intervals are adjusted, in words."""
    return ADJUSTMENTS[findings.study.adjust].word


def family_size(findings: Findings, name: str) -> str:
    """Return how many comparisons are adjusted together."""
    each = " in each slice" if " within " in name and name not in findings.study.factors else ""
    return f"{sizes_told(records.family(findings, name))}{each}"


def sizes_told(frame: pd.DataFrame) -> str:
    """Return how many comparisons are adjusted together, over the lines of a family."""
    counts = sorted({int(size) for size in frame["family_size"]})
    return f"{' or '.join(str(c) for c in counts)} comparison{'' if counts == [1] else 's'}"


def counted(count: int, thing: str) -> str:
    """Return a count with its noun."""
    return f"{fixed(count, 0)} {thing}{'' if count == 1 else 's'}"


def percent_told(share: float) -> str:
    """Return a share as percent, with decimals only where it needs them."""
    return f"{share * 100:g} %"


def to_do(step: str) -> str:
    """Return the next step as the bar names it."""
    return f"To do: {step} →"


def open_table(study: Study | None) -> str:
    """Return which table is open."""
    return "" if study is None else f"{study.table.name} · {counted(study.table.rows, 'row')}"


def levels_head(column: str) -> str:
    """Return what is behind the levels of a factor."""
    return f"Levels of {literal(column)}: names, order, control"


def too_many_levels(column: str, levels: int, most: int) -> str:
    """Return why the levels of a column are not listed."""
    return f"{column} has {levels} levels, and up to {most} are listed here; a column with more is usually a label, not a factor."


def row_aside(row: int, why: str) -> str:
    """Return a row that was set aside, with its reason."""
    return f"row {row}: {why}"


def decisions_head(count: int) -> str:
    """Return what is behind the log."""
    return f"{counted(count, 'decision')} so far, in order"


def rows_shown(shown: int, rows: int, columns: int) -> str:
    """Return how much of a table a preview shows."""
    return f"{'All' if shown == rows else f'The first {shown} of'} {counted(rows, 'row')}, {counted(columns, 'column')}."


def reckoning(analysed: int, left_out: int) -> str:
    """Return the account of the rows: each one is analysed or left out."""
    return f"{counted(analysed + left_out, 'row')} in the file: {fixed(analysed, 0)} analysed, {fixed(left_out, 0)} left out."


def family_told(findings: Findings, name: str) -> str:
    """Return how many comparisons a family holds and how they are adjusted."""
    size = family_size(findings, name)
    return size if size == "1 comparison" else f"{size}, adjusted together ({adjusted_by(findings)})"


def place_of(place: int, last: int) -> str:
    """Return which board of the story is shown."""
    return f"{place} of {last}"


def more_rows(count: int) -> str:
    """Return how many rows of a table are not shown."""
    return f"{counted(count, 'more row')} in the workbook."
