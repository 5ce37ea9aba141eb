"""Doubts about single observations: values that stand far out, and rows on which an answer hangs."""

import math

import numpy as np

from analysis.anova import INTERACTION
from analysis.doubting.signs import AMBER, NOTE, Doubt, Signs
from analysis.doubting.spreads import Spread
from analysis.naming import listed
from analysis.rounding import fixed, p_value, shortest, significant

DECISIVE = 20.0  # times by which a p-value changes where one observation decides an answer and not just tips it
POWER_FOUND = 0.15  # of a power of ten in which the ratio to the value expected may miss it
MOST_NAMED = 5


def outlying(signs: Signs) -> Doubt | None:
    """Doubt observations that stand far outside the rest, judged against their own cell too; a slip of a power of ten is said."""
    if not signs.outlying:
        return None
    told = [_stands_out(signs, at, p) for at, p in signs.outlying]
    rows = tuple(int(signs.file_rows[at]) for at, _ in signs.outlying)
    first = signs.outlying[0][0]
    advice = "Check the original record; set it aside only for a reason that stands without this result."
    return Doubt("one_observation", AMBER, " ".join([*told, _slip(signs, first), _change(signs, first), advice]).replace("  ", " "), rows)


def _stands_out(signs: Signs, at: int, p: float) -> str:
    size = significant(abs(float(signs.whole.student[at]))) if np.isfinite(signs.whole.student[at]) else "many"
    value = shortest(float(signs.layout.observed.values[at]))
    return f"Row {signs.file_rows[at]} ({value}) lies {size} standard errors from what the other rows lead one to expect ({p_value(p)})."


def _slip(signs: Signs, at: int) -> str:
    """Say where a value is a power of ten times what its cell leads one to expect."""
    observed = signs.layout.observed
    value = float(observed.scale.back(observed.values[at : at + 1])[0])
    mates = (signs.whole.cell == signs.whole.cell[at]) & signs.in_rest
    expected = float(np.median(observed.scale.back(observed.values[mates]))) if mates.any() else float("nan")
    if not (math.isfinite(expected) and value * expected > 0):
        return ""
    power = math.log10(value / expected)
    if round(power) == 0 or abs(power - round(power)) > POWER_FOUND:
        return ""
    factor = fixed(10.0 ** abs(round(power)), 0)
    size = "large" if power > 0 else "small"
    return f"It is about {factor} times as {size} as its cell leads one to expect: a slip of unit or decimal mark?"


def _change(signs: Signs, at: int) -> str:
    """Tell each answer with and without one observation."""
    without = signs.analysed.without
    if without is None:
        return ""
    now = _p_now(signs)
    told = [f"{_asked(term)} {p_value(now[term])} with it and {p_value(float(without[term].p[at]))} without" for term in now]
    return f"What hangs on it: {'; '.join(told)}."


def _p_now(signs: Signs) -> dict[str, float]:
    first = signs.holds["analysis"].tolist()
    rows = zip(first, signs.holds["term"].tolist(), signs.holds["p"].tolist(), strict=True)
    return {term: p for analysis, term, p in rows if analysis == first[0]}


def _asked(term: str) -> str:
    return "the interaction" if term == INTERACTION else term


def decisive(signs: Signs, _: Spread | None) -> Doubt | None:
    """Doubt an answer that one observation decides; where several would tip it, they are named in a note.

    Observations that stand far out are told as such and not again here.
    """
    without, alpha, now = signs.analysed.without, 1 - signs.analysed.confidence, _p_now(signs)
    if without is None:
        return None
    found = []
    for term, answer in without.items():
        with np.errstate(invalid="ignore", divide="ignore"):
            tipped = ((answer.p < alpha) != (now[term] < alpha)) & np.isfinite(answer.p) & signs.in_rest
            strength = np.where(tipped, np.abs(np.log(answer.p / now[term])), 0.0)
        if tipped.any():
            found.append((float(strength.max()), term, np.argsort(-strength, kind="stable")[: int(tipped.sum())]))
    if not found:
        return None
    most, term, at = max(found, key=lambda one: one[0])
    return Doubt("one_observation", AMBER if most > math.log(DECISIVE) else NOTE, *_hangs(signs, term, at))


def _hangs(signs: Signs, term: str, at: np.ndarray) -> tuple[str, tuple[int, ...]]:
    assert signs.analysed.without is not None
    now, without = _p_now(signs)[term], signs.analysed.without[term].p
    rows = tuple(int(row) for row in signs.file_rows[at[:MOST_NAMED]])
    subject = "The interaction" if term == INTERACTION else f"The answer on {term}"
    if len(at) == 1:
        told = f"{subject} hangs on row {rows[0]}: {p_value(now)} with it, {p_value(float(without[at[0]]))} without."
    else:
        more = f" and {len(at) - MOST_NAMED} more" if len(at) > MOST_NAMED else ""
        named = listed([str(row) for row in rows])
        told = f"{subject} would be decided otherwise without any one of rows {named}{more}: {p_value(now)} stands close to the line."
    return f"{told} Nothing need be wrong with it; tell the size of the effect and its interval rather than the decision alone.", rows
