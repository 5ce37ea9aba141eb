"""The words of Answer: which figures it offers, what stands in its tables, and what is said where means average over an interaction."""

from collections.abc import Mapping
from types import MappingProxyType

from analysis import verdicts
from analysis.findings import Findings
from analysis.rounding import percent, significant
from app import original, words

MEANS, VARIANCE = "Cell means", "Analysis of variance"
FIGURE, DRAWN = "Figure", "Drawn as"
LINES, SPREAD, AVERAGES, EFFECTS = "lines", "spread", "averages", "effects"
FIGURES: Mapping[str, str] = MappingProxyType({LINES: "Lines", SPREAD: "Every cell", AVERAGES: "Averages", EFFECTS: "Effects"})
BOX, POINTS = "boxes", "points"
WITH_TOLD = "{} sums of squares, for comparison: the answers read the model without interaction."
WITH, WITHOUT = "With interaction", "Without interaction"
NO_FULL = "The model with interaction leaves no residual here."
NO_ADDITIVE = "The model without interaction leaves no residual here."
TYPE_TWO = "Type II sums of squares; what the interaction would explain is counted as chance."
NO_EFFECTS = "Effects that sum to zero need an observation in every combination."
OVER_INTERACTION = "These averages hide something: what {row} does depends on {column}, so read each factor within the levels of the other."


def over_interaction(findings: Findings) -> str:
    """Return the warning that a main effect averages over an interaction; nothing where none is shown."""
    row, column = findings.study.factors
    shown = findings.answers[0].verdict in (verdicts.DIFFERS, verdicts.LARGER)
    return OVER_INTERACTION.format(row=row, column=column) if shown else ""


def margins(findings: Findings) -> str:
    """Return what stands in the table of cell means."""
    mean = original.mean_word(findings)
    what = "Estimates of the model" if findings.observed.scale.is_identity else f"Estimates of the model as {mean}s in original units"
    return (
        f"{what} with {words.intervals(findings)}. The margins give every combination the same weight; "
        "with unequal cells they differ from the plain averages of the observations."
    )


def table_used(findings: Findings) -> str:
    """Return which sums of squares the answers read, and why."""
    fit = f"Residual standard deviation {significant(findings.fit['sigma'])}, R² {percent(findings.fit['r2'])}."
    return f"{words.TABLES[findings.used['table']]} sums of squares. {findings.used['why']} {fit}"
