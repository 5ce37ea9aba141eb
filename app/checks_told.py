"""What the checks of the residuals say, in sentences that never claim more than the number of observations can show."""

from typing import Any

import pandas as pd

from analysis import plain
from analysis.findings import Findings
from analysis.rounding import fixed, p_value, significant
from app import records, words

BLIND, DIM, SHARP = 3, 10, 100  # observations in a cell up to which checks see next to nothing, large departures, moderate ones
FEW_RESIDUALS = 20


def what_can_be_seen(findings: Findings) -> str:
    """Say how much these checks can see with this many observations."""
    fewest, most = _fewest_and_most(findings)
    told = words.n_per_cell(findings)
    if most == 1:
        return "with one observation in each cell, spread inside the cells cannot be seen at all"
    if fewest <= BLIND:
        return f"{told}: too few for these checks to see much, so silence here is not a clean bill"
    if fewest <= DIM:
        return f"{told}: these checks see large departures only"
    return f"{told}: these checks see moderate departures{', and ones too small to matter' if fewest > SHARP else ''}"


def _fewest_and_most(findings: Findings) -> tuple[int, int]:
    filled = findings.cells["n"][findings.cells["n"] > 0]
    return int(filled.min()), int(filled.max())


def spread(findings: Findings) -> list[str]:
    """Say whether the cells spread alike: smallest and largest spread, and the tests."""
    cells = sorted(records.lines(findings.cells.dropna(subset=["sd"])), key=lambda cell: float(cell.sd))
    if not cells:
        return ["No cell holds two observations, so there is no spread inside cells to compare."]
    low, high = (f"{words.spread(c.sd, c.se)} ({c.row}, {c.column})" for c in (cells[0], cells[-1]))
    return [f"Standard deviations inside the cells run from {low} to {high}.", *_tests_of_spread(findings)]


def _tests_of_spread(findings: Findings) -> list[str]:
    test = plain.plain(findings.checks.get("brown_forsythe"))
    if not test or test["p"] is None:
        return ["A test of equal spread is not defined for these cells."]
    others = {name: _p(findings, check) for name, check in (("Levene", "levene"), ("Bartlett", "bartlett"))}
    beside = "".join(f"; {name} {p_value(p)}" for name, p in others.items() if p is not None)
    told = f"Brown–Forsythe {words.statistic(test['f'], test['df1'], test['df2'])}, {p_value(test['p'])}{beside}"
    alpha = _alpha(findings)
    if test["p"] < alpha:
        return [f"The cells do not spread alike ({told}): comparisons between quiet and noisy cells are less certain than they look."]
    if any(p is not None and p < alpha for p in others.values()):
        return [f"The tests do not agree whether the cells spread alike ({told}): look at the points before trusting either."]
    if _fewest_and_most(findings)[0] <= BLIND:
        return [f"No difference in spread was found ({told}), but with so few in a cell even a large one would often be missed."]
    return [f"No difference in spread was found ({told}); that does not show that there is none."]


def shape(findings: Findings) -> list[str]:
    """Say whether the residuals look like draws of a bell curve, and whether another scale suits them better."""
    return [_bell(findings), *_scale(findings), *_product(findings)]


def _bell(findings: Findings) -> str:
    test = plain.plain(findings.checks.get("shapiro"))
    if not test or test["p"] is None:
        return "The shape of so few residuals cannot be tested; look at the line."
    told = f"Shapiro–Wilk W = {fixed(test['w'], 3)}, {p_value(test['p'])}"
    count = len(findings.observations)
    if test["p"] < _alpha(findings):
        rest = ": with many observations means hardly mind; with few, look for one stray value or a skew" if count <= SHARP else ""
        return f"The residuals are not shaped like a bell ({told}){rest}."
    if count < FEW_RESIDUALS:
        return f"Nothing against a bell shape was found ({told}), but {count} residuals would show only a gross departure."
    return f"Nothing against a bell shape was found in {count} residuals ({told})."


def _scale(findings: Findings) -> list[str]:
    found = plain.plain(findings.checks.get("box_cox"))
    if not found or found["lambda"] is None:
        return []
    told = f"{fixed(found['lambda'], 1)} ({fixed(found['lower'], 1)} to {fixed(found['upper'], 1)})"
    if found["lower"] <= 1 <= found["upper"]:
        return [f"The power that suits this model best is {told}; 1, the scale as measured, is among them."]
    if found["lower"] <= 0 <= found["upper"]:
        return [f"The power that suits this model best is {told}; 0, the logarithm, is among them: look at that scale too."]
    return [f"The power that suits this model best is {told}; 1, the scale as measured, is not among them."]


def _product(findings: Findings) -> list[str]:
    test = plain.plain(findings.checks.get("nonadditivity"))
    if not test or test["p"] is None:
        return []
    told = f"one-degree test of non-additivity {words.statistic(test['f'], test['df1'], test['df2'])}, {p_value(test['p'])}"
    if test["p"] < _alpha(findings):
        return [f"What is left beside the two factors grows with both of their effects ({told}): another scale may make them add up."]
    return [f"No interaction of the kind that grows with both effects was found ({told})."]


def carriers(findings: Findings) -> list[str]:
    """Say which observation lies farthest out and which moves the fit most."""
    frame = influence(findings)
    if frame.empty:
        return ["The influence of single observations is not defined here."]
    farthest = next(records.lines(frame.sort_values("student_external", key=abs, ascending=False).head(1)))
    mover = next(records.lines(frame.nlargest(1, "cook")))
    return [
        f"Row {farthest.row} lies farthest from its fitted value: studentised residual {fixed(farthest.student_external, 1)}.",
        f"Row {mover.row} moves the fit most: Cook’s distance {significant(mover.cook, 2)}.",
        "Nothing is left out because of this list.",
    ]


def influence(findings: Findings) -> pd.DataFrame:
    """Return the observations whose influence is defined."""
    frame: pd.DataFrame | None = findings.checks.get("influence")
    return pd.DataFrame() if frame is None else frame.dropna(subset=["student_external", "cook"])


def _p(findings: Findings, check: str) -> float | None:
    found: Any = plain.plain(findings.checks.get(check))
    return None if not found else found["p"]


def _alpha(findings: Findings) -> float:
    return 1 - findings.study.confidence
