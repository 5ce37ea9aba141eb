"""The first answer in words: whether the effect of one factor depends on the other, and what that looks like."""

import numpy as np

from analysis import verdicts
from analysis.evidence import Evidence
from analysis.families import within_name
from analysis.rounding import signed, significant
from analysis.sizes import Size, turns


def untested(evidence: Evidence) -> tuple[str, str]:
    """Return sentence and reason where the interaction has no test."""
    if evidence.layout.interaction_untestable:
        what = "one observation in each cell" if evidence.layout.single_values else "no observation to spare"
        return f"Cannot be told: with {what}, interaction and chance cannot be separated.", "No test; repeat the combinations to have one."
    if evidence.study.model == "additive":
        return "Not asked: the model without interaction was chosen.", "No test; choose the model with interaction to have one."
    return "Cannot be told from these observations.", "No test: see the notes on the design."


def shown(evidence: Evidence, size: Size | None) -> tuple[str, str]:
    """Return verdict and sentence where the interaction is decided: what depends on what, with the largest example."""
    row, column = evidence.row, evidence.column
    sentence = f"Yes: what {column.word} does depends on {row.word}"
    if size is not None and size.all_small:
        return verdicts.SMALL, f"{sentence}, but by less than what matters."
    verdict = verdicts.LARGER if size is not None and size.verdict == verdicts.LARGER else verdicts.DIFFERS
    pairs = ((column, row), (row, column))
    turned = [factor.word for factor, other in pairs if turns(evidence.comparisons[within_name(factor.name, other.name)])]
    if turned:
        sentence = f"{sentence}, and the order of the levels of {' and of '.join(turned)} changes"
    return verdict, f"{sentence}{_example(evidence)}."


def not_shown(evidence: Evidence, size: Size | None) -> tuple[str, str]:
    """Return verdict and sentence where the interaction is not decided; never that there is none."""
    row, column = evidence.row.word, evidence.column.word
    if size is not None and size.all_small:
        return verdicts.NONE_THAT_MATTERS, f"Not by an amount that matters: {column} does much the same at every level of {row}."
    return verdicts.UNDECIDED, f"Not decided: the data do not show that what {column} does depends on {row}, nor that it does not."


def _example(evidence: Evidence) -> str:
    """Show the largest difference of differences by the two changes that it is made of, where the scale can tell them."""
    contrasts = evidence.interaction_contrasts
    if contrasts is None or not evidence.tells_sizes or contrasts["difference"].isna().all():
        return ""
    at = contrasts.iloc[int(contrasts["difference"].abs().fillna(0).to_numpy(float).argmax())]
    (r1, r2), (c1, c2) = at["rows"], at["columns"]
    row, column = evidence.row, evidence.column
    how = "changes by the factor" if evidence.scale.tells_ratios else "changes by"
    told = " and ".join(f"{_change(evidence, r, c1, c2)} with {row.told(r)}" for r in (r1, r2))
    return f": from {column.told(c1)} to {column.told(c2)} {evidence.response} {how} {told}"


def _change(evidence: Evidence, row: str, first: str, second: str) -> str:
    """Write how the estimate of one row changes between two columns."""
    mine = evidence.cells[evidence.cells["row"] == row]
    (before, se_before), (after, se_after) = (
        mine.loc[mine["column"] == column, ["estimate", "se"]].to_numpy(float)[0].tolist() for column in (first, second)
    )
    if evidence.scale.tells_ratios:
        return significant(float(evidence.scale.back(np.array(after - before))))
    return f"{signed(after - before, float(np.hypot(se_before, se_after)))}{evidence.unit}"
