"""The words of Lay out: what the layout is, which cells need a word, what the levels are asked about, and the account of the rows."""

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from analysis.amounts import Question
from analysis.counted import Account
from analysis.level_edits import Suggestion
from analysis.naming import listed
from analysis.refusals import rows_told
from analysis.rounding import fixed
from analysis.unit_question import UnitAnswer
from app import words

NAMED = 4  # cells named one by one
AMOUNTS_OR_GROUPS: Mapping[bool, str] = {True: "Amounts", False: "Groups"}
AMOUNTS_MEAN: Mapping[bool, str] = {
    True: "As amounts, they keep their true spacing along the axis, and Compare asks how the response follows them.",
    False: "As groups, they stand side by side at equal distances, and no trend is computed.",
}
LOOK = "Each of these stays in the analysis until you set it aside, with a reason."
COUNTED = "Counted are rows that are analysed; behind a level that is left out, the rows that it would bring."


def amounts_asked(question: Question) -> str:
    """Return what is asked about a factor whose levels are numbers."""
    return f"{words.literal(question.column)}: amounts or groups?"


def amounts_told(question: Question) -> str:
    """Return the reason for the answer that stands, and what follows from it."""
    who = words.CHOSEN.capitalize() if question.chosen else f"{question.reason[0].upper()}{question.reason[1:]}"
    return f"{who}. {AMOUNTS_MEAN[question.are_amounts]}"


def one_unit(column: str | None) -> str:
    """Return an answer to the question of the unit."""
    return "Each row" if column is None else f"Each {words.literal(column)}"


def unit_told(answer: UnitAnswer) -> str:
    """Return what follows from an answer to the question of the unit."""
    if answer.units is None or answer.residual_df is None:
        return f"Not possible. {answer.refusal}"
    averaged = "" if answer.unit is None else ", the mean of its rows each"
    return f"{fixed(answer.units, 0)} values{averaged}; {fixed(answer.residual_df, 0)} residual df"


def levels_alike(column: str, offer: Suggestion) -> str:
    """Return which levels of a column may be one, each with its analysed rows."""
    told = [f"“{level.name}” ({words.counted(level.rows, 'row')})" for level in (*offer.levels, offer.into)]
    ways = listed(list(dict.fromkeys(offer.ways)))
    return f"{column}: {'is' if len(told) == 2 else 'are'} {listed(told[:-1])} the same as {told[-1]}? They differ only in {ways}."


def layout(design: Mapping[str, Any]) -> str:
    """Return the size of a design in words."""
    rows = f"{len(design['row_levels'])} levels of {design['row_factor']}"
    columns = f"{len(design['column_levels'])} of {design['column_factor']}"
    return f"{rows} × {columns}, {words.counted(int(np.sum(design['counts'])), 'observation')}"


def cells(design: Mapping[str, Any]) -> list[str]:
    """Return what the counts of a design need said: whether it is balanced, and which cells are empty, single, fewest or most."""
    n = np.asarray(design["counts"])
    told = [_balance(design, n)]
    if design["empty_cells"]:
        told.append(f"Empty: {_named(design, n == 0)}. What can still be answered is answered.")
    if (n == 1).any() and not (n[n > 0] == 1).all():
        told.append(f"A single observation, which says nothing about spread, in {_named(design, n == 1)}.")
    return told + _unequal(design, n)


def _balance(design: Mapping[str, Any], n: NDArray[np.int_]) -> str:
    low, high = int(n[n > 0].min()), int(n.max())
    filled = f"n = {low} in each" if low == high else f"n = {low} to {high}"
    if design["balanced"]:
        return f"Balanced: {filled} cell, so every way of splitting the sums of squares agrees."
    if design["empty_cells"]:
        return f"{words.counted(len(design['empty_cells']), 'combination')} of {n.size} without an observation; in the others, {filled}."
    if low == high:
        return f"Every combination was observed equally often, {filled}, but not in every block."
    return f"Every combination was observed, but not equally often: {filled}."


def _unequal(design: Mapping[str, Any], n: NDArray[np.int_]) -> list[str]:
    """Return where the fewest and the most observations are, where filled cells differ."""
    low, high = int(n[n > 0].min()), int(n.max())
    if low == high:
        return []
    fewest = [] if low == 1 else [f"Fewest, n = {low}: {_named(design, n == low)}."]
    return [*fewest, f"Most, n = {high}: {_named(design, n == high)}."]


def _named(design: Mapping[str, Any], where: NDArray[np.bool_]) -> str:
    """Return cells by their levels, the first few in full."""
    found = [f"{design['row_levels'][i]} with {design['column_levels'][j]}" for i, j in np.argwhere(where)]
    return "; ".join(found[:NAMED]) + (f"; and {len(found) - NAMED} more" if len(found) > NAMED else "")


def rows_head(odd: int) -> str:
    """Return what is behind the rows, and whether any of their values is worth a look."""
    return "Rows: look through them, set some aside" + (f" ({words.counted(odd, 'value')} worth a look)" if odd else "")


def take_up(rows: Sequence[int]) -> str:
    """Return what names the rows of an odd value in the field for rows to set aside."""
    return f"Name {rows_told(rows)} below"


def reckoning(account: Account) -> str:
    """Return where every observation of the file went; the parts add up."""
    thing = "observation" if account.in_grid else "row"
    parts = [(account.analysed, "analysed"), (account.aside, "set aside"), (account.unusable, "unusable")]
    left = [(account.unkept, "of levels left out")] if account.unkept else []
    return f"{words.counted(account.whole, thing)} in the file: {', '.join(f'{fixed(n, 0)} {what}' for n, what in parts + left)}."


def left_out_head(account: Account) -> str:
    """Return what is behind the list of what takes no part."""
    thing = "observation" if account.in_grid else "row"
    return f"The {words.counted(account.whole - account.analysed, thing)} left out, with reasons"
